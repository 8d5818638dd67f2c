import { KernelError } from '#kernels/kernel-error.ts';
import { DEFAULT_REPLACEMENT_FRACTION, VALUE_STATE } from './replacement.ts';
import { notPositive, requireColumns } from './require-parts.ts';

/** Log-ratios to one part, with the cells that are only known to be below a limit. */
export interface CensoredLogRatios {
  n: number;
  p: number;
  /** Row-major (n, p), ln(x_j / x_denominator); cells below their limit hold a current guess. */
  ratios: Float64Array;
  /** Position in `ratios` and ln(limit / x_denominator) of each cell below its limit, by rows. */
  cells: { at: number; limit: number }[];
  denominator: number;
  /** Part of each coordinate. */
  partOf: number[];
  /** Table row of each row: those that miss no part. */
  rows: Uint32Array;
  nIncomplete: number;
}

/**
 * Ratios of the rows that miss no part, to the first part that is never below its limit; values
 * below start at a share of their limit.
 *
 * @throws {KernelError} `too-few-parts`, `shape`; `not-positive` with { row, col } at a measured
 *   value or a limit that is no number > 0; `too-few-rows`; `no-denominator`.
 */
export function prepareLogRatios(
  columns: readonly Float64Array[],
  states: readonly Uint8Array[],
): CensoredLogRatios {
  const nRows = requireColumns(columns, 3);
  if (states.length !== columns.length || states.some((column) => column.length !== nRows)) {
    throw new KernelError('shape', `expected ${nRows} states in each of ${columns.length} parts`);
  }
  const isComplete = (row: number) => states.every((part) => part[row]! < VALUE_STATE.missing);
  const rows = Uint32Array.from({ length: nRows }, (_, row) => row).filter(isComplete);
  if (!(rows.length > columns.length + 5)) {
    const message = `expected more than ${columns.length + 5} complete rows, found ${rows.length}`;
    throw new KernelError('too-few-rows', message, { found: rows.length });
  }
  const denominator = states.findIndex((part) =>
    rows.every((row) => part[row] !== VALUE_STATE.below),
  );
  if (denominator < 0) {
    const message = 'expected a part measured in every complete row, found none';
    throw new KernelError('no-denominator', message);
  }
  const partOf = Array.from(columns.keys()).filter((part) => part !== denominator);
  return {
    ...fillRatios(columns, states, rows, denominator, partOf),
    n: rows.length,
    p: partOf.length,
    denominator,
    partOf,
    rows,
    nIncomplete: nRows - rows.length,
  };
}

function fillRatios(
  columns: readonly Float64Array[],
  states: readonly Uint8Array[],
  rows: Uint32Array,
  denominator: number,
  partOf: readonly number[],
): Pick<CensoredLogRatios, 'ratios' | 'cells'> {
  const logOf = (row: number, part: number) => {
    const value = columns[part]![row]!;
    if (!(value > 0 && value < Infinity)) throw notPositive(value, row, part);
    return Math.log(value);
  };
  const ratios = new Float64Array(rows.length * partOf.length);
  const cells: CensoredLogRatios['cells'] = [];
  let at = 0;
  for (const row of rows) {
    const below = logOf(row, denominator);
    for (const part of partOf) {
      const ratio = logOf(row, part) - below;
      const isBelow = states[part]![row] === VALUE_STATE.below;
      if (isBelow) cells.push({ at, limit: ratio });
      ratios[at++] = isBelow ? ratio + Math.log(DEFAULT_REPLACEMENT_FRACTION) : ratio;
    }
  }
  return { ratios, cells };
}
