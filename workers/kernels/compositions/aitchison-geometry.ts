import { KernelError } from '#kernels/kernel-error.ts';
import { centredLogRatio } from './centred-log-ratio.ts';
import { close } from './closure.ts';

function requireSameParts(x: Float64Array, y: Float64Array): void {
  if (x.length !== y.length) {
    throw new KernelError('shape', `expected the same parts, found ${x.length} and ${y.length}`);
  }
}

/**
 * Aitchison distance of two compositions, the Euclidean distance of their clr. Scale of either
 * composition does not matter.
 *
 * @param x One composition, every part > 0. Not modified.
 * @param y The other, the same parts in the same order.
 * @throws {KernelError} `shape`, `not-positive`.
 * @see Aitchison (1986), The Statistical Analysis of Compositional Data, Chapman & Hall.
 */
export function aitchisonDistance(x: Float64Array, y: Float64Array): number {
  requireSameParts(x, y);
  const [a, b] = [centredLogRatio(x, x.length), centredLogRatio(y, y.length)];
  return Math.sqrt(a.reduce((sum, value, part) => sum + (value - b[part]!) ** 2, 0));
}

/** Aitchison norm: distance from the composition of equal parts. */
export function aitchisonNorm(x: Float64Array): number {
  return aitchisonDistance(x, new Float64Array(x.length).fill(1));
}

/** Perturbation, C(x y): the sum of log-ratio geometry. Closed to 1. */
export function perturb(x: Float64Array, y: Float64Array): Float64Array {
  requireSameParts(x, y);
  return close(
    x.map((value, part) => value * y[part]!),
    x.length,
  );
}

/** Powering, C(x^exponent): the scaling of log-ratio geometry. Closed to 1. */
export function power(x: Float64Array, exponent: number): Float64Array {
  if (!Number.isFinite(exponent)) {
    throw new KernelError('bad-parameter', `expected a finite exponent, found ${exponent}`);
  }
  // Through clr, so that large parts and exponents do not overflow.
  const logs = centredLogRatio(x, x.length).map((value) => value * exponent);
  const largest = logs.reduce((a, b) => Math.max(a, b), -Infinity);
  const powered = logs.map((value) => Math.exp(value - largest));
  const sum = powered.reduce((a, b) => a + b, 0);
  return powered.map((value) => value / sum);
}
