/** A merge tree of n rows: two parts per merge, heights ascending. */
export interface MergeTree {
  merges: Int32Array;
  heights: Float64Array;
  n: number;
}

/** One branch of the condensed tree: a group that lives over a range of density. */
export interface DenseBranch {
  /** Branch it split from; -1 for the root. */
  parent: number;
  /** Density 1/distance at which it appears. */
  birth: number;
  rows: number;
  /** Σ over its rows of (density at which the row leaves - birth). */
  stability: number;
  /** Density at which its last row leaves or it splits. */
  death: number;
}

/** The tree with splits smaller than a least size read as rows falling out of the group. */
export interface CondensedTree {
  /** The root first; parents before their parts. */
  branches: DenseBranch[];
  /** Branch each row was in last, and the density at which it left. */
  branchOf: Int32Array;
  leftAt: Float64Array;
}

/** Density of rows at one place: 1 / 1e-12. */
const LARGEST_DENSITY = 1e12;

/**
 * Condenses a merge tree: going down, a merge whose two parts both hold `minClusterSize` rows splits
 * the branch; a smaller part falls out of it.
 *
 * @see Campello, Moulavi & Sander (2013), PAKDD (from memory).
 */
export function condenseTree(tree: MergeTree, minClusterSize: number): CondensedTree {
  const { merges, heights, n } = tree;
  const size = sizes(tree);
  const branches: DenseBranch[] = [{ parent: -1, birth: 0, rows: n, stability: 0, death: 0 }];
  const branchOf = new Int32Array(n);
  const leftAt = new Float64Array(n);
  const leave = (node: number, branch: number, density: number): void => {
    const home = branches[branch]!;
    for (const open = [node]; open.length > 0;) {
      const part = open.pop()!;
      if (part >= n) {
        open.push(merges[2 * (part - n)]!, merges[2 * (part - n) + 1]!);
        continue;
      }
      branchOf[part] = branch;
      leftAt[part] = density;
      home.stability += density - home.birth;
      home.death = Math.max(home.death, density);
    }
  };
  for (const open = [{ node: 2 * n - 2, branch: 0 }]; open.length > 0;) {
    const { node, branch } = open.pop()!;
    if (node < n) continue; // a tree of one row
    const parts = [merges[2 * (node - n)]!, merges[2 * (node - n) + 1]!];
    const density = Math.min(LARGEST_DENSITY, 1 / heights[node - n]!);
    const large = parts.filter((part) => size[part]! >= minClusterSize);
    for (const part of parts) if (size[part]! < minClusterSize) leave(part, branch, density);
    if (large.length === 1) open.push({ node: large[0]!, branch });
    if (large.length < 2) continue;
    const home = branches[branch]!;
    home.death = Math.max(home.death, density);
    for (const part of large) {
      home.stability += size[part]! * (density - home.birth);
      const next = {
        parent: branch,
        birth: density,
        rows: size[part]!,
        stability: 0,
        death: density,
      };
      open.push({ node: part, branch: branches.push(next) - 1 });
    }
  }
  return { branches, branchOf, leftAt };
}

/** Rows under each node of a merge tree. */
function sizes({ merges, n }: MergeTree): Float64Array {
  const size = new Float64Array(2 * n - 1).fill(1, 0, n);
  for (let m = 0; m < n - 1; m++) size[n + m] = size[merges[2 * m]!]! + size[merges[2 * m + 1]!]!;
  return size;
}

/**
 * Branches of greatest total stability, no two on one line of descent: bottom up, the parts replace
 * the whole only when their sum is greater. The root is never picked.
 *
 * @returns For each branch the picked branch it lies in, or -1.
 */
export function pickBranches(branches: readonly DenseBranch[]): Int32Array {
  const best = Float64Array.from(branches, () => 0);
  const isPicked = new Uint8Array(branches.length);
  const fromParts = new Float64Array(branches.length);
  for (let b = branches.length - 1; b > 0; b--) {
    const { parent, stability } = branches[b]!;
    isPicked[b] = fromParts[b]! > stability ? 0 : 1;
    best[b] = Math.max(stability, fromParts[b]!);
    fromParts[parent]! += best[b]!;
  }
  const pickedOf = new Int32Array(branches.length).fill(-1);
  for (let b = 1; b < branches.length; b++) {
    const above = pickedOf[branches[b]!.parent]!;
    pickedOf[b] = above >= 0 ? above : isPicked[b] ? b : -1;
  }
  return pickedOf;
}
