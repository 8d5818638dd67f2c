import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { KernelError } from '#kernels/kernel-error.ts';
import { combine, dot, type Vector } from './directions.ts';
import type { TriangleFeature } from './nearest-on-triangle.ts';
import { areaVector, cornersOf, minus, vertexAt } from './triangle-vectors.ts';
import { triangleTree } from './triangle-tree.ts';
import type { TriangulatedSurface } from './triangulated-surface.ts';

/** Signed distances of points to a surface (m). */
export interface SurfaceDistances {
  /** Positive on the + side of the surface; NaN for a point without position. */
  distancesM: Float64Array;
  /** 1 where the nearest place is the edge of an open surface: there it is extended as a plane. */
  isBeyondEdge: Uint8Array;
}

/**
 * Signed distance of points to a triangulated surface: the distance to its nearest place, with the
 * sign of the angle-weighted normal there. Beyond the edge of an open surface it is the distance to a
 * plane through the nearest place of the edge, parallel to the best-fit plane of the surface.
 *
 * @param points Row-major (n, 3), east, north, up in metres; a row with a NaN gives NaN.
 * @throws {KernelError} `shape`; `bad-parameter` with { row } at an infinite coordinate.
 * @see Baerentzen & Aanaes (2005), IEEE Trans. Visualization and Computer Graphics 11, 243-253 (from
 *   memory).
 */
export function distancesToSurface(
  points: Float64Array,
  surface: TriangulatedSurface,
  onProgress?: (share: number) => void,
): SurfaceDistances {
  if (points.length % 3 !== 0) {
    throw new KernelError('shape', `${points.length} numbers do not fill rows of 3`);
  }
  const n = points.length / 3;
  const tree = triangleTree(surface.vertices, surface.triangles);
  const normals = featureNormals(surface);
  const fit = surface.isClosed ? null : bestFitNormal(surface);
  const out = { distancesM: new Float64Array(n).fill(NaN), isBeyondEdge: new Uint8Array(n) };
  for (let row = 0; row < n; row++) {
    const p = vertexAt(points, row);
    if (p.some((value) => Math.abs(value) === Infinity)) {
      const message = `expected a position, found ${p.join(', ')} in row ${row}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    if (p.some(Number.isNaN)) continue;
    const { point, triangle, feature, distanceM } = tree.nearest(p);
    const step = minus(p, point);
    if (fit && normals.isAtEdge(triangle, feature)) {
      out.isBeyondEdge[row] = 1;
      out.distancesM[row] = dot(fit, step);
    } else {
      const side = dot(normals.at(triangle, feature), step);
      out.distancesM[row] = side < 0 ? -distanceM : distanceM;
    }
    if (row % 1000 === 999) onProgress?.((row + 1) / n);
  }
  return out;
}

const normalAt = (surface: TriangulatedSurface, t: number): Vector => vertexAt(surface.normals, t);

/** Normals of triangles, edges and vertices, and which of them lie at the edge of the surface. */
function featureNormals(surface: TriangulatedSurface) {
  const { vertices, triangles, neighbours } = surface;
  const ofVertices = new Float64Array(vertices.length);
  const atEdge = new Uint8Array(vertices.length / 3);
  for (let t = 0; t < triangles.length / 3; t++) {
    const corners = cornersOf(triangles, t);
    corners.forEach((vertex, k) => {
      const next = corners[(k + 1) % 3]!;
      if (neighbours[3 * t + k] === -1) atEdge[vertex] = atEdge[next] = 1;
      const angle = angleAt(vertices, vertex, next, corners[(k + 2) % 3]!);
      normalAt(surface, t).forEach((value, axis) => {
        ofVertices[3 * vertex + axis]! += angle * value;
      });
    });
  }
  return {
    isAtEdge: (t: number, feature: TriangleFeature): boolean => {
      if (feature.kind === 'inside') return false;
      if (feature.kind === 'edge') return neighbours[3 * t + feature.k] === -1;
      return atEdge[triangles[3 * t + feature.k]!] === 1;
    },
    at: (t: number, feature: TriangleFeature): Vector => {
      if (feature.kind === 'inside') return normalAt(surface, t);
      if (feature.kind === 'corner') return vertexAt(ofVertices, triangles[3 * t + feature.k]!);
      const other = neighbours[3 * t + feature.k]!;
      return combine(1, normalAt(surface, t), 1, normalAt(surface, other));
    },
  };
}

function angleAt(vertices: Float64Array, at: number, b: number, c: number): number {
  const origin = vertexAt(vertices, at);
  const [u, v] = [minus(vertexAt(vertices, b), origin), minus(vertexAt(vertices, c), origin)];
  const twiceArea = Math.hypot(...areaVector(vertices, [at, b, c]));
  return Math.atan2(twiceArea, dot(u, v));
}

/**
 * Normal of the plane that fits a surface best by least squares over its area, on its + side: the
 * axis of least spread of the triangles' second moments.
 */
export function bestFitNormal({ vertices, triangles }: TriangulatedSurface): Vector {
  const origin = vertexAt(vertices, triangles[0]!);
  const sums = Matrix.zeros(3, 3);
  const mean = [0, 0, 0];
  const faces = [0, 0, 0];
  let area = 0;
  for (let t = 0; t < triangles.length / 3; t++) {
    const corners = cornersOf(triangles, t);
    const across = areaVector(vertices, corners);
    const weight = Math.hypot(...across);
    area += weight;
    const local = corners.map((vertex) => minus(vertexAt(vertices, vertex), origin));
    const middle = [0, 1, 2].map((k) => local.reduce((sum, v) => sum + v[k]!, 0) / 3);
    for (const i of [0, 1, 2]) {
      mean[i]! += weight * middle[i]!;
      faces[i]! += across[i]!;
      for (const j of [0, 1, 2]) {
        // exact for a triangle: (9 m m' + sum of v v') / 12
        const square = local.reduce((sum, v) => sum + v[i]! * v[j]!, 9 * middle[i]! * middle[j]!);
        sums.set(i, j, sums.get(i, j) + (weight * square) / 12);
      }
    }
  }
  for (const i of [0, 1, 2]) {
    for (const j of [0, 1, 2])
      sums.set(i, j, sums.get(i, j) / area - (mean[i]! * mean[j]!) / area ** 2);
  }
  const solved = new EigenvalueDecomposition(sums, { assumeSymmetric: true });
  const least = solved.realEigenvalues.indexOf(Math.min(...solved.realEigenvalues));
  const axis = solved.eigenvectorMatrix.getColumn(least);
  const [x = 0, y = 0, z = 0] = axis;
  const side = x * faces[0]! + y * faces[1]! + z * faces[2]!;
  return side < 0 ? [-x, -y, -z] : [x, y, z];
}
