import { KernelError } from '#kernels/kernel-error.ts';
import { disjointSets } from './disjoint-sets.ts';
import { numberGroups } from './number-groups.ts';
import { packPoints, type PackedPoints } from './points.ts';
import type { OnProgress } from '#kernels/progress.ts';

/** Input of `dbscan`. */
export interface DbscanInput {
  /** p columns of n rows in one space; NaN = missing. */
  columns: readonly Float64Array[];
  /** Reach of a row, > 0, in the unit of the space; a row at exactly this distance is within it. */
  eps: number;
  /** Rows within reach, the row itself included, that make it a core row. */
  minPoints: number;
  /** Complete rows at most, default 20,000 (time grows with their square). */
  maxRows?: number | undefined;
  /** Interval lengths (m) for the numbering of the labels. */
  weights?: ArrayLike<number> | undefined;
  onProgress?: OnProgress | undefined;
}

/** Groups of connected dense rows. */
export interface Dbscan {
  /** 1..K by descending rows or weight; 0 = noise or a missing coordinate. */
  labels: Uint16Array;
  /** 1 for a core row. */
  core: Uint8Array;
  clusters: number;
  nCore: number;
  /** Complete rows in no group. */
  nNoise: number;
  nUsed: number;
  nDropped: number;
}

/** Rows beyond which all pairs take too long. */
export const MAX_DENSITY_ROWS = 20_000;

/**
 * Density-based groups: core rows within reach of each other belong together; another row within
 * reach of a core row joins the group of the nearest one (ties: the first row), so the order of the
 * rows does not matter; the rest is noise.
 *
 * @throws {KernelError} `bad-parameter`, `too-many-rows` with { n, most }, `shape`; those of `packPoints`.
 * @see Ester, Kriegel, Sander & Xu (1996), KDD-96 (from memory).
 */
export function dbscan(input: DbscanInput): Dbscan {
  const { columns, eps, minPoints, maxRows = MAX_DENSITY_ROWS, onProgress } = input;
  if (!(eps > 0 && eps < Infinity))
    throw new KernelError('bad-parameter', `expected eps > 0, found ${eps}`);
  if (!(minPoints >= 1 && Math.floor(minPoints) === minPoints))
    throw new KernelError(
      'bad-parameter',
      `expected minPoints a whole number >= 1, found ${minPoints}`,
    );
  const packed = packPoints(columns);
  requireDensityRows(packed.n, maxRows);
  const { n } = packed;
  const report = (part: number) => (i: number) => {
    if ((i & 255) === 0) onProgress?.((part + i / n) / 2);
  };
  const near = new Uint32Array(n).fill(1);
  forPairsWithin(packed, eps, report(0), (a, b) => {
    near[a]! += 1;
    near[b]! += 1;
  });
  const isCore = near.map((count) => (count >= minPoints ? 1 : 0));
  const groupOf = connect(packed, eps, isCore, report(1));
  const places = { rowOf: packed.rowOf, nRows: columns[0]?.length ?? 0 };
  const labels = numberGroups(groupOf, places, input.weights);
  const core = new Uint8Array(places.nRows);
  isCore.forEach((flag, i) => (core[packed.rowOf ? packed.rowOf[i]! : i] = flag));
  const nNoise = groupOf.reduce((count, group) => count + (group < 0 ? 1 : 0), 0);
  return {
    labels,
    core,
    clusters: labels.reduce((most, label) => Math.max(most, label), 0),
    nCore: isCore.reduce((sum, flag) => sum + flag, 0),
    nNoise,
    nUsed: n,
    nDropped: packed.nDropped,
  };
}

/** @throws {KernelError} `too-many-rows` with { n, most }. */
export function requireDensityRows(n: number, most: number): void {
  if (n <= most) return;
  const message = `expected at most ${most} complete rows, found ${n}: composite to longer intervals or take fewer holes`;
  throw new KernelError('too-many-rows', message, { n, most });
}

/** Group of each row: cores within reach joined, other rows with their nearest core, -1 without. */
function connect(
  packed: PackedPoints,
  eps: number,
  isCore: Uint32Array,
  report: (i: number) => void,
): Int32Array {
  const { n } = packed;
  const sets = disjointSets(n);
  const nearestCore = new Int32Array(n).fill(-1);
  const nearestSq = new Float64Array(n).fill(Infinity);
  const attach = (row: number, core: number, squares: number): void => {
    const isNearer = squares < nearestSq[row]!;
    if (!isNearer && !(squares === nearestSq[row] && core < nearestCore[row]!)) return;
    nearestCore[row] = core;
    nearestSq[row] = squares;
  };
  forPairsWithin(packed, eps, report, (a, b, squares) => {
    if (isCore[a] && isCore[b]) sets.join(a, b);
    else if (isCore[b]) attach(a, b, squares);
    else if (isCore[a]) attach(b, a, squares);
  });
  return Int32Array.from({ length: n }, (_, i) => {
    const core = isCore[i] ? i : nearestCore[i]!;
    return core < 0 ? -1 : sets.find(core);
  });
}

/** Visits every pair of rows within `eps` once, sweeping along the first coordinate. */
function forPairsWithin(
  { points, n, p }: PackedPoints,
  eps: number,
  report: (i: number) => void,
  visit: (a: number, b: number, squares: number) => void,
): void {
  const order = Uint32Array.from({ length: n }, (_, i) => i);
  order.sort((a, b) => points[a * p]! - points[b * p]! || a - b);
  for (let i = 0; i < n; i++) {
    report(i);
    const a = order[i]!;
    const reach = points[a * p]! + eps * (1 + 1e-12); // the exact test is below
    for (let k = i + 1; k < n; k++) {
      const b = order[k]!;
      if (points[b * p]! > reach) break;
      let squares = 0;
      for (let j = 0; j < p; j++) squares += (points[a * p + j]! - points[b * p + j]!) ** 2;
      if (Math.sqrt(squares) <= eps) visit(a, b, squares);
    }
  }
}
