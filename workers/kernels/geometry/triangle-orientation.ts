import { KernelError } from '#kernels/kernel-error.ts';
import { upwardNormal } from './planes.ts';
import { areaVector, cornersOf } from './triangle-vectors.ts';

/** Triangles wound one way, with the neighbour across each edge. */
export interface OrientedTriangles {
  triangles: Int32Array;
  neighbours: Int32Array;
  /** Triangles wound otherwise than given. */
  turned: number;
}

/**
 * Winds the triangles of each connected part the same way, then turns the part so that it faces up
 * (open) or out (closed).
 *
 * @param triangles Vertex numbers without degenerate triangles. Not modified.
 * @throws {KernelError} `bad-parameter` with { row } at an edge of more than two triangles, or a part
 *   that cannot be wound one way.
 */
export function orientTriangles(vertices: Float64Array, triangles: Int32Array): OrientedTriangles {
  const wound = triangles.slice();
  const sharing = trianglesOfEdges(triangles);
  const isDone = new Uint8Array(triangles.length / 3);
  for (let start = 0; start < isDone.length; start++) {
    if (isDone[start] === 1) continue;
    const part = windPart(wound, sharing, start, isDone);
    if (facesBack(vertices, wound, part, sharing)) for (const t of part) turn(wound, t);
  }
  let turned = 0;
  for (let t = 0; t < isDone.length; t++) {
    if (!isSameTurn(wound, triangles, t)) turned++;
  }
  return { triangles: wound, neighbours: neighboursOf(wound, sharing), turned };
}

const edgeKey = (a: number, b: number): string => (a < b ? `${a} ${b}` : `${b} ${a}`);

const corner = (triangles: Int32Array, t: number, k: number): number => triangles[3 * t + (k % 3)]!;

function trianglesOfEdges(triangles: Int32Array): Map<string, number[]> {
  const sharing = new Map<string, number[]>();
  for (let t = 0; t < triangles.length / 3; t++) {
    for (let k = 0; k < 3; k++) {
      const key = edgeKey(corner(triangles, t, k), corner(triangles, t, k + 1));
      const list = sharing.get(key) ?? [];
      list.push(t);
      sharing.set(key, list);
      if (list.length > 2) {
        const message = `expected an edge of at most two triangles, found a third in triangle ${t}`;
        throw new KernelError('bad-parameter', message, { row: t });
      }
    }
  }
  return sharing;
}

/** Whether triangle t runs along the edge from a to b in that order. */
function runsAlong(triangles: Int32Array, t: number, a: number, b: number): boolean {
  return [0, 1, 2].some((k) => corner(triangles, t, k) === a && corner(triangles, t, k + 1) === b);
}

function turn(triangles: Int32Array, t: number): void {
  const [b, c] = [triangles[3 * t + 1]!, triangles[3 * t + 2]!];
  triangles[3 * t + 1] = c;
  triangles[3 * t + 2] = b;
}

/** Walks over the part from one triangle; two neighbours must run along their edge both ways. */
function windPart(
  wound: Int32Array,
  sharing: ReadonlyMap<string, number[]>,
  start: number,
  isDone: Uint8Array,
): number[] {
  const part = [start];
  isDone[start] = 1;
  for (let at = 0; at < part.length; at++) {
    const t = part[at]!;
    for (let k = 0; k < 3; k++) {
      const [a, b] = [corner(wound, t, k), corner(wound, t, k + 1)];
      const other = sharing.get(edgeKey(a, b))?.find((shared) => shared !== t);
      if (other === undefined) continue;
      const agrees = runsAlong(wound, other, b, a);
      if (isDone[other] === 1 && !agrees) {
        const message = `expected a surface with two sides, found one side only at triangle ${other}`;
        throw new KernelError('bad-parameter', message, { row: other });
      }
      if (isDone[other] === 1) continue;
      if (!agrees) turn(wound, other);
      isDone[other] = 1;
      part.push(other);
    }
  }
  return part;
}

function facesBack(
  vertices: Float64Array,
  wound: Int32Array,
  part: readonly number[],
  sharing: ReadonlyMap<string, number[]>,
): boolean {
  const isOpen = part.some((t) =>
    [0, 1, 2].some(
      (k) => sharing.get(edgeKey(corner(wound, t, k), corner(wound, t, k + 1)))?.length === 1,
    ),
  );
  const first = corner(wound, part[0]!, 0);
  let [east, north, up, volume] = [0, 0, 0, 0];
  for (const t of part) {
    const across = areaVector(vertices, cornersOf(wound, t));
    east += across[0];
    north += across[1];
    up += across[2];
    // from one vertex of the part, so that large coordinates do not cancel
    across.forEach((value, k) => {
      volume += value * (vertices[3 * corner(wound, t, 0) + k]! - vertices[3 * first + k]!);
    });
  }
  if (!isOpen) return volume < 0;
  if (Math.hypot(east, north, up) === 0) return false;
  const upward = upwardNormal([east, north, up]);
  return upward[0] * east + upward[1] * north + upward[2] * up < 0;
}

function neighboursOf(wound: Int32Array, sharing: ReadonlyMap<string, number[]>): Int32Array {
  return wound.map((a, i) => {
    const t = Math.floor(i / 3);
    const b = corner(wound, t, (i % 3) + 1);
    return sharing.get(edgeKey(a, b))?.find((other) => other !== t) ?? -1;
  });
}

/** Whether a triangle still runs round as it was given. */
function isSameTurn(wound: Int32Array, given: Int32Array, t: number): boolean {
  return runsAlong(wound, t, corner(given, t, 0), corner(given, t, 1));
}
