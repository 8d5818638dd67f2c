import { dot, type Vector } from '#kernels/geometry/directions.ts';
import { planeNormal, type Plane } from '#kernels/geometry/planes.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { NOT_LOGGED, type Category } from '#kernels/tables/category.ts';

/** A fault taken as a plane without end: a point on it, in metres, and its attitude, in degrees. */
export interface FaultPlane extends Plane {
  name: string;
  x: number;
  y: number;
  z: number;
}

/** Sides of a fault in the order of their codes; above is the hanging wall. */
export const FAULT_SIDES = ['above', 'below'] as const;

/**
 * Signed distance of points to a fault plane in metres: positive above it, on the side of its upward
 * normal. A vertical fault has no upper side: positive is then east of it, or north where it strikes
 * due east.
 *
 * @param points Row-major, shape (n, 3), east, north, up in metres; a row with a NaN gives NaN.
 * @throws {KernelError} `shape`; `bad-parameter` at a fault whose point or attitude is none, with { row }
 *   at an infinite coordinate.
 */
export function distancesToFault(points: Float64Array, fault: FaultPlane): Float64Array {
  if (points.length % 3 !== 0) {
    throw new KernelError('shape', `${points.length} numbers do not fill rows of 3`);
  }
  const origin: Vector = [fault.x, fault.y, fault.z];
  if (!origin.every(Number.isFinite)) {
    throw new KernelError(
      'bad-parameter',
      `expected a point on fault ${fault.name}, found ${origin.join(', ')}`,
    );
  }
  const normal = planeNormal(fault.dip, fault.dipDirection);
  const distances = new Float64Array(points.length / 3);
  for (let row = 0; row < distances.length; row++) {
    const [x, y, z] = [points[3 * row]!, points[3 * row + 1]!, points[3 * row + 2]!];
    if (Math.abs(x) + Math.abs(y) + Math.abs(z) === Infinity) {
      const message = `expected a position, found ${x}, ${y}, ${z} in row ${row}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    distances[row] = dot(normal, [x - fault.x, y - fault.y, z - fault.z]);
  }
  return distances;
}

/** Side of a fault by signed distance; a point on the plane counts as above, NaN as not logged. */
export function sidesOfFault(distancesM: Float64Array): Category {
  const side = (distance: number) => (Number.isNaN(distance) ? NOT_LOGGED : distance >= 0 ? 0 : 1);
  return { levels: [...FAULT_SIDES], codes: Int32Array.from(distancesM, side) };
}

/**
 * Where a line between two points meets a fault, as a share of its length from the first; split an
 * interval there and not by majority.
 *
 * @returns Null when both ends lie on one side, or one of them has no distance.
 */
export function faultCrossing(firstDistanceM: number, secondDistanceM: number): number | null {
  const isCrossed = firstDistanceM >= 0 !== secondDistanceM >= 0;
  if (!isCrossed || !Number.isFinite(firstDistanceM - secondDistanceM)) return null;
  return firstDistanceM / (firstDistanceM - secondDistanceM);
}
