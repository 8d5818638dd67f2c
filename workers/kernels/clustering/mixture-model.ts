import { KernelError } from '#kernels/kernel-error.ts';
import { choleskyPacked, invertTriangle, packedSize, raiseEigenvalues } from './packed-cholesky.ts';

/**
 * Shape of the groups: `full` an ellipsoid of its own each, `diagonal` with axes along the
 * coordinates, `spherical` a ball of its own size each, `tied` one ellipsoid shared by all.
 */
export type CovarianceFamily = 'full' | 'diagonal' | 'spherical' | 'tied';

export const COVARIANCE_FAMILIES: readonly CovarianceFamily[] = [
  'full',
  'diagonal',
  'spherical',
  'tied',
];

/** A mixture of K normal populations in p coordinates. */
export interface MixtureModel {
  family: CovarianceFamily;
  k: number;
  p: number;
  /** K shares of the whole, summing to 1. */
  shares: Float64Array;
  /** Row-major, shape (K, p). */
  means: Float64Array;
  /** Shape (K, p (p + 1) / 2): the lower triangle of each group's covariance, row by row. */
  covariances: Float64Array;
}

/** What the density of a model needs, ready for a loop over rows. */
export interface MixtureDensity {
  model: MixtureModel;
  /** Inverse Cholesky factors, packed like the covariances. */
  whiteners: Float64Array;
  /** ln share - p/2 ln 2π - 1/2 ln det per group; -Infinity for a group without share. */
  logScales: Float64Array;
}

/**
 * Free parameters: K - 1 shares and, for p coordinates, K p means with p (p + 1) / 2 covariances per
 * group (full) or once (tied), p variances (diagonal) or one (spherical) per group.
 */
export function mixtureParameterCount(family: CovarianceFamily, k: number, p: number): number {
  const spread = { full: k * packedSize(p), diagonal: k * p, spherical: k, tied: packedSize(p) };
  return k - 1 + k * p + spread[family];
}

/** True when the family has no covariances off the diagonal. */
export const isAxial = (family: CovarianceFamily): boolean =>
  family === 'diagonal' || family === 'spherical';

/** A model with room for K groups, all zero. */
export function emptyMixture(family: CovarianceFamily, k: number, p: number): MixtureModel {
  return {
    family,
    k,
    p,
    shares: new Float64Array(k),
    means: new Float64Array(k * p),
    covariances: new Float64Array(k * packedSize(p)),
  };
}

/**
 * Holds every eigenvalue of the covariances at or above `floor`, so that no group collapses onto
 * equal rows; well-spread groups stay as they are. Changes the model in place.
 *
 * @returns Groups that had to be held.
 */
export function holdCovariances(model: MixtureModel, floor: number, work: Float64Array): number[] {
  const { family, k, p, covariances } = model;
  const size = packedSize(p);
  const held: number[] = [];
  for (let c = 0; c < k; c++) {
    const at = c * size;
    if (family === 'tied' && c > 0) {
      covariances.copyWithin(at, 0, size);
      if (held.length > 0) held.push(c);
    } else if (isAxial(family)) {
      if (raiseDiagonal(covariances, at, p, floor)) held.push(c);
    } else if (Number.isNaN(choleskyPacked(covariances, at, p, work, floor))) {
      raiseEigenvalues(covariances, at, p, floor);
      held.push(c);
    }
  }
  return held;
}

function raiseDiagonal(covariances: Float64Array, at: number, p: number, floor: number): boolean {
  let raised = false;
  for (let a = 0, i = at; a < p; a++, i += a + 1) {
    if (covariances[i]! >= floor) continue;
    covariances[i] = floor;
    raised = true;
  }
  return raised;
}

/**
 * Density of a model, factored once.
 *
 * @throws {KernelError} `shape`; `singular` with { group } when a covariance is not positive definite.
 */
export function mixtureDensity(model: MixtureModel): MixtureDensity {
  const { k, p, shares, means, covariances } = model;
  const size = packedSize(p);
  if (shares.length !== k || means.length !== k * p || covariances.length !== k * size) {
    const message = `${shares.length} shares, ${means.length} mean coordinates and ${covariances.length} covariances do not make ${k} groups of ${p} coordinates`;
    throw new KernelError('shape', message, { k, p });
  }
  const density = { model, whiteners: new Float64Array(k * size), logScales: new Float64Array(k) };
  refreshDensity(density);
  return density;
}

/** Factors the model of a density again after it was changed in place. */
export function refreshDensity({ model, whiteners, logScales }: MixtureDensity): void {
  const { k, p, shares, covariances } = model;
  const size = packedSize(p);
  for (let c = 0; c < k; c++) {
    const at = c * size;
    const halfLog = choleskyPacked(covariances, at, p, whiteners.subarray(at, at + size));
    if (Number.isNaN(halfLog)) {
      throw new KernelError('singular', `covariance of group ${c + 1} is not positive definite`, {
        group: c + 1,
      });
    }
    invertTriangle(whiteners, at, p);
    logScales[c] = Math.log(shares[c]!) - halfLog - 0.5 * p * Math.log(2 * Math.PI);
  }
}
