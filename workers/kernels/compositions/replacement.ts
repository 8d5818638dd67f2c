import { KernelError } from '#kernels/kernel-error.ts';
import { requireParts } from './require-parts.ts';

/** Share of the detection limit a value below it becomes unless said. */
export const DEFAULT_REPLACEMENT_FRACTION = 0.65;

/** What each value of a column means; the numbers are those of stored columns. */
export const VALUE_STATE = { measured: 0, below: 1, above: 2, missing: 3, notAnalysed: 4 } as const;

/** A part of the table with its values below detection replaced. */
export interface ReplacedColumn {
  /** Finite and > 0 where measured or replaced; NaN where missing. */
  values: Float64Array;
  /** 1 where a value was put in place of one below its limit. */
  isReplaced: Uint8Array;
  nReplaced: number;
  notes: string[];
}

/**
 * Simple replacement on unclosed grades: a value below detection becomes fraction x its own limit;
 * observed values stay, since the mass added comes out of what was not measured.
 *
 * @param values ppm; where `states` says below or above, the limit that was passed. Not modified.
 * @param states One of {@link VALUE_STATE} per row.
 * @param options.fraction In (0, 1].
 * @param options.out Where to write the values (for shared memory); a new array unless given.
 * @returns Above-limit values keep their limit. A limit that is no number > 0 is taken as the
 *   smallest measured value, noted. In a column of one limit, a replacement not below the smallest
 *   measured value becomes half of that value, noted; with several limits it stays, since a coarse
 *   limit may lie above values of a finer method.
 * @throws {KernelError} `shape`; `bad-parameter` for the fraction; `not-positive` with { row } at a
 *   measured value that is not a finite number > 0; `too-few-rows` when a limit is unknown and
 *   nothing was measured.
 * @see Martin-Fernandez, Barcelo-Vidal & Pawlowsky-Glahn (2003), Math. Geol. 35.
 */
export function replaceBelowLimit(
  values: Float64Array,
  states: Uint8Array,
  options: { fraction?: number; out?: Float64Array } = {},
): ReplacedColumn {
  const { fraction = DEFAULT_REPLACEMENT_FRACTION, out = new Float64Array(values.length) } =
    options;
  if (states.length !== values.length || out.length !== values.length) {
    throw new KernelError('shape', `expected ${values.length} states and places for results`);
  }
  if (!(fraction > 0 && fraction <= 1)) {
    throw new KernelError('bad-parameter', `expected a fraction in (0, 1], found ${fraction}`);
  }
  const { smallest, limits, nUnknown } = surveyColumn(values, states);
  if (nUnknown > 0 && smallest === Infinity) {
    const message = `${nUnknown} values are below an unknown limit and nothing was measured`;
    throw new KernelError('too-few-rows', message);
  }
  const isReplaced = new Uint8Array(values.length);
  let [nReplaced, nClipped] = [0, 0];
  for (let row = 0; row < values.length; row++) {
    const state = states[row]!;
    if (state !== VALUE_STATE.below) {
      out[row] = state <= VALUE_STATE.above ? values[row]! : NaN;
      continue;
    }
    const limit = isLimit(values[row]!) ? values[row]! : smallest;
    const isClipped = limits.size <= 1 && fraction * limit >= smallest;
    out[row] = isClipped ? smallest / 2 : fraction * limit;
    isReplaced[row] = 1;
    nReplaced++;
    if (isClipped) nClipped++;
  }
  return {
    values: out,
    isReplaced,
    nReplaced,
    notes: replacementNotes(nUnknown, nClipped, smallest),
  };
}

const isLimit = (value: number): boolean => value > 0 && value < Infinity;

function surveyColumn(values: Float64Array, states: Uint8Array) {
  let [smallest, nUnknown] = [Infinity, 0];
  const limits = new Set<number>();
  for (let row = 0; row < values.length; row++) {
    const [value, state] = [values[row]!, states[row]!];
    if (state === VALUE_STATE.below) {
      if (isLimit(value)) limits.add(value);
      else nUnknown++;
    } else if (state <= VALUE_STATE.above) {
      if (!isLimit(value)) {
        const message = `expected a measured part > 0, found ${value} at row ${row}`;
        throw new KernelError('not-positive', message, { row });
      }
      if (state === VALUE_STATE.measured && value < smallest) smallest = value;
    }
  }
  return { smallest, limits, nUnknown };
}

