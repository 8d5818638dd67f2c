import { KernelError } from '#kernels/kernel-error.ts';

/** Vertices with near ones joined. */
export interface WeldedVertices {
  /** Row-major (nKept, 3). */
  vertices: Float64Array;
  /** New number of each old vertex. */
  indexOf: Int32Array;
}

/**
 * Joins each vertex to the first one within a distance, by a hash of cells of that size: a vertex
 * near another lies in the same cell or one next to it. O(n).
 *
 * @param vertices Row-major (n, 3), finite. Not modified.
 * @param distanceM > 0.
 * @throws {KernelError} `not-finite` with { row }; `bad-parameter`.
 */
export function weldVertices(vertices: Float64Array, distanceM: number): WeldedVertices {
  const bad = vertices.findIndex((value) => !Number.isFinite(value));
  if (bad >= 0) {
    const row = Math.floor(bad / 3);
    const message = `expected a position, found ${vertices[bad]} at vertex ${row}`;
    throw new KernelError('not-finite', message, { row });
  }
  if (!(distanceM > 0))
    throw new KernelError('bad-parameter', `expected a distance > 0 m, found ${distanceM}`);
  const n = vertices.length / 3;
  const cells = new Map<string, number[]>();
  const kept: number[] = [];
  const indexOf = new Int32Array(n);
  for (let vertex = 0; vertex < n; vertex++) {
    const position = [0, 1, 2].map((k) => vertices[3 * vertex + k]!);
    const near = nearVertex(cells, kept, position, distanceM);
    if (near >= 0) {
      indexOf[vertex] = near;
      continue;
    }
    indexOf[vertex] = kept.length / 3;
    const key = cellOf(position, distanceM, [0, 0, 0]);
    cells.set(key, [...(cells.get(key) ?? []), kept.length / 3]);
    kept.push(...position);
  }
  return { vertices: Float64Array.from(kept), indexOf };
}

const STEPS = [-1, 0, 1];

function cellOf(position: readonly number[], size: number, step: readonly number[]): string {
  return position.map((value, k) => Math.floor(value / size) + step[k]!).join(' ');
}

function nearVertex(
  cells: ReadonlyMap<string, number[]>,
  kept: readonly number[],
  position: readonly number[],
  distanceM: number,
): number {
  for (const x of STEPS) {
    for (const y of STEPS) {
      for (const z of STEPS) {
        for (const vertex of cells.get(cellOf(position, distanceM, [x, y, z])) ?? []) {
          const step = position.map((value, k) => value - kept[3 * vertex + k]!);
          if (Math.hypot(...step) <= distanceM) return vertex;
        }
      }
    }
  }
  return -1;
}
