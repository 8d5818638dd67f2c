import { sortedAscending } from '#kernels/statistics/sort-ascending.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { logNormalCdf, normalCdf } from '#kernels/normal.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';

/** A test of normality with mean and standard deviation estimated. */
export interface NormalityTest {
  n: number;
  statistic: number;
  /** Nominal p value; null when the formula does not reach it (see `text`). */
  p: number | null;
  text: string;
}

/** Anderson-Darling with its small-sample form. */
export interface AndersonDarling extends NormalityTest {
  /** A² (1 + .75/n + 2.25/n²), what p is read from: 5 % at .752, 1 % at 1.035. */
  adjusted: number;
}

/**
 * Anderson-Darling test of normality (of lognormality on ln grade). Beyond n = 1,000 any small
 * departure rejects: look at the plot.
 *
 * @param values Any unit, at least 8.
 * @throws {KernelError} `too-few-rows`, `not-finite`; `constant` when values do not vary.
 * @see D'Agostino & Stephens (1986), Goodness-of-Fit Techniques, table 4.9.
 */
export function andersonDarling(values: ArrayLike<number>): AndersonDarling {
  const z = standardised(values, 8);
  const n = z.length;
  let sum = 0;
  for (let i = 0; i < n; i++)
    sum += (2 * i + 1) * (logNormalCdf(z[i]!) + logNormalCdf(-z[n - 1 - i]!));
  const statistic = -n - sum / n;
  const adjusted = statistic * (1 + 0.75 / n + 2.25 / n ** 2);
  const p = andersonDarlingP(adjusted);
  return { n, statistic, adjusted, p, text: adjusted > 10 ? '< 1e-20' : formatP(p) };
}

/**
 * p of an adjusted statistic, by four branches that do not quite join; past 10, where the last one
 * would turn up again, it stays.
 *
 * @param adjusted A* >= 0.
 * @throws {KernelError} `bad-parameter` at NaN.
 */
export function andersonDarlingP(adjusted: number): number {
  if (Number.isNaN(adjusted))
    throw new KernelError('bad-parameter', 'expected an adjusted statistic, found NaN');
  const a = Math.min(adjusted, 10);
  if (a < 0.2) return 1 - Math.exp(-13.436 + 101.14 * a - 223.73 * a * a);
  if (a < 0.34) return 1 - Math.exp(-8.318 + 42.796 * a - 59.938 * a * a);
  if (a < 0.6) return Math.exp(0.9177 - 4.279 * a - 1.38 * a * a);
  return Math.exp(1.2937 - 5.709 * a + 0.0186 * a * a);
}

/**
 * Lilliefors test: the largest distance D between the empirical and the fitted normal distribution
 * function, itself the size of the misfit. p by the approximation of Dallal and Wilkinson, which holds
 * up to .10; above that only `> 0.10` is said.
 *
 * @param values Any unit, at least 5.
 * @throws {KernelError} As `andersonDarling`.
 * @see Lilliefors (1967), JASA 62; Dallal & Wilkinson (1986), Am. Stat. 40 (from memory).
 */
export function lilliefors(values: ArrayLike<number>): NormalityTest {
  const z = standardised(values, 5);
  const n = z.length;
  let statistic = 0;
  for (let i = 0; i < n; i++) {
    const fitted = normalCdf(z[i]!);
    statistic = Math.max(statistic, (i + 1) / n - fitted, fitted - i / n);
  }
  const size = Math.min(n, 100);
  const d = n > 100 ? statistic * (n / 100) ** 0.49 : statistic;
  const root = Math.sqrt(size + 2.78019);
  const p = Math.exp(
    -7.01256 * (d * root) ** 2 +
      2.99587 * d * root -
      0.122119 +
      0.974598 / Math.sqrt(size) +
      1.67997 / size,
  );
  return p > 0.1
    ? { n, statistic, p: null, text: '> 0.10' }
    : { n, statistic, p, text: formatP(p) };
}

/** Standardised values, ascending. */
function standardised(values: ArrayLike<number>, atLeast: number): Float64Array {
  requireFinite(values, 'values');
  const n = values.length;
  if (n < atLeast)
    throw new KernelError('too-few-rows', `expected at least ${atLeast} values, found ${n}`, { n });
  const sorted = sortedAscending(values);
  if (sorted[0] === sorted[n - 1])
    throw new KernelError('constant', `expected values that vary, all are ${sorted[0]}`);
  const mean = sorted.reduce((sum, value) => sum + value / n, 0);
  const sd = Math.sqrt(sorted.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (n - 1));
  if (!(sd > 0 && sd < Infinity))
    throw new KernelError(
      'not-finite',
      `expected values whose spread can be computed, found ${sorted[0]} to ${sorted[n - 1]}`,
    );
  return sorted.map((value) => (value - mean) / sd);
}

/** A p value for reading. */
export function formatP(p: number): string {
  return p < 0.001 ? p.toExponential(1) : p.toFixed(3);
}
