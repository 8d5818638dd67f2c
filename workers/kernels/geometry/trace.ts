import { KernelError } from '#kernels/kernel-error.ts';
import type { HolePath } from './hole-path.ts';
import { positionsAtDepths } from './position-at-depth.ts';

/** A hole as a polyline: depth down the hole (m) and position of each vertex. */
export interface HoleTrace {
  depthsM: Float64Array;
  /** East, north, elevation, row-major (nVertices, 3). */
  positions: Float64Array;
}

/**
 * Polyline whose chords stay within a tolerance of the arcs: a leg of length dm turning b radians is
 * cut into ceil(sqrt(dm b / (8 tolerance))) pieces.
 *
 * @param toDepthM End of the trace, usually the length of the hole.
 * @param options.toleranceM Largest distance between chord and arc, > 0.
 * @param options.alsoAtM Depths that must be vertices, such as interval ends.
 * @throws {KernelError} `bad-parameter` for a tolerance <= 0 or an end above the path's start.
 */
export function traceHole(
  path: HolePath,
  toDepthM: number,
  options: { toleranceM?: number; alsoAtM?: Iterable<number> } = {},
): HoleTrace {
  const { toleranceM = 0.05, alsoAtM = [] } = options;
  if (!(toleranceM > 0)) {
    throw new KernelError('bad-parameter', `expected a tolerance > 0 m, found ${toleranceM}`);
  }
  const start = path.depthsM[0]!;
  if (!(toDepthM > start && toDepthM < Infinity)) {
    throw new KernelError('bad-parameter', `expected an end below ${start} m, found ${toDepthM}`);
  }
  const depths = new Set([start, toDepthM, ...alsoAtM]);
  for (let leg = 0; leg < path.doglegsRad.length; leg++) {
    const [top, length] = [path.depthsM[leg]!, path.depthsM[leg + 1]! - path.depthsM[leg]!];
    const pieces = Math.max(1, piecesOfLeg(length, path.doglegsRad[leg]!, toleranceM));
    for (let i = 0; i < pieces; i++) depths.add(top + (length * i) / pieces);
    depths.add(top + length);
  }
  const kept = [...depths].filter((depth) => depth >= start && depth <= toDepthM);
  const depthsM = Float64Array.from(kept).sort();
  return { depthsM, positions: positionsAtDepths(path, depthsM).positions };
}

/** A leg in more pieces than this is a mistake of unit, in the tolerance or the survey. */
const MOST_PIECES = 100_000;

/**
 * Pieces that keep the sagitta, about length x angle / 8 for the whole leg, within the tolerance.
 *
 * @param lengthM, angleRad >= 0.  @param toleranceM > 0.
 * @throws {KernelError} `bad-parameter` outside those ranges or above 100 000 pieces.
 */
export function piecesOfLeg(lengthM: number, angleRad: number, toleranceM: number): number {
  const pieces = Math.ceil(Math.sqrt((lengthM * angleRad) / (8 * toleranceM)));
  if (lengthM >= 0 && angleRad >= 0 && toleranceM > 0 && pieces <= MOST_PIECES) return pieces;
  const message = `expected a leg of 0 to ${MOST_PIECES} pieces, found ${lengthM} m, ${angleRad} rad at ${toleranceM} m`;
  throw new KernelError('bad-parameter', message);
}
