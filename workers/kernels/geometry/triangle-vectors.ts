import type { Vector } from './directions.ts';

/** Position of a vertex in a row-major (n, 3) array. */
export function vertexAt(vertices: Float64Array, vertex: number): Vector {
  return [vertices[3 * vertex]!, vertices[3 * vertex + 1]!, vertices[3 * vertex + 2]!];
}

/** The three corners of a triangle. */
export function cornersOf(triangles: Int32Array, t: number): [number, number, number] {
  return [triangles[3 * t]!, triangles[3 * t + 1]!, triangles[3 * t + 2]!];
}

/** a - b. */
export function minus(a: Vector, b: Vector): Vector {
  return [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
}

/** Cross product of two sides of a triangle: across it, twice its area long. */
export function areaVector(
  vertices: Float64Array,
  [a, b, c]: readonly [number, number, number],
): Vector {
  const origin = vertexAt(vertices, a);
  const [u, v] = [minus(vertexAt(vertices, b), origin), minus(vertexAt(vertices, c), origin)];
  return [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
}
