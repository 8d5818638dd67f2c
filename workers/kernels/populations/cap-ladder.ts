import { KernelError } from '#kernels/kernel-error.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';
import { topCutTable, type TopCut } from './top-cuts.ts';

/**
 * Caps to look at, from a percentile of the grades to their maximum at equal steps of ln grade, with
 * what each does: the curves of mean, coefficient of variation and metal lost against the cap.
 *
 * @param values Grades > 0. Not modified.
 * @param options.weights Interval lengths (m); equal when left out.
 * @param options.from Percentile to start at, .9 unless told.
 * @param options.count Caps, 40 unless told, at least 2.
 * @returns Ascending caps, the last one the maximum; one cap when all grades above the percentile are
 *   the same.
 * @throws {KernelError} `bad-parameter`; else as `topCutTable`.
 */
export function capLadder(
  values: ArrayLike<number>,
  options: { weights?: ArrayLike<number>; from?: number; count?: number } = {},
): TopCut[] {
  const { weights, from = 0.9, count = 40 } = options;
  if (!(Number.isInteger(count) && count >= 2))
    throw new KernelError('bad-parameter', `expected at least 2 caps, found ${count}`);
  // Refuses grades that are none before logarithms are taken of them.
  topCutTable(values, [], weights);
  const [low = NaN, high = NaN] = quantiles(values, [from, 1]);
  if (low === high) return topCutTable(values, [high], weights);
  const step = Math.log(high / low) / (count - 1);
  const caps = Array.from({ length: count }, (_, i) =>
    i === count - 1 ? high : low * Math.exp(i * step),
  );
  return topCutTable(values, caps, weights);
}
