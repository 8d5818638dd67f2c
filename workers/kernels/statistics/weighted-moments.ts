import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite, requireWeights } from './require-finite.ts';

/** Moments of values weighted by interval length. */
export interface WeightedMoments {
  mean: number;
  /** Unbiased under reliability weights; null when a single row carries all the weight. */
  variance: number | null;
  /** Third standardised population moment m3 / m2^1.5; null when the values do not vary. */
  skewness: number | null;
  /** Fourth standardised population moment less 3; null when the values do not vary. */
  excessKurtosis: number | null;
}

/**
 * Length-weighted mean, sum(w x) / sum(w).
 *
 * @param values One value per interval, finite. Not modified.
 * @param weights Interval lengths (m), >= 0, not all zero.
 * @throws {KernelError} `too-few-rows`, `not-finite`, `shape`, `bad-parameter`.
 */
export function weightedMean(values: ArrayLike<number>, weights: ArrayLike<number>): number {
  requireFinite(values, 'values');
  const total = requireWeights(weights, values.length);
  let sum = 0;
  for (let row = 0; row < values.length; row++) sum += weights[row]! * values[row]!;
  return sum / total;
}

/**
 * Length-weighted variance under reliability weights,
 * sum(w (x - mean)^2) / (W - sum(w^2) / W); equal weights give the n - 1 form.
 *
 * @param values One value per interval, finite. Not modified.
 * @param weights Interval lengths (m), >= 0, not all zero.
 * @throws {KernelError} `too-few-rows` when a single row carries all the weight; else as
 *   {@link weightedMean}.
 */
export function weightedVariance(values: ArrayLike<number>, weights: ArrayLike<number>): number {
  const { variance } = weightedMoments(values, weights);
  if (variance === null) {
    throw new KernelError('too-few-rows', 'expected two rows with weight, found one');
  }
  return variance;
}

/**
 * Mean, variance, skewness and kurtosis of length-weighted values in two passes.
 *
 * @param values One value per interval, finite. Not modified.
 * @param weights Interval lengths (m), >= 0, not all zero.
 * @throws {KernelError} As {@link weightedMean}.
 */
export function weightedMoments(
  values: ArrayLike<number>,
  weights: ArrayLike<number>,
): WeightedMoments {
  const mean = weightedMean(values, weights);
  let [total, squaredWeights, sum2, sum3, sum4] = [0, 0, 0, 0, 0];
  let [smallest, largest] = [Infinity, -Infinity];
  for (let row = 0; row < values.length; row++) {
    const weight = weights[row]!;
    if (weight === 0) continue;
    const value = values[row]!;
    const deviation = value - mean;
    const square = weight * deviation * deviation;
    total += weight;
    squaredWeights += weight * weight;
    sum2 += square;
    sum3 += square * deviation;
    sum4 += square * deviation * deviation;
    smallest = Math.min(smallest, value);
    largest = Math.max(largest, value);
  }
  const freedom = total - squaredWeights / total;
  const single = !(freedom > 1e-12 * total);
  // A constant column leaves rounding noise in the sums, not a spread.
  if (smallest === largest) {
    return { mean: smallest, variance: single ? null : 0, skewness: null, excessKurtosis: null };
  }
  const m2 = sum2 / total;
  return {
    mean,
    variance: single ? null : sum2 / freedom,
    skewness: finiteOrNull(sum3 / total / m2 ** 1.5),
    excessKurtosis: finiteOrNull(sum4 / total / m2 ** 2 - 3),
  };
}

/**
 * Kish's effective number of rows, (sum w)^2 / sum(w^2): how many rows of equal length would give
 * the same variance of the mean.
 *
 * @param weights Interval lengths (m), >= 0, not all zero.
 * @throws {KernelError} `too-few-rows`, `not-finite`, `bad-parameter`.
 * @see Kish (1965), Survey Sampling, Wiley.
 */
export function effectiveCount(weights: ArrayLike<number>): number {
  const total = requireWeights(weights, weights.length);
  let squares = 0;
  for (let row = 0; row < weights.length; row++) squares += weights[row]! * weights[row]!;
  return (total * total) / squares;
}

function finiteOrNull(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
