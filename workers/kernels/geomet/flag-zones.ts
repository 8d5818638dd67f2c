import { KernelError } from '#kernels/kernel-error.ts';
import { checkIntervalsByHole, type IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';
import {
  bridge,
  ROUNDING_M,
  runningSums,
  runsOfHole,
  totals,
  type Run,
  type RunningSums,
} from './bridge-runs.ts';

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
  const sums = runningSums(intervals, element.valuesPpm, isOver);
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
