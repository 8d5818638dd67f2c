import { KernelError } from '#kernels/kernel-error.ts';
import { logNormalCdf } from '#kernels/normal.ts';

const LN_ROOT_2PI = 0.5 * Math.log(2 * Math.PI);

/**
 * Inverse Mills ratio of the lower tail, phi(z) / Phi(z), finite for any finite z: what a standard
 * normal known to lie below z lies below 0 on average.
 *
 * @param z Above negative infinity; 0 at infinity.
 * @throws {KernelError} `bad-parameter`.
 */
export function lowerTailRatio(z: number): number {
  requireLimit(z);
  return Math.exp(-0.5 * z * z - LN_ROOT_2PI - logNormalCdf(z));
}

/**
 * Variance of a standard normal known to lie below z: 1 - z h - h^2, h the lower tail ratio.
 *
 * @param z Above negative infinity; 1 at infinity.
 * @throws {KernelError} `bad-parameter`.
 */
export function lowerTailVariance(z: number): number {
  requireLimit(z);
  if (z === Infinity) return 1;
  // Far down the difference is all rounding; the asymptotic series takes its place.
  if (z < -25) {
    const w = 1 / (z * z);
    return w * (1 - w * (6 - w * (50 - 518 * w)));
  }
  const ratio = lowerTailRatio(z);
  return Math.max(1 - ratio * (z + ratio), 0);
}

function requireLimit(z: number): void {
  if (z > -Infinity) return;
  throw new KernelError('bad-parameter', `expected a limit above -infinity, found ${z}`);
}
