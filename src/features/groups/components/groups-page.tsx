import { useQuery } from '@tanstack/react-query';
import { useCallback, useMemo } from 'react';
import type { Job } from '#contract/jobs.ts';
import { useGrouping as standOnGrouping, type Grouping } from '#contract/groupings.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { componentRunsQuery, sweepsQuery } from '#src/lib/analysis-queries.ts';
import { cx } from '#src/lib/cx.ts';
import { useJobOfKind } from '#src/lib/job-of-kind.ts';
import { stagePath } from '#src/lib/stages.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useStandOn } from '../api/groups-mutations.ts';
import { sweepFor } from '../model.ts';
import { GROUPS_VIEW } from '../url.ts';
import { useGroupingInHand } from '../use-grouping.ts';
import { GroupGround } from './group-ground.tsx';
import { GroupingMenu } from './grouping-menu.tsx';
import { RunPanel } from './run-panel.tsx';
import { SweepPlate } from './sweep-plate.tsx';

interface Props {
  /** Lays a hole in the tray. */
  onHole: (name: string) => void;
}

const USUAL_K = 6;

/** Groups of intervals by their chemistry: which hold, how many, what makes each, where it lies. */
export function GroupsPage({ onHole }: Props) {
  const depositId = useDepositId();
  const [view, setView] = useUrlState(GROUPS_VIEW);
  const inHand = useGroupingInHand(depositId);
  const { grouping } = inHand;
  const runs = useQuery(componentRunsQuery(depositId));
  const sweeps = useQuery(sweepsQuery(depositId));
  const { refetch } = inHand;
  const onGrouped = useCallback(
    (job: Job) => {
      void refetch().then(() => setView({ grouping: job.result === null ? null : Number(job.result.id), groups: [], k: null }, { push: true }));
    },
    [refetch, setView],
  );
  const refetchSweeps = sweeps.refetch;
  const running = useJobOfKind(depositId, 'grouping', onGrouped);
  const sweeping = useJobOfKind(depositId, 'sweep', useCallback(() => void refetchSweeps(), [refetchSweeps]));
  const run = runs.data?.find(({ id }) => id === grouping?.componentRunId) ?? null;
  const sweep = useMemo(() => sweepFor(sweeps.data ?? [], grouping, runs.data?.[0]?.id ?? null), [sweeps.data, grouping, runs.data]);
  const k = view.k ?? grouping?.k ?? sweep?.suggestedK ?? USUAL_K;
  const sweepPlate = <SweepPlate sweep={sweep} chosenK={k} onK={(next) => setView({ k: next })} busy={sweeping} className="max-lg:h-80" />;
  const actions = (
    <>
      {grouping !== null && inHand.groupings.length > 1 && <GroupingMenu groupings={inHand.groupings} chosen={grouping} onChoose={(id) => setView({ grouping: id, groups: [], k: null }, { push: true })} />}
      {grouping !== null && !grouping.isActive && <StandOn grouping={grouping} />}
      <RunPanel key={`${grouping?.id} ${k}`} runs={runs.data ?? []} grouping={grouping} k={k} isBusy={running !== null} />
    </>
  );
  const error = inHand.error ?? runs.error;
  if (error) return <Framed actions={null}><Problem error={error} action={{ label: 'Try again', run: () => void Promise.all([inHand.refetch(), runs.refetch()]) }} /></Framed>;
  if (inHand.isPending || runs.isPending) return <Framed actions={null}><Loading /></Framed>;
  if (grouping === null || run === null || runs.data === undefined) {
    return (
      <Framed actions={actions}>
        <div className={cx('grid gap-3', (sweep !== null || sweeping !== null) && 'lg:grid-cols-2')}>
          <Plate title="Groups" busy={running}>
            <NoGroups hasRuns={(runs.data ?? []).length > 0} />
          </Plate>
          {(sweep !== null || sweeping !== null) && sweepPlate}
        </div>
      </Framed>
    );
  }
  return <GroupGround key={grouping.id} grouping={grouping} run={run} sweep={sweep} sweepPlate={sweepPlate} busy={running} actions={actions} chips={<Chips grouping={grouping} />} onHole={onHole} />;
}

function Framed({ actions, children }: { actions: React.ReactNode; children: React.ReactNode }) {
  return (
    <>
      <PageHead title="Groups" actions={actions} />
      {children}
    </>
  );
}

function NoGroups({ hasRuns }: { hasRuns: boolean }) {
  const depositId = useDepositId();
  if (hasRuns) return <Empty>Intervals fall into groups here by the scores of their components. Sweep over the number of groups, then run with the one that holds.</Empty>;
  return (
    <Empty action={<LinkButton to={stagePath(depositId, 'components')}>Go to components</LinkButton>}>
      Groups are made of component scores, and no components have been run yet.
    </Empty>
  );
}

function Chips({ grouping }: { grouping: Grouping }) {
  return (
    <>
      {grouping.isStale && <Chip tone="stale">stale: on snapshot {grouping.snapshotNumber}</Chip>}
      {grouping.isActive && <Chip tone="good">domains stand on it</Chip>}
    </>
  );
}

function StandOn({ grouping }: { grouping: Grouping }) {
  const stand = useStandOn(useDepositId());
  const refusal = useRefusal(standOnGrouping);
  return (
    <Button unavailable={refusal} isBusy={stand.isPending} onClick={() => stand.mutate(grouping.id)}>
      Let domains stand on it
    </Button>
  );
}
