import type { DensityGrid } from './density-grid.ts';
import type { Net } from './projection.ts';

/**
 * A density grid without gaps: nodes outside the circle get the density of the line they stand for,
 * whose lower end lies on the other side. Contours drawn through it run over the rim and can be
 * clipped there, and the two halves of one at the rim meet.
 *
 * @param grid With NaN outside the circle, as `densityGrid` makes it. Not modified.
 * @param net The net it was made for.
 * @returns Row-major, size x size, no NaN.
 */
export function densityBeyondRim(grid: DensityGrid, net: Net): Float64Array {
  const { size, values } = grid;
  const filled = values.slice();
  const at = (node: number) => -1 + (2 * node) / (size - 1);
  for (let row = 0; row < size; row++) {
    for (let col = 0; col < size; col++) {
      if (!Number.isNaN(values[row * size + col])) continue;
      const [x, y] = [at(col), at(row)];
      const r2 = x * x + y * y;
      // colatitude c past 90 degrees: sin and cos (or tan and cot) of c / 2 change places
      const scale = net === 'equal-area' ? -Math.sqrt((2 - r2) / r2) : -1 / r2;
      filled[row * size + col] = between(grid, x * scale, y * scale);
    }
  }
  return filled;
}

/** Bilinear value at a point of the net, over the corners that have one. */
function between({ size, values }: DensityGrid, x: number, y: number): number {
  const column = Math.min(size - 2, Math.floor(((x + 1) / 2) * (size - 1)));
  const row = Math.min(size - 2, Math.floor(((y + 1) / 2) * (size - 1)));
  const [u, v] = [((x + 1) / 2) * (size - 1) - column, ((y + 1) / 2) * (size - 1) - row];
  let [sum, weights] = [0, 0];
  for (const [i, j, weight] of [
    [0, 0, (1 - u) * (1 - v)],
    [1, 0, u * (1 - v)],
    [0, 1, (1 - u) * v],
    [1, 1, u * v],
  ] as const) {
    const value = values[(row + j) * size + column + i]!;
    if (Number.isNaN(value)) continue;
    // a corner just inside the rim still counts where all weight lies outside
    sum += (weight + 1e-12) * value;
    weights += weight + 1e-12;
  }
  return weights > 0 ? sum / weights : nearestInside({ size, values }, x, y);
}

/** Value of the node next to the point on its way to the middle. */
function nearestInside(
  { size, values }: Pick<DensityGrid, 'size' | 'values'>,
  x: number,
  y: number,
): number {
  for (let share = 1; share >= 0; share -= 0.05) {
    const col = Math.round(((share * x + 1) / 2) * (size - 1));
    const row = Math.round(((share * y + 1) / 2) * (size - 1));
    const value = values[row * size + col]!;
    if (!Number.isNaN(value)) return value;
  }
  return 0;
}
