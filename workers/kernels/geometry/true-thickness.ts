import { KernelError } from '#kernels/kernel-error.ts';
import { dot, toRadians, type Vector } from './directions.ts';

/** Thickness of what an interval cuts, measured across a plane (m). */
export interface Thickness {
  /** Across the plane; null where the hole runs along it. */
  trueM: number | null;
  /** Measured straight down, true / cos dip; null for a vertical plane. */
  verticalM: number | null;
  /** Measured level across the strike, true / sin dip; null for a horizontal plane. */
  horizontalM: number | null;
  /** |t . n|, the sine of the angle between hole and plane. */
  sineOfAngle: number;
  /** Why there is no thickness, in words; null when it is given. */
  refusal: string | null;
}

/** |t . n| under which a hole counts as running along the plane. */
export const SUB_PARALLEL = 0.1;
/** Components of a unit normal below this are rounding. */
const ROUNDING = 1e-9;

/**
 * True thickness T = L |t . n| of an interval that cuts a plane, with its vertical and horizontal
 * thickness. Use a mean plane only where the orientation summary says it is fit for thickness.
 *
 * @param lengthM Length along the hole, >= 0.
 * @param tangent Unit tangent of the hole at the middle of the interval.
 * @param normal Unit normal of the plane, either way.
 * @param leastSine |t . n| under which the thickness is refused as sub-parallel.
 * @throws {KernelError} `bad-parameter` at a length that is none or a vector that is not of length 1.
 * @see Geometry; with a plane measured in the same core |t . n| is the sine of alpha.
 */
export function trueThickness(
  lengthM: number,
  tangent: Vector,
  normal: Vector,
  leastSine = SUB_PARALLEL,
): Thickness {
  if (!(lengthM >= 0 && lengthM < Infinity)) {
    throw new KernelError('bad-parameter', `expected a length >= 0 m, found ${lengthM}`);
  }
  requireUnit(tangent, 'tangent');
  requireUnit(normal, 'normal');
  const sineOfAngle = Math.min(1, Math.abs(dot(tangent, normal)));
  if (sineOfAngle < leastSine) {
    const refusal = `sub-parallel: the hole meets the plane at ${((Math.asin(sineOfAngle) * 180) / Math.PI).toFixed(1)}°`;
    return { trueM: null, verticalM: null, horizontalM: null, sineOfAngle, refusal };
  }
  const trueM = lengthM * sineOfAngle;
  const cosDip = Math.abs(normal[2]);
  const sinDip = Math.hypot(normal[0], normal[1]);
  return {
    trueM,
    verticalM: cosDip < ROUNDING ? null : trueM / cosDip,
    horizontalM: sinDip < ROUNDING ? null : trueM / sinDip,
    sineOfAngle,
    refusal: null,
  };
}

/**
 * True thickness of a plane measured in the same core: L sin alpha.
 *
 * @param alphaDeg Angle between core axis and plane, [0, 90].
 * @returns Null where sin alpha is under {@link SUB_PARALLEL}.
 * @throws {KernelError} `bad-parameter`.
 */
export function thicknessOnCore(lengthM: number, alphaDeg: number): number | null {
  if (!(lengthM >= 0 && lengthM < Infinity && alphaDeg >= 0 && alphaDeg <= 90)) {
    const message = `expected a length >= 0 m and alpha in [0, 90], found ${lengthM}, ${alphaDeg}`;
    throw new KernelError('bad-parameter', message);
  }
  const sine = Math.sin(toRadians(alphaDeg));
  return sine < SUB_PARALLEL ? null : lengthM * sine;
}

function requireUnit(vector: Vector, what: string): void {
  if (Math.abs(Math.hypot(...vector) - 1) <= 1e-6) return;
  throw new KernelError(
    'bad-parameter',
    `expected a ${what} of length 1, found (${vector.join(', ')})`,
  );
}
