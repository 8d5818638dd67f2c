import { blur2, contours } from 'd3';
import type { ContourMultiPolygon } from 'd3';
import type { IsShown, Projector, ScatterPoints } from './scatter-points.ts';

const GRID = 96;
/** Room about the unit square, so that contours close. */
const MARGIN = 0.1;
const SHARES = [0.08, 0.2, 0.4, 0.65, 0.9];

/** Lines of equal density over all shown points, as shares of the highest density. */
export function densityContours(points: ScatterPoints, isShown: IsShown): ContourMultiPolygon[] {
  const counts = new Float64Array(GRID * GRID);
  const cell = (share: number) => Math.floor(((share + MARGIN) / (1 + 2 * MARGIN)) * GRID);
  for (let i = 0; i < points.rows.length; i++) {
    if (!isShown(points.rows[i] ?? 0)) continue;
    const col = cell(points.u[i] ?? 0);
    const row = cell(points.v[i] ?? 0);
    if (col < 0 || row < 0 || col >= GRID || row >= GRID) continue;
    counts[row * GRID + col] = (counts[row * GRID + col] ?? 0) + 1;
  }
  const smooth = blur2({ data: counts, width: GRID, height: GRID }, 2).data;
  const values = Array.from(smooth);
  const highest = values.reduce((most, value) => Math.max(most, value), 0);
  if (highest === 0) return [];
  return contours().size([GRID, GRID]).thresholds(SHARES.map((share) => share * highest))(values);
}

/** A contour as SVG path data under the view now. */
export function contourPath(contour: ContourMultiPolygon, view: Projector): string {
  const share = (cells: number) => (cells / GRID) * (1 + 2 * MARGIN) - MARGIN;
  const ring = (points: readonly (readonly number[])[]) =>
    `M${points.map(([col = 0, row = 0]) => `${view.x(share(col)).toFixed(1)} ${view.y(share(row)).toFixed(1)}`).join('L')}Z`;
  return contour.coordinates.flatMap((polygon) => polygon.map(ring)).join('');
}
