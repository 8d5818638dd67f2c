import { queryOptions, useQuery, useQueryClient, type QueryClient } from '@tanstack/react-query';
import { useEffect, useRef } from 'react';
import { getJob, listJobs, type Job } from '#contract/jobs.ts';
import { call } from './api-client.ts';

export const jobsQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'jobs'],
    queryFn: ({ signal }) => call(listJobs, { params: { depositId } }, signal),
  });

export const jobQuery = (depositId: number, jobId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'jobs', jobId],
    queryFn: ({ signal }) => call(getJob, { params: { depositId, jobId } }, signal),
  });

export const isActive = (job: Job): boolean =>
  job.state === 'queued' || job.state === 'running' || job.state === 'interrupted';

/**
 * Puts what a job has become into the list and the single entry. Progress never runs backwards.
 *
 * @returns whether a job known to be under way has ended by it.
 */
export function rememberJob(queryClient: QueryClient, job: Job): boolean {
  const { depositId, id } = job;
  const listKey = jobsQuery(depositId).queryKey;
  const oneKey = jobQuery(depositId, id).queryKey;
  const known =
    queryClient.getQueryData(oneKey) ??
    queryClient.getQueryData(listKey)?.find((other) => other.id === id);
  if (known && !isNews(known, job)) return false;
  queryClient.setQueryData(oneKey, job);
  queryClient.setQueryData(listKey, (jobs) => {
    if (!jobs) return jobs;
    const others = jobs.filter((other) => other.id !== id);
    return [job, ...others].sort((a, b) => b.id - a.id);
  });
  return known !== undefined && isActive(known) && !isActive(job);
}

function isNews(known: Job, job: Job): boolean {
  if (!isActive(known)) return !isActive(job) && known.state !== job.state;
  return !isActive(job) || known.state !== job.state || job.progress >= known.progress;
}

interface Following {
  job: Job | undefined;
  isRunning: boolean;
  error: Error | null;
}

const POLL_MS = 2000;

/**
 * Follows a job to its end, by events and, where they do not come through, by asking.
 *
 * @param onEnd Called once when the job ends while followed, whatever its outcome.
 */
export function useJob(
  depositId: number,
  jobId: number | null,
  onEnd?: (job: Job) => void,
): Following {
  const queryClient = useQueryClient();
  const wasActive = useRef<number | null>(null);
  const { data: job, error } = useQuery({
    ...jobQuery(depositId, jobId ?? 0),
    enabled: jobId !== null,
    refetchInterval: ({ state }) => (state.data && !isActive(state.data) ? false : POLL_MS),
  });
  useEffect(() => {
    if (!job) return;
    if (isActive(job)) wasActive.current = job.id;
    else if (wasActive.current === job.id) {
      wasActive.current = null;
      void queryClient.invalidateQueries({ queryKey: jobsQuery(depositId).queryKey, exact: true });
      onEnd?.(job);
    }
  }, [job, depositId, queryClient, onEnd]);
  return { job, isRunning: jobId !== null && (job === undefined || isActive(job)), error };
}
