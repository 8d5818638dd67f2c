import { useQuery } from '@tanstack/react-query';
import { Play } from 'lucide-react';
import { useCallback, useMemo, useState } from 'react';
import { startComponents, type ComponentRun } from '#contract/components.ts';
import { FRAME } from '#contract/snapshots.ts';
import { BiplotPlate } from '#src/components/ground/biplot-plate.tsx';
import { knownComponent } from '#src/components/ground/component-words.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate, type PlateBusy } from '#src/components/ui/plate.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { componentRunsQuery, suitesQuery } from '#src/lib/analysis-queries.ts';
import { categoriesQuery } from '#src/lib/columns.ts';
import { formatCount, formatShare } from '#src/lib/format.ts';
import { frameQuery } from '#src/lib/frame.ts';
import { useJob } from '#src/lib/jobs.ts';
import { notifyProblem } from '#src/lib/toasts.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useStartComponents } from '../api/components-mutations.ts';
import { COMPONENTS_VIEW } from '../url.ts';
import { LoadingsPlate, LoadingsTable } from './loadings-plate.tsx';
import { ScreePlate } from './scree-plate.tsx';

const COLOURS = [{ value: 'lithology', label: 'by logged rock' }, { value: 'weathering', label: 'by weathering' }, { value: 'campaign', label: 'by campaign' }] as const;
const MOST_COLOURS = 16;

const findingOf = ({ readings, shares, suggested }: ComponentRun): string => {
  const first = readings[0];
  const share = shares.slice(0, suggested).reduce((sum, own) => sum + own, 0);
  return `${formatCount(suggested)} components hold ${formatShare(share)} of the log-ratio variance.${first ? ` The first sets ${first.sentence}.` : ''}`;
};

/** Components: log-ratio PCA of a suite. */
export function ComponentsStage() {
  const depositId = useDepositId();
  const [view, setView] = useUrlState(COMPONENTS_VIEW);
  const suites = useQuery(suitesQuery(depositId)).data;
  const runs = useQuery(componentRunsQuery(depositId)).data;
  const [jobId, setJobId] = useState<number | null>(null);
  const { job, isRunning } = useJob(depositId, jobId);
  const start = useStartComponents(depositId);
  const refusal = useRefusal(startComponents);
  if (!suites || !runs) return <><PageHead title="Components" /><Skeleton lines={10} /></>;
  const suite = suites.find(({ id }) => id === view.suite) ?? suites.find(({ id }) => id === runs[0]?.suiteId) ?? suites[0] ?? null;
  const run = runs.find(({ id }) => id === view.run) ?? runs.find(({ suiteId }) => suiteId === suite?.id) ?? null;
  const busy: PlateBusy | null = isRunning ? { progress: job?.progress ?? null, phase: job?.phase ?? 'waiting its turn' } : null;
  const go = (): void => { if (suite) start.mutate(suite.id, { onSuccess: (answer) => { setJobId(answer.job.id); setView({ run: null }); }, onError: notifyProblem }); };
  const actions = suite && (
    <>
      <Select label="Suite" isLabelHidden options={suites.map(({ id, name }) => ({ value: String(id), label: name }))} value={String(suite.id)} onPick={(id) => setView({ suite: Number(id), run: null })} />
      <Button kind={run && !run.isStale ? 'plain' : 'main'} icon={Play} unavailable={refusal ?? (isRunning ? 'Components are being found' : undefined)} isBusy={start.isPending} onClick={go}>{run ? 'Run again' : 'Find components'}</Button>
    </>
  );
  return (
    <>
      <PageHead title="Components" finding={run ? findingOf(run) : undefined} chips={run?.isStale && <Chip tone="stale">stale: on snapshot {run.snapshotNumber}</Chip>} actions={actions} />
      {job?.state === 'failed' && <p role="alert" className="mb-3 rounded-2 bg-bad-wash px-3 py-2 text-bad">{job.error?.message}</p>}
      {run ? <RunPlates key={run.id} run={run} busy={busy} /> : (
        <Plate title="Components" busy={busy} empty={<Empty action={suite ? undefined : <LinkButton to={`/deposits/${depositId}/suite`}>Go to Suite</LinkButton>}>{suite ? `Find the components of “${suite.name}”: the few directions along which its log-ratios vary most.` : 'Components are found in a suite of analytes. Choose one first.'}</Empty>} />
      )}
    </>
  );
}

function RunPlates({ run, busy }: { run: ComponentRun; busy: PlateBusy | null }) {
  const depositId = useDepositId();
  const [view, setView] = useUrlState(COMPONENTS_VIEW);
  const frame = useQuery(frameQuery(depositId, run.frameTableId)).data;
  const logged = useQuery(categoriesQuery(depositId, run.frameTableId, FRAME[view.colour])).data;
  const categories = useMemo(() => (logged?.dictionary ?? []).slice(0, MOST_COLOURS).map((label, i) => ({ label, slot: i + 1 })), [logged]);
  const linesOf = useCallback((row: number) => [logged?.dictionary[logged.codes[row] ?? -1] ?? 'not logged'], [logged]);
  const axes = { x: knownComponent(view.x, run.stored, 1), y: knownComponent(view.y, run.stored, 2), tool: view.tool };
  const used = run.nFit + run.nScoredOnly;
  const caption = `n = ${formatCount(used)} ${run.support === 'drill' ? 'intervals' : 'samples'} · clr, classical PCA, ${formatShare(run.replacedShare)} of values replaced · snapshot ${run.snapshotNumber}`;
  return (
    <div className="grid gap-3">
      <div className="grid gap-3 lg:grid-cols-[minmax(0,5fr)_minmax(0,3fr)_minmax(0,3fr)]">
        {frame ? (
          <BiplotPlate run={run} frame={frame} view={axes} onView={setView} categories={categories} category={logged?.codes} linesOf={linesOf} caption={caption} stale={run.isStale ? `on snapshot ${run.snapshotNumber}` : null} busy={busy} height={380} tools={<Select label="Colour" isLabelHidden controlSize="tiny" options={COLOURS} value={view.colour} onPick={(colour) => setView({ colour })} />} />
        ) : <Plate title="Biplot"><Skeleton lines={8} /></Plate>}
        <ScreePlate run={run} />
        <LoadingsPlate run={run} pc={view.pc} onPc={(pc) => setView({ pc })} />
      </div>
      <LoadingsTable run={run} />
      {run.notes.map((note) => <p key={note} className="text-small text-ink-2">{note}</p>)}
    </div>
  );
}
