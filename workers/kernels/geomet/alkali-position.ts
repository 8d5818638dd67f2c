import { KernelError } from '#kernels/kernel-error.ts';
import { nodeOf, type AlkaliPoint } from './molar-ratios.ts';

/** Where a point lies among three minerals of the alkali-alumina diagram. */
export interface AlkaliPosition {
  /** Barycentric weights of the three nodes, 0..1, sum 1. */
  weights: readonly [number, number, number];
  /** Distance outside the triangle in the diagram's units; 0 inside. */
  distance: number;
}

/** Three minerals that span a triangle, by name. */
export type AlkaliTriangle = readonly [string, string, string];

/** Feldspar altered to white mica; and white mica and albite altered to chlorite. */
export const ALKALI_TRIANGLES: Readonly<Record<string, AlkaliTriangle>> = {
  feldspathic: ['K-feldspar', 'muscovite', 'albite'],
  chloritic: ['muscovite', 'albite', 'clinochlore'],
};

/**
 * Barycentric weights of a point in a triangle of mineral nodes; a point outside is taken to the
 * nearest edge and its distance kept.
 *
 * @throws {KernelError} `bad-parameter` at a point that is not finite or nodes in one line.
 */
export function alkaliPosition(point: AlkaliPoint, minerals: AlkaliTriangle): AlkaliPosition {
  const p = { x: point.naOverAl, y: point.kOverAl };
  if (!Number.isFinite(p.x + p.y)) {
    throw new KernelError('bad-parameter', `expected molar ratios, found ${p.x}, ${p.y}`);
  }
  const at = (mineral: string): Point => {
    const { naOverAl, kOverAl } = nodeOf(mineral);
    return { x: naOverAl, y: kOverAl };
  };
  const corners = [at(minerals[0]), at(minerals[1]), at(minerals[2])] as const;
  const [a, b, c] = corners;
  const whole = area(a, b, c);
  if (Math.abs(whole) < 1e-12) {
    const message = `expected three minerals that span a triangle, found ${minerals.join(', ')}`;
    throw new KernelError('bad-parameter', message);
  }
  const inside = [area(p, b, c) / whole, area(a, p, c) / whole, area(a, b, p) / whole] as const;
  if (inside.every((weight) => weight >= -1e-12)) return { weights: cleaned(inside), distance: 0 };
  const edges = ([0, 1, 2] as const).map((k) => nearestOnEdge(p, corners, k));
  return edges.reduce((best, edge) => (edge.distance < best.distance ? edge : best));
}

interface Point {
  x: number;
  y: number;
}

/** Twice the signed area of a triangle. */
const area = (a: Point, b: Point, c: Point): number =>
  (b.x - a.x) * (c.y - a.y) - (c.x - a.x) * (b.y - a.y);

function cleaned(weights: readonly [number, number, number]): [number, number, number] {
  const [a, b, c] = [Math.max(0, weights[0]), Math.max(0, weights[1]), Math.max(0, weights[2])];
  const sum = a + b + c;
  return [a / sum, b / sum, c / sum];
}

/** Nearest point of the edge from corner k to the next. */
function nearestOnEdge(
  p: Point,
  corners: readonly [Point, Point, Point],
  k: 0 | 1 | 2,
): AlkaliPosition {
  const next = (k + 1) % 3;
  const [from, to] = [corners[k], corners[next]!];
  const [dx, dy] = [to.x - from.x, to.y - from.y];
  const along = ((p.x - from.x) * dx + (p.y - from.y) * dy) / (dx * dx + dy * dy);
  const share = Math.min(1, Math.max(0, along));
  const weightOf = (corner: number) => (corner === k ? 1 - share : corner === next ? share : 0);
  return {
    weights: [weightOf(0), weightOf(1), weightOf(2)],
    distance: Math.hypot(from.x + share * dx - p.x, from.y + share * dy - p.y),
  };
}
