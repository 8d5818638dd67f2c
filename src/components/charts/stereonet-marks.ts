import { contours } from 'd3';
import { densityGrid } from '#kernels/orientation/density-grid.ts';
import { cross, toRadians } from '#kernels/geometry/directions.ts';
import type { Vector } from '#kernels/geometry/directions.ts';
import { lineVector } from '#kernels/geometry/planes.ts';
import { projectLine } from '#kernels/orientation/projection.ts';

/** How sure a reading is, and so how it is drawn: dot, open dot, cross. */
export type Sureness = 'sure' | 'moderate' | 'unsure';

/** A line or the pole of a plane, degrees; plunge 0 to 90 downwards. */
export interface NetLine {
  trend: number;
  plunge: number;
  sureness: Sureness;
}

type Point = readonly [number, number];

/** Where a line falls on the equal-area net, lower half: x east, y north, rim at 1. */
export function netPoint(trend: number, plunge: number): Point {
  return projectLine(lineVector({ trend, plunge }), 'equal-area');
}

/** A cone about a line, as pieces that break where it passes the rim to the other side. */
export function coneCurves(axis: { trend: number; plunge: number }, halfAngleDeg: number): Point[][] {
  const middle = lineVector(axis);
  const side = cross(middle, Math.abs(middle[2]) < 0.9 ? [0, 0, 1] : [1, 0, 0]);
  const long = Math.hypot(...side);
  const first: Vector = [side[0] / long, side[1] / long, side[2] / long];
  const second = cross(middle, first);
  const [c, s] = [Math.cos(toRadians(halfAngleDeg)), Math.sin(toRadians(halfAngleDeg))];
  const curves: Point[][] = [[]];
  let wasUp: boolean | null = null;
  for (let i = 0; i <= 120; i++) {
    const [ca, sa] = [Math.cos((i * Math.PI) / 60), Math.sin((i * Math.PI) / 60)];
    const at = (k: 0 | 1 | 2) => c * middle[k] + s * (ca * first[k] + sa * second[k]);
    const isUp = at(2) > 0;
    if (wasUp !== null && isUp !== wasUp) curves.push([]);
    wasUp = isUp;
    curves.at(-1)?.push(projectLine([at(0), at(1), at(2)], 'equal-area'));
  }
  return curves.filter((curve) => curve.length > 1);
}

/** Kamb contours at 2, 4, 6 … standard deviations, as SVG path data on the unit net (y upwards turned down). */
export function kambContours(lines: readonly NetLine[]): { level: number; d: string }[] {
  if (lines.length < 3) return [];
  const vectors = Float64Array.from(lines.flatMap(({ trend, plunge }) => [...lineVector({ trend, plunge })]));
  const { size, values } = densityGrid(vectors, 'equal-area');
  const filled = Array.from(values, (value) => (Number.isNaN(value) ? -9 : value));
  const highest = filled.reduce((most, value) => Math.max(most, value), 0);
  const levels: number[] = [];
  for (let level = 2; level <= highest && levels.length < 8; level += Math.max(2, 2 * Math.ceil(highest / 16))) levels.push(level);
  const unit = (cells: number) => ((cells - 0.5) / (size - 1)) * 2 - 1;
  return contours()
    .size([size, size])
    .thresholds(levels)(filled)
    .map((contour) => ({
      level: contour.value,
      d: contour.coordinates
        .flatMap((polygon) => polygon.map((ring) => `M${ring.map(([col = 0, row = 0]) => `${unit(col).toFixed(3)} ${(-unit(row)).toFixed(3)}`).join('L')}Z`))
        .join(''),
    }));
}
