import { KernelError } from '#kernels/kernel-error.ts';
import type { OnProgress } from '#kernels/progress.ts';
import { seededRandom } from '#kernels/random.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import type { Interval } from './bootstrap.ts';

/** Two sets of values of one variable side by side, quantile by quantile. */
export interface QuantileComparison {
  /** Probabilities (i - .5) / n, n the smaller number of values, at most 200. */
  probabilities: number[];
  first: number[];
  second: number[];
  /** 100 (mean second / mean first - 1), %. */
  biasPercent: number;
  /** Bootstrap 95 % range, each set drawn anew by itself. */
  biasInterval: Interval;
}

const MOST_POINTS = 200;
const DRAWS = 999;
const FEWEST = 5;

/**
 * Compares two sets that need not be pairs: two laboratories, two campaigns, two methods.
 *
 * @param first, second Finite values in one unit; at least five each, and a mean of the first that
 *   is not 0. Not modified.
 * @throws {KernelError} `too-few-rows`, `not-finite`; `singular` when the first mean is not > 0.
 */
export function compareQuantiles(
  first: Float64Array,
  second: Float64Array,
  { seed, onProgress }: { seed: number; onProgress?: OnProgress },
): QuantileComparison {
  for (const side of [first, second]) {
    requireFinite(side, 'values');
    if (side.length < FEWEST) {
      const message = `expected at least ${FEWEST} values in each set, found ${side.length}`;
      throw new KernelError('too-few-rows', message, { found: side.length });
    }
  }
  const meanFirst = meanOf(first);
  if (!(meanFirst > 0)) {
    throw new KernelError('singular', `expected a first mean > 0, found ${meanFirst}`);
  }
  const n = Math.min(first.length, second.length, MOST_POINTS);
  const probabilities = Array.from({ length: n }, (_, i) => (i + 0.5) / n);
  const random = seededRandom(seed);
  const drawMean = (values: Float64Array) => {
    let sum = 0;
    for (let i = 0; i < values.length; i++) sum += values[random.below(values.length)]!;
    return sum / values.length;
  };
  const draws = Array.from({ length: DRAWS }, (_, draw) => {
    onProgress?.(draw / DRAWS);
    return 100 * (drawMean(second) / drawMean(first) - 1);
  });
  const [low = NaN, high = NaN] = quantiles(
    draws.filter((draw) => Number.isFinite(draw)),
    [0.025, 0.975],
  );
  return {
    probabilities,
    first: quantiles(first, probabilities),
    second: quantiles(second, probabilities),
    biasPercent: 100 * (meanOf(second) / meanFirst - 1),
    biasInterval: { low, high },
  };
}

const meanOf = (values: Float64Array): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;
