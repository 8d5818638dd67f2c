import { useQuery } from '@tanstack/react-query';
import { useCallback, useState } from 'react';
import type { Grouping } from '#contract/groupings.ts';
import type { Screen } from '#contract/screens.ts';
import { VERDICT_HELP } from '#kernels/populations/verdict-power.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { PageWait } from '#src/components/layout/page-wait.tsx';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import type { CellSummary } from '#contract/screens.ts';
import { groupingsQuery } from '#src/lib/analysis-queries.ts';
import { snapshotQuery } from '#src/lib/deposit-queries.ts';
import { formatCount } from '#src/lib/format.ts';
import { useJob } from '#src/lib/jobs.ts';
import { takeRows } from '#src/lib/selection.ts';
import { urlOneOf, urlText, useUrlState } from '#src/lib/url-state.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { screensQuery } from '../api/populations-queries.ts';
import { useSubsetValues } from '../subset-values.ts';
import { CellPlate } from './cell-plate.tsx';
import { ScreenPanel } from './screen-panel.tsx';
import { VerdictHelp } from './verdict-help.tsx';
import { VerdictMatrix } from './verdict-matrix.tsx';

const VIEW = { subset: urlText(), variable: urlText(), plot: urlOneOf(['probability', 'histogram'], 'probability') };

const MATRIX_HELP = { text: <VerdictHelp />, caution: VERDICT_HELP.caution, source: VERDICT_HELP.source };

const EXPORTED: Column<CellSummary>[] = [
  { header: 'Subset', cell: ({ subsetKey }) => subsetKey, value: ({ subsetKey }) => subsetKey, rowHeader: true },
  { header: 'Variable', cell: ({ variable }) => variable, value: ({ variable }) => variable },
  { header: 'Verdict', cell: ({ verdict }) => verdict, value: ({ verdict }) => verdict },
  { header: 'n', cell: ({ n }) => n, value: ({ n }) => n },
  { header: 'Mean ppm', cell: ({ mean }) => mean, value: ({ mean }) => mean },
  { header: 'Median ppm', cell: ({ median }) => median, value: ({ median }) => median },
  { header: 'CV', cell: ({ cv }) => cv, value: ({ cv }) => cv },
  { header: 'Dip', cell: ({ dip }) => dip, value: ({ dip }) => dip },
  { header: 'BIC gain', cell: ({ deltaBic }) => deltaBic, value: ({ deltaBic }) => deltaBic },
];

/** The cell in hand: what the address names, else the first mixed one, else the first. */
function cellInHand(screen: Screen, subset: string, variable: string) {
  const named = screen.cells.find((cell) => cell.subsetKey === subset && cell.variable === variable);
  const groups = new Set(screen.subsets.filter(({ kind }) => kind === 'group').map(({ key }) => key));
  return named ?? screen.cells.find(({ verdict, subsetKey }) => verdict === 'mixed' && groups.has(subsetKey)) ?? screen.cells.find(({ verdict }) => verdict === 'mixed') ?? screen.cells[0] ?? null;
}

/** Populations: the matrix of verdicts, and the cell in hand drawn at the right. */
export function PopulationsStage() {
  const depositId = useDepositId();
  const snapshotAnswer = useQuery(snapshotQuery(depositId));
  const screens = useQuery(screensQuery(depositId));
  const groupings = useQuery(groupingsQuery(depositId)).data ?? [];
  const [jobId, setJobId] = useState<number | null>(null);
  const { job, isRunning } = useJob(depositId, jobId);
  const snapshot = snapshotAnswer.data?.snapshot ?? null;
  const screen = screens.data?.[0] ?? null;
  const usable = groupings.find(({ isActive, isStale }) => isActive && !isStale) ?? null;
  const busy = isRunning ? { progress: job?.progress ?? null, phase: job?.phase ?? 'waiting its turn' } : null;

  if (!snapshotAnswer.data || !screens.data) return <PageWait title="Populations" reads={[snapshotAnswer, screens]} />;
  const panel = snapshot && <ScreenPanel snapshot={snapshot} grouping={usable} started={setJobId} isRunning={isRunning} hasScreen={screen !== null} lastVariables={screen?.variables ?? []} />;
  return (
    <>
      <PageHead title="Populations" finding={screen?.finding} chips={screen?.isStale && <Chip tone="stale">stale: on snapshot {screen.snapshotNumber}</Chip>} actions={panel} />
      {job?.state === 'failed' && <p role="alert" className="mb-3 rounded-2 bg-bad-wash px-3 py-2 text-bad">{job.error?.message}</p>}
      {screen ? (
        <ScreenPlates screen={screen} groupings={groupings} busy={busy} />
      ) : (
        <Plate title="Mixing verdicts" busy={busy} empty={<Empty action={snapshot ? undefined : <LinkButton to={`/deposits/${depositId}/intake`}>Go to Intake</LinkButton>}>{snapshot ? 'No grade has been screened yet. Choose variables above: each is tested for more than one population, in the whole and in each group, rock and weathering class.' : 'Populations are screened in loaded assays. Bring in assays first.'}</Empty>} />
      )}
    </>
  );
}

interface PlatesProps {
  screen: Screen;
  groupings: readonly Grouping[];
  busy: { progress: number | null; phase: string } | null;
}

function ScreenPlates({ screen, groupings, busy }: PlatesProps) {
  const depositId = useDepositId();
  const [view, setView] = useUrlState(VIEW);
  const cell = cellInHand(screen, view.subset, view.variable);
  const subset = screen.subsets.find(({ key }) => key === cell?.subsetKey) ?? null;
  const grouping = groupings.find(({ id }) => id === screen.groupingId) ?? null;
  const snapshot = useQuery(snapshotQuery(depositId)).data?.snapshot ?? null;
  const own = snapshot?.id === screen.snapshotId ? snapshot : null;
  const values = useSubsetValues({ depositId, snapshot: own, support: screen.support, grouping, subset, variable: cell?.variable ?? null });
  const pick = useCallback((nextSubset: string, variable: string) => setView({ subset: nextSubset, variable }, { push: true }), [setView]);
  const take = (): void => {
    if (values && subset && cell) takeRows(values.rows, `${cell.variable} in ${subset.label}`, 'replace');
  };
  return (
    <div className="grid gap-3 lg:grid-cols-[minmax(0,1.18fr)_minmax(0,1fr)]">
      <Plate
        title="Mixing verdicts"
        qualifier="subset × variable"
        help={MATRIX_HELP}
        stale={screen.isStale && `on snapshot ${screen.snapshotNumber}`}
        busy={busy}
        exports={tableExports('mixing-verdicts', EXPORTED, screen.cells)}
        caption={`Dip test, mixture BIC and separation · ${formatCount(screen.cells.length)} cells · ${screen.support === 'drill' ? 'length-weighted' : 'each sample counts once'} · snapshot ${screen.snapshotNumber} · few: n under 30`}
      >
        <VerdictMatrix screen={screen} picked={{ subset: cell?.subsetKey ?? '', variable: cell?.variable ?? '' }} onPick={pick} />
      </Plate>
      {cell && subset && (
        <div className="grid content-start gap-2">
          <CellPlate screen={screen} subset={subset} variable={cell.variable} values={own ? values : null} isDrawn={own !== null} view={view.plot} onView={(plot) => setView({ plot })} />
          {values && values.rows.length > 0 && (
            <div className="justify-self-end"><Button size="tiny" onClick={take}>Mark these {formatCount(values.rows.length)} in the core</Button></div>
          )}
        </div>
      )}
    </div>
  );
}
