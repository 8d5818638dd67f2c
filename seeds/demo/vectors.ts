/** A point or a direction in the local grid: x east, y north, z up, metres. */
export interface Vector {
  x: number;
  y: number;
  z: number;
}

/** A plane through a point, with its upward unit normal. */
export interface Plane {
  point: Vector;
  normal: Vector;
}

const RADIANS = Math.PI / 180;

export const add = (a: Vector, b: Vector): Vector => ({ x: a.x + b.x, y: a.y + b.y, z: a.z + b.z });
export const subtract = (a: Vector, b: Vector): Vector => add(a, scale(b, -1));
export const scale = (a: Vector, factor: number): Vector => ({
  x: a.x * factor,
  y: a.y * factor,
  z: a.z * factor,
});
export const dot = (a: Vector, b: Vector): number => a.x * b.x + a.y * b.y + a.z * b.z;
export const cross = (a: Vector, b: Vector): Vector => ({
  x: a.y * b.z - a.z * b.y,
  y: a.z * b.x - a.x * b.z,
  z: a.x * b.y - a.y * b.x,
});
export const unit = (a: Vector): Vector => scale(a, 1 / Math.sqrt(dot(a, a)));

/** Direction of a hole: azimuth clockwise from grid north, dip negative downwards, degrees. */
export function direction(azimuthDeg: number, dipDeg: number): Vector {
  const horizontal = Math.cos(dipDeg * RADIANS);
  return {
    x: horizontal * Math.sin(azimuthDeg * RADIANS),
    y: horizontal * Math.cos(azimuthDeg * RADIANS),
    z: Math.sin(dipDeg * RADIANS),
  };
}

/** Upward unit normal of a plane given by dip and dip direction, degrees. */
export function planeNormal(dipDeg: number, dipDirectionDeg: number): Vector {
  const horizontal = Math.sin(dipDeg * RADIANS);
  return {
    x: horizontal * Math.sin(dipDirectionDeg * RADIANS),
    y: horizontal * Math.cos(dipDirectionDeg * RADIANS),
    z: Math.cos(dipDeg * RADIANS),
  };
}

/** Distance from a plane, positive on its upper side. */
export const signedDistance = (plane: Plane, at: Vector): number =>
  dot(plane.normal, subtract(at, plane.point));

/** Turns a direction about a unit axis by the right-hand rule (Rodrigues' formula). */
export function rotate(a: Vector, axis: Vector, angleDeg: number): Vector {
  const cosine = Math.cos(angleDeg * RADIANS);
  const along = scale(axis, dot(axis, a) * (1 - cosine));
  const across = scale(cross(axis, a), Math.sin(angleDeg * RADIANS));
  return add(add(scale(a, cosine), across), along);
}
