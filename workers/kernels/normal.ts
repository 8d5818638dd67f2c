import { KernelError } from './kernel-error.ts';

const SQRT_2PI = Math.sqrt(2 * Math.PI);

function requireNumber(z: number): void {
  if (Number.isNaN(z)) throw new KernelError('not-finite', 'expected a normal score, found NaN');
}

/**
 * Density of the standard normal; 0 at the infinities.
 *
 * @throws {KernelError} `not-finite` at NaN.
 */
export function normalDensity(z: number): number {
  requireNumber(z);
  return Math.exp(-0.5 * z * z) / SQRT_2PI;
}

/**
 * Complementary error function, relative error below 1e-14 for x >= 0: a series near 0, a continued
 * fraction (evaluated backwards) further out.
 *
 * @see Abramowitz & Stegun (1964), Handbook of Mathematical Functions, 7.1.6 and 7.1.14.
 */
function erfcPositive(x: number): number {
  if (x < 2.5) {
    let term = x;
    let sum = x;
    for (let n = 1; Math.abs(term) > 1e-17 * Math.abs(sum); n++) {
      term *= (2 * x * x) / (2 * n + 1);
      sum += term;
    }
    return 1 - (2 / Math.sqrt(Math.PI)) * Math.exp(-x * x) * sum;
  }
  let fraction = x;
  for (let n = 60; n >= 1; n--) fraction = x + n / 2 / fraction;
  return Math.exp(-x * x) / (fraction * Math.sqrt(Math.PI));
}

/**
 * Distribution function of the standard normal, accurate in both tails; 0 and 1 at the infinities.
 *
 * @throws {KernelError} `not-finite` at NaN.
 */
export function normalCdf(z: number): number {
  requireNumber(z);
  const tail = 0.5 * erfcPositive(Math.abs(z) / Math.SQRT2);
  return z <= 0 ? tail : 1 - tail;
}

/**
 * ln of the normal distribution function, finite far into the lower tail, down to negative infinity,
 * whose own it is.
 *
 * @throws {KernelError} `not-finite` at NaN.
 */
export function logNormalCdf(z: number): number {
  requireNumber(z);
  if (z > -30) return Math.log(normalCdf(z));
  const z2 = z * z;
  return -0.5 * z2 - Math.log(-z * SQRT_2PI) + Math.log1p(-1 / z2 + 3 / (z2 * z2));
}

/** Acklam's rational start: relative error about 1e-9 (coefficients from memory). */
function quantileStart(p: number): number {
  const a = [
    -39.69683028665376, 220.9460984245205, -275.9285104469687, 138.357751867269, -30.66479806614716,
    2.506628277459239,
  ];
  const b = [
    -54.47609879822406, 161.5858368580409, -155.6989798598866, 66.80131188771972,
    -13.28068155288572,
  ];
  const c = [
    -0.007784894002430293, -0.3223964580411365, -2.400758277161838, -2.549732539343734,
    4.374664141464968, 2.938163982698783,
  ];
  const d = [0.007784695709041462, 0.3224671290700398, 2.445134137142996, 3.754408661907416];
  const poly = (coefficients: number[], x: number) =>
    coefficients.reduce((sum, k) => sum * x + k, 0);
  if (p < 0.02425) {
    const q = Math.sqrt(-2 * Math.log(p));
    return poly(c, q) / (poly(d, q) * q + 1);
  }
  const q = p - 0.5;
  const r = q * q;
  return (poly(a, r) * q) / (poly(b, r) * r + 1);
}

/**
 * Quantile of the standard normal: a rational start, then one Halley step, about 1e-15 relative.
 *
 * @param p Probability in (0, 1); 0 and 1 give the infinities.
 * @throws {KernelError} `bad-parameter` outside [0, 1] or NaN.
 */
export function normalQuantile(p: number): number {
  if (!(p >= 0 && p <= 1))
    throw new KernelError('bad-parameter', `expected a probability in [0, 1], found ${p}`);
  if (p === 0) return -Infinity;
  if (p === 1) return Infinity;
  if (p > 0.5) return -normalQuantile(1 - p);
  const start = quantileStart(p);
  const error = (normalCdf(start) - p) / normalDensity(start);
  return start - error / (1 + (start * error) / 2);
}
