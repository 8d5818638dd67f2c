import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';

/** Range that holds a statistic with a stated confidence. */
export interface Interval {
  low: number;
  high: number;
}

/**
 * Percentile bootstrap: rows are drawn anew with replacement and the statistic taken each time.
 *
 * @param n Rows, >= 1.
 * @param statistic Of the rows named, in any order, repeats included; draws without a finite value
 *   are left out.
 * @param options.level Confidence, .95 unless said.
 * @param options.draws 999 unless said.
 * @returns Null when no draw has a finite value.
 * @throws {KernelError} `bad-parameter`.
 * @see Efron & Tibshirani (1993), An Introduction to the Bootstrap, Chapman & Hall.
 */
export function bootstrapInterval(
  n: number,
  statistic: (rows: Uint32Array) => number,
  options: { seed: number; draws?: number; level?: number },
): Interval | null {
  const { seed, draws = 999, level = 0.95 } = options;
  if (!(n >= 1 && n < 2 ** 32) || !(draws >= 19) || !(level > 0 && level < 1)) {
    const message = `expected rows, at least 19 draws and a level in (0, 1), found ${n}, ${draws}, ${level}`;
    throw new KernelError('bad-parameter', message);
  }
  const random = seededRandom(seed);
  const rows = new Uint32Array(n);
  const values: number[] = [];
  for (let draw = 0; draw < draws; draw++) {
    for (let i = 0; i < n; i++) rows[i] = random.below(n);
    const value = statistic(rows);
    if (Number.isFinite(value)) values.push(value);
  }
  if (values.length === 0) return null;
  const [low = NaN, high = NaN] = quantiles(values, [(1 - level) / 2, (1 + level) / 2]);
  return { low, high };
}
