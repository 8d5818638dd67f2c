import { KernelError } from '#kernels/kernel-error.ts';
import {
  combine,
  cross,
  dot,
  tangentOf,
  toDegrees,
  toRadians,
  wrapAzimuth,
  type HoleDirection,
  type Vector,
} from './directions.ts';
import { lineOf, planeOf, upwardNormal, type Line, type Plane } from './planes.ts';

/** How the angles of a data set were read; stored with it, since practices differ. */
export interface CoreConvention {
  /** Side of the hole the reference line marks. */
  referenceLine: 'bottom' | 'top';
  /** End of the ellipse's long axis that beta goes to. */
  ellipseEnd: 'down-hole' | 'up-hole';
  /** Turn in which gamma grows about the normal that points down the hole; right-handed unless said. */
  gammaSense?: 'right-handed' | 'left-handed';
}

/** Alpha and beta of a plane on core, degrees. */
export interface CoreAngles {
  /** Acute angle between core axis and plane, [0, 90]. */
  alpha: number;
  /** Clockwise looking down the hole from the reference line, [0, 360]. */
  beta: number;
}

/** A plane measured on core, with what lowers its worth. */
export interface OrientedPlane extends Plane {
  /** Upward unit normal, east, north, up. */
  normal: Vector;
  cautions: ('beta-undefined' | 'beta-poorly-defined' | 'steep-hole')[];
}

const DEFAULT_CONVENTION: CoreConvention = { referenceLine: 'bottom', ellipseEnd: 'down-hole' };

/** Alpha (degrees) under which beta is poorly defined, and dip past which the bottom line is. */
const SHALLOW_ALPHA = 10;
const STEEP_HOLE = 85;

/** The core's own frame: t down the hole, u to the bottom of the hole, v = t x u. */
function coreFrame(hole: HoleDirection): { t: Vector; u: Vector; v: Vector } {
  const t = tangentOf(hole);
  const [a, d] = [toRadians(hole.azimuth), toRadians(hole.dip)];
  const u: Vector = [Math.sin(d) * Math.sin(a), Math.sin(d) * Math.cos(a), -Math.cos(d)];
  return { t, u, v: [-Math.cos(a), Math.sin(a), 0] };
}

/** What must be added to beta to count from the bottom line to the down-hole end. */
function betaShift({ referenceLine, ellipseEnd }: CoreConvention): number {
  return (referenceLine === 'top' ? 180 : 0) + (ellipseEnd === 'up-hole' ? 180 : 0);
}

/** Long axis of the ellipse, down the hole, and the normal with n . t = sin alpha. */
function ellipseAxes(hole: HoleDirection, angles: CoreAngles, convention: CoreConvention) {
  const { alpha, beta } = angles;
  if (!(alpha >= 0 && alpha <= 90)) {
    throw new KernelError('bad-parameter', `expected alpha in [0, 90], found ${alpha}`);
  }
  if (!(beta >= 0 && beta <= 360)) {
    throw new KernelError('bad-parameter', `expected beta in [0, 360], found ${beta}`);
  }
  const { t, u, v } = coreFrame(hole);
  const [a, b] = [toRadians(alpha), toRadians(beta + betaShift(convention))];
  const radial = combine(Math.cos(b), u, Math.sin(b), v);
  return {
    axis: combine(Math.cos(a), t, Math.sin(a), radial),
    normal: combine(Math.sin(a), t, -Math.cos(a), radial),
  };
}

/**
 * Dip and dip direction of a plane measured on oriented core.
 *
 * @param hole Azimuth and dip of the hole at the reading, degrees.
 * @param angles Alpha and beta, degrees.
 * @param convention Bottom line and down-hole end of the ellipse unless said.
 * @returns The plane with its upward normal; `cautions` name a beta that is irrelevant (alpha 90) or
 *   poorly defined (alpha under 10), and a hole too steep for a bottom line (over 85).
 * @throws {KernelError} `bad-parameter` for angles out of range.
 */
