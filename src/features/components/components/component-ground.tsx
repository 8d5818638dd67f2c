import { useQuery } from '@tanstack/react-query';
import { useCallback, useMemo } from 'react';
import type { ComponentRun } from '#contract/components.ts';
import { BiplotPlate } from '#src/components/ground/biplot-plate.tsx';
import { componentNumber, knownComponent, shortReading } from '#src/components/ground/component-words.ts';
import { sequenceStop } from '#src/components/charts/hole-geometry.ts';
import { PlacePlate } from '#src/components/ground/place-plate.tsx';
import { RowTooltip } from '#src/components/ground/row-tooltip.tsx';
import type { RowPaint } from '#src/components/ground/traces.ts';
import { Loading } from '#src/components/ui/loading.tsx';
import type { PlateBusy } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { columnQuery } from '#src/lib/columns.ts';
import { countOf, formatFigures, MISSING } from '#src/lib/format.ts';
import { frameQuery, type Frame } from '#src/lib/frame.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { useRowColours } from '../colour.ts';
import { sixths } from '../model.ts';
import { COLOURS, COMPONENTS_VIEW, type Colour } from '../url.ts';
import { LoadingsPlate } from './loadings-plate.tsx';
import { LoadingsTablePlate } from './loadings-table-plate.tsx';
import { RunFactsPlate } from './run-facts-plate.tsx';
import { ScoreKey } from './score-key.tsx';
import { ScreePlate } from './scree-plate.tsx';

interface Props {
  run: ComponentRun;
  busy: PlateBusy | null;
  onHole: (name: string) => void;
}

/** The evidence of one run: biplot, variance, loadings, and one component in the ground. */
export function ComponentGround({ run, busy, onHole }: Props) {
  const depositId = useDepositId();
  const frame = useQuery(frameQuery(depositId, run.frameTableId));
  if (frame.error) return <Problem error={frame.error} action={{ label: 'Try again', run: () => void frame.refetch() }} />;
  if (frame.data === undefined) return <Loading />;
  return <Plates run={run} busy={busy} onHole={onHole} frame={frame.data} />;
}

function Plates({ run, busy, onHole, frame }: Props & { frame: Frame }) {
  const [view, setView] = useUrlState(COMPONENTS_VIEW);
  const { colours, grouping } = useRowColours(frame, view.colour);
  const { categories, category } = colours;
  const pc = knownComponent(view.pc, run.stored, 1);
  const stale = run.isStale ? `on snapshot ${run.snapshotNumber}` : null;
  const axes = { x: knownComponent(view.x, run.stored, 1), y: knownComponent(view.y, run.stored, 2), tool: view.tool };
  const linesOf = useCallback((row: number) => (category === undefined ? [] : [categories[category[row] ?? -1]?.label ?? MISSING]), [category, categories]);
  const caption = [`n = ${countOf(run.nFit + run.nScoredOnly, run.support === 'drill' ? 'interval' : 'sample')}`, 'clr, classical', `snapshot ${run.snapshotNumber}`, colours.note];
  return (
    <>
      <div className="grid gap-3 lg:min-h-[max(27rem,calc(100dvh-var(--tray-now,36px)-9rem))] lg:grid-cols-[minmax(0,10fr)_minmax(0,8fr)_minmax(0,6fr)] lg:grid-rows-2">
        <BiplotPlate
          run={run}
          frame={frame}
          view={axes}
          onView={setView}
          categories={categories}
          category={category}
          linesOf={linesOf}
          caption={caption.filter((part) => part !== '').join(' · ')}
          stale={stale}
          busy={busy}
          height="fill"
          colourChoice={<ColourChoice colour={view.colour} hasGroups={grouping !== null} onColour={(colour) => setView({ colour })} />}
          className="max-lg:h-[28rem] lg:row-span-2"
        />
        <ScreePlate run={run} stale={stale} />
        <LoadingsPlate run={run} pc={pc} onPc={(next) => setView({ pc: next })} stale={stale} />
        <ScorePlace run={run} frame={frame} pc={pc} stale={stale} onHole={onHole} />
      </div>
      <div className="mt-3 grid items-start gap-3 lg:grid-cols-[minmax(0,1fr)_20rem]">
        <LoadingsTablePlate run={run} stale={stale} />
        <RunFactsPlate run={run} stale={stale} />
      </div>
    </>
  );
}

const COLOUR_WORDS: Record<Colour, string> = { group: 'Group', lithology: 'Logged lithology', weathering: 'Weathering', campaign: 'Campaign', none: 'One colour' };

function ColourChoice({ colour, hasGroups, onColour }: { colour: Colour; hasGroups: boolean; onColour: (colour: Colour) => void }) {
  const options = COLOURS.filter((value) => hasGroups || value !== 'group').map((value) => ({ value, label: COLOUR_WORDS[value] }));
  return <Select label="Colour by" value={hasGroups || colour !== 'group' ? colour : 'none'} options={options} onPick={onColour} />;
}

const PLACE_HELP = {
  text: 'Scores of the chosen component where the intervals lie: six classes with as many rows in each, pale blue to yellow from low to high.',
  caution: 'High is not rich: the sign of a component is arbitrary. Read it with its loadings.',
};

interface PlaceProps {
  run: ComponentRun;
  frame: Frame;
  pc: string;
  stale: string | null;
  onHole: (name: string) => void;
}

function ScorePlace({ run, frame, pc, stale, onHole }: PlaceProps) {
  const depositId = useDepositId();
  const [view, setView] = useUrlState(COMPONENTS_VIEW);
  const { data: scores } = useQuery(columnQuery(depositId, run.tableId, pc));
  const limits = useMemo(() => (scores === undefined ? [] : sixths(scores)), [scores]);
  const paint = useCallback<RowPaint>((row) => ({ stop: scores === undefined ? null : sequenceStop(scores[row] ?? NaN, limits) }), [scores, limits]);
  return (
    <PlacePlate
      frame={frame}
      support={run.support}
      paint={paint}
      subject={`by ${pc}`}
      kind={view.place}
      onKind={(place) => setView({ place })}
      sectionM={view.section}
      onSection={(section) => setView({ section, place: 'section' })}
      onHole={onHole}
      tooltip={(row) => <RowTooltip frame={frame} row={row} lines={[`${pc} ${formatFigures(scores?.[row] ?? NaN)}`]} />}
      foot={<ScoreKey pc={pc} limits={limits} />}
      help={PLACE_HELP}
      caption={`${pc}: ${shortReading(run, componentNumber(pc))} · snapshot ${run.snapshotNumber}`}
      stale={stale}
      height="fill"
      className="max-lg:h-96"
    />
  );
}
