import { KernelError } from '#kernels/kernel-error.ts';

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
 * their leaves join first; ties go to the first pair. Own code: trees of tens of codes need no package.
 *
 * @param distances Row-major (n, n), symmetric, finite, >= 0. Not modified.
 * @returns n - 1 joins, heights never falling.
 * @throws {KernelError} `shape`; `bad-parameter` with { row, col } at a distance that is none or differs
 *   from its mirror image.
 * @see Sokal & Michener (1958), University of Kansas Science Bulletin 38 (from memory).
 */
export function averageLinkage(distances: Float64Array, n: number): TreeJoin[] {
  requireDistances(distances, n);
  const gap = distances.slice();
  const branch = Array.from({ length: n }, (_, i) => ({ id: i, size: 1 }));
  const open = new Set(branch.keys());
  const joins: TreeJoin[] = [];
  while (open.size > 1) {
    const { i, j, height } = nearestPair(gap, n, [...open]);
    const [first, second] = [branch[i]!, branch[j]!];
    const size = first.size + second.size;
    for (const k of open) {
      const mean = (first.size * gap[i * n + k]! + second.size * gap[j * n + k]!) / size;
      gap[i * n + k] = gap[k * n + i] = mean;
    }
    open.delete(j);
    const [a, b] = first.id < second.id ? [first.id, second.id] : [second.id, first.id];
    branch[i] = { id: n + joins.length, size };
    joins.push({ a, b, height, size });
  }
  return joins;
}

function nearestPair(gap: Float64Array, n: number, open: readonly number[]) {
  let best = { i: -1, j: -1, height: Infinity };
  for (const [at, i] of open.entries()) {
    for (const j of open.slice(at + 1)) {
      if (gap[i * n + j]! < best.height) best = { i, j, height: gap[i * n + j]! };
    }
  }
  return best;
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
