import { KernelError } from '#kernels/kernel-error.ts';
import { condensedDistances, pairIndex } from './condensed-distances.ts';
import { disjointSets } from './disjoint-sets.ts';
import { packPoints } from './points.ts';
import type { OnProgress } from '#kernels/progress.ts';

/** How the distance between two groups follows from those of their rows. */
export type Linkage = 'ward' | 'average' | 'complete';

/** Input of `hierarchicalTree`. */
export interface HierarchicalInput {
  /** p columns of n rows in one space; NaN = missing. */
  columns: readonly Float64Array[];
  linkage: Linkage;
  /**
   * Rows each row stands for, > 0, default 1: centroids of k-means micro-groups with their sizes. Ward
   * and average weigh by them.
   */
  sizes?: ArrayLike<number> | undefined;
  /** Complete rows at most, default 5,000 (about 100 MB of distances). */
  maxRows?: number | undefined;
  onProgress?: OnProgress | undefined;
}

/** A merge tree. */
export interface HierarchicalTree {
  /**
   * Two per merge, ascending in height: a complete row (0..n-1, in order) or n + the number of an
   * earlier merge.
   */
  merges: Int32Array;
  /** One per merge, n - 1 in all, ascending. */
  heights: Float64Array;
  /** Complete rows. */
  n: number;
  /** Input row of each complete row; null when all were complete. */
  rowOf: Uint32Array | null;
  nRows: number;
  nDropped: number;
  notes: string[];
}

/** Rows beyond which the distances no longer fit: group by k-means first. */
export const MAX_HIERARCHICAL_ROWS = 5000;

/**
 * Agglomerative tree by the nearest-neighbour chain, exact for these linkages, O(n²) time and memory.
 * Ward heights are √(2 n_a n_b / (n_a + n_b)) times the distance of the centroids (unsquared).
 *
 * @throws {KernelError} `too-many-rows` with { n, most }; `too-few-rows` below 2 complete rows; `shape`
 *   and `bad-parameter` for the sizes; those of `packPoints`.
 * @see Ward (1963), JASA 58; Murtagh & Legendre (2014), J. Classif. 31 (from memory).
 */
export function hierarchicalTree(input: HierarchicalInput): HierarchicalTree {
  const { columns, linkage, maxRows = MAX_HIERARCHICAL_ROWS, onProgress } = input;
  const { points, n, p, rowOf, nDropped } = packPoints(columns);
  const nRows = columns[0]?.length ?? 0;
  if (n > maxRows) {
    const message = `expected at most ${maxRows} complete rows, found ${n}: group them by k-means first and join the groups`;
    throw new KernelError('too-many-rows', message, { n, most: maxRows });
  }
  if (n < 2) throw new KernelError('too-few-rows', `expected 2 complete rows, found ${n}`, { n });
  const size = sizesOf(input.sizes, nRows, rowOf, n);
  const distances = condensedDistances(points, n, p);
  if (linkage === 'ward') scaleForWard(distances, size);
  const found = joinByChain(distances, size, linkage, onProgress);
  const notes = nDropped > 0 ? [`${nDropped} rows with a missing coordinate were left out`] : [];
  return { ...treeOfJoins(found, n), n, rowOf, nRows, nDropped, notes };
}

function sizesOf(
  sizes: ArrayLike<number> | undefined,
  nRows: number,
  rowOf: Uint32Array | null,
  n: number,
): Float64Array {
  if (!sizes) return new Float64Array(n).fill(1);
  if (sizes.length !== nRows)
    throw new KernelError('shape', `${sizes.length} sizes for ${nRows} rows`);
  return Float64Array.from({ length: n }, (_, i) => {
    const row = rowOf ? rowOf[i]! : i;
    const size = sizes[row]!;
    if (size > 0 && size < Infinity) return size;
    throw new KernelError('bad-parameter', `expected a size > 0, found ${size} in row ${row}`, {
      row,
    });
  });
}

/** Distances between single rows as Ward heights. */
function scaleForWard(distances: Float64Array, size: Float64Array): void {
  for (let a = 0, at = 0; a < size.length; a++) {
    for (let b = a + 1; b < size.length; b++, at++)
      distances[at]! *= Math.sqrt((2 * size[a]! * size[b]!) / (size[a]! + size[b]!));
  }
}

