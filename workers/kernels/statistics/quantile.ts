import { quantileSorted } from 'simple-statistics';
import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite, requireWeights } from './require-finite.ts';
import { sortedAscending } from './sort-ascending.ts';

function requireProbabilities(probabilities: readonly number[]): void {
  const bad = probabilities.find((p) => !(p >= 0 && p <= 1));
  if (bad !== undefined) {
    throw new KernelError('bad-parameter', `expected a probability in [0, 1], found ${bad}`);
  }
}

/**
 * Sample quantiles by linear interpolation at (n - 1) p (type 7 of Hyndman & Fan).
 *
 * @param values Finite values in any order. Not modified.
 * @param probabilities Each in [0, 1].
 * @returns One quantile per probability, in the unit of the values.
 * @throws {KernelError} `too-few-rows`, `not-finite`, `bad-parameter`.
 * @see Hyndman & Fan (1996), Sample quantiles in statistical packages, Am. Stat. 50.
 */
export function quantiles(values: ArrayLike<number>, probabilities: readonly number[]): number[] {
  requireFinite(values, 'values');
  requireProbabilities(probabilities);
  const sorted = Array.from(sortedAscending(values));
  return probabilities.map((p) => quantileSorted(sorted, p));
}

/**
 * Length-weighted quantiles: linear interpolation of the sorted values against
 * p_i = (W_i - (w_i + w_1) / 2) / (W - (w_1 + w_n) / 2), W_i the running weight. Equal weights give
 * {@link quantiles}.
 *
 * @param values Finite values in any order. Not modified.
 * @param weights Interval lengths (m), >= 0; rows of weight 0 are left out.
 * @param probabilities Each in [0, 1].
 * @throws {KernelError} `too-few-rows`, `not-finite`, `shape`, `bad-parameter`.
 */
export function weightedQuantiles(
  values: ArrayLike<number>,
  weights: ArrayLike<number>,
  probabilities: readonly number[],
): number[] {
  requireFinite(values, 'values');
  requireWeights(weights, values.length);
  requireProbabilities(probabilities);
  const order = ascendingWithWeight(values, weights);
  const positions = plottingPositions(order, weights);
  return probabilities.map((p) => {
    const upper = firstAtLeast(positions, p);
    const high = values[order[upper]!]!;
    if (upper === 0) return high;
    const low = values[order[upper - 1]!]!;
    const start = positions[upper - 1]!;
    const share = (p - start) / (positions[upper]! - start);
    return share < 1 ? low + (high - low) * share : high;
  });
}

/** Row numbers with weight > 0 by ascending value, ties in row order. */
function ascendingWithWeight(values: ArrayLike<number>, weights: ArrayLike<number>): Uint32Array {
  const rows = new Uint32Array(values.length);
  let kept = 0;
  for (let row = 0; row < values.length; row++) if (weights[row]! > 0) rows[kept++] = row;
  return rows.subarray(0, kept).sort((a, b) => values[a]! - values[b]! || a - b);
}

function plottingPositions(order: Uint32Array, weights: ArrayLike<number>): Float64Array {
  const positions = new Float64Array(order.length);
  const first = weights[order[0]!]!;
  let running = 0;
  for (let i = 0; i < order.length; i++) {
    const weight = weights[order[i]!]!;
    running += weight;
    positions[i] = running - (weight + first) / 2;
  }
  const span = positions[order.length - 1]!;
  if (span > 0) for (let i = 0; i < positions.length; i++) positions[i]! /= span;
  return positions;
}

/** Index of the first position >= p, the last index when rounding leaves none. */
function firstAtLeast(positions: Float64Array, p: number): number {
  let [low, high] = [0, positions.length - 1];
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (positions[middle]! >= p) high = middle;
    else low = middle + 1;
  }
  return low;
}
