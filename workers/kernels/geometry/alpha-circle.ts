import { KernelError } from '#kernels/kernel-error.ts';
import {
  combine,
  cross,
  tangentOf,
  toRadians,
  type HoleDirection,
  type Vector,
} from './directions.ts';

/**
 * Poles that a plane of known alpha may have where the core is not oriented: a small circle about the
 * hole, never one plane.
 *
 * @param alphaDeg Angle between core axis and plane, [0, 90].
 * @param steps Points of the circle, >= 3; the first is not repeated.
 * @returns Unit vectors n with n . t = sin alpha, row-major, shape (steps, 3).
 * @throws {KernelError} `bad-parameter` for angles out of range or too few steps.
 */
export function polesOfAlpha(hole: HoleDirection, alphaDeg: number, steps = 72): Float64Array {
  if (!(alphaDeg >= 0 && alphaDeg <= 90)) {
    throw new KernelError('bad-parameter', `expected alpha in [0, 90], found ${alphaDeg}`);
  }
  if (!(Number.isInteger(steps) && steps >= 3)) {
    throw new KernelError('bad-parameter', `expected 3 or more steps, found ${steps}`);
  }
  const t = tangentOf(hole);
  const azimuth = toRadians(hole.azimuth);
  // level and square to the hole, even where the hole is vertical
  const side: Vector = [-Math.cos(azimuth), Math.sin(azimuth), 0];
  const other = cross(t, side);
  const alpha = toRadians(alphaDeg);
  const poles = new Float64Array(3 * steps);
  for (let i = 0; i < steps; i++) {
    const turn = (2 * Math.PI * i) / steps;
    const radial = combine(Math.cos(turn), side, Math.sin(turn), other);
    poles.set(combine(Math.sin(alpha), t, Math.cos(alpha), radial), 3 * i);
  }
  return poles;
}
