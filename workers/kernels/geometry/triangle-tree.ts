import type { Vector } from './directions.ts';
import { nearestOnTriangle, type NearestPoint } from './nearest-on-triangle.ts';
import { cornersOf, vertexAt } from './triangle-vectors.ts';

/** The nearest triangle to a point. */
export interface NearestTriangle extends NearestPoint {
  triangle: number;
  distanceM: number;
}

/** Finds the nearest triangle without looking at all of them. */
export interface TriangleTree {
  nearest: (p: Vector) => NearestTriangle;
}

/** A box about some triangles: two halves, or the triangles themselves. */
interface Box {
  low: Vector;
  high: Vector;
  content: { halves: [Box, Box] } | { triangles: number[] };
}

const LEAF = 4;

/**
 * Builds a tree of boxes over triangles, halved along their longest side. O(m log m) to build, about
 * O(log m) a query.
 *
 * @param vertices Row-major (n, 3).  @param triangles Vertex numbers, row-major (m, 3), m >= 1.
 */
export function triangleTree(vertices: Float64Array, triangles: Int32Array): TriangleTree {
  const middles = new Float64Array(triangles.length);
  for (let t = 0; t < triangles.length / 3; t++) {
    const corners = cornersOf(triangles, t).map((vertex) => vertexAt(vertices, vertex));
    for (let k = 0; k < 3; k++) {
      middles[3 * t + k] = corners.reduce((sum, corner) => sum + corner[k]!, 0) / 3;
    }
  }
  const all = Array.from({ length: triangles.length / 3 }, (_, t) => t);
  const root = boxOf(vertices, triangles, middles, all);
  return { nearest: (p) => nearestIn(root, vertices, triangles, p) };
}

function boxOf(
  vertices: Float64Array,
  triangles: Int32Array,
  middles: Float64Array,
  members: number[],
): Box {
  const low: [number, number, number] = [Infinity, Infinity, Infinity];
  const high: [number, number, number] = [-Infinity, -Infinity, -Infinity];
  for (const t of members) {
    for (const vertex of cornersOf(triangles, t)) {
      for (const k of [0, 1, 2] as const) {
        low[k] = Math.min(low[k], vertices[3 * vertex + k]!);
        high[k] = Math.max(high[k], vertices[3 * vertex + k]!);
      }
    }
  }
  if (members.length <= LEAF) return { low, high, content: { triangles: members } };
  const sides = [0, 1, 2].map((k) => high[k]! - low[k]!);
  const axis = sides.indexOf(Math.max(...sides));
  const sorted = [...members].sort(
    (a, b) => middles[3 * a + axis]! - middles[3 * b + axis]! || a - b,
  );
  const half = sorted.length >>> 1;
  const halves: [Box, Box] = [
    boxOf(vertices, triangles, middles, sorted.slice(0, half)),
    boxOf(vertices, triangles, middles, sorted.slice(half)),
  ];
  return { low, high, content: { halves } };
}

function squaredToBox({ low, high }: Box, p: Vector): number {
  let sum = 0;
  for (const k of [0, 1, 2] as const) {
    const outside = Math.max(low[k] - p[k], 0, p[k] - high[k]);
    sum += outside * outside;
  }
  return sum;
}

function nearestIn(
  root: Box,
  vertices: Float64Array,
  triangles: Int32Array,
  p: Vector,
): NearestTriangle {
  const stack = [{ box: root, squared: squaredToBox(root, p) }];
  let best: NearestTriangle | null = null;
  let least = Infinity;
  for (let next = stack.pop(); next !== undefined; next = stack.pop()) {
    if (next.squared > least) continue;
    const { content } = next.box;
    if ('halves' in content) {
      const ranked = content.halves.map((box) => ({ box, squared: squaredToBox(box, p) }));
      stack.push(...ranked.sort((a, b) => b.squared - a.squared));
      continue;
    }
    for (const triangle of content.triangles) {
      const [a, b, c] = cornersOf(triangles, triangle);
      const found = nearestOnTriangle(p, [
        vertexAt(vertices, a),
        vertexAt(vertices, b),
        vertexAt(vertices, c),
      ]);
      const squared = [0, 1, 2].reduce((sum, k) => sum + (p[k]! - found.point[k]!) ** 2, 0);
      // the lower number wins a tie, so that the order of the tree does not show
      if (squared < least || (squared === least && triangle < (best?.triangle ?? Infinity))) {
        least = squared;
        best = { ...found, triangle, distanceM: Math.sqrt(squared) };
      }
    }
  }
  return best ?? { point: p, feature: { kind: 'inside' }, triangle: -1, distanceM: NaN };
}