/** Two rows whose groups join at a height. */
export interface Join {
  a: number;
  b: number;
  height: number;
}

/**
 * Joins in the order the nearest-neighbour chain finds them; a group lives on at the place of its later
 * row.
 *
 * @param distances Condensed, as of `condensedDistances`; used up.
 * @param size What each row stands for; used up.
 */
export function joinByChain(
  distances: Float64Array,
  size: Float64Array,
  linkage: Linkage,
  onProgress?: OnProgress,
): Join[] {
  const n = size.length;
  const gone = new Uint8Array(n);
  const chain: number[] = [];
  const joins: Join[] = [];
  for (let first = 0; joins.length < n - 1;) {
    if (chain.length === 0) {
      while (gone[first]) first += 1;
      chain.push(first);
    }
    const tip = chain[chain.length - 1]!;
    const before = chain.length > 1 ? chain[chain.length - 2]! : -1;
    const next = nearestTo(tip, before, distances, gone);
    if (next !== before) {
      chain.push(next);
      continue;
    }
    chain.length -= 2;
    const [a, b] = tip < before ? [tip, before] : [before, tip];
    joins.push({ a, b, height: distances[pairIndex(a, b, n)]! });
    gone[a] = 1;
    update(distances, size, gone, linkage, a, b);
    size[b]! += size[a]!;
    if ((joins.length & 63) === 0) onProgress?.(joins.length / n);
  }
  return joins;
}

/** The nearest group to `tip`; the one before it in the chain on a tie, so that the chain ends. */
function nearestTo(tip: number, before: number, distances: Float64Array, gone: Uint8Array): number {
  const n = gone.length;
  let best = before;
  let least = before < 0 ? Infinity : distances[pairIndex(tip, before, n)]!;
  for (let other = 0; other < n; other++) {
    if (gone[other] || other === tip) continue;
    const distance = distances[pairIndex(tip, other, n)]!;
    if (distance >= least && best >= 0) continue;
    best = other;
    least = distance;
  }
  return best;
}

/** Distances of the joined group, kept at the place of b, to every other. */
function update(
  distances: Float64Array,
  size: Float64Array,
  gone: Uint8Array,
  linkage: Linkage,
  a: number,
  b: number,
): void {
  const n = size.length;
  const [sizeA, sizeB] = [size[a]!, size[b]!];
  const joined = distances[pairIndex(a, b, n)]!;
  for (let c = 0; c < n; c++) {
    if (gone[c] || c === b) continue;
    const toB = pairIndex(b, c, n);
    const [da, db] = [distances[pairIndex(a, c, n)]!, distances[toB]!];
    if (linkage === 'complete') distances[toB] = Math.max(da, db);
    else if (linkage === 'average') distances[toB] = (sizeA * da + sizeB * db) / (sizeA + sizeB);
    else {
      const sizeC = size[c]!;
      const squares =
        (sizeA + sizeC) * da * da + (sizeB + sizeC) * db * db - sizeC * joined * joined;
      distances[toB] = Math.sqrt(Math.max(0, squares / (sizeA + sizeB + sizeC)));
    }
  }
}

/**
 * Joins by ascending height (equal ones as found), with the number of the group each place then
 * holds.
 */
export function treeOfJoins(
  joins: readonly Join[],
  n: number,
): Pick<HierarchicalTree, 'merges' | 'heights'> {
  const sorted = joins
    .map((join, at) => ({ ...join, at }))
    .sort((x, y) => x.height - y.height || x.at - y.at);
  const places = disjointSets(n);
  const groupAt = Int32Array.from({ length: n }, (_, i) => i);
  const merges = new Int32Array(2 * sorted.length);
  const heights = new Float64Array(sorted.length);
  for (const [m, { a, b, height }] of sorted.entries()) {
    const [rootA, rootB] = [places.find(a), places.find(b)];
    const [groupA, groupB] = [groupAt[rootA]!, groupAt[rootB]!];
    merges[2 * m] = Math.min(groupA, groupB);
    merges[2 * m + 1] = Math.max(groupA, groupB);
    heights[m] = height;
    places.join(rootA, rootB);
    groupAt[rootB] = n + m;
  }
  return { merges, heights };
}
