import { KernelError } from '#kernels/kernel-error.ts';
import { toRadians, type Vector } from '#kernels/geometry/directions.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';

/** Positions of n composites: east, north, up in metres. */
export interface Positions {
  x: Float64Array;
  y: Float64Array;
  z: Float64Array;
}

/**
 * Number of positions; rows without one must be left out before.
 *
 * @throws {KernelError} `shape`; `too-few-rows` when empty; `not-finite` with { row }.
 */
export function requirePositions({ x, y, z }: Positions): number {
  if (y.length !== x.length || z.length !== x.length)
    throw new KernelError(
      'shape',
      `expected as many coordinates on each axis, found ${x.length}, ${y.length}, ${z.length}`,
    );
  requireFinite(x, 'east coordinates');
  requireFinite(y, 'north coordinates');
  requireFinite(z, 'elevations');
  return x.length;
}

/**
 * Unit vector of a line.
 *
 * @param trend Azimuth in degrees, [0, 360].  @param plunge Degrees, positive down, [-90, 90].
 * @throws {KernelError} `bad-parameter`.
 */
export function lineDirection(trend: number, plunge: number): Vector {
  if (!(trend >= 0 && trend <= 360 && plunge >= -90 && plunge <= 90))
    throw new KernelError(
      'bad-parameter',
      `expected a trend in [0, 360] and a plunge in [-90, 90], found ${trend}, ${plunge}`,
    );
  const [t, p] = [toRadians(trend), toRadians(plunge)];
  return [Math.cos(p) * Math.sin(t), Math.cos(p) * Math.cos(t), -Math.sin(p)];
}

/** Coordinate of each position along a line, in metres from where the line passes the origin. */
export function coordinateAlong(positions: Positions, [east, north, up]: Vector): Float64Array {
  requirePositions(positions);
  const { x, y, z } = positions;
  return x.map((value, row) => value * east + y[row]! * north + z[row]! * up);
}
