import { KernelError } from '#kernels/kernel-error.ts';
import { notPositive, requireColumns } from './require-parts.ts';

/** One step of a sequential binary partition, by the names of its parts. */
export interface PartitionStep {
  above: readonly string[];
  below: readonly string[];
}

/**
 * Balance of two groups of parts, row by row: sqrt(r s / (r + s)) ln(gm(above) / gm(below)).
 *
 * @param columns One array per part (ppm), > 0 or NaN where missing. Not modified.
 * @param above Indices of the r parts above, `below` of the s parts below: no part twice.
 * @returns One value per row; NaN where a part of the balance is missing.
 * @throws {KernelError} `too-few-parts`, `shape`; `bad-parameter` for the groups; `not-positive`
 *   with { row, col }.
 * @see Egozcue & Pawlowsky-Glahn (2005), Groups of parts and their balances, Math. Geol. 37.
 */
export function balance(
  columns: readonly Float64Array[],
  above: readonly number[],
  below: readonly number[],
): Float64Array {
  const nRows = requireColumns(columns);
  const all = [...above, ...below];
  if (above.length === 0 || below.length === 0 || new Set(all).size !== all.length) {
    const message = `expected parts on each side and none twice, found ${above.length} above and ${below.length} below`;
    throw new KernelError('bad-parameter', message);
  }
  const outside = all.find((part) => columns[part] === undefined);
  if (outside !== undefined) {
    const message = `expected parts among ${columns.length}, found ${outside}`;
    throw new KernelError('bad-parameter', message);
  }
  const scale = Math.sqrt((above.length * below.length) / (above.length + below.length));
  const out = new Float64Array(nRows);
  const add = (part: number, weight: number) => {
    columns[part]!.forEach((value, row) => {
      if (!Number.isNaN(value) && !(value > 0 && value < Infinity)) {
        throw notPositive(value, row, part);
      }
      out[row]! += weight * Math.log(value);
    });
  };
  for (const part of above) add(part, scale / above.length);
  for (const part of below) add(part, -scale / below.length);
  return out;
}

/**
 * Signs of a sequential binary partition from named groups: the first step splits all parts, each
 * later one splits a group that an earlier step made. The rows are what `balanceBasis` takes.
 *
 * @param parts Names of all parts, each once.
 * @param steps parts.length - 1 splits.
 * @throws {KernelError} `too-few-parts` under two; `bad-parameter` with { step } at the first split
 *   that names an unknown part, names one twice, lacks a side, or splits no group there is.
 */
export function partitionSigns(
  parts: readonly string[],
  steps: readonly PartitionStep[],
): number[][] {
  if (parts.length < 2 || new Set(parts).size !== parts.length) {
    const message = `expected at least 2 parts of different names, found ${parts.length}`;
    throw new KernelError('too-few-parts', message, { found: parts.length });
  }
  const keyOf = (names: readonly string[]) => JSON.stringify([...names].sort());
  const open = new Set([keyOf(parts)]);
  const signs = steps.map(({ above, below }, step) => {
    const all = [...above, ...below];
    const unknown = all.find((name) => !parts.includes(name));
    if (unknown !== undefined) {
      throw refuseStep(step, `expected parts among ${parts.join(', ')}, found ${unknown}`);
    }
    if (above.length === 0 || below.length === 0) {
      throw refuseStep(step, 'expected a part on each side, found an empty side');
    }
    if (!open.delete(keyOf(all))) {
      throw refuseStep(step, `expected a group not split yet, found ${all.join(', ')}`);
    }
    for (const side of [above, below]) if (side.length > 1) open.add(keyOf(side));
    return parts.map((name) => (above.includes(name) ? 1 : below.includes(name) ? -1 : 0));
  });
  if (open.size > 0) {
    const message = `expected ${parts.length - 1} splits, found ${steps.length}`;
    throw refuseStep(steps.length, message);
  }
  return signs;
}

function refuseStep(step: number, message: string): KernelError {
  return new KernelError('bad-parameter', `split ${step + 1}: ${message}`, { step });
}
