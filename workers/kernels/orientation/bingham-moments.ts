import { KernelError } from '#kernels/kernel-error.ts';
import { scaledBesselI0 } from './bessel.ts';
import { besselRatio } from './circular.ts';

/** Moments of exp(k1 x1^2 + k2 x2^2) on the sphere. */
export interface BinghamMoments {
  /** ln of the mean of the density's exponential over the sphere (0 for a uniform one). */
  logConstant: number;
  /** Means of x1^2 and x2^2. */
  means: [number, number];
  /** Variances of x1^2 and x2^2 and their covariance. */
  covariance: [v11: number, v22: number, v12: number];
}

/**
 * Nodes of the double exponential rule on [0, 1], with 1 - z^2 kept apart: most of the weight may lie
 * within 1e-6 of either end, where a fixed rule fails.
 */
const NODES = Array.from({ length: 257 }, (_, i) => {
  const t = (i - 128) / 32;
  const s = (Math.PI / 2) * Math.sinh(t);
  const z = 1 / (1 + Math.exp(-2 * s));
  const rest = 1 / (1 + Math.exp(2 * s));
  const weight = (Math.PI / 32) * Math.cosh(t) * z * rest;
  return { z, sine2: rest * (1 + z), weight };
});

/**
 * Normalising constant and moments of the Bingham distribution by one integral over z = x3 in [0, 1]:
 * around that axis the angle integrates to a Bessel function of a = (k2 - k1)(1 - z^2) / 2.
 *
 * @param k1, k2 Concentrations k1 <= k2 <= 0 along x1 and x2; x3 has 0.
 * @throws {KernelError} `bad-parameter`.
 */
export function binghamMoments(k1: number, k2: number): BinghamMoments {
  if (!(k1 > -Infinity && k1 <= k2 && k2 <= 0))
    throw new KernelError('bad-parameter', `expected k1 <= k2 <= 0, found ${k1}, ${k2}`);
  let [m0, m1, m2, m11, m22, m12] = [0, 0, 0, 0, 0, 0];
  for (const { sine2, weight } of NODES) {
    const a = ((k2 - k1) * sine2) / 2;
    const density = weight * Math.exp(k2 * sine2) * scaledBesselI0(a);
    if (density === 0) continue;
    const first = besselRatio(a);
    const second = a > 0 ? 1 - (2 * first) / a : 0;
    const q = sine2 * sine2 * density;
    m0 += density;
    m1 += (density * sine2 * (1 - first)) / 2;
    m2 += (density * sine2 * (1 + first)) / 2;
    m11 += (q * (3 - 4 * first + second)) / 8;
    m22 += (q * (3 + 4 * first + second)) / 8;
    m12 += (q * (1 - second)) / 8;
  }
  const means: [number, number] = [m1 / m0, m2 / m0];
  return {
    logConstant: Math.log(m0),
    means,
    covariance: [
      m11 / m0 - means[0] ** 2,
      m22 / m0 - means[1] ** 2,
      m12 / m0 - means[0] * means[1],
    ],
  };
}
