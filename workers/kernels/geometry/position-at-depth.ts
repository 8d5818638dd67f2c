import { KernelError } from '#kernels/kernel-error.ts';
import type { Vector } from './directions.ts';
import type { HolePath } from './hole-path.ts';

/** Turn of a leg (radians) below which it counts as straight. */
const STRAIGHT = 1e-8;

/** Position (m) and unit tangent at one depth of a hole. */
export interface PathPoint {
  position: Vector;
  tangent: Vector;
}

/** Positions and tangents at many depths, row-major (nDepths, 3). */
export interface PathPoints {
  positions: Float64Array;
  tangents: Float64Array;
}

/**
 * Position and tangent at a depth: on the arc between stations, straight along the last tangent
 * beyond the last station.
 *
 * @param depthM Depth down the hole, not above the first station of the path.
 * @throws {KernelError} `bad-parameter` for a depth above the path or one that is no number.
 */
export function positionAtDepth(path: HolePath, depthM: number): PathPoint {
  const { positions, tangents } = positionsAtDepths(path, Float64Array.of(depthM));
  return {
    position: [positions[0]!, positions[1]!, positions[2]!],
    tangent: [tangents[0]!, tangents[1]!, tangents[2]!],
  };
}

/**
 * {@link positionAtDepth} for many depths of one hole; fastest when they ascend.
 *
 * @param depthsM Depths down the hole in any order. Not modified.
 * @throws {KernelError} `bad-parameter` with { row } at the first depth above the path.
 */
export function positionsAtDepths(path: HolePath, depthsM: Float64Array): PathPoints {
  const out = {
    positions: new Float64Array(3 * depthsM.length),
    tangents: new Float64Array(3 * depthsM.length),
  };
  const last = path.depthsM.length - 1;
  let leg = 0;
  for (let row = 0; row < depthsM.length; row++) {
    const depth = depthsM[row]!;
    if (!(depth >= path.depthsM[0]! && depth < Infinity)) {
      const message = `expected a depth >= ${path.depthsM[0]!} m, found ${depth}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    if (depth < path.depthsM[leg]!) leg = 0;
    while (leg < last && depth >= path.depthsM[leg + 1]!) leg++;
    const along = depth - path.depthsM[leg]!;
    if (leg === last || path.doglegsRad[leg]! < STRAIGHT)
      straightPoint(path, leg, along, out, 3 * row);
    else arcPoint(path, leg, along, out, 3 * row);
  }
  return out;
}

/** Along the chord of a straight leg, so that it meets its next station; past the last, along t. */
function straightPoint(
  path: HolePath,
  leg: number,
  along: number,
  out: PathPoints,
  at: number,
): void {
  const isLast = leg + 1 === path.depthsM.length;
  const share = isLast ? 0 : along / (path.depthsM[leg + 1]! - path.depthsM[leg]!);
  for (let k = 0; k < 3; k++) {
    const tangent = path.tangents[3 * leg + k]!;
    const from = path.positions[3 * leg + k]!;
    const step = isLast ? along * tangent : share * (path.positions[3 * leg + 3 + k]! - from);
    out.positions[at + k] = from + step;
    out.tangents[at + k] = tangent;
  }
}

/** On the arc, with differences of cosines written as products of sines: they cancel near 0. */
function arcPoint(path: HolePath, leg: number, along: number, out: PathPoints, at: number): void {
  const angle = path.doglegsRad[leg]!;
  const length = path.depthsM[leg + 1]! - path.depthsM[leg]!;
  const f = along / length;
  const sine = Math.sin(angle);
  const scale = length / (angle * sine);
  const half = Math.sin((angle * f) / 2);
  const first = scale * 2 * Math.sin(angle * (1 - f / 2)) * half;
  const second = scale * 2 * half * half;
  const [a, b] = [Math.sin(angle * (1 - f)) / sine, Math.sin(angle * f) / sine];
  for (let k = 0; k < 3; k++) {
    const top = path.tangents[3 * leg + k]!;
    const bottom = path.tangents[3 * leg + 3 + k]!;
    out.positions[at + k] = path.positions[3 * leg + k]! + first * top + second * bottom;
    out.tangents[at + k] = a * top + b * bottom;
  }
}
