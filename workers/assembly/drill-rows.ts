import { positionsAtDepths } from '#kernels/geometry/position-at-depth.ts';
import type { SurveyedHole } from './hole-paths.ts';
import { rowsByHole, type LoadedTable } from './read-rows.ts';

/** The assay intervals placed in space, in the order they are stored in. */
export interface DrillRows {
  hole: string[];
  fromM: Float64Array;
  toM: Float64Array;
  lengthM: Float64Array;
  x: Float64Array;
  y: Float64Array;
  z: Float64Array;
  runs: Map<string, { first: number; count: number }>;
  notes: string[];
}

/** Centres of the assay intervals by the path of their hole; NaN for a hole without a collar. */
export function placeIntervals(assay: LoadedTable, holes: ReadonlyMap<string, SurveyedHole>): DrillRows {
  const hole = assay.texts('hole');
  const [fromM, toM] = [assay.numbers('from'), assay.numbers('to')];
  const runs = rowsByHole(hole);
  const blank = (): Float64Array => new Float64Array(hole.length).fill(Number.NaN);
  const rows: DrillRows = { hole, fromM, toM, lengthM: toM.map((to, i) => to - (fromM[i] ?? to)), x: blank(), y: blank(), z: blank(), runs, notes: [] };
  let lost = 0;
  for (const [name, { first, count }] of runs) {
    const surveyed = holes.get(name);
    if (!surveyed) {
      lost += count;
      continue;
    }
    const middles = Float64Array.from({ length: count }, (_, i) => ((fromM[first + i] ?? 0) + (toM[first + i] ?? 0)) / 2);
    const { positions } = positionsAtDepths(surveyed.path, middles);
    for (let i = 0; i < count; i++) {
      rows.x[first + i] = positions[3 * i] ?? Number.NaN;
      rows.y[first + i] = positions[3 * i + 1] ?? Number.NaN;
      rows.z[first + i] = positions[3 * i + 2] ?? Number.NaN;
    }
  }
  if (lost > 0) rows.notes.push(`${lost} intervals lie in holes without a collar: they have no coordinates.`);
  return rows;
}
