import { KernelError } from '#kernels/kernel-error.ts';
import { normalQuantile } from '#kernels/normal.ts';
import { chiSquareTail } from '#kernels/tables/special-functions.ts';

/**
 * Quantile of the chi-square distribution: bracketed, then halved to the last bit that counts. The
 * start is Wilson and Hilferty's cube of a normal quantile.
 *
 * @param p Probability in [0, 1); 0 gives 0.
 * @param df Degrees of freedom, > 0.
 * @throws {KernelError} `bad-parameter`.
 * @see Wilson & Hilferty (1931), The distribution of chi-square, PNAS 17.
 */
export function chiSquareQuantile(p: number, df: number): number {
  if (!(p >= 0 && p < 1) || !(df > 0 && df < Infinity)) {
    const message = `expected a probability in [0, 1) and degrees of freedom > 0, found ${p}, ${df}`;
    throw new KernelError('bad-parameter', message);
  }
  if (p === 0) return 0;
  const share = 2 / (9 * df);
  const start = df * Math.max(1 - share + normalQuantile(p) * Math.sqrt(share), 0.01) ** 3;
  const isAbove = (x: number) => chiSquareTail(x, df) < 1 - p;
  let [low, high] = [start, start];
  while (isAbove(low) && low > Number.MIN_VALUE) low /= 2;
  while (!isAbove(high)) high *= 2;
  for (let step = 0; step < 200 && high - low > 1e-15 * high; step++) {
    const middle = (low + high) / 2;
    if (isAbove(middle)) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}
