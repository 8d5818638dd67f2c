import type { HoleRow } from '#contract/holes.ts';
import type { Frame } from '#src/lib/frame.ts';
import { traceOf } from '#src/lib/hole-traces.ts';
import type { HoleTrace, TraceInterval } from '../charts/hole-geometry.ts';

/** Colour of a row: a category slot or a step of the sequence; null leaves it bare. */
export type RowPaint = (row: number) => Pick<TraceInterval, 'slot' | 'stop'> | null;

/** Holes with the intervals of a frame laid on them, each in its colour. */
export function paintedHoles(holes: readonly HoleRow[], frame: Frame, paint: RowPaint): HoleTrace[] {
  return holes.map((hole) => {
    const { start, end } = frame.rangeOf.get(hole.hole) ?? { start: 0, end: 0 };
    const intervals: TraceInterval[] = [];
    for (let row = start; row < end; row++) {
      const colour = paint(row);
      if (colour !== null) intervals.push({ row, fromM: frame.fromM[row] ?? NaN, toM: frame.toM[row] ?? NaN, ...colour });
    }
    return { ...traceOf(hole), intervals };
  });
}

interface Places {
  x: Float64Array;
  y: Float64Array;
  z: Float64Array;
}

/** Length of the dash a sample is drawn as, against the width of the whole grid. */
const DASH_SHARE = 0.012;

/** Surface samples for the plan: a short dash each, so that they take colours as holes do. */
export function paintedSamples(frame: Frame, { x, y, z }: Places, paint: RowPaint): HoleTrace[] {
  const rows = Array.from({ length: frame.nRows }, (_value, row) => row).filter((row) => frame.holeAt(row) === null && Number.isFinite(x[row]) && Number.isFinite(y[row]));
  const easts = rows.map((row) => x[row] ?? 0);
  const dash = rows.length === 0 ? 1 : Math.max(1, (Math.max(...easts) - Math.min(...easts)) * DASH_SHARE);
  return rows.map((row) => {
    const colour = paint(row);
    const [east, north, elevation] = [x[row] ?? 0, y[row] ?? 0, z[row] ?? 0];
    const points = [0, dash].map((depthM) => ({ depthM, east: east - dash / 2 + depthM, north, elevation }));
    return { name: `sample ${row + 1}`, points, intervals: colour === null ? [] : [{ row, fromM: 0, toM: dash, ...colour }] };
  });
}
