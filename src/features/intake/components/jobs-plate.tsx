import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { cancelJob, type Job } from '#contract/jobs.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { ProgressRun } from '#src/components/ui/run.tsx';
import { call } from '#src/lib/api-client.ts';
import { countOf, formatShare } from '#src/lib/format.ts';
import { isActive, jobsQuery, rememberJob } from '#src/lib/jobs.ts';
import { useRefusal } from '#src/lib/use-deposit.ts';

const INTAKE_JOBS: readonly Job['kind'][] = ['check-file', 'load-file', 'assemble'];

/** Work on files and tables that runs now. */
export function JobsPlate({ depositId }: { depositId: number }) {
  const { data: jobs = [] } = useQuery(jobsQuery(depositId));
  const active = jobs.filter((job) => isActive(job) && INTAKE_JOBS.includes(job.kind));
  if (active.length === 0) return null;
  return (
    <Plate title="Under way" qualifier={countOf(active.length, 'job')}>
      <ul className="m-0 grid list-none p-0">
        {active.map((job) => (
          <JobLine key={job.id} job={job} />
        ))}
      </ul>
    </Plate>
  );
}

function JobLine({ job }: { job: Job }) {
  const queryClient = useQueryClient();
  const { id: jobId, depositId, title, state, phase, progress, startedBy } = job;
  const refusal = useRefusal(cancelJob);
  const cancel = useMutation({
    mutationFn: () => call(cancelJob, { params: { depositId, jobId } }),
    onSuccess: (stopped) => void rememberJob(queryClient, stopped),
  });
  return (
    <li className="grid gap-1 border-b border-rule py-1.5 last:border-0">
      <div className="flex items-center gap-2">
        <span className="min-w-0 flex-1 truncate font-medium" title={title}>{title}</span>
        <Button size="tiny" unavailable={refusal} isBusy={cancel.isPending} aria-label={`Cancel: ${title}`} onClick={() => cancel.mutate()}>
          Cancel
        </Button>
      </div>
      <ProgressRun value={state === 'running' ? progress : 0} label={title} heightPx={6} />
      <span className="text-caption text-ink-3">
        {state === 'running' ? `${phase}, ${formatShare(progress)}` : 'waits its turn'} · {startedBy.name}
      </span>
      {cancel.error && <Problem error={cancel.error} />}
    </li>
  );
}
