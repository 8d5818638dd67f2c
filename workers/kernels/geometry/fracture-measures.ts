import { KernelError } from '#kernels/kernel-error.ts';
import { toRadians } from './directions.ts';

/** Discontinuities cut by a length of core. */
export interface FractureMeasures {
  count: number;
  /** P10: discontinuities per metre along the hole. */
  perMetre: number;
  /** P32: discontinuity area per volume (m2/m3), from the weighted count. */
  areaPerVolume: number;
  /** Sum of the sampling weights. */
  weightedCount: number;
  /** How many were met at less than the capped angle: their weight is a floor. */
  cappedCount: number;
}

/** Alpha (degrees) under which the weight no longer grows, so that one reading cannot rule. */
export const CAPPED_ALPHA = 15;

/**
 * Sampling weight 1 / sin alpha of a plane met at an angle alpha: planes nearly along the hole are
 * seldom cut.
 *
 * @param alphaDeg Angle between core axis and plane, [0, 90].
 * @param cappedAlphaDeg Smaller angles weigh as this one, (0, 90].
 * @throws {KernelError} `bad-parameter`.
 * @see Terzaghi (1965), Géotechnique 15, 287-304 (from memory).
 */
export function samplingWeight(alphaDeg: number, cappedAlphaDeg = CAPPED_ALPHA): number {
  if (!(alphaDeg >= 0 && alphaDeg <= 90)) {
    throw new KernelError('bad-parameter', `expected alpha in [0, 90], found ${alphaDeg}`);
  }
  if (!(cappedAlphaDeg > 0 && cappedAlphaDeg <= 90)) {
    const message = `expected a capped alpha in (0, 90], found ${cappedAlphaDeg}`;
    throw new KernelError('bad-parameter', message);
  }
  return 1 / Math.sin(toRadians(Math.max(alphaDeg, cappedAlphaDeg)));
}

/**
 * Linear and volumetric intensity of discontinuities: P10 = count / L, P32 about sum(1 / sin alpha) / L.
 *
 * @param alphasDeg One angle for each discontinuity; none gives zeros.
 * @param lengthM Length of core logged, > 0.
 * @throws {KernelError} `bad-parameter`, with { row } at an angle that is none.
 * @see Mauldon & Dershowitz (2000), on P32 from boreholes (from memory); Terzaghi (1965).
 */
export function fractureMeasures(
  alphasDeg: Float64Array,
  lengthM: number,
  cappedAlphaDeg = CAPPED_ALPHA,
): FractureMeasures {
  if (!(lengthM > 0 && lengthM < Infinity)) {
    throw new KernelError('bad-parameter', `expected a logged length > 0 m, found ${lengthM}`);
  }
  let [weightedCount, cappedCount] = [0, 0];
  alphasDeg.forEach((alpha, row) => {
    if (!(alpha >= 0 && alpha <= 90)) {
      const message = `expected alpha in [0, 90], found ${alpha} in row ${row}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    weightedCount += samplingWeight(alpha, cappedAlphaDeg);
    if (alpha < cappedAlphaDeg) cappedCount++;
  });
  const count = alphasDeg.length;
  return {
    count,
    perMetre: count / lengthM,
    areaPerVolume: weightedCount / lengthM,
    weightedCount,
    cappedCount,
  };
}
