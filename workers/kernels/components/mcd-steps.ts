import { cholesky, squaredDistances } from './cholesky.ts';

/** Rows of points that the search for a smallest determinant runs on. */
export interface McdRows {
  /** Row-major (n, p). */
  points: Float64Array;
  n: number;
  p: number;
  /** Rows of a subset. */
  h: number;
}

/** A subset of rows with the estimate it gives. */
export interface McdCandidate {
  centre: Float64Array;
  /** Lower triangle of the covariance (rows - 1). */
  lower: Float64Array;
  logDeterminant: number;
  /** Rows of the subset, ascending. */
  rows: Uint32Array;
}

/** Mean and covariance (rows - 1) of some rows. */
export function subsetMoments(
  { points, p }: Pick<McdRows, 'points' | 'p'>,
  rows: Uint32Array,
): { centre: Float64Array; covariance: Float64Array } {
  const centre = new Float64Array(p);
  for (const row of rows) for (let i = 0; i < p; i++) centre[i]! += points[row * p + i]!;
  for (let i = 0; i < p; i++) centre[i]! /= rows.length;
  const covariance = new Float64Array(p * p);
  const deviation = new Float64Array(p);
  for (const row of rows) {
    for (let i = 0; i < p; i++) {
      const value = points[row * p + i]! - centre[i]!;
      deviation[i] = value;
      for (let j = 0; j <= i; j++) covariance[i * p + j]! += value * deviation[j]!;
    }
  }
  for (let i = 0; i < p; i++) {
    for (let j = 0; j <= i; j++) {
      const value = covariance[i * p + j]! / (rows.length - 1);
      covariance[i * p + j] = value;
      covariance[j * p + i] = value;
    }
  }
  return { centre, covariance };
}

/** The estimate of a subset, or null when its rows lie on a plane. */
export function candidateOf(rows: McdRows, subset: Uint32Array): McdCandidate | null {
  const { centre, covariance } = subsetMoments(rows, subset);
  const logDeterminant = cholesky(covariance, rows.p);
  if (logDeterminant === null) return null;
  return { centre, lower: covariance, logDeterminant, rows: subset };
}

/** The h rows nearest to an estimate, ascending; of equally far rows the earlier ones. */
export function nearestRows({ points, n, p, h }: McdRows, candidate: McdCandidate): Uint32Array {
  const distances = new Float64Array(n);
  squaredDistances(points, p, candidate.centre, candidate.lower, distances);
  return smallest(distances, h);
}

/** Positions of the h smallest values, ascending; of equal ones the earlier. */
export function smallest(values: Float64Array, h: number): Uint32Array {
  const limit = values.slice().sort()[h - 1]!;
  let ties = h;
  for (let row = 0; row < values.length; row++) if (values[row]! < limit) ties--;
  const rows = new Uint32Array(h);
  let count = 0;
  for (let row = 0; row < values.length; row++) {
    if (values[row]! < limit || (values[row] === limit && ties-- > 0)) rows[count++] = row;
  }
  return rows;
}

/** Most concentration steps; each lowers the determinant, so that far fewer are ever taken. */
const MOST_STEPS = 200;

/**
 * Concentration steps: the h rows nearest to an estimate give the next, whose determinant is no
 * larger, until the rows stay.
 *
 * @param onPlane Told of a subset whose rows lie on a plane, where no step can be taken.
 * @returns The last estimate, or null after such a subset.
 */
export function concentrate(
  rows: McdRows,
  start: McdCandidate,
  steps: number,
  onPlane: (subset: Uint32Array) => void,
): McdCandidate | null {
  let current = start;
  for (let step = 0; step < Math.min(steps, MOST_STEPS); step++) {
    const subset = nearestRows(rows, current);
    const isSame =
      subset.length === current.rows.length && subset.every((row, i) => row === current.rows[i]);
    if (isSame) return current;
    const next = candidateOf(rows, subset);
    if (!next) {
      onPlane(subset);
      return null;
    }
    current = next;
  }
  return current;
}
