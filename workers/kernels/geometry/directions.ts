import { KernelError } from '#kernels/kernel-error.ts';

/** A vector east, north, up. */
export type Vector = readonly [east: number, north: number, up: number];

/** Direction of a hole: azimuth clockwise from grid north, dip negative down, both in degrees. */
export interface HoleDirection {
  azimuth: number;
  dip: number;
}

export const RADIANS_PER_DEGREE = Math.PI / 180;

/** Horizontal part of a unit vector below which a direction counts as vertical. */
const VERTICAL = 1e-9;

export function toRadians(degrees: number): number {
  return degrees * RADIANS_PER_DEGREE;
}

export function toDegrees(radians: number): number {
  return radians / RADIANS_PER_DEGREE;
}

/**
 * An angle brought into [0, 360); 360 becomes 0.
 *
 * @throws {KernelError} `not-finite`.
 */
export function wrapAzimuth(degrees: number): number {
  if (!Number.isFinite(degrees))
    throw new KernelError('not-finite', `expected an angle, found ${degrees}`);
  const wrapped = ((degrees % 360) + 360) % 360;
  return wrapped === 360 ? 0 : wrapped;
}

export function dot(a: Vector, b: Vector): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

export function cross(a: Vector, b: Vector): Vector {
  return [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
}

/**
 * Refuses a vector one part of which is no number or infinite.
 *
 * @throws {KernelError} `not-finite`.
 */
export function requireVector(vector: Vector): void {
  if (Number.isFinite(vector[0]) && Number.isFinite(vector[1]) && Number.isFinite(vector[2]))
    return;
  throw new KernelError('not-finite', `expected a vector, found (${vector.join(', ')})`);
}

/** a x + b y. */
export function combine(a: number, x: Vector, b: number, y: Vector): Vector {
  return [a * x[0] + b * y[0], a * x[1] + b * y[1], a * x[2] + b * y[2]];
}

/**
 * Unit tangent of a hole, pointing down the hole.
 *
 * @param direction Azimuth in [0, 360] and dip in [-90, 90], degrees.
 * @throws {KernelError} `bad-parameter` outside those ranges or for a value that is no number.
 */
export function tangentOf(direction: HoleDirection): Vector {
  const { azimuth, dip } = direction;
  if (!(azimuth >= 0 && azimuth <= 360)) {
    throw new KernelError('bad-parameter', `expected an azimuth in [0, 360], found ${azimuth}`);
  }
  if (!(dip >= -90 && dip <= 90)) {
    throw new KernelError('bad-parameter', `expected a dip in [-90, 90], found ${dip}`);
  }
  const [a, d] = [toRadians(azimuth), toRadians(dip)];
  return [Math.cos(d) * Math.sin(a), Math.cos(d) * Math.cos(a), Math.sin(d)];
}

/**
 * Azimuth and dip (degrees) of a tangent; the azimuth of a vertical hole is undefined, hence null.
 *
 * @throws {KernelError} `not-finite`.
 */
export function directionOf(tangent: Vector): { azimuth: number | null; dip: number } {
  requireVector(tangent);
  const horizontal = Math.hypot(tangent[0], tangent[1]);
  const dip = toDegrees(Math.atan2(tangent[2], horizontal));
  if (horizontal < VERTICAL) return { azimuth: null, dip };
  return { azimuth: wrapAzimuth(toDegrees(Math.atan2(tangent[0], tangent[1]))), dip };
}

/**
 * Grid azimuth from a magnetic one.
 *
 * @param declination Of the survey date, positive east, degrees.
 * @param convergence Grid north measured clockwise from true north, degrees.
 * @throws {KernelError} `not-finite`.
 */
export function gridAzimuth(magnetic: number, declination: number, convergence: number): number {
  requireVector([magnetic, declination, convergence]);
  return wrapAzimuth(magnetic + declination - convergence);
}
