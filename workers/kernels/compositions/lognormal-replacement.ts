import { KernelError } from '#kernels/kernel-error.ts';
import {
  fitCensoredLognormal,
  meanBelowLimit,
  type CensoredLognormal,
} from './censored-lognormal.ts';
import { replaceBelowLimit, VALUE_STATE, type ReplacedColumn } from './replacement.ts';

/** A column whose values below detection were replaced by what a lognormal expects there. */
export interface LognormalReplacement extends ReplacedColumn {
  /** Null when simple replacement was taken instead; `notes` says why. */
  fit: CensoredLognormal | null;
}

export interface LognormalReplacementOptions {
  /** Fewest measured values a distribution is fitted to. */
  minMeasured?: number;
  /** Largest sd of ln x that is believed. */
  maxLogSd?: number;
  /** Of the limit, where simple replacement is taken instead. */
  fraction?: number;
  /** Where to write the values (for shared memory); a new array unless given. */
  out?: Float64Array;
}

/**
 * Multiplicative lognormal replacement on unclosed grades: a value below detection becomes the
 * geometric mean, below its own limit, of the lognormal fitted to the whole column. Observed values
 * stay, and with them every ratio of them.
 *
 * @param values ppm; where `states` says below or above, the limit that was passed. Not modified.
 * @param states One of VALUE_STATE per row. Above-limit values count as measured at their limit.
 * @returns An unknown limit is taken as the smallest measured value, noted. Under `minMeasured`
 *   values, or with a fit that cannot be believed, simple replacement is taken instead, noted.
 * @throws {KernelError} As {@link replaceBelowLimit}; `bad-parameter` for the options.
 * @see Palarea-Albaladejo & Martin-Fernandez (2013), Values below detection limit in compositional
 *   chemical data, Anal. Chim. Acta 764.
 */
export function replaceByLognormal(
  values: Float64Array,
  states: Uint8Array,
  options: LognormalReplacementOptions = {},
): LognormalReplacement {
  const { minMeasured = 10, maxLogSd = 3, ...simpleOptions } = options;
  if (!(minMeasured >= 2) || !(maxLogSd > 0)) {
    const message = `expected at least 2 values and a largest sd > 0, found ${minMeasured}, ${maxLogSd}`;
    throw new KernelError('bad-parameter', message);
  }
  // Checks the column, and stands where no distribution can be fitted.
  const simple = replaceBelowLimit(values, states, simpleOptions);
  if (simple.nReplaced === 0) return { ...simple, fit: null };
  const measured = values.filter((_, row) => isMeasured(states[row]!));
  const smallest = measured.reduce((least, value) => Math.min(least, value), Infinity);
  const limitAt = (row: number) => (isLimit(values[row]!) ? values[row]! : smallest);
  const limits = Float64Array.from(states.keys())
    .filter((row) => states[row] === VALUE_STATE.below)
    .map(limitAt);
  const { fit, reason } = tryFit(measured, limits, minMeasured, maxLogSd);
  if (!fit) {
    const note = `${reason}: ${simple.nReplaced} values were replaced by a share of their limit instead`;
    return { ...simple, notes: [...simple.notes, note], fit: null };
  }
  const known = new Map<number, number>();
  for (let row = 0; row < states.length; row++) {
    if (states[row] !== VALUE_STATE.below) continue;
    const limit = limitAt(row);
    const value = known.get(limit) ?? meanBelowLimit(fit, limit);
    known.set(limit, value);
    simple.values[row] = value;
  }
  return { ...simple, notes: unknownLimitNotes(values, states, smallest), fit };
}

const isMeasured = (state: number): boolean =>
  state <= VALUE_STATE.above && state !== VALUE_STATE.below;
const isLimit = (value: number): boolean => value > 0 && value < Infinity;

function tryFit(
  measured: Float64Array,
  limits: Float64Array,
  minMeasured: number,
  maxLogSd: number,
): { fit: CensoredLognormal | null; reason: string } {
  if (measured.length < minMeasured) {
    return { fit: null, reason: `only ${measured.length} values were measured` };
  }
  try {
    const fit = fitCensoredLognormal(measured, limits);
    const sd = fit.logSd.toPrecision(2);
    if (fit.logSd > maxLogSd)
      return { fit: null, reason: `the fitted sd of logs, ${sd}, is too wide` };
    const isUsable = limits.every((limit) => {
      const value = meanBelowLimit(fit, limit);
      return value > 0 && value < limit;
    });
    if (isUsable) return { fit, reason: '' };
    return { fit: null, reason: 'the fitted distribution does not reach below the limits' };
  } catch (error) {
    if (!(error instanceof KernelError)) throw error;
    return { fit: null, reason: `no distribution could be fitted (${error.message})` };
  }
}

function unknownLimitNotes(values: Float64Array, states: Uint8Array, smallest: number): string[] {
  const isUnknown = (row: number) => states[row] === VALUE_STATE.below && !isLimit(values[row]!);
  const nUnknown = Array.from(states.keys()).filter(isUnknown).length;
  if (nUnknown === 0) return [];
  return [
    `${nUnknown} values below an unknown limit: the smallest measured value, ${smallest}, was taken as the limit`,
  ];
}
