import { KernelError } from '#kernels/kernel-error.ts';
import { joinByChain, treeOfJoins } from './hierarchical.ts';

/** Two branches joined. Leaves are 0..n-1; the join at place i of the list is branch n + i. */
export interface TreeJoin {
  a: number;
  b: number;
  height: number;
  /** Leaves below. */
  size: number;
}

/**
 * Tree of a distance matrix by average linkage: the two branches with the least mean distance between
 * their leaves join first; equal distances are settled in the same way each time. The chain is that of
 * `hierarchicalTree`, on distances that are given.
 *
 * @param distances Row-major (n, n), symmetric, finite, >= 0. Not modified.
 * @returns n - 1 joins, heights never falling.
 * @throws {KernelError} `shape`; `bad-parameter` with { row, col } at a distance that is none or differs
 *   from its mirror image.
 * @see Sokal & Michener (1958), University of Kansas Science Bulletin 38 (from memory).
 */
export function averageLinkage(distances: Float64Array, n: number): TreeJoin[] {
  requireDistances(distances, n);
  const condensed = new Float64Array((n * (n - 1)) / 2);
  for (let row = 0, at = 0; row < n; row++)
    for (let col = row + 1; col < n; col++) condensed[at++] = distances[row * n + col]!;
  const found = joinByChain(condensed, new Float64Array(n).fill(1), 'average');
  const { merges, heights } = treeOfJoins(found, n);
  const sizes = new Float64Array(2 * n).fill(1);
  return Array.from(heights, (height, join) => {
    const [a, b] = [merges[2 * join]!, merges[2 * join + 1]!];
    const size = sizes[a]! + sizes[b]!;
    sizes[n + join] = size;
    return { a, b, height, size };
  });
}

function requireDistances(distances: Float64Array, n: number): void {
  if (!(Number.isInteger(n) && n >= 0) || distances.length !== n * n)
    throw new KernelError('shape', `expected ${n} x ${n} distances, found ${distances.length}`);
  distances.forEach((distance, at) => {
    const [row, col] = [Math.floor(at / n), at % n];
    const mirror = distances[col * n + row]!;
    if (distance >= 0 && distance < Infinity && Math.abs(distance - mirror) <= 1e-9 * distance)
      return;
    const found = `found ${distance} and ${mirror} between ${row} and ${col}`;
    throw new KernelError('bad-parameter', `expected a distance >= 0, ${found}`, { row, col });
  });
}

/** Leaves in the order the tree lays them, first branch first. */
export function leafOrder(joins: readonly TreeJoin[], n: number): number[] {
  const leaves = (id: number): number[] => {
    const join = joins[id - n];
    return id < n || !join ? [id] : [...leaves(join.a), ...leaves(join.b)];
  };
  const below = new Set(joins.flatMap(({ a, b }) => [a, b]));
  const roots = [...Array(n + joins.length).keys()].filter((id) => !below.has(id));
  return roots.flatMap(leaves);
}
