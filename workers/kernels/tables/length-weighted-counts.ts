import { effectiveCount } from '#kernels/statistics/weighted-moments.ts';
import { NOT_LOGGED, type Category } from './category.ts';
import { crossTabulate } from './cross-tabulation.ts';

/** A table in metres, brought to the number of rows that stands behind it. */
export interface LengthWeightedTable {
  rowLevels: string[];
  colLevels: string[];
  /** Row-major, shape (rowLevels, colLevels): metres scaled so that they add up to `effectiveN`. */
  counts: Float64Array;
  /** Kish's effective number of the intervals used; never more than there are. */
  effectiveN: number;
  metres: number;
  nUsed: number;
  nDropped: number;
  notes: string[];
}

/**
 * Crosses two label columns by length without inflating n. Chi-square grows with the total of its
 * table, so a table in metres would let the unit decide; here it adds up to the effective number of
 * intervals, (sum of lengths)^2 / sum of squared lengths, whatever the unit. Equal lengths give the
 * plain counts.
 *
 * Cutting intervals finer still adds rows: for tests, composite to one support first and count.
 *
 * @param rows, cols Label columns, n codes each.
 * @param lengthsM n lengths >= 0; intervals without length are dropped.
 * @throws {KernelError} As `crossTabulate`; `too-few-rows` when no interval carries both labels and a
 *   length.
 * @see Kish (1965), Survey Sampling, Wiley.
 */
export function lengthWeightedCounts(
  rows: Category,
  cols: Category,
  lengthsM: Float64Array,
): LengthWeightedTable {
  const measured: Category = {
    levels: rows.levels,
    codes: rows.codes.map((code, i) => (lengthsM[i] === 0 ? NOT_LOGGED : code)),
  };
  const table = crossTabulate(measured, cols, lengthsM);
  const used = lengthsM.filter(
    (_, i) => measured.codes[i] !== NOT_LOGGED && cols.codes[i] !== NOT_LOGGED,
  );
  const effectiveN = effectiveCount(used);
  const metres = used.reduce((sum, length) => sum + length, 0);
  return {
    rowLevels: table.rowLevels,
    colLevels: table.colLevels,
    counts: table.metres.map((cell) => (cell / metres) * effectiveN),
    effectiveN,
    metres,
    nUsed: table.nUsed,
    nDropped: table.nDropped,
    notes: table.notes,
  };
}
