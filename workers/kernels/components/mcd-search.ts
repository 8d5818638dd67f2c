import { EVD, Matrix } from 'ml-matrix';
import { KernelError } from '#kernels/kernel-error.ts';
import type { Random } from '#kernels/random.ts';
import type { OnProgress } from '#kernels/progress.ts';
import {
  candidateOf,
  concentrate,
  subsetMoments,
  type McdCandidate,
  type McdRows,
} from './mcd-steps.ts';

/** Random starts are followed on groups of about this many rows, at most five of them. */
const GROUP_ROWS = 300;
const MOST_GROUPS = 5;
/** Candidates carried from one stage of the search to the next. */
const CARRIED = 10;
/** Above this many products a step, only the best candidate is followed to its end. */
const LARGE_WORK = 2e7;

/**
 * Searches the subset of h rows whose covariance has the smallest determinant: two concentration
 * steps from every random start, the ten best to their end. More than 600 rows are searched by
 * nested subsets.
 *
 * @param starts Random starts of p + 1 rows.
 * @throws {KernelError} `singular` with { onPlane } when h rows lie on a plane.
 * @see Rousseeuw & Van Driessen (1999), A fast algorithm for the MCD, Technometrics 41.
 */
export function searchSubset(
  rows: McdRows,
  starts: number,
  random: Random,
  onProgress: OnProgress = () => undefined,
): McdCandidate {
  const onPlane = (points: McdRows) => (subset: Uint32Array) =>
    requireNoPlane(rows, points, subset);
  const groups = rows.n > 2 * GROUP_ROWS ? drawGroups(rows, random) : [rows];
  const perGroup = Math.max(1, Math.floor(starts / groups.length));
  const found = groups.map((group, g) => {
    const candidates: McdCandidate[] = [];
    for (let start = 0; start < perGroup; start++) {
      onProgress((0.6 * (g + start / perGroup)) / groups.length);
      const first = randomStart(group, random);
      const after = first && concentrate(group, first, 2, onPlane(group));
      if (after) keepBest(candidates, after);
    }
    return candidates;
  });
  if (groups.length === 1) return best(rows, found.flat(), onPlane(rows), onProgress);
  const merged = mergeGroups(rows, groups);
  const carried: McdCandidate[] = [];
  for (const candidate of found.flat()) {
    const after = concentrate(merged, candidate, 2, onPlane(merged));
    if (after) keepBest(carried, after);
  }
  return best(rows, carried, onPlane(rows), onProgress);
}

/** Follows candidates on all rows and takes the one of the smallest determinant. */
function best(
  rows: McdRows,
  candidates: readonly McdCandidate[],
  onPlane: (subset: Uint32Array) => void,
  onProgress: OnProgress,
): McdCandidate {
  const isLarge = rows.n * rows.p * rows.p > LARGE_WORK;
  const ends: McdCandidate[] = [];
  candidates.forEach((candidate, i) => {
    onProgress(0.6 + (0.4 * i) / (candidates.length + 1));
    // Rows of a candidate may be of a group, so that a first step on all rows is always taken.
    const onAll = { ...candidate, rows: new Uint32Array(0) };
    const end = concentrate(rows, onAll, isLarge ? 2 : Infinity, onPlane);
    if (end) keepBest(ends, end);
  });
  const [first] = ends;
  const last = first && isLarge ? concentrate(rows, first, Infinity, onPlane) : first;
  if (!last) {
    throw new KernelError('singular', `expected ${rows.p} variables that vary on their own`);
  }
  return last;
}

/** Keeps the ten smallest determinants, the earlier of equal ones first. */
function keepBest(kept: McdCandidate[], candidate: McdCandidate): void {
  const at = kept.findIndex(({ logDeterminant }) => candidate.logDeterminant < logDeterminant);
  kept.splice(at < 0 ? kept.length : at, 0, candidate);
  if (kept.length > CARRIED) kept.length = CARRIED;
}

/** p + 1 random rows, and more one by one while they lie on a plane; null when all rows do. */
function randomStart(rows: McdRows, random: Random): McdCandidate | null {
  const order = Uint32Array.from({ length: rows.n }, (_, row) => row);
  for (let count = 0; count < rows.n; count++) {
    const other = count + random.below(rows.n - count);
    [order[count], order[other]] = [order[other]!, order[count]!];
    if (count < rows.p) continue;
    const candidate = candidateOf(rows, order.subarray(0, count + 1));
    if (candidate) return { ...candidate, rows: new Uint32Array(0) };
  }
  return null;
}

/** Disjoint random groups of rows with their share of h. */
function drawGroups({ points, n, p, h }: McdRows, random: Random): McdRows[] {
  const count = Math.min(MOST_GROUPS, Math.floor(n / GROUP_ROWS));
  const total = Math.min(n, MOST_GROUPS * GROUP_ROWS);
  const order = Uint32Array.from({ length: n }, (_, row) => row);
  for (let i = 0; i < total; i++) {
    const other = i + random.below(n - i);
    [order[i], order[other]] = [order[other]!, order[i]!];
  }
  return Array.from({ length: count }, (_, g) => {
    const members = order.subarray(
      Math.floor((g * total) / count),
      Math.floor(((g + 1) * total) / count),
    );
    const picked = new Float64Array(members.length * p);
    members.forEach((row, i) => picked.set(points.subarray(row * p, (row + 1) * p), i * p));
    return { points: picked, n: members.length, p, h: Math.ceil((members.length * h) / n) };
  });
}

function mergeGroups({ n, p, h }: McdRows, groups: readonly McdRows[]): McdRows {
  const total = groups.reduce((sum, group) => sum + group.n, 0);
  const points = new Float64Array(total * p);
  let start = 0;
  for (const group of groups) {
    points.set(group.points, start);
    start += group.points.length;
  }
  return { points, n: total, p, h: Math.ceil((total * h) / n) };
}

/**
 * A subset on a plane may be an accident of a small group; it is the answer, with a determinant of
 * zero, when h of all rows lie on that plane.
 */
function requireNoPlane(all: McdRows, searched: McdRows, subset: Uint32Array): void {
  const { p } = all;
  const { centre, covariance } = subsetMoments(searched, subset);
  const matrix = Array.from({ length: p }, (_, i) => [...covariance.subarray(i * p, (i + 1) * p)]);
  const evd = new EVD(new Matrix(matrix), { assumeSymmetric: true });
  const normal = evd.eigenvectorMatrix.getColumn(0);
  let onPlane = 0;
  for (let row = 0; row < all.n; row++) {
    let offset = 0;
    for (let i = 0; i < p; i++) offset += normal[i]! * (all.points[row * p + i]! - centre[i]!);
    if (Math.abs(offset) < 1e-6) onPlane++;
  }
  if (onPlane < all.h) return;
  const message =
    `expected ${p} variables that vary on their own in most rows, ` +
    `found ${onPlane} of ${all.n} rows on a plane`;
  throw new KernelError('singular', message, { onPlane, nRows: all.n });
}
