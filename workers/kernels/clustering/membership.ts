import { KernelError } from '#kernels/kernel-error.ts';
import { f64Bytes, withLab } from '#kernels/dense/lab.ts';
import { squaredDistance } from '#kernels/dense/squared-distance.ts';
import { rowTableBytes, rowTableOf } from './row-table.ts';
import { packPoints } from './points.ts';

/** Rows measured at a time. */
const BLOCK_ROWS = 4096;

/** A frozen k-means model and the rows to place in it. */
export interface MembershipInput {
  /** p columns of n rows in the space of the centroids; NaN = missing. */
  columns: readonly Float64Array[];
  /** Row-major, shape (K, p). */
  centroids: Float64Array;
  /** W / ((n - K) p) of the fit; see `withinVariance`. */
  variance: number;
}

/**
 * Variance of a coordinate within groups, pooled over groups and coordinates: W / ((n - K) p).
 *
 * @param inertia W, total squared distance to the centroids (weighted: with weights of mean 1).
 * @throws {KernelError} `too-few-rows` unless n > K; `bad-parameter` at a W that is negative or not
 *   finite.
 */
export function withinVariance(inertia: number, n: number, k: number, p: number): number {
  if (!(n > k))
    throw new KernelError(
      'too-few-rows',
      `expected more than ${k} rows for ${k} groups, found ${n}`,
      { n, k },
    );
  if (!(inertia >= 0 && inertia < Infinity))
    throw new KernelError('bad-parameter', `expected a total W >= 0, found ${inertia}`);
  return inertia / ((n - k) * p);
}

/**
 * Probability of each row's nearest centroid: softmax over groups of -d² / (2 σ²), that is, round
 * groups of one size and equal prior shares. With σ² = 0 it is 1 (shared evenly on a tie).
 *
 * @returns One probability per input row in [1/K, 1]; NaN where a coordinate is missing.
 * @throws {KernelError} `shape`, `not-finite`, `too-few-rows`, `bad-parameter` (variance < 0).
 */
export function ownMembership(input: MembershipInput): Float64Array {
  const { points, n, p, rowOf, centres, k, halfPrecision, nRows } = prepared(input);
  const out = new Float64Array(nRows).fill(NaN);
  const room =
    rowTableBytes(BLOCK_ROWS, p) +
    rowTableBytes(k, p) +
    f64Bytes(BLOCK_ROWS, BLOCK_ROWS, BLOCK_ROWS);
  for (let from = 0; from < n; from += BLOCK_ROWS) {
    const block = points.subarray(from * p, Math.min(from + BLOCK_ROWS, n) * p);
    withLab(room, (lab) => {
      const rows = rowTableOf(lab, block, p, null);
      const [nearestSq, nextSq] = [lab.f64(rows.n), lab.f64(rows.n)];
      lab.math.nearestTwo(
        rows,
        rowTableOf(lab, centres, p, null).points,
        k,
        lab.u8(rows.n),
        nearestSq,
        nextSq,
      );
      for (let i = 0; i < rows.n; i++) {
        const least = nearestSq[i]!;
        let total = 0;
        if (k > 1 && (nextSq[i]! - least) * halfPrecision > 40)
          total = 1; // the rest is below 1e-17
        else
          for (let c = 0; c < k; c++)
            total += relativeLikelihood(
              squaredDistance(block, i, centres, c, p) - least,
              halfPrecision,
            );
        out[rowOf ? rowOf[from + i]! : from + i] = 1 / total;
      }
    });
  }
  return out;
}

/**
 * Probabilities of all K groups by the same rule; each row sums to 1.
 *
 * @returns Row-major, shape (n, K); NaN rows where a coordinate is missing.
 * @throws {KernelError} As `ownMembership`.
 */
export function allMemberships(input: MembershipInput): Float64Array {
  const { points, n, p, rowOf, centres, k, halfPrecision, nRows } = prepared(input);
  const out = new Float64Array(nRows * k).fill(NaN);
  const sq = new Float64Array(k);
  for (let i = 0; i < n; i++) {
    let nearestSq = Infinity;
    for (let c = 0; c < k; c++) {
      sq[c] = squaredDistance(points, i, centres, c, p);
      nearestSq = Math.min(nearestSq, sq[c]!);
    }
    const at = (rowOf ? rowOf[i]! : i) * k;
    let total = 0;
    for (let c = 0; c < k; c++)
      total += out[at + c] = relativeLikelihood(sq[c]! - nearestSq, halfPrecision);
    for (let c = 0; c < k; c++) out[at + c]! /= total;
  }
  return out;
}

/** exp(-excess * halfPrecision), 1 at no excess even when the precision is infinite. */
function relativeLikelihood(excess: number, halfPrecision: number): number {
  return excess === 0 ? 1 : Math.exp(-excess * halfPrecision);
}

function prepared({ columns, centroids, variance }: MembershipInput) {
  const p = columns.length;
  if (p === 0 || centroids.length === 0 || centroids.length % p !== 0) {
    throw new KernelError(
      'shape',
      `${centroids.length} centroid coordinates do not fill rows of ${p}`,
    );
  }
  if (!(variance >= 0 && variance < Infinity))
    throw new KernelError('bad-parameter', `expected a variance >= 0, found ${variance}`);
  const packed = packPoints(columns);
  return {
    points: packed.points,
    p,
    n: packed.n,
    rowOf: packed.rowOf,
    nRows: columns[0]?.length ?? 0,
    centres: centroids,
    k: centroids.length / p,
    halfPrecision: 1 / (2 * variance),
  };
}
