import { KernelError } from '#kernels/kernel-error.ts';
import type { HierarchicalTree } from './hierarchical.ts';
import { numberGroups } from './number-groups.ts';

/**
 * Cuts a merge tree into k groups by leaving out its last k - 1 merges.
 *
 * @param weights Optional weight per input row (interval lengths, m) for the numbering.
 * @returns 1..k per input row by descending rows or weight (ties: first occurrence); 0 where a
 *   coordinate was missing.
 * @throws {KernelError} `bad-parameter` unless k is a whole number from 1 to n and at most 65,534;
 *   `shape` for the weights.
 */
export function cutTree(
  tree: HierarchicalTree,
  k: number,
  weights?: ArrayLike<number>,
): Uint16Array {
  const { merges, n } = tree;
  const most = Math.min(n, 65_534);
  if (!(k >= 1 && k <= most && Math.floor(k) === k))
    throw new KernelError(
      'bad-parameter',
      `expected k a whole number from 1 to ${most}, found ${k}`,
      { k },
    );
  const kept = n - k;
  const groupOf = new Int32Array(n + kept);
  // From the last kept merge down: a part belongs where the whole does.
  for (let node = n + kept - 1; node >= 0; node--) groupOf[node] = node;
  for (let m = kept - 1; m >= 0; m--) {
    groupOf[merges[2 * m]!] = groupOf[n + m]!;
    groupOf[merges[2 * m + 1]!] = groupOf[n + m]!;
  }
  return numberGroups(groupOf.subarray(0, n), tree, weights);
}
