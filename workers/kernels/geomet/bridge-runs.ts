import { LOGGING_TOLERANCE_M } from '#kernels/intervals/interval-table.ts';
import type { IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';

/** Depths this close count as equal when lengths are compared with the rules. */
export const ROUNDING_M = 1e-9;
/** Most of a zone that may be dilution. */
const MOST_DILUTION = 0.5;

/** What two runs must keep to when they are joined across a gap. */
export interface BridgeRules {
  limitPpm: number;
  maxDilutionM: number;
}

/** Rows of touching intervals, both ends included. */
export interface Run {
  first: number;
  last: number;
}

/** Sums over the rows before each row, so that any run's totals are a difference. */
export interface RunningSums {
  overM: Float64Array;
  assayedM: Float64Array;
  metal: Float64Array;
}

export function runningSums(
  { fromM, toM }: IntervalsByHole,
  valuesPpm: Float64Array,
  isOver: Uint8Array,
): RunningSums {
  const n = fromM.length;
  const sums = {
    overM: new Float64Array(n + 1),
    assayedM: new Float64Array(n + 1),
    metal: new Float64Array(n + 1),
  };
  for (let row = 0; row < n; row++) {
    const length = toM[row]! - fromM[row]!;
    const value = valuesPpm[row]!;
    const assayed = Number.isNaN(value) ? 0 : length;
    sums.overM[row + 1] = sums.overM[row]! + isOver[row]! * length;
    sums.assayedM[row + 1] = sums.assayedM[row]! + assayed;
    sums.metal[row + 1] = sums.metal[row]! + (assayed > 0 ? value * length : 0);
  }
  return sums;
}

/** Touching intervals over the limit, in lists that no zone may cross. */
export function runsOfHole(
  { holeStarts, fromM, toM, isBreakBefore }: IntervalsByHole,
  isOver: Uint8Array,
  hole: number,
): Run[][] {
  const lists: Run[][] = [[]];
  for (let row = holeStarts[hole]!; row < holeStarts[hole + 1]!; row++) {
    if (isBreakBefore?.[row] === 1) lists.push([]);
    if (isOver[row] !== 1) continue;
    const list = lists[lists.length - 1]!;
    const run = list[list.length - 1];
    const touches = run?.last === row - 1 && fromM[row]! - toM[row - 1]! <= LOGGING_TOLERANCE_M;
    if (run && touches) run.last = row;
    else list.push({ first: row, last: row });
  }
  return lists;
}

export function bridge(
  runs: Run[],
  intervals: IntervalsByHole,
  sums: RunningSums,
  rules: BridgeRules,
): Run[] {
  const { fromM, toM } = intervals;
  const joined = [...runs];
  for (;;) {
    let best: { at: number; gap: number; mean: number } | null = null;
    for (let at = 0; at + 1 < joined.length; at++) {
      const [upper, lower] = [joined[at]!, joined[at + 1]!];
      const gap = fromM[lower.first]! - toM[upper.last]!;
      if (gap > rules.maxDilutionM + ROUNDING_M) continue;
      const { lengthM, dilutionM, mean } = totals(
        { first: upper.first, last: lower.last },
        intervals,
        sums,
      );
      if (mean < rules.limitPpm * (1 - 1e-12) || dilutionM > MOST_DILUTION * lengthM + ROUNDING_M)
        continue;
      const isShorter = best !== null && gap < best.gap - ROUNDING_M;
      const isRicher =
        best !== null && gap <= best.gap + ROUNDING_M && mean > best.mean * (1 + 1e-12);
      if (best === null || isShorter || isRicher) best = { at, gap, mean };
    }
    if (best === null) return joined;
    const [upper, lower] = [joined[best.at]!, joined[best.at + 1]!];
    joined.splice(best.at, 2, { first: upper.first, last: lower.last });
  }
}

export function totals(
  { first, last }: Run,
  { fromM, toM }: IntervalsByHole,
  { overM, assayedM, metal }: RunningSums,
) {
  const lengthM = toM[last]! - fromM[first]!;
  const assayed = assayedM[last + 1]! - assayedM[first]!;
  return {
    lengthM,
    dilutionM: tidy(lengthM - (overM[last + 1]! - overM[first]!)),
    notAssayedM: tidy(lengthM - assayed),
    // over-range intervals may lack a value: then nothing is known of the mean
    mean: assayed > 0 ? (metal[last + 1]! - metal[first]!) / assayed : NaN,
  };
}

/** A difference of sums without its rounding dust. */
const tidy = (metres: number): number => (Math.abs(metres) < 1e-6 ? 0 : metres);
