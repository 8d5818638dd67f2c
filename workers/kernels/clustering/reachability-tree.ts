import { KernelError } from '#kernels/kernel-error.ts';
import type { Join } from './hierarchical.ts';
import type { OnProgress } from '#kernels/progress.ts';

/**
 * Distance of each row to its `minSamples`-th nearest row, itself counted as the first.
 *
 * @param points Row-major, shape (n, p).
 * @throws {KernelError} `too-few-rows` with { n, minSamples } when there are fewer rows than that.
 */
export function coreDistances(
  points: Float64Array,
  n: number,
  p: number,
  minSamples: number,
  onProgress?: OnProgress,
): Float64Array {
  if (n < minSamples) {
    const message = `expected at least ${minSamples} complete rows (minSamples), found ${n}`;
    throw new KernelError('too-few-rows', message, { n, minSamples });
  }
  const out = new Float64Array(n);
  const nearest = new Float64Array(minSamples);
  for (let a = 0; a < n; a++) {
    if ((a & 255) === 0) onProgress?.(a / n);
    nearest.fill(Infinity);
    for (let b = 0; b < n; b++) insert(nearest, squares(points, a, b, p));
    out[a] = Math.sqrt(nearest[minSamples - 1]!);
  }
  return out;
}

/** Puts a value in its place among the least ones, ascending. */
function insert(least: Float64Array, value: number): void {
  let at = least.length - 1;
  if (value >= least[at]!) return;
  for (; at > 0 && least[at - 1]! > value; at--) least[at] = least[at - 1]!;
  least[at] = value;
}

function squares(points: Float64Array, a: number, b: number, p: number): number {
  let sum = 0;
  for (let j = 0, i = a * p, k = b * p; j < p; j++) {
    const d = points[i++]! - points[k++]!;
    sum += d * d;
  }
  return sum;
}

/**
 * Minimum spanning tree of the mutual reachability max(core_a, core_b, distance), by Prim's algorithm
 * without storing distances: O(n²) time, O(n) memory.
 *
 * @param core Core distance per row.
 * @returns n - 1 edges in the order found.
 */
export function reachabilityTree(
  points: Float64Array,
  p: number,
  core: Float64Array,
  onProgress?: OnProgress,
): Join[] {
  const n = core.length;
  const least = new Float64Array(n).fill(Infinity);
  const from = new Int32Array(n);
  const inTree = new Uint8Array(n);
  const edges: Join[] = [];
  for (let current = 0; edges.length < n - 1;) {
    if ((edges.length & 255) === 0) onProgress?.(edges.length / n);
    inTree[current] = 1;
    let next = -1;
    for (let other = 0; other < n; other++) {
      if (inTree[other]) continue;
      const distance = Math.sqrt(squares(points, current, other, p));
      const reach = Math.max(distance, core[current]!, core[other]!);
      if (reach < least[other]!) {
        least[other] = reach;
        from[other] = current;
      }
      if (next < 0 || least[other]! < least[next]!) next = other;
    }
    edges.push({ a: from[next]!, b: next, height: least[next]! });
    current = next;
  }
  return edges;
}
