import { useMemo } from 'react';
import type { GradeUnit } from '#contract/deposits.ts';
import type { HoleDetail } from '#contract/holes.ts';
import type { DepthInterval } from '#src/components/charts/core-types.ts';
import { clampWindow, fitWindow, isSameWindow, type DepthWindow } from '#src/components/charts/depth-window.ts';
import { HoleStrip } from '#src/components/charts/hole-strip.tsx';
import { assignPatterns } from '#src/components/charts/rock-patterns.tsx';
import { useFigure } from '#src/components/charts/use-figure.ts';
import { RockKey } from '#src/components/tray/rock-key.tsx';
import { WindowButton } from '#src/components/tray/window-button.tsx';
import { figureExports } from '#src/components/ui/figure-exports.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { countOf, formatDepth, formatFigures, formatMetres } from '#src/lib/format.ts';
import { stripIntervals, stripStructures, weatheringOrder } from '../hole-strip-data.ts';

interface Props {
  hole: HoleDetail;
  /** Codes of the whole deposit, so that a rock keeps its pattern from hole to hole. */
  rockCodes: readonly string[];
  analyte: string;
  unit: GradeUnit;
  onAnalyte: (analyte: string) => void;
  /** Depths on show; empty for the whole hole. */
  depth: readonly number[];
  onDepth: (depth: readonly number[]) => void;
  framed: DepthInterval | null;
}

/** The hole laid out as core: rock, weathering, grade and structures under one ruler. */
export function CorePlate({ hole, rockCodes, analyte, unit, onAnalyte, depth, onDepth, framed }: Props) {
  const chart = useFigure();
  const patterns = useMemo(() => assignPatterns(rockCodes), [rockCodes]);
  const rockKey = useMemo(() => {
    const here = new Set(hole.lithology.map(({ code }) => code));
    return [...here].map((code) => ({ code, label: code, pattern: patterns.get(code) ?? null }));
  }, [hole, patterns]);
  const intervals = useMemo(() => stripIntervals(hole, analyte, unit), [hole, analyte, unit]);
  const structures = useMemo(() => stripStructures(hole), [hole]);
  const order = useMemo(() => weatheringOrder(hole.weathering), [hole]);
  const fit = fitWindow([hole]);
  const [from, to] = depth;
  const window: DepthWindow = from !== undefined && to !== undefined && to > from ? clampWindow([from, to], fit) : fit;
  const most = Math.max(0, ...intervals.map(({ grade }) => grade ?? 0));
  const scale = most > 0 ? ` from 0 to ${formatFigures(most)} ${unit}` : '';
  const caption = `${countOf(hole.assays.length, 'assayed interval')}, ${formatMetres(hole.assayedM)} of ${formatMetres(hole.lengthM)} · ${analyte} on a root scale${scale} · dashed structures: poor confidence`;
  const table = () => ({
    columns: ['From, m', 'To, m', `${analyte}, ${unit}`],
    rows: intervals.map(({ fromM, toM, grade }) => [fromM, toM, grade]),
  });
  return (
    <Plate
      title="Core"
      qualifier={<span className="max-md:hidden">depth from the collar down the hole</span>}
      caption={caption}
      tools={
        <>
          <WindowButton window={window} fit={fit} onWindow={(next) => onDepth(next === null || isSameWindow(next, fit) ? [] : [...next])} />
          {hole.analytes.length > 0 && (
            <Select label="Grade drawn" isLabelHidden controlSize="tiny" className="w-24" options={hole.analytes.map((value) => ({ value, label: value }))} value={analyte} onPick={onAnalyte} />
          )}
        </>
      }
      exports={figureExports(chart.drawn, { fileName: `${hole.hole}-core`, caption: `${hole.hole}: ${caption}`, table })}
    >
      <HoleStrip
        chartRef={chart.ref}
        title={`Core of ${hole.hole}`}
        description={`Rock, weathering, ${analyte} and structures of ${hole.hole} from ${formatDepth(window[0])} to ${formatDepth(window[1])} m`}
        fromM={window[0]}
        toM={window[1]}
        rock={hole.lithology}
        rockKey={rockKey}
        weathering={hole.weathering}
        weatheringOrder={order}
        intervals={intervals}
        structures={structures}
        gradeLabel={`${analyte} ${unit}`}
        framed={framed}
        height={172}
      />
      <div className="flex"><RockKey entries={rockKey} /></div>
    </Plate>
  );
}
