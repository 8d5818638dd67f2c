import { KernelError } from '#kernels/kernel-error.ts';
import { condenseTree, pickBranches, type CondensedTree } from './condensed-tree.ts';
import { MAX_DENSITY_ROWS, requireDensityRows } from './dbscan.ts';
import { treeOfJoins } from './hierarchical.ts';
import { numberGroups } from './number-groups.ts';
import { packPoints } from './points.ts';
import type { OnProgress } from '#kernels/progress.ts';
import { coreDistances, reachabilityTree } from './reachability-tree.ts';

/** Input of `hdbscan`. */
export interface HdbscanInput {
  /** p columns of n rows in one space, best at most 5 scores; NaN = missing. */
  columns: readonly Float64Array[];
  /** Least rows of a group, >= 2; default the larger of 25 and 1 % of the complete rows. */
  minClusterSize?: number | undefined;
  /** Rows, itself included, within the core distance of a row; default `minClusterSize`. */
  minSamples?: number | undefined;
  /** Complete rows at most, default 20,000. */
  maxRows?: number | undefined;
  /** Interval lengths (m) for the numbering of the labels. */
  weights?: ArrayLike<number> | undefined;
  onProgress?: OnProgress | undefined;
}

/** Groups that stay together over the widest range of density. */
export interface Hdbscan {
  /** 1..K by descending rows or weight; 0 = unassigned or a missing coordinate. */
  labels: Uint16Array;
  /**
   * How deep in its group a row lies: the density at which it leaves over that at which the group ends
   * or splits, [0, 1]; 0 when unassigned, NaN when missing.
   */
  strength: Float64Array;
  clusters: number;
  nNoise: number;
  minClusterSize: number;
  minSamples: number;
  nUsed: number;
  nDropped: number;
  notes: string[];
}

/**
 * Density groups without one reach for all: core distances, the spanning tree of mutual reachability,
 * its condensed tree, and the branches of greatest stability. Rows outside stay unassigned; they are
 * no domain.
 *
 * @throws {KernelError} `bad-parameter`, `too-many-rows`, `too-few-rows`, `shape`; those of `packPoints`.
 * @see Campello, Moulavi & Sander (2013), PAKDD, Density-based clustering based on hierarchical
 *   density estimates (from memory).
 */
export function hdbscan(input: HdbscanInput): Hdbscan {
  const { columns, maxRows = MAX_DENSITY_ROWS, onProgress } = input;
  const { points, n, p, rowOf, nDropped } = packPoints(columns);
  requireDensityRows(n, maxRows);
  const { minClusterSize = Math.max(25, Math.ceil(n / 100)) } = input;
  const { minSamples = minClusterSize } = input;
  for (const [name, value, least] of [
    ['minClusterSize', minClusterSize, 2],
    ['minSamples', minSamples, 1],
  ] as const) {
    if (value >= least && Math.floor(value) === value) continue;
    throw new KernelError(
      'bad-parameter',
      `expected ${name} a whole number >= ${least}, found ${value}`,
    );
  }
  const core = coreDistances(points, n, p, minSamples, (share) => onProgress?.(share / 2));
  const edges = reachabilityTree(points, p, core, (share) => onProgress?.(0.5 + share / 2));
  const condensed = condenseTree({ ...treeOfJoins(edges, n), n }, minClusterSize);
  const pickedOf = pickBranches(condensed.branches);
  const groupOf = condensed.branchOf.map((branch) => pickedOf[branch]!);
  const nRows = columns[0]?.length ?? 0;
  const labels = numberGroups(groupOf, { rowOf, nRows }, input.weights);
  const clusters = labels.reduce((most, label) => Math.max(most, label), 0);
  const notes =
    nDropped > 0 ? [`${nDropped} rows with a missing coordinate were left out (label 0)`] : [];
  if (clusters === 0)
    notes.push(
      `no part of the rows stands apart with ${minClusterSize} rows or more: all are unassigned`,
    );
  return {
    labels,
    strength: strengths(condensed, groupOf, rowOf, nRows),
    clusters,
    nNoise: groupOf.reduce((count, group) => count + (group < 0 ? 1 : 0), 0),
    minClusterSize,
    minSamples,
    nUsed: n,
    nDropped,
    notes,
  };
}

/** Density at which a row leaves over that at which its group ends or splits, at most 1. */
function strengths(
  { branches, leftAt }: CondensedTree,
  groupOf: Int32Array,
  rowOf: Uint32Array | null,
  nRows: number,
): Float64Array {
  const out = new Float64Array(nRows).fill(NaN);
  groupOf.forEach((group, i) => {
    const strength = group < 0 ? 0 : Math.min(1, leftAt[i]! / branches[group]!.death);
    out[rowOf ? rowOf[i]! : i] = strength;
  });
  return out;
}
