import { KernelError } from '#kernels/kernel-error.ts';
import { spreadOf, type MixtureData } from './mixture-data.ts';

/** A single lognormal population cut off at the least and the greatest value. */
export interface TruncatedPopulation {
  /** Edges in ln grade. */
  from: number;
  to: number;
  /** Log-likelihood of ln grade. */
  logLik: number;
  /** With four parameters: mean, spread and both edges. */
  bic: number;
}

const NODES = 400;

/**
 * The single normal distribution (ln grade) cut off below the least and above the greatest value, as
 * a grade shell or a cut-off leaves it; its limits are the exponential and the uniform. It tells an
 * edge from a mixture: a sharp edge looks to a mixture like a second, narrow population.
 *
 * The density is exp(a t + b t²) on the range, b <= 0, t in standard units; the two natural parameters
 * come by Newton's method on the concave likelihood.
 *
 * @throws {KernelError} `too-few-rows` when ln grades do not vary.
 * @see Cohen (1991), Truncated and Censored Samples, Dekker (from memory).
 */
export function fitTruncatedPopulation(data: MixtureData): TruncatedPopulation {
  const { y, n } = data;
  const { mean, sd, total } = spreadOf(data);
  if (!(sd > 0))
    throw new KernelError('too-few-rows', 'expected grades that vary, found one value');
  const [from, to] = [y[0]!, y[y.length - 1]!];
  const range = { from: (from - mean) / sd, to: (to - mean) / sd };
  const perRow = maximum(range);
  const logLik = total * (perRow - Math.log(sd));
  return { from, to, logLik, bic: -2 * logLik + 4 * Math.log(n) };
}

interface Range {
  from: number;
  to: number;
}

/** Greatest mean log-likelihood of standardised points (mean 0, mean square 1) on the range. */
function maximum(range: Range): number {
  let [a, b] = [0, -0.5];
  let value = meanLogLik(range, a, b);
  for (let step = 0; step < 100; step++) {
    const move = newtonStep(range, a, b);
    let factor = 1;
    let improved = false;
    for (let halving = 0; halving < 30 && !improved; halving++, factor /= 2) {
      const [nextA, nextB] = [a + factor * move[0], Math.min(0, b + factor * move[1])];
      const next = meanLogLik(range, nextA, nextB);
      if (next <= value + 1e-13) continue;
      [a, b, value] = [nextA, nextB, next];
      improved = true;
    }
    if (!improved) break;
  }
  return value;
}

/** a·0 + b·1 less ln of the integral of exp(a t + b t²). */
function meanLogLik(range: Range, a: number, b: number): number {
  return b - moments(range, a, b).logIntegral;
}

/** Newton's step for (a, b); along a alone when b rests at its limit 0 and would leave it. */
function newtonStep(range: Range, a: number, b: number): [number, number] {
  const { m1, m2, m3, m4 } = moments(range, a, b);
  const gradient = [0 - m1, 1 - m2] as const;
  const [vaa, vab, vbb] = [m2 - m1 * m1, m3 - m1 * m2, m4 - m2 * m2];
  if (b >= 0 && gradient[1] > 0) return [gradient[0] / vaa, 0];
  const determinant = vaa * vbb - vab * vab;
  if (!(determinant > 1e-14 * vaa * vbb)) return [gradient[0] / vaa, 0];
  return [
    (vbb * gradient[0] - vab * gradient[1]) / determinant,
    (vaa * gradient[1] - vab * gradient[0]) / determinant,
  ];
}

/** ln of the integral of exp(a t + b t²) over the range and the first four moments, by Simpson's rule. */
function moments({ from, to }: Range, a: number, b: number) {
  const h = (to - from) / NODES;
  const height = (t: number) => a * t + b * t * t;
  const peak = b < 0 ? Math.min(to, Math.max(from, -a / (2 * b))) : a > 0 ? to : from;
  const top = height(peak);
  const sums = [0, 0, 0, 0, 0];
  for (let i = 0; i <= NODES; i++) {
    const t = from + i * h;
    const simpson = i === 0 || i === NODES ? 1 : i % 2 === 1 ? 4 : 2;
    let term = simpson * Math.exp(height(t) - top);
    for (let power = 0; power < 5; power++, term *= t) sums[power]! += term;
  }
  const [s0 = 1, s1 = 0, s2 = 0, s3 = 0, s4 = 0] = sums;
  return {
    logIntegral: top + Math.log((s0 * h) / 3),
    m1: s1 / s0,
    m2: s2 / s0,
    m3: s3 / s0,
    m4: s4 / s0,
  };
}
