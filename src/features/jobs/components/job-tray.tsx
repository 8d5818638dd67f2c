import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { Hourglass } from 'lucide-react';
import { useEffect, useRef } from 'react';
import { cancelJob, type Job } from '#contract/jobs.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Chip, type Tone } from '#src/components/ui/chip.tsx';
import { IconButton } from '#src/components/ui/icon-button.tsx';
import { Panel } from '#src/components/ui/panel.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { ProgressRun } from '#src/components/ui/run.tsx';
import { call } from '#src/lib/api-client.ts';
import { formatShare } from '#src/lib/format.ts';
import { formatWhen } from '#src/lib/format-dates.ts';
import { isActive, jobsQuery, rememberJob } from '#src/lib/jobs.ts';
import { notify } from '#src/lib/toasts.ts';
import { useMe } from '#src/lib/session.ts';

const MOST_SHOWN = 12;

/** Work in hand and lately done: each job a run filling from left to right, with cancel. */
export function JobTray({ depositId }: { depositId: number }) {
  const { data: jobs = [], error } = useQuery({
    ...jobsQuery(depositId),
    refetchInterval: ({ state }) => (state.data?.some(isActive) ? 4000 : false),
  });
  const running = jobs.filter(isActive).length;
  useEndNotices(jobs);
  return (
    <Panel
      label="Jobs"
      className="w-[23rem]"
      trigger={
        <IconButton
          icon={Hourglass}
          size="bar"
          label={running > 0 ? `Jobs: ${running} running` : 'Jobs'}
          count={running}
        />
      }
    >
      <h2 className="mb-1 text-body font-semibold">Jobs</h2>
      {error && <Problem error={error} />}
      {jobs.length === 0 ? (
        <p className="text-ink-2">
          Nothing has run on this deposit yet. Long work shows here and goes on when you leave the
          page.
        </p>
      ) : (
        <ul className="m-0 grid list-none p-0">
          {jobs.slice(0, MOST_SHOWN).map((job) => (
            <JobLine key={job.id} job={job} />
          ))}
        </ul>
      )}
    </Panel>
  );
}

/** A long job that was left to itself says when it has ended. */
function useEndNotices(jobs: readonly Job[]): void {
  const me = useMe();
  const active = useRef(new Set<number>());
  useEffect(() => {
    for (const job of jobs) {
      if (isActive(job)) active.current.add(job.id);
      else if (
        active.current.delete(job.id) &&
        job.startedBy.id === me?.id &&
        lastedMs(job) > 10_000
      ) {
        notify(`${job.title}: ${STATE_WORDS[job.state]}`);
      }
    }
  }, [jobs, me?.id]);
}

const lastedMs = ({ createdAt, endedAt }: Job): number =>
  endedAt ? Date.parse(endedAt) - Date.parse(createdAt) : 0;

const STATE_WORDS: Record<Job['state'], string> = {
  queued: 'waiting its turn',
  running: 'running',
  done: 'done',
  failed: 'failed',
  cancelled: 'cancelled',
  interrupted: 'starts again',
};
const STATE_TONES: Record<Job['state'], Tone> = {
  queued: 'plain',
  running: 'note',
  done: 'good',
  failed: 'bad',
  cancelled: 'plain',
  interrupted: 'warn',
};

function JobLine({ job }: { job: Job }) {
  const queryClient = useQueryClient();
  const { depositId, id: jobId } = job;
  const cancel = useMutation({
    mutationFn: () => call(cancelJob, { params: { depositId, jobId } }),
    onSuccess: (stopped) => rememberJob(queryClient, stopped),
  });
  return (
    <li className="grid gap-1 border-b border-rule py-2 last:border-0">
      <div className="flex items-start justify-between gap-2">
        <span className="min-w-0 font-medium">{job.title}</span>
        {!isActive(job) && <Chip tone={STATE_TONES[job.state]}>{STATE_WORDS[job.state]}</Chip>}
        {isActive(job) && (
          <Button size="tiny" isBusy={cancel.isPending} onClick={() => cancel.mutate()}>
            Cancel
          </Button>
        )}
      </div>
      {isActive(job) && (
        <ProgressRun
          value={job.state === 'running' ? job.progress : 0}
          label={job.title}
          heightPx={6}
        />
      )}
      <div className="flex justify-between gap-2 text-caption text-ink-3">
        <span>
          {isActive(job)
            ? job.state === 'running'
              ? `${job.phase}, ${formatShare(job.progress)}`
              : STATE_WORDS[job.state]
            : (job.error?.message ?? '')}
        </span>
        <span className="whitespace-nowrap">
          {job.startedBy.name}, {formatWhen(job.endedAt ?? job.createdAt)}
        </span>
      </div>
      {cancel.error && <Problem error={cancel.error} />}
    </li>
  );
}
