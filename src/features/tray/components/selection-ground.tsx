import { useQueries } from '@tanstack/react-query';
import { useMemo, type ReactNode } from 'react';
import type { Snapshot } from '#contract/snapshots.ts';
import { CategoryMark, slotColours } from '#src/components/charts/category-marks.tsx';
import { CardPart, Facts, SelectionCard } from '#src/components/layout/selection-card.tsx';
import { ShareBar } from '#src/components/ui/run.tsx';
import { columnQuery } from '#src/lib/columns.ts';
import { useCommands } from '#src/lib/commands.ts';
import { countOf, formatFixed, formatGrade, formatMetres, formatShare } from '#src/lib/format.ts';
import { clearSelection, useSelection, type Selection } from '#src/lib/selection.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { groupShares, weightedMean } from '../selection-sums.ts';
import { metresByHole, type TrayLayers } from '../tray-data.ts';
import { TRAY_VIEW } from '../url.ts';

interface Props {
  layers: TrayLayers;
  snapshot: Snapshot;
  /** Wide buttons at the foot. */
  actions?: ReactNode;
  /** Further `CardPart`s of the page. */
  children?: ReactNode;
}

const MOST_HOLES = 3;

/** The selection card of an analysis page: metres, groups, length-weighted means, holes. Esc clears. */
export function SelectionGround({ layers, snapshot, actions, children }: Props) {
  const selection = useSelection();
  const count = selection.rows.length;
  useCommands(useMemo(() => (count > 0 ? [{ id: 'clear-selection', label: 'Clear the selection', group: 'Selection', keys: 'escape', run: clearSelection }] : []), [count]));
  if (count === 0) return null;
  return (
    <Card layers={layers} snapshot={snapshot} selection={selection} actions={actions}>
      {children}
    </Card>
  );
}

function Card({ layers, snapshot, selection, actions, children }: Props & { selection: Selection }) {
  const { frame, grouping } = layers;
  const holes = useMemo(() => metresByHole(frame, selection.rows), [frame, selection]);
  const samples = selection.rows.length - holes.reduce((sum, { intervals }) => sum + intervals, 0);
  const metres = holes.reduce((sum, hole) => sum + hole.metres, 0);
  const detail = [
    holes.length > 0 ? `${formatMetres(metres)} in ${countOf(holes.length, 'hole')}` : '',
    samples > 0 && holes.length > 0 ? countOf(samples, 'surface sample') : '',
    selection.source,
  ];
  return (
    <SelectionCard
      count={selection.rows.length}
      unit={holes.length === 0 ? plural(samples, 'surface sample') : plural(selection.rows.length, 'interval')}
      detail={detail.filter((part) => part !== '').join(' · ')}
      onClear={clearSelection}
      actions={actions}
    >
      {grouping !== null && <Groups layers={layers} selection={selection} />}
      <Means layers={layers} snapshot={snapshot} selection={selection} />
      {children}
      {holes.length > 0 && <Holes holes={holes} />}
    </SelectionCard>
  );
}

const plural = (count: number, one: string) => (count === 1 ? one : `${one}s`);

function Groups({ layers, selection }: { layers: TrayLayers; selection: Selection }) {
  const shares = useMemo(() => groupShares(layers, selection.rows), [layers, selection]);
  if (shares.length === 0) return null;
  return (
    <CardPart title={layers.grouping?.support === 'surface' ? 'Groups, by samples' : 'Groups, by metres'}>
      <ShareBar label="Groups of the selection" parts={shares.map(({ name, slot, share }) => ({ label: name, share, ...(slot === null ? { look: 'hatch' as const } : { fill: slotColours(slot).fill }) }))} />
      <Facts
        facts={shares.map(({ name, slot, share }) => ({
          term: (
            <span className="inline-flex items-center gap-1">
              {slot === null ? <span className="w-3" /> : <CategoryMark slot={slot} />}
              {name}
            </span>
          ),
          value: formatShare(share),
        }))}
      />
    </CardPart>
  );
}

/** Means of the analytes that pay; only where the assays in hand are those of the frame. */
function Means({ layers, snapshot, selection }: Props & { selection: Selection }) {
  const deposit = useDeposit();
  const { frame, columns } = layers;
  const { assayTableId } = snapshot;
  const known = new Set(snapshot.analytes.map(({ analyte }) => analyte));
  const isAligned = snapshot.frameTableId === frame.tableId && assayTableId !== null;
  const shown = isAligned ? deposit.payAnalytes.filter(({ analyte }) => known.has(analyte)).slice(0, 4) : [];
  const values = useQueries({ queries: shown.map(({ analyte }) => columnQuery(deposit.id, assayTableId ?? 0, analyte)), combine: (results) => results.map(({ data }) => data) });
  const facts = shown.map(({ analyte, unit }, index) => {
    const column = values[index];
    return { term: analyte, value: column === undefined ? '…' : formatGrade(weightedMean(column, frame.weight, selection.rows), unit) };
  });
  const membership = columns === null ? null : weightedMean(columns.membership, frame.weight, selection.rows);
  if (membership !== null) facts.push({ term: 'Membership', value: formatFixed(membership, 2) });
  if (facts.length === 0) return null;
  return (
    <CardPart title="Length-weighted means">
      <div title="A value below its limit counts as the limit.">
        <Facts facts={facts} />
      </div>
    </CardPart>
  );
}

/** A press lays the hole in the tray. */
function Holes({ holes }: { holes: ReturnType<typeof metresByHole> }) {
  const [, setView] = useUrlState(TRAY_VIEW);
  return (
    <CardPart title="Most metres">
      <Facts
        facts={holes.slice(0, MOST_HOLES).map(({ hole, metres }) => ({
          term: (
            <button type="button" title={`Lay ${hole} in the tray`} className="min-h-6 rounded-1 font-mono text-caption text-ink underline decoration-rule-firm underline-offset-2 hover:bg-trough" onClick={() => setView({ holes: [hole] })}>
              {hole}
            </button>
          ),
          value: formatMetres(metres),
        }))}
      />
    </CardPart>
  );
}
