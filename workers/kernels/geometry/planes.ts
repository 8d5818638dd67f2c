import { KernelError } from '#kernels/kernel-error.ts';
import { requireVector, toDegrees, toRadians, wrapAzimuth, type Vector } from './directions.ts';

/** A plane in degrees; the dip direction of a horizontal plane is undefined, hence null. */
export interface Plane {
  dip: number;
  dipDirection: number | null;
}

/** A line in degrees: trend clockwise from grid north, plunge positive down. */
export interface Line {
  trend: number;
  plunge: number;
}

/** Component of a unit normal below which a plane counts as vertical or horizontal. */
const ROUNDING = 1e-9;

/**
 * The unit normal of a plane, turned up. A vertical plane has two: the one with east > 0 is taken, or
 * north > 0 where east is 0, so that its dip direction lies in [0, 180) and does not hang on rounding.
 *
 * @param normal Any vector across the plane, not zero.
 * @throws {KernelError} `bad-parameter` for a zero vector or a value that is no number.
 */
export function upwardNormal(normal: Vector): Vector {
  const length = Math.hypot(...normal);
  if (!(length > 0 && Number.isFinite(length))) {
    throw new KernelError(
      'bad-parameter',
      `expected a normal vector, found (${normal.join(', ')})`,
    );
  }
  const [east, north, up] = [normal[0] / length, normal[1] / length, normal[2] / length];
  if (Math.abs(up) >= ROUNDING) return up > 0 ? [east, north, up] : [-east, -north, -up];
  const isTurned = Math.abs(east) >= ROUNDING ? east > 0 : north > 0;
  return isTurned ? [east, north, 0] : [-east, -north, 0];
}

/**
 * Upward unit normal of a plane: (sin d sin D, sin d cos D, cos d).
 *
 * @param dip In [0, 90], degrees.
 * @param dipDirection In [0, 360], degrees; null only for a horizontal plane.
 * @throws {KernelError} `bad-parameter` outside those ranges.
 */
export function planeNormal(dip: number, dipDirection: number | null): Vector {
  if (!(dip >= 0 && dip <= 90)) {
    throw new KernelError('bad-parameter', `expected a dip of a plane in [0, 90], found ${dip}`);
  }
  if (dipDirection === null) {
    if (dip === 0) return [0, 0, 1];
    throw new KernelError('bad-parameter', `expected a dip direction for dip ${dip}, found none`);
  }
  if (!(dipDirection >= 0 && dipDirection <= 360)) {
    const message = `expected a dip direction in [0, 360], found ${dipDirection}`;
    throw new KernelError('bad-parameter', message);
  }
  const [d, direction] = [toRadians(dip), toRadians(dipDirection)];
  return upwardNormal([
    Math.sin(d) * Math.sin(direction),
    Math.sin(d) * Math.cos(direction),
    Math.cos(d),
  ]);
}

/** Dip and dip direction of the plane across a vector of any length and sense. */
export function planeOf(normal: Vector): Plane {
  const [east, north, up] = upwardNormal(normal);
  const horizontal = Math.hypot(east, north);
  if (horizontal < ROUNDING) return { dip: 0, dipDirection: null };
  return {
    dip: toDegrees(Math.atan2(horizontal, up)),
    dipDirection: wrapAzimuth(toDegrees(Math.atan2(east, north))),
  };
}

/** Pole of a plane, pointing down: trend D + 180, plunge 90 - dip. A flat plane's trend is 0. */
export function poleOf(plane: Plane): Line {
  planeNormal(plane.dip, plane.dipDirection);
  const trend = plane.dipDirection === null ? 0 : wrapAzimuth(plane.dipDirection + 180);
  return { trend, plunge: 90 - plane.dip };
}

/** The plane with a given downward pole. */
export function planeOfPole(pole: Line): Plane {
  const [east, north, up] = lineVector(pole);
  return planeOf([-east, -north, -up]);
}

/** Strike by the right-hand rule, dip direction - 90; null for a horizontal plane. */
export function strikeOf(plane: Plane): number | null {
  return plane.dipDirection === null ? null : wrapAzimuth(plane.dipDirection - 90);
}

/**
 * Unit vector of a line.
 *
 * @throws {KernelError} `bad-parameter` for a plunge outside [-90, 90] or a trend outside [0, 360].
 */
export function lineVector({ trend, plunge }: Line): Vector {
  if (!(plunge >= -90 && plunge <= 90 && trend >= 0 && trend <= 360)) {
    const message = `expected plunge in [-90, 90] and trend in [0, 360], found ${plunge} to ${trend}`;
    throw new KernelError('bad-parameter', message);
  }
  const [p, t] = [toRadians(plunge), toRadians(trend)];
  return [Math.cos(p) * Math.sin(t), Math.cos(p) * Math.cos(t), -Math.sin(p)];
}

/**
 * Trend and plunge of a line, turned to point down.
 *
 * @throws {KernelError} `not-finite`.
 */
export function lineOf(vector: Vector): Line {
  requireVector(vector);
  const [east, north, up] = vector[2] > 0 ? [-vector[0], -vector[1], -vector[2]] : vector;
  const horizontal = Math.hypot(east, north);
  return {
    trend: horizontal < ROUNDING ? 0 : wrapAzimuth(toDegrees(Math.atan2(east, north))),
    plunge: toDegrees(Math.atan2(-up, horizontal)),
  };
}
