import { combine, dot, requireVector, type Vector } from './directions.ts';
import { minus } from './triangle-vectors.ts';

/** Part of a triangle nearest to a point: a corner, an edge (k from corner k to the next), or inside. */
export type TriangleFeature = { kind: 'corner' | 'edge'; k: 0 | 1 | 2 } | { kind: 'inside' };

export interface NearestPoint {
  point: Vector;
  feature: TriangleFeature;
}

/**
 * Nearest point of a triangle by the regions of its corners, edges and inside.
 *
 * @param p Finite.
 * @param corners Finite, not in one line.
 * @throws {KernelError} `not-finite` at the point.
 * @see Ericson (2005), Real-Time Collision Detection, Morgan Kaufmann, section 5.1.5 (from memory).
 */
export function nearestOnTriangle(
  p: Vector,
  [a, b, c]: readonly [Vector, Vector, Vector],
): NearestPoint {
  requireVector(p);
  const [ab, ac] = [minus(b, a), minus(c, a)];
  const fromA = minus(p, a);
  const [d1, d2] = [dot(ab, fromA), dot(ac, fromA)];
  if (d1 <= 0 && d2 <= 0) return { point: a, feature: { kind: 'corner', k: 0 } };
  const fromB = minus(p, b);
  const [d3, d4] = [dot(ab, fromB), dot(ac, fromB)];
  if (d3 >= 0 && d4 <= d3) return { point: b, feature: { kind: 'corner', k: 1 } };
  const vc = d1 * d4 - d3 * d2;
  if (vc <= 0 && d1 >= 0 && d3 <= 0) return onEdge(a, ab, d1 / (d1 - d3), 0);
  const fromC = minus(p, c);
  const [d5, d6] = [dot(ab, fromC), dot(ac, fromC)];
  if (d6 >= 0 && d5 <= d6) return { point: c, feature: { kind: 'corner', k: 2 } };
  const vb = d5 * d2 - d1 * d6;
  if (vb <= 0 && d2 >= 0 && d6 <= 0) return onEdge(a, ac, d2 / (d2 - d6), 2);
  const va = d3 * d6 - d5 * d4;
  if (va <= 0 && d4 >= d3 && d5 >= d6) {
    return onEdge(b, minus(c, b), (d4 - d3) / (d4 - d3 + (d5 - d6)), 1);
  }
  const total = va + vb + vc;
  const inside = combine(vb / total, ab, vc / total, ac);
  return { point: combine(1, a, 1, inside), feature: { kind: 'inside' } };
}

function onEdge(from: Vector, along: Vector, share: number, k: 0 | 1 | 2): NearestPoint {
  return { point: combine(1, from, share, along), feature: { kind: 'edge', k } };
}
