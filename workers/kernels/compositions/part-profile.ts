import { KernelError } from '#kernels/kernel-error.ts';
import { sortedAscending } from '#kernels/statistics/sort-ascending.ts';
import { VALUE_STATE } from './replacement.ts';

/** How complete one analyte is: what screening rests on. */
export interface PartProfile {
  nRows: number;
  nMeasured: number;
  nBelow: number;
  nAbove: number;
  /** Missing or not analysed. */
  nMissing: number;
  /** Distinct detection limits, ascending, in the unit of the values. */
  limits: number[];
  /** Share of the measured rows taken by the four commonest values: rounding steps. */
  steppedShare: number;
}

/**
 * Counts the states of a column, its limits and its rounding steps.
 *
 * @param values ppm, the limit where `states` says below or above. Not modified.
 * @param states One of VALUE_STATE per row.
 * @throws {KernelError} `shape`; `bad-parameter` with { row } at an unknown state.
 */
export function profilePart(values: Float64Array, states: Uint8Array): PartProfile {
  if (states.length !== values.length) {
    throw new KernelError('shape', `expected ${values.length} states, found ${states.length}`);
  }
  const counts = [0, 0, 0, 0, 0];
  const limits = new Set<number>();
  for (let row = 0; row < values.length; row++) {
    const state = states[row]!;
    if (state > VALUE_STATE.notAnalysed) {
      throw new KernelError('bad-parameter', `expected a state 0–4, found ${state} at row ${row}`, {
        row,
      });
    }
    counts[state]! += 1;
    const value = values[row]!;
    if (state === VALUE_STATE.below && value > 0 && value < Infinity) limits.add(value);
  }
  const [nMeasured = 0, nBelow = 0, nAbove = 0, nMissing = 0, nNotAnalysed = 0] = counts;
  return {
    nRows: values.length,
    nMeasured,
    nBelow,
    nAbove,
    nMissing: nMissing + nNotAnalysed,
    limits: [...limits].sort((a, b) => a - b),
    steppedShare: steppedShare(values, states, nMeasured),
  };
}

/** The four longest runs of equal values, by sorting. */
function steppedShare(values: Float64Array, states: Uint8Array, nMeasured: number): number {
  if (nMeasured === 0) return 0;
  const found = new Float64Array(nMeasured);
  let count = 0;
  for (let row = 0; row < values.length; row++) {
    if (states[row] === VALUE_STATE.measured) found[count++] = values[row]!;
  }
  const measured = sortedAscending(found);
  const longest = [0, 0, 0, 0];
  let run = 0;
  for (let i = 0; i < nMeasured; i++) {
    run = i > 0 && measured[i] === measured[i - 1] ? run + 1 : 1;
    const isEnd = i + 1 === nMeasured || measured[i + 1] !== measured[i];
    if (isEnd && run > longest[3]!) {
      longest[3] = run;
      longest.sort((a, b) => b - a);
    }
  }
  return longest.reduce((sum, length) => sum + length, 0) / nMeasured;
}
