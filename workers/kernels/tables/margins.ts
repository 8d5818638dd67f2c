import { KernelError } from '#kernels/kernel-error.ts';

/** Totals of a two-way table. */
export interface Margins {
  nRows: number;
  nCols: number;
  rowTotals: Float64Array;
  colTotals: Float64Array;
  total: number;
}

/**
 * Row, column and grand totals.
 *
 * @param cells Row-major, shape (nRows, nCols), each finite and >= 0.
 * @throws {KernelError} `shape` when the cells do not fill rows; `bad-parameter` with { row, col } at
 *   a negative or non-finite cell.
 */
export function marginsOf(cells: Float64Array, nCols: number): Margins {
  if (!(nCols >= 1) || cells.length % nCols !== 0) {
    throw new KernelError('shape', `${cells.length} cells do not fill rows of ${nCols} columns`);
  }
  const nRows = cells.length / nCols;
  const rowTotals = new Float64Array(nRows);
  const colTotals = new Float64Array(nCols);
  let total = 0;
  cells.forEach((cell, i) => {
    const row = Math.floor(i / nCols);
    const col = i % nCols;
    if (!(cell >= 0 && cell < Infinity)) {
      const where = `row ${row}, column ${col}`;
      throw new KernelError('bad-parameter', `expected a cell >= 0, found ${cell} in ${where}`, {
        row,
        col,
      });
    }
    rowTotals[row]! += cell;
    colTotals[col]! += cell;
    total += cell;
  });
  return { nRows, nCols, rowTotals, colTotals, total };
}

/**
 * Shares of each row's total, for display: the metres of a domain by lithology, for instance.
 *
 * @param cells Row-major, shape (nRows, nCols), usually metres.
 * @returns Same shape, each row summing to 1; a row without metres is NaN.
 */
export function rowShares(cells: Float64Array, nCols: number): Float64Array {
  const { rowTotals } = marginsOf(cells, nCols);
  return cells.map((cell, i) => cell / rowTotals[Math.floor(i / nCols)]!);
}
