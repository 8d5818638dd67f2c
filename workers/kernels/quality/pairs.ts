import { VALUE_STATE } from '#kernels/compositions/replacement.ts';
import { KernelError } from '#kernels/kernel-error.ts';

/** Fewest pairs a figure is given for. */
export const FEWEST_PAIRS = 5;

/** Pairs of assays of one material, with what was left out and why. */
export interface UsedPairs {
  a: Float64Array;
  b: Float64Array;
  /** Row of each used pair. */
  rows: Uint32Array;
  n: number;
  dropped: {
    /** One side or both missing. */
    missing: number;
    /** One side or both below detection, or above the upper limit. */
    censored: number;
    /** One side or both under the multiple of the detection limit. */
    nearLimit: number;
    /** Both 0. */
    zero: number;
  };
}

export interface PairOptions {
  /** VALUE_STATE of each value of a and b; all measured unless given. */
  states?: { a: Uint8Array; b: Uint8Array };
  /** Detection limit in the unit of the values; 0 when not known. */
  limit?: number;
  /** Pairs need both values at or above this many limits. */
  limitMultiple?: number;
}

/**
 * Pairs fit for summary figures: both measured, both well above the detection limit.
 *
 * @param a, b Values of the same rows in one unit, NaN where missing, otherwise >= 0. Not modified.
 * @throws {KernelError} `shape`; `bad-parameter` for the options; `not-positive` with { row } at a
 *   negative or infinite value; `too-few-rows` under five pairs.
 */
export function usablePairs(
  a: Float64Array,
  b: Float64Array,
  options: PairOptions = {},
): UsedPairs {
  const { states, limit = 0, limitMultiple = 10 } = options;
  requireSides(a, b, states);
  if (!(limit >= 0 && limit < Infinity) || !(limitMultiple >= 0 && limitMultiple < Infinity)) {
    const message = `expected a limit and a multiple >= 0, found ${limit}, ${limitMultiple}`;
    throw new KernelError('bad-parameter', message);
  }
  const dropped = { missing: 0, censored: 0, nearLimit: 0, zero: 0 };
  const least = limit * limitMultiple;
  const rows: number[] = [];
  for (let row = 0; row < a.length; row++) {
    const reason = dropReason(a[row]!, b[row]!, stateAt(states, row), least, row);
    if (reason) dropped[reason]++;
    else rows.push(row);
  }
  if (rows.length < FEWEST_PAIRS) {
    const message = `expected at least ${FEWEST_PAIRS} pairs measured above ${least}, found ${rows.length} of ${a.length}`;
    throw new KernelError('too-few-rows', message, { found: rows.length });
  }
  return {
    a: Float64Array.from(rows, (row) => a[row]!),
    b: Float64Array.from(rows, (row) => b[row]!),
    rows: Uint32Array.from(rows),
    n: rows.length,
    dropped,
  };
}

/** The worse state of the two: missing before censored before measured. */
function stateAt(states: PairOptions['states'], row: number): number {
  return states ? Math.max(states.a[row]!, states.b[row]!) : VALUE_STATE.measured;
}

function dropReason(
  a: number,
  b: number,
  state: number,
  least: number,
  row: number,
): keyof UsedPairs['dropped'] | null {
  if (state >= VALUE_STATE.missing || Number.isNaN(a) || Number.isNaN(b)) return 'missing';
  if (!(a >= 0 && a < Infinity && b >= 0 && b < Infinity)) {
    const message = `expected values >= 0, found ${a} and ${b} at row ${row}`;
    throw new KernelError('not-positive', message, { row });
  }
  if (state !== VALUE_STATE.measured) return 'censored';
  if (a + b === 0) return 'zero';
  return a < least || b < least ? 'nearLimit' : null;
}

function requireSides(a: Float64Array, b: Float64Array, states: PairOptions['states']): void {
  if (a.length !== b.length) {
    throw new KernelError('shape', `expected pairs, found ${a.length} and ${b.length} values`);
  }
  if (states && (states.a.length !== a.length || states.b.length !== b.length)) {
    throw new KernelError('shape', `expected ${a.length} states on each side`);
  }
}

/**
 * Checks plain pairs: the same number of finite values on each side.
 *
 * @returns Number of pairs.
 * @throws {KernelError} `shape`; `too-few-rows` under `fewest`; `not-finite` with { row }.
 */
export function requirePairs(x: Float64Array, y: Float64Array, fewest = FEWEST_PAIRS): number {
  if (x.length !== y.length) {
    throw new KernelError('shape', `expected pairs, found ${x.length} and ${y.length} values`);
  }
  if (x.length < fewest) {
    const message = `expected at least ${fewest} pairs, found ${x.length}`;
    throw new KernelError('too-few-rows', message, { found: x.length });
  }
  const row = x.findIndex((value, i) => !(Math.abs(value) < 1e150 && Math.abs(y[i]!) < 1e150));
  if (row >= 0) {
    const message = `expected finite pairs, found ${x[row]} and ${y[row]} at row ${row}`;
    throw new KernelError('not-finite', message, { row });
  }
  return x.length;
}
