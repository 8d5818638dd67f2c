import { useQuery } from '@tanstack/react-query';
import { ChevronsUpDown } from 'lucide-react';
import { useCallback, type ReactNode } from 'react';
import type { ComponentRun } from '#contract/components.ts';
import type { Job } from '#contract/jobs.ts';
import type { Suite } from '#contract/suites.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Menu } from '#src/components/ui/menu.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { suitesQuery } from '#src/lib/analysis-queries.ts';
import { formatWhen } from '#src/lib/format-dates.ts';
import { useJobOfKind } from '#src/lib/job-of-kind.ts';
import { stagePath } from '#src/lib/stages.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { componentsFinding } from '../model.ts';
import { COMPONENTS_VIEW } from '../url.ts';
import { useRunInHand } from '../use-run.ts';
import { ComponentGround } from './component-ground.tsx';
import { RunPanel } from './run-panel.tsx';

interface Props {
  /** Lays a hole in the tray. */
  onHole: (name: string) => void;
}

/** Log-ratio components: how many, what they oppose, where they lie. */
export function ComponentsPage({ onHole }: Props) {
  const depositId = useDepositId();
  const [view, setView] = useUrlState(COMPONENTS_VIEW);
  const { runs, run, error, isPending, refetch } = useRunInHand(depositId);
  const suites = useQuery(suitesQuery(depositId));
  const onDone = useCallback((job: Job) => void refetch().then(() => setView({ run: job.result === null ? null : Number(job.result.id), suite: null }, { push: true })), [refetch, setView]);
  const busy = useJobOfKind(depositId, 'components', onDone);
  const problem = error ?? suites.error;
  const actions = suites.data !== undefined && (
    <>
      {runs.length > (run === null ? 0 : 1) && <RunMenu runs={runs} chosen={run} onChoose={(id) => setView({ run: id, suite: null }, { push: true })} />}
      <RunPanel key={view.suite} suites={suites.data} run={run} suiteId={view.suite} isBusy={busy !== null} />
    </>
  );
  return (
    <>
      <PageHead
        title="Components"
        finding={run === null ? undefined : componentsFinding(run)}
        chips={run?.isStale && <Chip tone="stale">stale: on snapshot {run.snapshotNumber}</Chip>}
        actions={actions}
      />
      {problem ? (
        <Problem error={problem} action={{ label: 'Try again', run: () => void Promise.all([refetch(), suites.refetch()]) }} />
      ) : isPending || suites.data === undefined ? (
        <Loading />
      ) : run === null ? (
        <Plate title="Components" busy={busy}>
          <NoRuns hasSuites={suites.data.length > 0} suite={suites.data.find(({ id }) => id === view.suite)} />
        </Plate>
      ) : (
        <ComponentGround key={run.id} run={run} busy={busy} onHole={onHole} />
      )}
    </>
  );
}

function NoRuns({ hasSuites, suite }: { hasSuites: boolean; suite: Suite | undefined }): ReactNode {
  const depositId = useDepositId();
  if (hasSuites) return <Empty>Components show which elements go together and which oppose. Run them on {suite === undefined ? 'a suite' : `“${suite.name}”`} with the button above.</Empty>;
  return <Empty action={<LinkButton to={stagePath(depositId, 'suite')}>Choose a suite</LinkButton>}>Components are found among the analytes of a suite, and no suite has been chosen yet.</Empty>;
}

function RunMenu({ runs, chosen, onChoose }: { runs: readonly ComponentRun[]; chosen: ComponentRun | null; onChoose: (id: number) => void }) {
  return (
    <Menu
      trigger={
        <Button icon={ChevronsUpDown} aria-label={chosen === null ? 'Choose a run' : `Run on ${chosen.suiteName}. Choose another`}>
          {chosen?.suiteName ?? 'Other runs'}
        </Button>
      }
      groups={[
        {
          heading: 'Runs, newest first',
          items: runs.map((run) => ({
            label: run.suiteName,
            hint: `${run.parts.length} analytes · snapshot ${run.snapshotNumber}${run.isStale ? ', stale' : ''} · ${formatWhen(run.createdAt)}`,
            isChosen: run.id === chosen?.id,
            run: () => onChoose(run.id),
          })),
        },
      ]}
    />
  );
}
