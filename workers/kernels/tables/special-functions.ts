import { KernelError } from '#kernels/kernel-error.ts';

const HALF_LN_2PI = 0.5 * Math.log(2 * Math.PI);
const TINY = 1e-300;
const EPSILON = 1e-16;
const MAX_STEPS = 100_000;

/**
 * ln of the gamma function for x > 0, relative error about 1e-15: the argument is raised above 12 by
 * the recurrence, then Stirling's series.
 *
 * @throws {KernelError} `bad-parameter` when x is not > 0 and finite.
 * @see Abramowitz & Stegun (1964), Handbook of Mathematical Functions, 6.1.15 and 6.1.41.
 */
export function logGamma(x: number): number {
  if (!(x > 0 && x < Infinity))
    throw new KernelError('bad-parameter', `expected an argument > 0, found ${x}`);
  let product = 1;
  let z = x;
  while (z < 12) product *= z++;
  const w = 1 / (z * z);
  const series =
    (1 / 12 -
      w * (1 / 360 - w * (1 / 1260 - w * (1 / 1680 - w * (1 / 1188 - (w * 691) / 360360))))) /
    z;
  return (z - 0.5) * Math.log(z) - z + HALF_LN_2PI + series - Math.log(product);
}

/**
 * Regularised upper incomplete gamma function Q(a, x) = Gamma(a, x) / Gamma(a): a series below
 * x = a + 1, a continued fraction above, so that small tails keep their relative accuracy.
 *
 * @param a Shape, > 0.  @param x Argument, >= 0 (infinity gives 0).
 * @throws {KernelError} `bad-parameter`; `not-converged` after 100 000 terms.
 * @see Abramowitz & Stegun (1964) 6.5.29 and 6.5.31.
 */
export function upperGamma(a: number, x: number): number {
  if (!(a > 0 && x >= 0)) {
    throw new KernelError(
      'bad-parameter',
      `expected shape > 0 and argument >= 0, found ${a}, ${x}`,
    );
  }
  if (x === 0) return 1;
  if (x === Infinity) return 0;
  const front = Math.exp(a * Math.log(x) - x - logGamma(a));
  return x < a + 1 ? 1 - front * lowerGammaSeries(a, x) : front * upperGammaFraction(a, x);
}

function lowerGammaSeries(a: number, x: number): number {
  let term = 1 / a;
  let sum = term;
  for (let n = 1; n < MAX_STEPS; n++) {
    term *= x / (a + n);
    sum += term;
    if (term < sum * EPSILON) return sum;
  }
  throw new KernelError('not-converged', `incomplete gamma series at shape ${a}, argument ${x}`);
}

function upperGammaFraction(a: number, x: number): number {
  let b = x + 1 - a;
  let c = 1 / TINY;
  let d = 1 / b;
  let value = d;
  for (let n = 1; n < MAX_STEPS; n++) {
    const an = n * (a - n);
    b += 2;
    d = 1 / away(an * d + b);
    c = away(b + an / c);
    value *= d * c;
    if (Math.abs(d * c - 1) < EPSILON * 4) return value;
  }
  throw new KernelError('not-converged', `incomplete gamma fraction at shape ${a}, argument ${x}`);
}

/** Keeps a denominator of a continued fraction off zero. */
const away = (value: number): number => (Math.abs(value) < TINY ? TINY : value);

/**
 * Regularised incomplete beta function I_x(a, b), by its continued fraction on the side where that
 * converges fast.
 *
 * @param x In [0, 1].  @param a, b Shapes, > 0.
 * @throws {KernelError} `bad-parameter`; `not-converged` after 100 000 terms.
 * @see Abramowitz & Stegun (1964) 26.5.8.
 */
export function incompleteBeta(x: number, a: number, b: number): number {
  if (!(a > 0 && b > 0 && x >= 0 && x <= 1)) {
    const found = `found x ${x}, shapes ${a}, ${b}`;
    throw new KernelError('bad-parameter', `expected x in [0, 1] and shapes > 0, ${found}`);
  }
  if (x === 0 || x === 1) return x;
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a);
  const front = a * Math.log(x) + b * Math.log1p(-x) + logGamma(a + b) - logGamma(a) - logGamma(b);
  return (Math.exp(front) * betaFraction(x, a, b)) / a;
}

function betaFraction(x: number, a: number, b: number): number {
  let c = 1;
  let d = 1 / away(1 - ((a + b) * x) / (a + 1));
  let value = d;
  const step = (coefficient: number): number => {
    d = 1 / away(1 + coefficient * d);
    c = away(1 + coefficient / c);
    value *= d * c;
    return d * c;
  };
  for (let n = 1; n < MAX_STEPS; n++) {
    step((n * (b - n) * x) / ((a + 2 * n - 1) * (a + 2 * n)));
    const change = step((-(a + n) * (a + b + n) * x) / ((a + 2 * n) * (a + 2 * n + 1)));
    if (Math.abs(change - 1) < EPSILON * 4) return value;
  }
  throw new KernelError('not-converged', `incomplete beta at x ${x}, shapes ${a}, ${b}`);
}

/** P(chi-square with `df` degrees of freedom >= value). */
export function chiSquareTail(value: number, df: number): number {
  return upperGamma(df / 2, value / 2);
}

/** P(F with (df1, df2) degrees of freedom >= value); value infinite gives 0. */
export function fTail(value: number, df1: number, df2: number): number {
  if (value === Infinity) return 0;
  return incompleteBeta(df2 / (df2 + df1 * value), df2 / 2, df1 / 2);
}

/** P(|Student t with `df` degrees of freedom| >= |t|), two-sided. */
export function studentTwoSided(t: number, df: number): number {
  return fTail(t * t, 1, df);
}

/**
 * P(sup of the Brownian bridge >= lambda): the limiting law of the Kolmogorov-Smirnov statistic
 * times the root of the sample size. Two series, each where it converges fast.
 *
 * @param lambda >= 0.
 * @see Kolmogorov (1933); Feller (1948), Annals of Mathematical Statistics 19 (from memory).
 */
export function kolmogorovTail(lambda: number): number {
  if (!(lambda >= 0))
    throw new KernelError('bad-parameter', `expected a value >= 0, found ${lambda}`);
  if (lambda < 0.05) return 1;
  let sum = 0;
  if (lambda < 1.1) {
    for (let k = 1; k < 20; k += 2)
      sum += Math.exp((-k * k * Math.PI * Math.PI) / (8 * lambda * lambda));
    return 1 - (Math.sqrt(2 * Math.PI) / lambda) * sum;
  }
  for (let k = 1, sign = 1; k < 20; k++, sign = -sign)
    sum += sign * Math.exp(-2 * k * k * lambda * lambda);
  return Math.min(1, 2 * sum);
}
