import { useQuery } from '@tanstack/react-query';
import { useCallback, useMemo, type ReactNode } from 'react';
import type { ComponentRun } from '#contract/components.ts';
import type { Grouping, Sweep } from '#contract/groupings.ts';
import { BiplotPlate } from '#src/components/ground/biplot-plate.tsx';
import { knownComponent } from '#src/components/ground/component-words.ts';
import { PlacePlate } from '#src/components/ground/place-plate.tsx';
import { RowTooltip } from '#src/components/ground/row-tooltip.tsx';
import type { RowPaint } from '#src/components/ground/traces.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import type { PlateBusy } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { columnQuery } from '#src/lib/columns.ts';
import { countOf, formatFigures } from '#src/lib/format.ts';
import { frameQuery } from '#src/lib/frame.ts';
import { takeRows } from '#src/lib/selection.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { categoryOf, groupsFinding, shareBetween } from '../model.ts';
import { GROUPS_VIEW } from '../url.ts';
import { FingerprintPlate } from './fingerprint-plate.tsx';
import { GroupListPlate } from './group-list-plate.tsx';

interface Props {
  grouping: Grouping;
  run: ComponentRun;
  sweep: Sweep | null;
  sweepPlate: ReactNode;
  busy: PlateBusy | null;
  actions: ReactNode;
  chips: ReactNode;
  onHole: (name: string) => void;
}

/** The evidence of one grouping: biplot, fingerprints, section, sweep, and the groups one by one. */
export function GroupGround(props: Props) {
  const { grouping, run, sweep } = props;
  const depositId = useDepositId();
  const frame = useQuery(frameQuery(depositId, grouping.frameTableId));
  const label = useQuery(columnQuery(depositId, grouping.tableId, 'group'));
  const membership = useQuery(columnQuery(depositId, grouping.tableId, 'membership'));
  const betweenShare = useMemo(() => (membership.data && frame.data ? shareBetween(membership.data, frame.data.weight) : null), [membership.data, frame.data]);
  const head = <PageHead title="Groups" finding={groupsFinding(grouping, { betweenShare, sweep })} chips={props.chips} actions={props.actions} />;
  const error = frame.error ?? label.error ?? membership.error;
  const ready = frame.data && label.data && membership.data ? { frame: frame.data, label: label.data, membership: membership.data } : null;
  return (
    <>
      {head}
      {error ? <Problem error={error} action={{ label: 'Try again', run: () => void Promise.all([frame.refetch(), label.refetch(), membership.refetch()]) }} /> : ready === null ? <Loading /> : <Plates {...props} {...ready} run={run} />}
    </>
  );
}

const PLACE_HELP = {
  text: 'Every interval where it lies, in the colour of its group. Sections run along the fences the holes were drilled on; vertical and horizontal scale are the same. A press lays the hole in the tray.',
  caution: 'A corridor projects holes onto its plane: contacts of holes at its edge are up to half a corridor off.',
};

interface PlatesProps extends Props {
  frame: Parameters<typeof BiplotPlate>[0]['frame'];
  label: Float64Array;
  membership: Float64Array;
}

function Plates({ grouping, run, frame, label, membership, sweepPlate, busy, onHole }: PlatesProps) {
  const [view, setView] = useUrlState(GROUPS_VIEW);
  const { groups } = grouping;
  const categories = useMemo(() => groups.map(({ name, slot }) => ({ label: name, slot })), [groups]);
  const category = useMemo(() => categoryOf(label, groups), [label, groups]);
  const paint = useCallback<RowPaint>((row) => ({ slot: categories[category[row] ?? -1]?.slot ?? null }), [category, categories]);
  const linesOf = useCallback(
    (row: number) => {
      const own = categories[category[row] ?? -1];
      return [own === undefined ? 'in no group' : `${own.label}, membership ${formatFigures(membership[row] ?? NaN, 2)}`];
    },
    [categories, category, membership],
  );
  const takeGroup = (wanted: number) => takeRows(Array.from(label, (own, row) => (own === wanted ? row : -1)).filter((row) => row >= 0), `all of ${groups.find((group) => group.label === wanted)?.name}`);
  const stale = grouping.isStale ? `on snapshot ${grouping.snapshotNumber}` : null;
  const caption = `n = ${countOf(grouping.n, grouping.support === 'drill' ? 'interval' : 'sample')} · k-means on ${countOf(grouping.components, 'clr component')}, seed ${grouping.seed} · snapshot ${grouping.snapshotNumber}`;
  const axes = { x: knownComponent(view.x, run.stored, 1), y: knownComponent(view.y, run.stored, 2), tool: view.tool };
  return (
    <>
      <div className="grid gap-3 lg:min-h-[max(24.5rem,calc(100dvh-var(--tray-now,36px)-9rem))] lg:grid-cols-[minmax(0,5fr)_minmax(0,7fr)] lg:grid-rows-[auto_minmax(12rem,1fr)]">
        <BiplotPlate run={run} frame={frame} view={axes} onView={setView} categories={categories} category={category} linesOf={linesOf} caption={caption} stale={stale} busy={busy} height="fill" className="max-lg:h-[28rem] lg:row-span-2" />
        <FingerprintPlate grouping={grouping} run={run} stale={stale} onGroup={takeGroup} selectedLabel={null} />
        <div className="grid min-h-0 gap-3 md:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
          <PlacePlate
            frame={frame}
            support={grouping.support}
            paint={paint}
            subject="by group"
            kind={view.place}
            onKind={(place) => setView({ place })}
            sectionM={view.section}
            onSection={(section) => setView({ section, place: 'section' })}
            onHole={onHole}
            tooltip={(row) => <RowTooltip frame={frame} row={row} lines={linesOf(row)} />}
            help={PLACE_HELP}
            caption={`by group · snapshot ${grouping.snapshotNumber}`}
            stale={stale}
            height="fill"
            className="max-lg:h-80"
          />
          {sweepPlate}
        </div>
      </div>
      <GroupListPlate grouping={grouping} ticked={view.groups} onTick={(ticked) => setView({ groups: ticked })} stale={stale} caption={caption} />
    </>
  );
}
