import { KernelError } from '#kernels/kernel-error.ts';
import { intervalFault, LOGGING_TOLERANCE_M } from './interval-table.ts';

/** How composites are laid over a run of one domain. */
export interface CompositeRules {
  /** Wanted length (m), > 0. */
  lengthM: number;
  /**
   * `equal` shares a run out in pieces of one length near the wanted one; `fixed` cuts pieces of the
   * wanted length from the top and leaves a residual.
   */
  mode?: 'equal' | 'fixed';
  /** What becomes of a residual shorter than the least share, in mode `fixed`. */
  residual?: 'append' | 'keep' | 'discard';
  /** Share of the wanted length from which a residual is a composite of its own. */
  leastShare?: number;
}

/** Where one run is cut. */
export interface CompositeBreaks {
  /** Depths from the top of the run to its end, both included. */
  breaks: number[];
  /** Whether the last piece is thrown away by the residual rule. */
  isLastDiscarded: boolean;
  /** Length under which a composite counts as short (m). */
  leastM: number;
}

const MOST_PIECES = 10_000_000;

/** Lengths that differ by less are the same length (m). */
const ROUNDING_M = 1e-9;

/**
 * Cuts one run into composites. Equal lengths: n = max(1, floor(L / Lc + 1/2)) pieces of L / n. Fixed
 * length: whole pieces from the top; a residual shorter than `leastShare` of the length is added to
 * the piece above (a run too short for that is kept whole), kept, or discarded.
 *
 * @throws {KernelError} `bad-parameter` at a length that logging cannot resolve, a share outside [0, 1]
 *   or more than 10 000 000 pieces; `bad-interval` at a run that is none.
 */
export function compositeBreaks(
  fromM: number,
  toM: number,
  rules: CompositeRules,
): CompositeBreaks {
  const { lengthM, mode = 'equal', residual = 'append', leastShare = 0.5 } = rules;
  if (!(lengthM > LOGGING_TOLERANCE_M && lengthM < Infinity)) {
    const message = `expected a composite length > ${LOGGING_TOLERANCE_M} m, found ${lengthM}`;
    throw new KernelError('bad-parameter', message);
  }
  if (!(leastShare >= 0 && leastShare <= 1)) {
    throw new KernelError('bad-parameter', `expected a share in [0, 1], found ${leastShare}`);
  }
  const fault = intervalFault(fromM, toM);
  if (fault) throw new KernelError('bad-interval', `${fault} of a run`);
  if (!((toM - fromM) / lengthM <= MOST_PIECES)) {
    const message = `expected at most ${MOST_PIECES} pieces of ${lengthM} m, found a run of ${toM - fromM} m`;
    throw new KernelError('bad-parameter', message);
  }
  const leastM = leastShare * lengthM - ROUNDING_M;
  const runM = toM - fromM;
  if (mode === 'equal') {
    const count = Math.max(1, Math.floor(runM / lengthM + 0.5));
    const breaks = Array.from({ length: count }, (_, i) => fromM + (i * runM) / count);
    return { breaks: [...breaks, toM], isLastDiscarded: false, leastM };
  }
  const whole = Math.floor(runM / lengthM + ROUNDING_M);
  const breaks = Array.from({ length: whole + 1 }, (_, i) => fromM + i * lengthM);
  const leftM = toM - breaks[whole]!;
  const isTooShort = leftM < leastM;
  if (leftM <= ROUNDING_M || (whole > 0 && isTooShort && residual === 'append')) {
    breaks[whole] = toM;
    return { breaks, isLastDiscarded: false, leastM };
  }
  return {
    breaks: [...breaks, toM],
    isLastDiscarded: isTooShort && residual === 'discard',
    leastM,
  };
}
