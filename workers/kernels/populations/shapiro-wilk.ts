import { KernelError } from '#kernels/kernel-error.ts';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import { formatP, type NormalityTest } from './normality.ts';

const polynomial = (x: number, ...coefficients: number[]): number =>
  coefficients.reduceRight((sum, c) => sum * x + c, 0);

/**
 * Shapiro-Wilk test of normality: W is the squared correlation of the sorted values with their
 * expected normal scores, weighted by Royston's polynomials; p by his normalising transform.
 *
 * @param values Any unit, 3 to 5,000.
 * @throws {KernelError} `too-few-rows`; `too-many-rows` beyond 5,000, where the polynomials were not
 *   fitted; `not-finite`; `constant` when values do not vary.
 * @see Royston (1995), AS R94, Appl. Stat. 44, 547-551 (coefficients from memory, checked against
 *   independent software).
 */
export function shapiroWilk(values: ArrayLike<number>): NormalityTest {
  requireFinite(values, 'values');
  const n = values.length;
  if (n < 3) throw new KernelError('too-few-rows', `expected 3 values or more, found ${n}`, { n });
  if (n > 5000)
    throw new KernelError('too-many-rows', `expected at most 5000 values, found ${n}`, { n });
  const sorted = Float64Array.from(values).sort();
  if (sorted[0] === sorted[n - 1])
    throw new KernelError('constant', `expected values that vary, all are ${sorted[0]}`);
  const weights = scoreWeights(n);
  const mean = sorted.reduce((sum, value) => sum + value / n, 0);
  let along = 0;
  let squares = 0;
  for (let i = 0; i < n; i++) {
    along += weights[i]! * (sorted[i]! - mean);
    squares += (sorted[i]! - mean) ** 2;
  }
  if (!(squares > 0 && squares < Infinity))
    throw new KernelError(
      'not-finite',
      `expected values whose spread can be computed, found ${sorted[0]} to ${sorted[n - 1]}`,
    );
  const statistic = Math.min(1, (along / squares) * along);
  const p = pValue(statistic, n);
  return { n, statistic, p, text: formatP(p) };
}

/** Weights a_1..a_n, antisymmetric, of unit length. */
function scoreWeights(n: number): Float64Array {
  if (n === 3) return Float64Array.of(-Math.SQRT1_2, 0, Math.SQRT1_2);
  const scores = Float64Array.from({ length: n }, (_, i) =>
    normalQuantile((i + 0.625) / (n + 0.25)),
  );
  const squares = scores.reduce((sum, m) => sum + m * m, 0);
  const u = 1 / Math.sqrt(n);
  const last = scores[n - 1]!;
  const next = scores[n - 2]!;
  const aLast =
    last / Math.sqrt(squares) +
    polynomial(u, 0, 0.221157, -0.147981, -2.07119, 4.434685, -2.706056);
  const aNext =
    next / Math.sqrt(squares) +
    polynomial(u, 0, 0.042981, -0.293762, -1.752461, 5.682633, -3.582633);
  const two = n > 5;
  const rest = two
    ? (squares - 2 * last ** 2 - 2 * next ** 2) / (1 - 2 * aLast ** 2 - 2 * aNext ** 2)
    : (squares - 2 * last ** 2) / (1 - 2 * aLast ** 2);
  const weights = scores.map((m) => m / Math.sqrt(rest));
  weights[n - 1] = aLast;
  weights[0] = -aLast;
  if (two) {
    weights[n - 2] = aNext;
    weights[1] = -aNext;
  }
  return weights;
}

function pValue(w: number, n: number): number {
  if (n === 3)
    return Math.max(0, (6 / Math.PI) * (Math.asin(Math.sqrt(w)) - Math.asin(Math.sqrt(0.75))));
  const left = Math.log(Math.max(1 - w, Number.MIN_VALUE));
  if (n <= 11) {
    const gamma = -2.273 + 0.459 * n;
    if (left >= gamma) return 0; // W below what the transform covers
    const mean = polynomial(n, 0.544, -0.39978, 0.025054, -0.0006714);
    const sd = Math.exp(polynomial(n, 1.3822, -0.77857, 0.062767, -0.0020322));
    return normalCdf(-(-Math.log(gamma - left) - mean) / sd);
  }
  const x = Math.log(n);
  const mean = polynomial(x, -1.5861, -0.31082, -0.083751, 0.0038915);
  const sd = Math.exp(polynomial(x, -0.4803, -0.082676, 0.0030302));
  return normalCdf(-(left - mean) / sd);
}
