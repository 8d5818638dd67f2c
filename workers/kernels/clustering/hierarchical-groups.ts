import { cutTree } from './cut-tree.ts';
import {
  hierarchicalTree,
  MAX_HIERARCHICAL_ROWS,
  type HierarchicalTree,
  type Linkage,
} from './hierarchical.ts';
import { kMeans } from './k-means.ts';
import { numberGroups } from './number-groups.ts';
import { packPoints } from './points.ts';
import type { OnProgress } from '#kernels/progress.ts';

/** Input of `hierarchicalGroups`. */
export interface HierarchicalGroupsInput {
  /** p columns of n rows in one space; NaN = missing. */
  columns: readonly Float64Array[];
  linkage: Linkage;
  k: number;
  /** Seed of the micro-groups. */
  seed: number;
  /** Complete rows beyond which micro-groups are joined, default 5,000. */
  maxRows?: number | undefined;
  /** Micro-groups then made, default 200. */
  microGroups?: number | undefined;
  /** Interval lengths (m) for the numbering of the labels. */
  weights?: Float64Array | undefined;
  onProgress?: OnProgress | undefined;
}

/** Groups cut from a tree. */
export interface HierarchicalGroups {
  /** 1..K per row by descending rows or weight; 0 = a coordinate is missing. */
  labels: Uint16Array;
  /** Of the rows, or of the micro-groups. */
  tree: HierarchicalTree;
  notes: string[];
}

/**
 * Groups by a merge tree at any number of rows: of the rows themselves up to `maxRows`, beyond that of
 * k-means micro-groups with their sizes, which a note says.
 *
 * @throws {KernelError} Those of `hierarchicalTree`, `kMeans` and `cutTree`.
 */
export function hierarchicalGroups(input: HierarchicalGroupsInput): HierarchicalGroups {
  const { columns, linkage, k, seed, weights, onProgress } = input;
  const { maxRows = MAX_HIERARCHICAL_ROWS, microGroups = 200 } = input;
  const { n } = packPoints(columns);
  if (n <= maxRows) {
    const tree = hierarchicalTree({ columns, linkage, maxRows, onProgress });
    return { labels: cutTree(tree, k, weights), tree, notes: tree.notes };
  }
  const micro = kMeans({
    columns,
    k: microGroups,
    seed,
    onProgress: (share) => onProgress?.(0.9 * share),
  });
  const { p, centroids } = micro;
  const centres = Array.from({ length: p }, (_, j) =>
    Float64Array.from({ length: microGroups }, (__, c) => centroids[c * p + j]!),
  );
  const tree = hierarchicalTree({ columns: centres, linkage, sizes: micro.sizes });
  const groupOfMicro = cutTree(tree, k);
  const groupOf = Int32Array.from(micro.labels, (label) =>
    label === 0 ? -1 : groupOfMicro[label - 1]!,
  );
  const labels = numberGroups(groupOf, { rowOf: null, nRows: groupOf.length }, weights);
  const note = `${n} rows are more than ${maxRows}: ${microGroups} k-means micro-groups were joined instead`;
  return { labels, tree, notes: [note, ...micro.notes] };
}
