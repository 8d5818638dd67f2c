import { f64Bytes, withLab } from '#kernels/dense/lab.ts';
import { seededRandom } from '#kernels/random.ts';
import { groupedPoints, type GroupedPoints, type Labels } from './group-moments.ts';
import { drawRows } from './k-means-starts.ts';
import { takeRows } from './points.ts';
import type { OnProgress } from '#kernels/progress.ts';

/** Settings of `silhouette`. */
export interface SilhouetteOptions {
  /** Rows at most; more are drawn down to this many. Default 3,000. */
  sampleSize?: number;
  /** Seed of the draw. */
  seed?: number;
  onProgress?: OnProgress;
}

/** Silhouette widths of a labelling. */
export interface Silhouette {
  /** Mean width in [-1, 1]; null with one group. */
  mean: number | null;
  /** Mean width per label, in label order; null for a label absent from the sample. */
  byLabel: { label: number; rows: number; mean: number | null }[];
  /** Rows used. */
  n: number;
  /** True when rows were drawn: the widths are those within the sample. */
  sampled: boolean;
}

/**
 * Silhouette by distances between all pairs of rows, exact up to `sampleSize` labelled rows, on a
 * seeded draw of that many beyond. s = (b - a) / max(a, b), with a the mean distance to the own group
 * and b the least mean distance to another; a group of one row has 0.
 *
 * @param columns p columns of n rows in the clustering space; rows with NaN are left out.
 * @param labels 1..K per row, 0 = unassigned (left out).
 * @throws {KernelError} Those of `groupedPoints`.
 * @see Rousseeuw (1987), J. Comput. Appl. Math. 20, 53-65 (from memory).
 */
export function silhouette(
  columns: readonly Float64Array[],
  labels: Labels,
  options: SilhouetteOptions = {},
): Silhouette {
  return silhouetteOf(groupedPoints(columns, labels), options);
}

/** {@link silhouette} of rows already gathered by group. */
export function silhouetteOf(all: GroupedPoints, options: SilhouetteOptions = {}): Silhouette {
  const { sampleSize = 3000, seed = 1, onProgress } = options;
  const sampled = all.n > sampleSize;
  const used = sampled ? drawn(all, sampleSize, seed) : all;
  const sums = distanceSums(used, onProgress);
  return { ...widths(used, sums), n: used.n, sampled };
}

function drawn(all: GroupedPoints, size: number, seed: number): GroupedPoints {
  const rows = drawRows(all.n, size, seededRandom(seed));
  const group = Uint16Array.from(rows, (row) => all.group[row] ?? 0);
  const sizes = new Array<number>(all.k).fill(0);
  for (const g of group) sizes[g]! += 1;
  return { ...all, points: takeRows(all.points, all.p, rows), n: size, group, sizes };
}

/** Rows between reports of progress. */
const REPORT_ROWS = 256;

/** Sum of distances from each row to the rows of each group, shape (n, k). */
function distanceSums(
  { points, n, p, group, k, sizes }: GroupedPoints,
  onProgress?: OnProgress,
): Float64Array {
  const stride = n + (n % 2);
  const rowAt = rowsByGroup(group, sizes);
  return withLab(f64Bytes(stride * p, stride * k, k + 1), (lab) => {
    const x = lab.f64(stride * p);
    const starts = lab.u32(k + 1);
    const sums = lab.f64(stride * k);
    for (const [g, size] of sizes.entries()) starts[g + 1] = starts[g]! + size;
    for (let i = 0; i < n; i++) for (let j = 0; j < p; j++) x[j * stride + i] = points[rowAt[i]! * p + j]!;
    for (let from = 0; from < n; from += REPORT_ROWS) {
      onProgress?.(1 - (1 - from / n) ** 2); // each row has fewer left to be measured against
      lab.math.addDistances(x, stride, p, starts, k, from, Math.min(from + REPORT_ROWS, n), sums);
    }
    const out = new Float64Array(n * k);
    for (let i = 0; i < n; i++) for (let g = 0; g < k; g++) out[rowAt[i]! * k + g] = sums[g * stride + i]!;
    return out;
  });
}

/** Row numbers, group after group. */
function rowsByGroup(group: Uint16Array, sizes: readonly number[]): Uint32Array {
  const next = sizes.map((_, g) => sizes.slice(0, g).reduce((sum, size) => sum + size, 0));
  const rows = new Uint32Array(group.length);
  group.forEach((g, row) => (rows[next[g]!++] = row));
  return rows;
}

function widths(
  { n, group, k, labelOf, sizes }: GroupedPoints,
  sums: Float64Array,
): Pick<Silhouette, 'mean' | 'byLabel'> {
  const present = sizes.filter((size) => size > 0).length;
  const total = new Float64Array(k);
  for (let i = 0; i < n; i++) {
    const own = group[i]!;
    if (sizes[own]! < 2) continue;
    const a = sums[i * k + own]! / (sizes[own]! - 1);
    let b = Infinity;
    for (let g = 0; g < k; g++)
      if (g !== own && sizes[g]! > 0) b = Math.min(b, sums[i * k + g]! / sizes[g]!);
    if (a !== b) total[own]! += (b - a) / Math.max(a, b);
  }
  const defined = present > 1;
  return {
    mean: defined ? total.reduce((sum, value) => sum + value, 0) / n : null,
    byLabel: labelOf.map((label, g) => ({
      label,
      rows: sizes[g]!,
      mean: defined && sizes[g]! > 0 ? total[g]! / sizes[g]! : null,
    })),
  };
}
