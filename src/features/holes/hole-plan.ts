import type { HoleRow } from '#contract/holes.ts';
import { sequenceStop, type HoleTrace, type TraceInterval } from '#src/components/charts/hole-geometry.ts';
import { traceOf } from '#src/lib/hole-traces.ts';

/** Grades of all rows with their depths, as the plan colours traces by them. */
export interface PlanGrades {
  values: Float64Array;
  fromM: Float64Array;
  toM: Float64Array;
  /** Five limits between the six steps of the sequence, in the same unit as the values. */
  limits: readonly number[];
}

const STRETCH_M = 10;

/** Where there is no grade to show, stretches of a hole that only let the pointer find it. */
function bareIntervals(lengthM: number, firstRow: number): TraceInterval[] {
  const count = Math.max(1, Math.ceil(lengthM / STRETCH_M));
  const step = lengthM / count;
  return Array.from({ length: count }, (_, i) => ({ fromM: i * step, toM: (i + 1) * step, row: firstRow }));
}

function gradedIntervals({ firstRow, intervals }: HoleRow, { values, fromM, toM, limits }: PlanGrades): TraceInterval[] {
  return Array.from({ length: intervals }, (_, i) => {
    const row = firstRow + i;
    return { row, fromM: fromM[row] ?? NaN, toM: toM[row] ?? NaN, stop: sequenceStop(values[row] ?? NaN, limits) };
  }).filter(({ fromM: from, toM: to }) => Number.isFinite(from) && Number.isFinite(to));
}

/** Traces for the plan, coloured by grade where one is read. */
export const planTraces = (holes: readonly HoleRow[], grades: PlanGrades | null): HoleTrace[] =>
  holes.map((hole) => {
    const intervals = grades && hole.intervals > 0 ? gradedIntervals(hole, grades) : bareIntervals(hole.lengthM, hole.firstRow);
    return { ...traceOf(hole), intervals };
  });

/** Shares of the values that lie below each limit: most metres are barren, so steps open upwards. */
export const LIMIT_SHARES = [0.5, 0.75, 0.9, 0.95, 0.99] as const;

/** The limits of the steps for a column of grades; empty without grades. */
export function gradeLimits(values: Float64Array): number[] {
  const sorted = values.filter((value) => Number.isFinite(value)).sort();
  if (sorted.length === 0) return [];
  return LIMIT_SHARES.map((share) => sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? NaN);
}

/** Holes whose name or campaign holds the text. */
export function findHoles(holes: readonly HoleRow[], text: string): readonly HoleRow[] {
  const wanted = text.trim().toLowerCase();
  if (wanted === '') return holes;
  return holes.filter(({ hole, campaign }) => hole.toLowerCase().includes(wanted) || campaign?.toLowerCase().includes(wanted));
}
