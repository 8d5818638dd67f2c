import { LOGGING_TOLERANCE_M } from '#kernels/intervals/interval-table.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { checkIntervalsByHole, type IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';

/** Values of one element on the intervals. */
export interface ElementValues {
  /** One per interval, ppm; NaN where not assayed. */
  valuesPpm: Float64Array;
  /** 1 where the value is a lower bound (over range): counted as over any limit. */
  isLowerBound?: Uint8Array;
}

/** When a run of flagged intervals is a zone. */
export interface ZoneRules {
  /** An interval is over at a value >= this. */
  limitPpm: number;
  minLengthM: number;
  /** Longest single stretch below the limit, or not assayed, that a zone may bridge. */
  maxDilutionM: number;
}

/** A run of intervals over the limit in one hole, with what it bridges. */
export interface FlagZone {
  /** Position of the hole in `holeStarts`. */
  hole: number;
  firstRow: number;
  lastRow: number;
  fromM: number;
  toM: number;
  lengthM: number;
  /** Length-weighted over the assayed metres. */
  meanPpm: number;
  maxPpm: number;
  /** Metres below the limit or not assayed. */
  dilutionM: number;
  notAssayedM: number;
  /** Whether mean and maximum are lower bounds, as an over-range value lies inside. */
  isLowerBound: boolean;
}

/** Depths this close count as equal when lengths are compared with the rules. */
const ROUNDING_M = 1e-9;
/** Most of a zone that may be dilution. */
const MOST_DILUTION = 0.5;

/**
 * Zones of flagged intervals, hole by hole. Runs of intervals at or over the limit are bridged, best
 * pair first (shortest gap, then highest mean, then upper), while each gap is at most `maxDilutionM`,
 * the length-weighted mean of what is joined stays at or over the limit, and at most half of it is
 * dilution; then runs shorter than `minLengthM` are dropped. Intervals not assayed, and depths
 * without an interval, count as dilution and have no say in the mean.
 *
 * @param intervals Intervals in order down each hole; a zone never crosses a break.
 * @returns In order of hole, then depth.
 * @throws {KernelError} `shape`; `bad-interval` or `overlap` with { row }; `bad-parameter` at a rule
 *   or a negative or infinite value.
 */
export function flagZones(
  intervals: IntervalsByHole,
  element: ElementValues,
  rules: ZoneRules,
): FlagZone[] {
  checkIntervalsByHole(intervals);
  checkElement(intervals, element);
  checkRules(rules);
  const isOver = overLimit(element, rules.limitPpm);
  const sums = runningSums(intervals, element, isOver);
  const zones: FlagZone[] = [];
  for (let hole = 0; hole + 1 < intervals.holeStarts.length; hole++) {
    for (const runs of runsOfHole(intervals, isOver, hole)) {
      const joined = bridge(runs, intervals, sums, rules);
      zones.push(...joined.map((run) => describe(run, hole, intervals, element, sums)));
    }
  }
  return zones.filter(({ lengthM }) => lengthM >= rules.minLengthM - ROUNDING_M);
}

/** 1 at each interval whose value is at or over the limit, or a lower bound. */
export function overLimit(
  { valuesPpm, isLowerBound }: ElementValues,
  limitPpm: number,
): Uint8Array {
  return Uint8Array.from(valuesPpm, (value, row) =>
    Number(value >= limitPpm || isLowerBound?.[row] === 1),
  );
}

interface Run {
  first: number;
  last: number;
}

/** Sums over the rows before each row, so that any run's totals are a difference. */
interface RunningSums {
  overM: Float64Array;
  assayedM: Float64Array;
  metal: Float64Array;
}

function runningSums(
  { fromM, toM }: IntervalsByHole,
  { valuesPpm }: ElementValues,
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
function runsOfHole(
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

function bridge(
  runs: Run[],
  intervals: IntervalsByHole,
  sums: RunningSums,
  rules: ZoneRules,
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

function totals(
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

function describe(
  run: Run,
  hole: number,
  intervals: IntervalsByHole,
  element: ElementValues,
  sums: RunningSums,
): FlagZone {
  const { lengthM, dilutionM, notAssayedM, mean } = totals(run, intervals, sums);
  let maxPpm = -Infinity;
  let isLowerBound = false;
  for (let row = run.first; row <= run.last; row++) {
    if (element.valuesPpm[row]! > maxPpm) maxPpm = element.valuesPpm[row]!;
    if (element.isLowerBound?.[row] === 1) isLowerBound = true;
  }
  const [fromM, toM] = [intervals.fromM[run.first]!, intervals.toM[run.last]!];
  const extent = { hole, firstRow: run.first, lastRow: run.last, fromM, toM, lengthM };
  return { ...extent, meanPpm: mean, maxPpm, dilutionM, notAssayedM, isLowerBound };
}

function checkElement(
  { fromM }: IntervalsByHole,
  { valuesPpm, isLowerBound }: ElementValues,
): void {
  const n = fromM.length;
  if (valuesPpm.length !== n || (isLowerBound && isLowerBound.length !== n)) {
    throw new KernelError(
      'shape',
      `expected ${n} values and marks, found ${valuesPpm.length}, ${isLowerBound?.length}`,
    );
  }
  valuesPpm.forEach((value, row) => {
    const isBad = value < 0 || value === Infinity;
    const isBareBound = isLowerBound?.[row] === 1 && Number.isNaN(value);
    if (isBad || isBareBound) {
      throw new KernelError('bad-parameter', `expected ppm >= 0, found ${value} in row ${row}`, {
        row,
      });
    }
  });
}

function checkRules({ limitPpm, minLengthM, maxDilutionM }: ZoneRules): void {
  if (limitPpm > 0 && minLengthM >= 0 && maxDilutionM >= 0) return;
  const found = `found ${limitPpm} ppm, ${minLengthM} m, ${maxDilutionM} m`;
  throw new KernelError('bad-parameter', `expected a limit > 0 and lengths >= 0, ${found}`);
}
