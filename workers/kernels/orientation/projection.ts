import { combine, cross, toRadians, type Vector } from '#kernels/geometry/directions.ts';
import { planeNormal, type Plane } from '#kernels/geometry/planes.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { checkUnitVectors, vectorAt } from './unit-vectors.ts';

/** Schmidt's net keeps areas (for densities), Wulff's keeps angles. */
export type Net = 'equal-area' | 'equal-angle';

/**
 * Lower-hemisphere projection: x east, y north, the horizontal on the unit circle. A line pointing
 * up is shown by its lower end.
 *
 * @param vectors Unit vectors of lines or poles, row-major, shape (n, 3), east, north, up.
 * @returns Row-major, shape (n, 2).
 * @throws {KernelError} `shape`; `too-few-rows`; `not-unit`.
 */
export function projectLines(vectors: Float64Array, net: Net): Float64Array {
  const n = checkUnitVectors(vectors);
  const points = new Float64Array(2 * n);
  for (let row = 0; row < n; row++) points.set(projectLine(vectorAt(vectors, row), net), 2 * row);
  return points;
}

/** One line of `projectLines`, unchecked. */
export function projectLine([x, y, z]: Vector, net: Net): [number, number] {
  const down = z > 0 ? -1 : 1;
  const depth = Math.min(1, Math.abs(z));
  // r / sin(colatitude): sqrt(2) sin(c/2) / sin c and tan(c/2) / sin c, finite at the centre
  const scale = net === 'equal-area' ? 1 / Math.sqrt(1 + depth) : 1 / (1 + depth);
  return [down * x * scale + 0, down * y * scale + 0];
}

/**
 * The downward line at a point of the net.
 *
 * @throws {KernelError} `bad-parameter` outside the unit circle.
 */
export function lineAtPoint(x: number, y: number, net: Net): [number, number, number] {
  const r2 = x * x + y * y;
  if (!(r2 <= 1 + 1e-12))
    throw new KernelError('bad-parameter', `expected a point in the circle, found ${x}, ${y}`);
  const depth = net === 'equal-area' ? 1 - r2 : (1 - r2) / (1 + r2);
  const scale = net === 'equal-area' ? Math.sqrt(1 + depth) : 1 + depth;
  return [x * scale, y * scale, -Math.max(0, depth)];
}

/**
 * Trace of a plane through the centre of the sphere: projected points from one end of its strike to
 * the other, equally spaced in rake.
 *
 * @param plane Degrees; the trace of a horizontal plane is the whole rim.
 * @param steps Pieces of the curve, >= 2.
 * @returns Row-major, shape (steps + 1, 2).
 * @throws {KernelError} `bad-parameter` for angles out of range or too few steps.
 */
export function greatCircle(plane: Plane, net: Net, steps = 90): Float64Array {
  if (!(Number.isInteger(steps) && steps >= 2)) {
    throw new KernelError('bad-parameter', `expected 2 or more steps, found ${steps}`);
  }
  const normal = planeNormal(plane.dip, plane.dipDirection);
  const azimuth = toRadians(plane.dipDirection ?? 0);
  const strike: Vector = [-Math.cos(azimuth), Math.sin(azimuth), 0];
  const across = cross(normal, strike);
  const downDip = across[2] > 0 ? combine(-1, across, 0, across) : across;
  const turn = plane.dip === 0 ? 2 * Math.PI : Math.PI;
  const points = new Float64Array(2 * (steps + 1));
  for (let i = 0; i <= steps; i++) {
    const rake = (i * turn) / steps;
    const line = combine(Math.cos(rake), strike, Math.sin(rake), downDip);
    points.set(projectLine(line, net), 2 * i);
  }
  return points;
}
