import { useQuery } from '@tanstack/react-query';
import { useCallback, useState } from 'react';
import { cancelJob, type Job, type JobKind } from '#contract/jobs.ts';
import { call } from './api-client.ts';
import { isActive, jobsQuery, useJob } from './jobs.ts';
import { notifyProblem } from './toasts.ts';

/** What a plate shows while a job is under way. */
interface Busy {
  progress: number | null;
  phase: string;
  onCancel: () => void;
}

/**
 * Follows the job of one kind that is under way in a deposit, whoever started it and whether or not
 * this page did: after a reload its progress is shown again. A failure is told in a notice.
 *
 * @param onDone Called once when a job followed here has made its result. Memoise it.
 */
export function useJobOfKind(depositId: number, kind: JobKind, onDone?: (job: Job) => void): Busy | null {
  const { data: jobs } = useQuery(jobsQuery(depositId));
  const active = jobs?.find((job) => job.kind === kind && isActive(job));
  const [jobId, setJobId] = useState<number | null>(null);
  if (active !== undefined && active.id !== jobId) setJobId(active.id);
  const onEnd = useCallback(
    (job: Job) => {
      if (job.state === 'done') onDone?.(job);
      else if (job.state === 'failed') notifyProblem(new Error(`${job.title}: ${job.error?.message ?? 'it failed'}`));
    },
    [onDone],
  );
  const { job, isRunning } = useJob(depositId, jobId, onEnd);
  if (!isRunning || jobId === null) return null;
  return {
    progress: job === undefined || job.state === 'queued' ? null : job.progress,
    phase: job === undefined || job.state === 'queued' ? 'waiting its turn' : job.phase,
    onCancel: () => void call(cancelJob, { params: { depositId, jobId } }).catch(notifyProblem),
  };
}
