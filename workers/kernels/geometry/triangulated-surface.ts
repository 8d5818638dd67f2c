import { KernelError } from '#kernels/kernel-error.ts';
import { orientTriangles } from './triangle-orientation.ts';
import { areaVector, cornersOf, minus, vertexAt } from './triangle-vectors.ts';
import { weldVertices } from './weld-vertices.ts';

/** A surface of triangles: welded, wound one way, its edges known. */
export interface TriangulatedSurface {
  /** East, north, up (m), row-major (nVertices, 3); no two within the weld distance. */
  vertices: Float64Array;
  /** Vertex numbers, row-major (nTriangles, 3), counter-clockwise seen from the + side. */
  triangles: Int32Array;
  /** Unit normals, row-major (nTriangles, 3), pointing to the + side. */
  normals: Float64Array;
  /** Neighbour across the edge from corner k to corner k + 1; -1 at the edge of the surface. */
  neighbours: Int32Array;
  /** False for a surface with an edge: its sign is uncertain beyond it. */
  isClosed: boolean;
  areaM2: number;
  notes: string[];
}

/** Vertices closer than this are one vertex (m). */
export const WELD_M = 1e-6;

/**
 * Prepares a triangulated surface: welds vertices, drops degenerate triangles and repeats, winds
 * each connected part one way. The + side is the upper one of an open part (the sum of its area
 * vectors points up; a vertical one as planes do: east, or north where that is 0), and the outside of
 * a closed part.
 *
 * @param vertices Row-major (n, 3), east, north, up in metres. Not modified.
 * @param triangles Vertex numbers, row-major (m, 3), wound in any way. Not modified.
 * @throws {KernelError} `shape`; `too-few-rows` when no triangle is left; `not-finite` with { row } at
 *   a vertex; `bad-parameter` with { row } at a triangle that names no vertex, an edge shared by more
 *   than two triangles, or a part that cannot be wound one way (a Moebius band).
 */
export function prepareSurface(vertices: Float64Array, triangles: Int32Array): TriangulatedSurface {
  checkMesh(vertices, triangles);
  const notes: string[] = [];
  const welded = weldVertices(vertices, WELD_M);
  const merged = vertices.length / 3 - welded.vertices.length / 3;
  if (merged > 0) notes.push(`${merged} vertices lay on others and were joined to them`);
  const kept: number[] = [];
  const seen = new Set<string>();
  let [degenerate, repeated] = [0, 0];
  for (let t = 0; t < triangles.length; t += 3) {
    const corner = (k: number) => welded.indexOf[triangles[t + k]!]!;
    const corners = [corner(0), corner(1), corner(2)] as const;
    const key = [...corners].sort((a, b) => a - b).join(' ');
    if (isDegenerate(welded.vertices, corners)) degenerate++;
    else if (seen.has(key)) repeated++;
    else kept.push(...corners);
    seen.add(key);
  }
  if (degenerate > 0) notes.push(`${degenerate} triangles without area were dropped`);
  if (repeated > 0) notes.push(`${repeated} repeated triangles were dropped`);
  if (kept.length === 0) {
    throw new KernelError('too-few-rows', 'expected a triangle with an area, found none');
  }
  const oriented = orientTriangles(welded.vertices, Int32Array.from(kept));
  if (oriented.turned > 0) {
    notes.push(`${oriented.turned} triangles were wound the other way to face one side`);
  }
  const { triangles: wound, neighbours } = oriented;
  const isClosed = !neighbours.includes(-1);
  if (!isClosed) notes.push('open surface: its sides are extended beyond its edge');
  return {
    vertices: welded.vertices,
    triangles: wound,
    ...normalsOf(welded.vertices, wound),
    neighbours,
    isClosed,
    notes,
  };
}

function checkMesh(vertices: Float64Array, triangles: Int32Array): void {
  if (vertices.length % 3 !== 0 || triangles.length % 3 !== 0) {
    const found = `${vertices.length} coordinates and ${triangles.length} corners`;
    throw new KernelError('shape', `${found} do not fill rows of 3`);
  }
  vertices.forEach((value, i) => {
    if (Number.isFinite(value)) return;
    const row = Math.floor(i / 3);
    throw new KernelError('not-finite', `expected a position, found ${value} at vertex ${row}`, {
      row,
    });
  });
  const n = vertices.length / 3;
  triangles.forEach((vertex, i) => {
    if (vertex >= 0 && vertex < n) return;
    const row = Math.floor(i / 3);
    const message = `expected a vertex in 0..${n - 1}, found ${vertex} in triangle ${row}`;
    throw new KernelError('bad-parameter', message, { row });
  });
}

/** No area beside the longest side: the height is under the weld distance. */
function isDegenerate(vertices: Float64Array, corners: readonly [number, number, number]): boolean {
  const [a, b, c] = corners;
  if (a === b || b === c || c === a) return true;
  const length = (p: number, q: number) =>
    Math.hypot(...minus(vertexAt(vertices, p), vertexAt(vertices, q)));
  const longest = Math.max(length(a, b), length(b, c), length(c, a));
  return Math.hypot(...areaVector(vertices, corners)) <= longest * WELD_M;
}

function normalsOf(vertices: Float64Array, triangles: Int32Array) {
  const normals = new Float64Array(triangles.length);
  let areaM2 = 0;
  for (let t = 0; t < triangles.length / 3; t++) {
    const across = areaVector(vertices, cornersOf(triangles, t));
    const twice = Math.hypot(...across);
    areaM2 += twice / 2;
    normals.set([across[0] / twice, across[1] / twice, across[2] / twice], 3 * t);
  }
  return { normals, areaM2 };
}
