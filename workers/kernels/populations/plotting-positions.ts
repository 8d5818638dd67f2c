import { KernelError } from '#kernels/kernel-error.ts';
import { normalQuantile } from '#kernels/normal.ts';

/** a of (i - a) / (n + 1 - 2a). */
export const PLOTTING_RULES = { hazen: 0.5, weibull: 0, blom: 0.375 } as const;
export type PlottingRule = keyof typeof PLOTTING_RULES;

/**
 * Plotting positions of n sorted values: (i - a) / (n + 1 - 2a), i = 1..n.
 *
 * @throws {KernelError} `too-few-rows` for n < 1; `bad-parameter` for an n that is no count.
 */
export function plottingPositions(n: number, rule: PlottingRule = 'hazen'): Float64Array {
  if (!(n >= 1)) throw new KernelError('too-few-rows', `expected at least one value, found ${n}`);
  if (!(Number.isInteger(n) && n < 2 ** 32))
    throw new KernelError('bad-parameter', `expected a count of values, found ${n}`);
  const a = PLOTTING_RULES[rule];
  return Float64Array.from({ length: n }, (_, i) => (i + 1 - a) / (n + 1 - 2 * a));
}

/**
 * Weighted plotting positions of sorted values: p_i = (W_i - w_i / 2) / W, W_i the running weight.
 * Equal weights give Hazen's.
 *
 * @param weights In the order of the sorted values, each > 0 (interval lengths, m).
 * @throws {KernelError} `too-few-rows`; `not-positive` with { row }.
 */
export function weightedPlottingPositions(weights: ArrayLike<number>): Float64Array {
  if (weights.length === 0)
    throw new KernelError('too-few-rows', 'expected at least one value, found none');
  const out = new Float64Array(weights.length);
  let running = 0;
  for (let row = 0; row < weights.length; row++) {
    const weight = weights[row]!;
    if (!(weight > 0 && weight < Infinity))
      throw new KernelError(
        'not-positive',
        `expected a weight > 0, found ${weight} at row ${row}`,
        { row },
      );
    out[row] = running + weight / 2;
    running += weight;
  }
  return out.map((position) => position / running);
}

/**
 * Normal scores of n sorted values: quantiles of the standard normal at their plotting positions.
 */
export function normalScores(n: number, rule: PlottingRule = 'hazen'): Float64Array {
  return plottingPositions(n, rule).map(normalQuantile);
}
