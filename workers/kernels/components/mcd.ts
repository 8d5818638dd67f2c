import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';
import { chiSquareQuantile } from './chi-square-quantile.ts';
import { cholesky, squaredDistances } from './cholesky.ts';
import type { OnProgress } from '#kernels/progress.ts';
import { consistencyFactor, smallSampleFactor } from './mcd-factors.ts';
import { searchSubset } from './mcd-search.ts';
import { subsetMoments } from './mcd-steps.ts';

export interface McdOptions {
  seed: number;
  /** Share of rows the inner subset takes, [.5, 1]; .5 withstands the most outliers. */
  share?: number;
  /** Random starts. */
  starts?: number;
  /** Rows further than this quantile of chi-square are left out of the final estimate. */
  cutoffProbability?: number;
  onProgress?: OnProgress;
}

/** An estimate of location and scatter with the factors it was multiplied by. */
export interface RobustEstimate {
  centre: Float64Array;
  /** Row-major (p, p); of the subset without the factors, of the final estimate with them. */
  covariance: Float64Array;
  consistency: number;
  smallSample: number;
}

/** Minimum covariance determinant estimate of a table of points. */
export interface RobustScatter extends RobustEstimate {
  nRows: number;
  nCols: number;
  /** Rows of the subset of smallest determinant, ascending from 0. */
  subset: Uint32Array;
  raw: RobustEstimate & { logDeterminant: number };
  /** Squared robust distance of each row from the final estimate. */
  distances: Float64Array;
  /** Squared distance above which a row counts as an outlier. */
  cutoff: number;
  nOutliers: number;
  /** Rows the final estimate rests on. */
  nUsed: number;
}

const DEFAULTS = { share: 0.75, starts: 500, cutoffProbability: 0.975 };

/** Rows of the inner subset: 2 m - n + 2 (n - m) share, with m = floor((n + p + 1) / 2). */
export function mcdSubsetSize(n: number, p: number, share: number): number {
  const half = Math.floor((n + p + 1) / 2);
  return Math.floor(2 * half - n + 2 * (n - half) * share);
}

/**
 * Minimum covariance determinant: location and scatter of the h rows that lie closest together,
 * then of all rows within reach of them. Both scatters carry a consistency factor and a small-sample
 * factor. Affine equivariant: turning or scaling the points turns or scales the answer.
 *
 * @param points Row-major (n, p), finite, p >= 1. Not modified.
 * @returns Centre (p), covariance (p, p) and squared distances in the units of the points.
 * @throws {KernelError} `shape`; `not-finite` with { row, col }; `bad-parameter`; `too-few-rows`
 *   unless n > 2 p; `singular` with { onPlane } when h rows lie on a plane.
 * @see Rousseeuw & Van Driessen (1999), Technometrics 41; Pison, Van Aelst & Willems (2002).
 */
export function fastMcd(points: Float64Array, p: number, options: McdOptions): RobustScatter {
  const { seed, share, starts, cutoffProbability } = { ...DEFAULTS, ...options };
  const n = requirePoints(points, p);
  requireOptions(share, starts, cutoffProbability);
  const scaled = standardise(points, n, p);
  const h = mcdSubsetSize(n, p, share);
  const { rows: subset } = searchSubset(
    { points: scaled, n, p, h },
    starts,
    seededRandom(seed),
    options.onProgress,
  );
  const inner = subsetMoments({ points, p }, subset);
  const raw = {
    ...inner,
    logDeterminant: logDeterminantOf(inner.covariance, p),
    consistency: consistencyFactor(h / n, p),
    smallSample: smallSampleFactor(share, n, p, 'raw'),
  };
  const cutoff = chiSquareQuantile(cutoffProbability, p);
  const scale = raw.consistency * raw.smallSample;
  const used = rowsWithin(mahalanobis(points, p, raw.centre, raw.covariance, scale), cutoff);
  const outer = subsetMoments({ points, p }, used);
  const consistency = consistencyFactor(used.length / n, p);
  const smallSample = smallSampleFactor(share, n, p, 'reweighted');
  const covariance = outer.covariance.map((value) => value * consistency * smallSample);
  const distances = mahalanobis(points, p, outer.centre, covariance);
  const nOutliers = n - rowsWithin(distances, cutoff).length;
  const { centre } = outer;
  return {
    nRows: n,
    nCols: p,
    subset,
    raw,
    centre,
    covariance,
    consistency,
    smallSample,
    distances,
    cutoff,
    nOutliers,
    nUsed: used.length,
  };
}