function replacementNotes(nUnknown: number, nClipped: number, smallest: number): string[] {
  const notes: string[] = [];
  if (nUnknown > 0) {
    notes.push(
      `${nUnknown} values below an unknown limit: the smallest measured value, ${smallest}, was taken as the limit`,
    );
  }
  if (nClipped > 0) {
    notes.push(
      `${nClipped} replacements were not below the smallest measured value, ${smallest}: half of it was taken`,
    );
  }
  return notes;
}

/**
 * Brings a column to one detection limit: every measured value under it, and every finer limit,
 * becomes "below `limit`". Use it where the limit changed between campaigns.
 *
 * @returns New values and states; nothing else changes.
 * @throws {KernelError} `shape`; `bad-parameter` for a limit that is not > 0; `not-finite` with { row }
 *   at an infinite value.
 */
export function harmoniseLimit(
  values: Float64Array,
  states: Uint8Array,
  limit: number,
): { values: Float64Array; states: Uint8Array; nChanged: number } {
  if (states.length !== values.length) {
    throw new KernelError('shape', `expected ${values.length} states, found ${states.length}`);
  }
  if (!isLimit(limit))
    throw new KernelError('bad-parameter', `expected a limit > 0, found ${limit}`);
  const out = { values: values.slice(), states: states.slice(), nChanged: 0 };
  for (let row = 0; row < values.length; row++) {
    const [value, state] = [values[row]!, states[row]!];
    if (Math.abs(value) === Infinity) {
      const message = `expected values or NaN, found ${value} at row ${row}`;
      throw new KernelError('not-finite', message, { row });
    }
    const isUnder =
      state <= VALUE_STATE.below &&
      (value < limit || (state === VALUE_STATE.below && !isLimit(value)));
    if (!isUnder) continue;
    out.values[row] = limit;
    out.states[row] = VALUE_STATE.below;
    out.nChanged++;
  }
  return out;
}

/**
 * Multiplicative simple replacement on closed data: a part of 0 becomes its replacement, the others
 * x (1 - sum of replacements / total), so that the total and every observed ratio stay.
 *
 * @param parts Row-major (nRows, nCols), rows summing to `total`, zeros where below detection. Not
 *   modified.
 * @param replacements Same shape: what a zero becomes, in the unit of the closed parts (usually
 *   fraction x limit); read only where a part is 0.
 * @throws {KernelError} `shape`; `bad-parameter` with { row } where a row does not sum to the total
 *   or its replacements are not > 0 or reach it; `not-positive` for a part under 0 or no number.
 * @see Martin-Fernandez, Barcelo-Vidal & Pawlowsky-Glahn (2003), Math. Geol. 35.
 */
export function replaceInClosed(
  parts: Float64Array,
  nCols: number,
  replacements: Float64Array,
  total = 1,
): Float64Array {
  if (parts.length !== replacements.length) {
    throw new KernelError('shape', `${replacements.length} replacements for ${parts.length} parts`);
  }
  // Zeros stand for values below detection: everything else must be a part.
  requireParts(
    parts.map((value) => (value === 0 ? 1 : value)),
    nCols,
  );
  const out = new Float64Array(parts.length);
  for (let start = 0; start < parts.length; start += nCols) {
    let [sum, added] = [0, 0];
    for (let at = start; at < start + nCols; at++) {
      sum += parts[at]!;
      if (parts[at] === 0) added += replacements[at]! > 0 ? replacements[at]! : NaN;
    }
    const row = start / nCols;
    if (!(Math.abs(sum - total) <= 1e-9 * total) || !(added < total)) {
      const message = `row ${row}: expected parts summing to ${total} and smaller replacements > 0, found ${sum} and ${added}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    const share = 1 - added / total;
    for (let at = start; at < start + nCols; at++) {
      out[at] = parts[at] === 0 ? replacements[at]! : parts[at]! * share;
    }
  }
  return out;
}
