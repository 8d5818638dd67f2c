import { KernelError } from '#kernels/kernel-error.ts';
import type { MixtureModel } from './mixture-model.ts';
import type { PackedPoints } from './points.ts';

/** Rows moved to their mean and divided by one number, so that no square under- or overflows. */
export interface ScaledPoints {
  /** Row-major, shape (n, p), every value in [-1, 1]. */
  points: Float64Array;
  centre: Float64Array;
  scale: number;
  /** Mean over the coordinates of the (weighted) variance of the scaled rows. */
  meanVariance: number;
}

/**
 * Scales packed rows for EM.
 *
 * @throws {KernelError} `singular` when all rows are equal.
 */
export function scaledPoints(
  { points, n, p }: PackedPoints,
  weights: Float64Array | null,
): ScaledPoints {
  const centre = new Float64Array(p);
  for (let i = 0, at = 0; i < n; i++)
    // relative to the first row: exact when all are equal
    for (let j = 0; j < p; j++)
      centre[j]! += ((weights ? weights[i]! : 1) / n) * (points[at++]! - points[j]!);
  for (let j = 0; j < p; j++) centre[j]! += points[j]!;
  let scale = 0;
  for (let i = 0, at = 0; i < n; i++)
    for (let j = 0; j < p; j++) scale = Math.max(scale, Math.abs(points[at++]! - centre[j]!));
  if (!(scale > Number.MIN_VALUE * 2 ** 53))
    throw new KernelError('singular', `expected rows that differ, found ${n} equal rows`, { n });
  const scaled = new Float64Array(points.length);
  let squares = 0;
  for (let at = 0, i = 0; i < n; i++) {
    for (let j = 0; j < p; j++, at++) {
      scaled[at] = (points[at]! - centre[j]!) / scale;
      squares += (weights ? weights[i]! : 1) * scaled[at]! ** 2;
    }
  }
  return { points: scaled, centre, scale, meanVariance: squares / (n * p) };
}

/** A model of scaled rows in the unit of the original ones. */
export function unscaleModel(model: MixtureModel, { centre, scale }: ScaledPoints): MixtureModel {
  return {
    ...model,
    means: model.means.map((value, at) => centre[at % model.p]! + scale * value),
    covariances: model.covariances.map((value) => value * scale * scale),
  };
}