/**
 * Squared Mahalanobis distances of rows from a centre.
 *
 * @param points Row-major (n, p). Not modified.
 * @param scale Factor on the covariance.
 * @throws {KernelError} `shape`; `singular` when the covariance cannot be inverted.
 */
export function mahalanobis(
  points: Float64Array,
  p: number,
  centre: Float64Array,
  covariance: Float64Array,
  scale = 1,
): Float64Array {
  if (centre.length !== p || covariance.length !== p * p || points.length % p !== 0) {
    throw new KernelError('shape', `expected rows, a centre and a covariance of ${p} variables`);
  }
  const lower = covariance.map((value) => value * scale);
  if (cholesky(lower, p) === null) {
    throw new KernelError('singular', 'expected a covariance that can be inverted');
  }
  const out = new Float64Array(points.length / p);
  squaredDistances(points, p, centre, lower, out);
  return out;
}

function rowsWithin(distances: Float64Array, cutoff: number): Uint32Array {
  return Uint32Array.from(distances.keys()).filter((row) => distances[row]! <= cutoff);
}

function logDeterminantOf(covariance: Float64Array, p: number): number {
  const logDeterminant = cholesky(covariance.slice(), p);
  if (logDeterminant === null) {
    throw new KernelError('singular', 'expected variables that vary on their own');
  }
  return logDeterminant;
}

/** Columns less their median over their median deviation: no unit makes a plane look like none. */
function standardise(points: Float64Array, n: number, p: number): Float64Array {
  const out = new Float64Array(points.length);
  for (let col = 0; col < p; col++) {
    const column = Float64Array.from({ length: n }, (_, row) => points[row * p + col]!);
    const median = quantiles(column, [0.5])[0]!;
    const away = column.map((value) => Math.abs(value - median));
    const [middle = 0, largest = 0] = quantiles(away, [0.5, 1]);
    const scale = middle > 0 ? middle : largest > 0 ? largest : 1;
    for (let row = 0; row < n; row++) out[row * p + col] = (column[row]! - median) / scale;
  }
  return out;
}

function requirePoints(points: Float64Array, p: number): number {
  if (!Number.isInteger(p) || p < 1 || points.length % p !== 0) {
    throw new KernelError('shape', `${points.length} values do not fill rows of ${p} variables`);
  }
  const bad = points.findIndex((value) => !(Math.abs(value) < 1e150));
  if (bad >= 0) {
    const where = { row: Math.floor(bad / p), col: bad % p };
    const message = `expected finite values, found ${points[bad]} at row ${where.row}, column ${where.col}`;
    throw new KernelError('not-finite', message, where);
  }
  const n = points.length / p;
  if (!(n > 2 * p)) {
    const message = `expected more than ${2 * p} rows for ${p} variables, found ${n}`;
    throw new KernelError('too-few-rows', message, { found: n });
  }
  return n;
}

function requireOptions(share: number, starts: number, cutoffProbability: number): void {
  if (!(share >= 0.5 && share <= 1)) {
    throw new KernelError('bad-parameter', `expected a share in [.5, 1], found ${share}`);
  }
  if (!Number.isInteger(starts) || starts < 1) {
    throw new KernelError('bad-parameter', `expected at least 1 start, found ${starts}`);
  }
  if (!(cutoffProbability >= 0.5 && cutoffProbability < 1)) {
    const message = `expected a cut-off in [.5, 1), found ${cutoffProbability}`;
    throw new KernelError('bad-parameter', message);
  }
}
