import { linearRegression, median } from 'simple-statistics';
import { KernelError } from '#kernels/kernel-error.ts';
import { incompleteBeta } from '#kernels/tables/special-functions.ts';
import { requirePairs } from './pairs.ts';

/** Error of measurement as it grows with concentration: sd = s0 + k c. */
export interface PrecisionModel {
  /** Sd at concentration 0, in the unit of the values. */
  s0: number;
  /** Growth of the sd with concentration. */
  k: number;
}

export interface ThompsonHowarth extends PrecisionModel {
  /** The groups the line was drawn through, by rising mean. */
  groups: { n: number; mean: number; medianDifference: number }[];
  nPairs: number;
  notes: string[];
}

/** Pairs of one group, and fewest pairs a line is drawn through. */
const GROUP_SIZE = 11;
const FEWEST_FOR_LINE = 50;
/** Median |a - b| to sd: 1 / (sqrt(2) .67449). */
const SD_PER_MEDIAN = 1.0483580825075305;

/**
 * Precision as a function of concentration from duplicates: median |a - b| of groups of eleven pairs
 * of like mean, regressed on the group means. Not an average error of the data set: take the average
 * coefficient of variation for that.
 *
 * @param a, b Duplicates in one unit, finite, >= 0. Not modified.
 * @throws {KernelError} `shape`, `not-finite`; `too-few-rows` under fifty pairs (use
 *   {@link precisionControl} then); `not-positive` with { row }.
 * @see Thompson & Howarth (1976, 1978), J. Geochem. Explor. 9; factor 1.04836 as quoted by Stanley &
 *   Lawie (2008).
 */
export function thompsonHowarth(a: Float64Array, b: Float64Array): ThompsonHowarth {
  const nPairs = requirePairs(a, b, FEWEST_FOR_LINE);
  requireNotNegative(a, b);
  const groups = groupPairs(a, b);
  const line = linearRegression(
    groups.map(({ mean, medianDifference }) => [mean, medianDifference]),
  );
  const { intercept, slope, notes } = withoutNegative(groups, line.b, line.m);
  return { s0: intercept * SD_PER_MEDIAN, k: slope * SD_PER_MEDIAN, groups, nPairs, notes };
}

/** Relative precision at a concentration > 0, 2 sd / c as a fraction. */
export function precisionAt({ s0, k }: PrecisionModel, concentration: number): number {
  if (!(concentration > 0 && concentration < Infinity)) {
    throw new KernelError('bad-parameter', `expected a concentration > 0, found ${concentration}`);
  }
  return (2 * (s0 + k * concentration)) / concentration;
}

function groupPairs(a: Float64Array, b: Float64Array): ThompsonHowarth['groups'] {
  const sums = a.map((value, i) => value + b[i]!);
  const order = Array.from(sums.keys()).sort((i, j) => sums[i]! - sums[j]! || i - j);
  const count = Math.floor(order.length / GROUP_SIZE);
  return Array.from({ length: count }, (_, g) => {
    // Pairs left over are those of highest mean: they join the last group.
    const rows = order.slice(g * GROUP_SIZE, g + 1 === count ? undefined : (g + 1) * GROUP_SIZE);
    return {
      n: rows.length,
      mean: rows.reduce((sum, row) => sum + sums[row]! / 2, 0) / rows.length,
      medianDifference: median(rows.map((row) => Math.abs(a[row]! - b[row]!))),
    };
  });
}

/** An error cannot be negative: a line that is gives way to one that is not, and says so. */
function withoutNegative(
  groups: ThompsonHowarth['groups'],
  intercept: number,
  slope: number,
): { intercept: number; slope: number; notes: string[] } {
  const sum = (value: (group: ThompsonHowarth['groups'][number]) => number) =>
    groups.reduce((total, group) => total + value(group), 0);
  if (!(slope >= 0)) {
    const mean = sum(({ medianDifference }) => medianDifference) / groups.length;
    const notes = ['the error does not grow with concentration: one error was taken for all'];
    return { intercept: mean, slope: 0, notes };
  }
  if (intercept >= 0) return { intercept, slope, notes: [] };
  const through = sum((g) => g.mean * g.medianDifference) / sum((g) => g.mean * g.mean);
  const notes = ['the error at concentration 0 came out negative: the line was drawn through 0'];
  return { intercept: 0, slope: through, notes };
}

/** How many duplicates fall outside what a stated precision allows. */
export interface PrecisionControl {
  nPairs: number;
  beyond90: number;
  beyond99: number;
  /** Chance of so many or more when the precision holds. */
  p90: number;
  p99: number;
}

/** Quantiles .9 and .99 of |a - b| over the sd: sqrt(2) times quantiles .95 and .995. */
export const CONTROL_LINES = { p90: 2.3261743073533476, p99: 3.6427727354368993 } as const;

/**
 * Counts duplicates past the control lines of a stated precision, for sets too small to fit one.
 *
 * @param a, b Duplicates in one unit, finite, >= 0; at least five. Not modified.
 * @throws {KernelError} `shape`, `not-finite`, `too-few-rows`, `not-positive`; `bad-parameter` for a
 *   model that is negative or 0 throughout.
 * @see Thompson & Howarth (1978), J. Geochem. Explor. 9.
 */
export function precisionControl(
  a: Float64Array,
  b: Float64Array,
  { s0, k }: PrecisionModel,
): PrecisionControl {
  const nPairs = requirePairs(a, b);
  requireNotNegative(a, b);
  if (!(s0 >= 0 && k >= 0 && s0 + k > 0)) {
    const message = `expected s0 and k >= 0 and not both 0, found ${s0}, ${k}`;
    throw new KernelError('bad-parameter', message);
  }
  const countBeyond = (line: number) =>
    a.reduce((count, value, i) => {
      const sd = s0 + (k * (value + b[i]!)) / 2;
      return Math.abs(value - b[i]!) > line * sd ? count + 1 : count;
    }, 0);
  const [beyond90, beyond99] = [countBeyond(CONTROL_LINES.p90), countBeyond(CONTROL_LINES.p99)];
  return {
    nPairs,
    beyond90,
    beyond99,
    p90: binomialTail(nPairs, beyond90, 0.1),
    p99: binomialTail(nPairs, beyond99, 0.01),
  };
}

/**
 * Chance of `count` or more successes in n trials of chance p each.
 *
 * @throws {KernelError} `bad-parameter`.
 * @see Abramowitz & Stegun (1964) 26.5.24.
 */
export function binomialTail(n: number, count: number, p: number): number {
  const isCount = Number.isInteger(n) && Number.isInteger(count) && count >= 0 && count <= n;
  if (!isCount || !(p >= 0 && p <= 1)) {
    const message = `expected up to n successes and a chance in [0, 1], found ${count} of ${n}, ${p}`;
    throw new KernelError('bad-parameter', message);
  }
  return count === 0 ? 1 : incompleteBeta(p, count, n - count + 1);
}

function requireNotNegative(a: Float64Array, b: Float64Array): void {
  const row = a.findIndex((value, i) => !(value >= 0 && b[i]! >= 0));
  if (row < 0) return;
  const message = `expected values >= 0, found ${a[row]} and ${b[row]} at row ${row}`;
  throw new KernelError('not-positive', message, { row });
}
