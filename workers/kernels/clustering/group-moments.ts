import { KernelError } from '#kernels/kernel-error.ts';
import { packPoints } from './points.ts';

/** Labels 1..K per row; 0 = unassigned. */
export type Labels = ArrayLike<number>;

/** Rows that have a label and all coordinates, with the means of their groups. */
export interface GroupedPoints {
  /** Row-major, shape (n, p). */
  points: Float64Array;
  n: number;
  p: number;
  /** 0-based group of each row. */
  group: Uint16Array;
  k: number;
  /** Label of each group, ascending; labels without rows are left out. */
  labelOf: number[];
  sizes: number[];
  /** Row-major, shape (k, p). */
  centroids: Float64Array;
}

/**
 * Rows with a label > 0 and complete coordinates, with group means.
 *
 * @throws {KernelError} `shape` when labels and columns differ in length; `bad-parameter` for a label
 *   that is not a whole number from 0 to 65,534; `too-few-rows` when nothing is labelled; those of
 *   `packPoints`.
 */
export function groupedPoints(columns: readonly Float64Array[], labels: Labels): GroupedPoints {
  const packed = packPoints(columns);
  const p = packed.p;
  if (labels.length !== columns[0]?.length) {
    throw new KernelError('shape', `${labels.length} labels for ${columns[0]?.length ?? 0} rows`);
  }
  const labelOfRow = (i: number) => labels[packed.rowOf ? packed.rowOf[i]! : i]!;
  const { labelOf, groupOf } = compactLabels(labels);
  const { points } = packed; // labelled rows move forward in place
  const group = new Uint16Array(packed.n);
  let n = 0;
  for (let i = 0; i < packed.n; i++) {
    const label = labelOfRow(i);
    if (label === 0) continue;
    group[n] = groupOf[label]!;
    if (n < i) points.copyWithin(n * p, i * p, (i + 1) * p);
    n += 1;
  }
  if (n === 0) throw new KernelError('too-few-rows', 'no complete row has a label');
  return withMeans(points.subarray(0, n * p), group.subarray(0, n), n, p, labelOf);
}

/** Labels in use, ascending, and the place of each among them. */
export function compactLabels(labels: Labels): { labelOf: number[]; groupOf: Uint16Array } {
  const inUse = new Uint8Array(65_535);
  for (let i = 0; i < labels.length; i++) {
    const label = labels[i]!;
    if (!(label >= 0 && label < 65_535 && Math.floor(label) === label)) {
      throw new KernelError(
        'bad-parameter',
        `expected a label from 0 to 65534, found ${label} in row ${i}`,
        { row: i },
      );
    }
    inUse[label] = 1;
  }
  const labelOf: number[] = [];
  const groupOf = new Uint16Array(65_535);
  for (let label = 1; label < inUse.length; label++) {
    if (!inUse[label]) continue;
    groupOf[label] = labelOf.length;
    labelOf.push(label);
  }
  return { labelOf, groupOf };
}

/** Means per group; groups whose rows were all incomplete drop out. */
function withMeans(
  points: Float64Array,
  group: Uint16Array,
  n: number,
  p: number,
  labels: number[],
): GroupedPoints {
  const counts = new Uint32Array(labels.length);
  for (let i = 0; i < n; i++) counts[group[i]!]! += 1;
  const kept = [...labels.keys()].filter((g) => counts[g]! > 0);
  const place = new Uint16Array(labels.length);
  for (const [next, g] of kept.entries()) place[g] = next;
  const centroids = new Float64Array(kept.length * p);
  for (let i = 0; i < n; i++) {
    group[i] = place[group[i]!]!;
    for (let j = 0; j < p; j++) centroids[group[i]! * p + j]! += points[i * p + j]!;
  }
  const sizes = kept.map((g) => counts[g]!);
  for (let at = 0; at < centroids.length; at++) centroids[at]! /= sizes[Math.floor(at / p)]!;
  return {
    points,
    n,
    p,
    group,
    k: kept.length,
    labelOf: kept.map((g) => labels[g]!),
    sizes,
    centroids,
  };
}
