import { median } from 'simple-statistics';
import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import type { Interval } from './bootstrap.ts';
import { requirePairs } from './pairs.ts';

/** A line between two methods that outliers do not move. */
export interface PassingBablok {
  /** Pairs the line rests on: a seeded sample of a larger set. */
  n: number;
  slope: number;
  intercept: number;
  /** 95 % ranges; one without 1, or without 0, tells a proportional or a constant bias. */
  slopeInterval: Interval;
  interceptInterval: Interval;
  /** Slopes between pairs of points, and those under -1 that shift the median. */
  nSlopes: number;
  shift: number;
  notes: string[];
}

const Z_95 = 1.959963984540054;
/** Slopes grow with the square of the pairs. */
const MOST_PAIRS = 2000;
const FEW_PAIRS = 30;

/**
 * Passing-Bablok regression of y on x: the median slope between all points, shifted so that x and y
 * may change places. Pairs of points alike in both are left out, slopes of exactly -1 too; points of
 * equal x have a slope of +infinity, whatever their order.
 *
 * @param x, y The same samples by two methods, one unit, finite; at least five. Not modified.
 * @param options.seed Draws the sample of a set of more than 2000 pairs.
 * @throws {KernelError} `shape`, `too-few-rows`, `not-finite`; `singular` when x does not vary or the
 *   methods do not rise together.
 * @see Passing & Bablok (1983), J. Clin. Chem. Clin. Biochem. 21.
 */
export function passingBablok(
  x: Float64Array,
  y: Float64Array,
  options: { seed: number },
): PassingBablok {
  const nGiven = requirePairs(x, y);
  const rows = sampleRows(nGiven, options.seed);
  const xs = Float64Array.from(rows, (row) => x[row]!);
  const ys = Float64Array.from(rows, (row) => y[row]!);
  const n = xs.length;
  const slopes = sortedSlopes(xs, ys);
  const nSlopes = slopes.length;
  const shift = firstAtLeast(slopes, -1);
  const middle = (nSlopes + 1) / 2 + shift;
  const slope = (at(slopes, Math.floor(middle)) + at(slopes, Math.ceil(middle))) / 2;
  if (!Number.isFinite(slope) || Math.ceil(middle) > nSlopes) {
    throw new KernelError('singular', 'expected two methods that rise together and vary');
  }
  const spread = Z_95 * Math.sqrt((n * (n - 1) * (2 * n + 5)) / 18);
  const lower = Math.round((nSlopes - spread) / 2);
  const slopeInterval = {
    low: at(slopes, lower + shift),
    high: at(slopes, nSlopes - lower + 1 + shift),
  };
  const interceptFor = (b: number) => median(Array.from(xs, (value, i) => ys[i]! - b * value));
  const notes: string[] = [];
  if (n < nGiven) notes.push(`a sample of ${n} of ${nGiven} pairs was used`);
  if (n < FEW_PAIRS) notes.push(`${n} pairs only: the ranges are wide`);
  return {
    n,
    slope,
    intercept: interceptFor(slope),
    slopeInterval,
    interceptInterval: {
      low: Number.isFinite(slopeInterval.high) ? interceptFor(slopeInterval.high) : -Infinity,
      high: interceptFor(slopeInterval.low),
    },
    nSlopes,
    shift,
    notes,
  };
}

/** Value at a place counted from 1, the nearest there is past the ends. */
function at(sorted: Float64Array, place: number): number {
  return sorted[Math.min(Math.max(place, 1), sorted.length) - 1]!;
}

function sortedSlopes(x: Float64Array, y: Float64Array): Float64Array {
  const slopes = new Float64Array((x.length * (x.length - 1)) / 2);
  let count = 0;
  for (let i = 0; i < x.length; i++) {
    for (let j = i + 1; j < x.length; j++) {
      const [dx, dy] = [x[j]! - x[i]!, y[j]! - y[i]!];
      if (dx === 0 && dy === 0) continue;
      const slope = dx === 0 ? Infinity : dy / dx;
      if (slope !== -1) slopes[count++] = slope;
    }
  }
  if (count === 0) throw new KernelError('singular', 'expected pairs that differ, found one');
  return slopes.slice(0, count).sort();
}

/** How many sorted values lie under a limit. */
function firstAtLeast(sorted: Float64Array, limit: number): number {
  let [low, high] = [0, sorted.length];
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (sorted[middle]! < limit) low = middle + 1;
    else high = middle;
  }
  return low;
}

function sampleRows(n: number, seed: number): Uint32Array {
  const rows = Uint32Array.from({ length: n }, (_, row) => row);
  if (n <= MOST_PAIRS) return rows;
  const random = seededRandom(seed);
  for (let i = 0; i < MOST_PAIRS; i++) {
    const other = i + random.below(n - i);
    [rows[i], rows[other]] = [rows[other]!, rows[i]!];
  }
  return rows.slice(0, MOST_PAIRS).sort();
}
