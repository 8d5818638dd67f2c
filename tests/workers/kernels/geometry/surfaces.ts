import { prepareSurface } from '#kernels/geometry/triangulated-surface.ts';

/** Eight corners and twelve triangles of a unit cube, wound without care. */
export const cube = {
  vertices: Float64Array.from(
    [0, 1, 2, 3, 4, 5, 6, 7].flatMap((i) => [i & 1, (i >> 1) & 1, (i >> 2) & 1]),
  ),
  triangles: Int32Array.from(
    [
      [0, 1, 3],
      [0, 2, 3],
      [4, 5, 7],
      [4, 7, 6],
      [0, 1, 5],
      [0, 5, 4],
      [2, 3, 7],
      [2, 6, 7],
      [0, 2, 6],
      [0, 6, 4],
      [1, 3, 7],
      [1, 5, 7],
    ].flat(),
  ),
};

/** A sheet z = height(x, y) over a grid of `size` cells of 10 m from (0, 0). */
export function sheet(size: number, height: (x: number, y: number) => number) {
  const vertices: number[] = [];
  const triangles: number[] = [];
  for (let j = 0; j <= size; j++) {
    for (let i = 0; i <= size; i++) vertices.push(10 * i, 10 * j, height(10 * i, 10 * j));
  }
  for (let j = 0; j < size; j++) {
    for (let i = 0; i < size; i++) {
      const a = j * (size + 1) + i;
      const above = a + size + 1;
      triangles.push(a, a + 1, above + 1, a, above, above + 1);
    }
  }
  return prepareSurface(Float64Array.from(vertices), Int32Array.from(triangles));
}
