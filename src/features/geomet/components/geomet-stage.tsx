import { useQuery } from '@tanstack/react-query';
import { Flag } from 'lucide-react';
import { useState } from 'react';
import { startZones } from '#contract/geomet.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { PageWait } from '#src/components/layout/page-wait.tsx';
import { Button } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { snapshotQuery } from '#src/lib/deposit-queries.ts';
import { useJob } from '#src/lib/jobs.ts';
import { notifyProblem } from '#src/lib/toasts.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { rulesQuery, useStartZones, zoneRunsQuery } from '../api/geomet-queries.ts';
import { LoadPlate } from './load-plate.tsx';
import { RulesPlate } from './rules-plate.tsx';
import { ZonesPlate } from './zones-plate.tsx';

/** Deleterious zones: limits, the zones they make, and which domains carry them. */
export function GeometStage() {
  const depositId = useDepositId();
  const rules = useQuery(rulesQuery(depositId));
  const runs = useQuery(zoneRunsQuery(depositId));
  const snapshot = useQuery(snapshotQuery(depositId)).data?.snapshot ?? null;
  const [jobId, setJobId] = useState<number | null>(null);
  const { job, isRunning } = useJob(depositId, jobId);
  const start = useStartZones(depositId);
  const refusal = useRefusal(startZones);
  if (!rules.data || !runs.data) return <PageWait title="Geomet" reads={[rules, runs]} />;
  const run = runs.data[0] ?? null;
  const unavailable = refusal ?? (rules.data.limits.length === 0 ? 'Set a limit first' : !snapshot ? 'Bring in assays first' : isRunning ? 'Zones are being flagged' : undefined);
  const busy = isRunning ? { progress: job?.progress ?? null, phase: job?.phase ?? 'waiting its turn' } : null;
  const go = (): void => start.mutate(undefined, { onSuccess: (answer) => setJobId(answer.job.id), onError: notifyProblem });
  return (
    <>
      <PageHead
        title="Geomet"
        finding={run?.finding}
        chips={run?.isStale && <Chip tone="stale">stale: tables, limits or domains changed</Chip>}
        actions={<Button kind={run && !run.isStale ? 'plain' : 'main'} icon={Flag} unavailable={unavailable} isBusy={start.isPending} onClick={go}>{run ? 'Flag zones again' : 'Flag zones'}</Button>}
      />
      {job?.state === 'failed' && <p role="alert" className="mb-3 rounded-2 bg-bad-wash px-3 py-2 text-bad">{job.error?.message}</p>}
      <div className="grid gap-3 lg:grid-cols-[minmax(0,24rem)_minmax(0,1fr)]">
        <RulesPlate key={rules.data.version} rules={rules.data} snapshot={snapshot} />
        <div className="grid min-w-0 content-start gap-3">
          {run ? <LoadPlate run={run} /> : <Plate title="Load of each domain" busy={busy} empty={<Empty>{rules.data.limits.length === 0 ? 'Set limits at the left, then flag zones: runs of intervals over a limit, with the share of each domain they load.' : 'Limits are set. Flag zones to see which ground and which domains they load.'}</Empty>} />}
          {run && <ZonesPlate run={run} />}
          {run?.notes.map((note) => <p key={note} className="text-small text-ink-2">{note}</p>)}
          <p className="text-caption text-ink-3">Zones are screening only: confirm them by laboratory test work and local rules before they decide on a plant or a contract.</p>
        </div>
      </div>
    </>
  );
}
