import { sortedAscending } from '#kernels/statistics/sort-ascending.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { effectiveCount } from '#kernels/statistics/weighted-moments.ts';
import { requireFinite, requireWeights } from '#kernels/statistics/require-finite.ts';

/** What a mixture is fitted to: weighted points on a line, some known only to lie below a limit. */
export interface MixtureData {
  /** Points (ln grade), ascending; bin means when binned. */
  y: Float64Array;
  /** Weight of each point; with `belowWeight` they add up to `n`. */
  weight: Float64Array;
  /** Variance within each bin; null when the points are the values themselves. */
  binVariance: Float64Array | null;
  /** Limits (ln) of values known only to be below, ascending, with their weights. */
  below: Float64Array;
  belowWeight: Float64Array;
  /** Effective number of rows, the n of the likelihood and of BIC. */
  n: number;
}

/**
 * Mixture data of rows: equal points are merged and weights scaled so that they add up to Kish's
 * effective number of rows (to the number of rows when unweighted).
 *
 * @param y Measured values (ln grade), finite, any order.
 * @param below Limits (ln) of rows known only to be below them.
 * @param weights Of the measured rows, then of those below; interval lengths (m). Equal when left out.
 * @throws {KernelError} `too-few-rows` without a measured row, `not-finite`, `shape`, `bad-parameter`.
 */
export function mixtureData(
  y: ArrayLike<number>,
  below: ArrayLike<number> = [],
  weights?: ArrayLike<number>,
): MixtureData {
  requireFinite(y, 'values');
  if (below.length > 0) requireFinite(below, 'limits');
  const rows = y.length + below.length;
  const used = weights ?? new Float64Array(rows).fill(1);
  const total = requireWeights(used, rows);
  const n = weights ? effectiveCount(used) : rows;
  const measured = merged(y, (row) => (used[row]! * n) / total);
  const limits = merged(below, (row) => (used[y.length + row]! * n) / total);
  if (measured.x.length === 0)
    throw new KernelError('too-few-rows', 'expected a measured row with weight, found none');
  return {
    y: measured.x,
    weight: measured.weight,
    binVariance: null,
    below: limits.x,
    belowWeight: limits.weight,
    n,
  };
}

/** Distinct values ascending with their summed weights; rows of weight 0 left out. */
function merged(
  values: ArrayLike<number>,
  weightOf: (row: number) => number,
): { x: Float64Array; weight: Float64Array } {
  const sorted = sortedAscending(values);
  let count = 0;
  for (let i = 0; i < sorted.length; i++)
    if (i === 0 || sorted[i] !== sorted[i - 1]) sorted[count++] = sorted[i]!;
  const x = sorted.subarray(0, count);
  const weight = new Float64Array(count);
  for (let row = 0; row < values.length; row++) weight[placeOf(x, values[row]!)]! += weightOf(row);
  const kept = weight.some((w) => w === 0)
    ? [...weight.keys()].filter((i) => weight[i]! > 0)
    : null;
  return kept
    ? {
        x: Float64Array.from(kept, (i) => x[i]!),
        weight: Float64Array.from(kept, (i) => weight[i]!),
      }
    : { x, weight };
}

/** Place of a value among ascending distinct values that hold it. */
function placeOf(x: Float64Array, value: number): number {
  let [low, high] = [0, x.length - 1];
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (x[middle]! < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

/**
 * The same data in bins of equal width: mean, weight and variance of each bin with points. Fits on
 * a few hundred bins or more differ from fits on the points by far less than their standard error.
 */
export function binned(data: MixtureData, bins: number): MixtureData {
  if (data.y.length <= bins) return data;
  const known = binnings.get(data) ?? new Map<number, MixtureData>();
  binnings.set(data, known);
  const found = known.get(bins) ?? inBins(data, bins);
  known.set(bins, found);
  return found;
}

/** Binnings already made: fits of several k ask for the same ones. */
const binnings = new WeakMap<MixtureData, Map<number, MixtureData>>();

function inBins(data: MixtureData, bins: number): MixtureData {
  const { y, weight, binVariance } = data;
  const first = y[0]!;
  const width = (y[y.length - 1]! - first) / bins;
  const sum = new Float64Array(bins);
  const mass = new Float64Array(bins);
  const squares = new Float64Array(bins);
  for (let i = 0; i < y.length; i++) {
    const bin = Math.min(bins - 1, Math.floor((y[i]! - first) / width));
    const offset = y[i]! - first - (bin + 0.5) * width;
    const own = binVariance ? binVariance[i]! : 0;
    mass[bin]! += weight[i]!;
    sum[bin]! += weight[i]! * offset;
    squares[bin]! += weight[i]! * (offset * offset + own);
  }
  const filled = [...mass.keys()].filter((bin) => mass[bin]! > 0);
  const meanOffset = (bin: number) => sum[bin]! / mass[bin]!;
  return {
    ...data,
    y: Float64Array.from(filled, (bin) => first + (bin + 0.5) * width + meanOffset(bin)),
    weight: Float64Array.from(filled, (bin) => mass[bin]!),
    binVariance: Float64Array.from(filled, (bin) =>
      Math.max(0, squares[bin]! / mass[bin]! - meanOffset(bin) ** 2),
    ),
  };
}

/** Weighted mean and standard deviation (denominator n) of the measured points. */
export function spreadOf({ y, weight, binVariance }: MixtureData): {
  mean: number;
  sd: number;
  total: number;
} {
  let total = 0;
  let mean = 0;
  for (let i = 0; i < y.length; i++) {
    total += weight[i]!;
    mean += (weight[i]! / total) * (y[i]! - mean);
  }
  let squares = 0;
  for (let i = 0; i < y.length; i++)
    squares += weight[i]! * ((y[i]! - mean) ** 2 + (binVariance?.[i] ?? 0));
  return { mean, sd: Math.sqrt(squares / total), total };
}