export function planeFromCore(
  hole: HoleDirection,
  angles: CoreAngles,
  convention: CoreConvention = DEFAULT_CONVENTION,
): OrientedPlane {
  const normal = upwardNormal(ellipseAxes(hole, angles, convention).normal);
  const cautions: OrientedPlane['cautions'] = [];
  if (angles.alpha === 90) cautions.push('beta-undefined');
  if (angles.alpha < SHALLOW_ALPHA) cautions.push('beta-poorly-defined');
  if (Math.abs(hole.dip) > STEEP_HOLE) cautions.push('steep-hole');
  return { ...planeOf(normal), normal, cautions };
}

/**
 * Alpha and beta at which a plane would be met on core: the inverse of {@link planeFromCore}.
 *
 * @param normal Any normal of the plane.
 * @returns Degrees; beta is 0 where alpha is 90, since no ellipse is left.
 */
export function coreFromPlane(
  hole: HoleDirection,
  normal: Vector,
  convention: CoreConvention = DEFAULT_CONVENTION,
): CoreAngles {
  const { t, u, v } = coreFrame(hole);
  const up = upwardNormal(normal);
  const n: Vector = dot(up, t) < 0 ? [-up[0], -up[1], -up[2]] : up;
  const along = Math.min(dot(n, t), 1);
  const radial = combine(along, t, -1, n);
  const across = Math.hypot(...radial);
  const alpha = toDegrees(Math.atan2(along, across));
  if (across < 1e-9) return { alpha: 90, beta: 0 };
  const beta = toDegrees(Math.atan2(dot(radial, v), dot(radial, u)));
  return { alpha, beta: wrapAzimuth(beta - betaShift(convention)) };
}

/**
 * Trend and plunge of a line within a plane on core.
 *
 * @param gamma Angle in the plane from the down-hole end of the ellipse's long axis, degrees, in the
 *   turn the convention says (practice differs; right-handed about the down-hole normal is ours).
 * @throws {KernelError} `bad-parameter` for angles out of range.
 */
export function lineFromCore(
  hole: HoleDirection,
  angles: CoreAngles,
  gamma: number,
  convention: CoreConvention = DEFAULT_CONVENTION,
): Line {
  if (!(gamma >= -360 && gamma <= 360)) {
    throw new KernelError('bad-parameter', `expected gamma in [-360, 360], found ${gamma}`);
  }
  const { axis, normal } = ellipseAxes(hole, angles, convention);
  const g = toRadians(gamma) * gammaSign(convention);
  return lineOf(combine(Math.cos(g), axis, Math.sin(g), cross(normal, axis)));
}

/**
 * Gamma at which a line of a plane would be met on core: the inverse of {@link lineFromCore}.
 *
 * @param line Unit vector of the line, either way; its part across the plane is left out.
 * @returns Degrees in [0, 180): a line has no sense.
 * @throws {KernelError} `bad-parameter` for angles out of range or a line square to the plane.
 */
export function gammaFromLine(
  hole: HoleDirection,
  angles: CoreAngles,
  line: Vector,
  convention: CoreConvention = DEFAULT_CONVENTION,
): number {
  const { axis, normal } = ellipseAxes(hole, angles, convention);
  const [along, across] = [dot(line, axis), dot(line, cross(normal, axis))];
  const length = Math.hypot(along, across);
  if (!(length > 1e-9 && length < Infinity)) {
    throw new KernelError(
      'bad-parameter',
      `expected a line in the plane, found (${line.join(', ')})`,
    );
  }
  const gamma = toDegrees(Math.atan2(across, along)) * gammaSign(convention);
  const half = wrapAzimuth(2 * gamma) / 2;
  return half >= 180 ? 0 : half;
}

function gammaSign({ gammaSense = 'right-handed' }: CoreConvention): 1 | -1 {
  return gammaSense === 'right-handed' ? 1 : -1;
}
