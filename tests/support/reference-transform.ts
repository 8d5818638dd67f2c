import { EVD, Matrix } from 'ml-matrix';
import { numbersOf, type ReferenceCheck, type ReferenceSet } from './reference.ts';

/** A row-major table of numbers. */
export interface ReferenceTable {
  values: Float64Array;
  nRows: number;
  nCols: number;
}

/**
 * The `columns` of a check as a row-major table, before any transform. Transforms here are written
 * from their definitions, apart from the kernels they help to test.
 */
export function rawTable(set: ReferenceSet, check: ReferenceCheck): ReferenceTable {
  const names = check.inputs.columns ?? [check.inputs.column ?? ''];
  const columns = names.map((name) => numbersOf(set, check, name));
  return fromRows(Array.from(columns[0] ?? [], (_, row) => columns.map((col) => col[row] ?? NaN)));
}

/** The check's table after its `transform` (none means raw). */
export function transformedTable(set: ReferenceSet, check: ReferenceCheck): ReferenceTable {
  const rows = toRows(rawTable(set, check));
  const ln = rows.map((row) => row.map(Math.log));
  switch (check.inputs.transform ?? 'raw') {
    case 'raw':
      return fromRows(rows);
    case 'ln':
      return fromRows(ln);
    case 'ln_cor':
      return fromRows(standardised(ln));
    case 'clr':
    case 'clr_cov':
      return fromRows(ln.map(centred));
    case 'ilr_pivot':
      return fromRows(ln.map(pivot));
    case 'ilr_helmert':
      return fromRows(ln.map(helmert));
    case 'ilr_pivot_std':
      return fromRows(standardised(ln.map(pivot)));
    case 'ilr_helmert_std':
      return fromRows(standardised(ln.map(helmert)));
    case 'pca_clr_cov_scores':
      return fromRows(principalScores(ln.map(centred), check.inputs.components ?? 2));
    default:
      throw new Error(`${check.id}: unknown transform ${check.inputs.transform}`);
  }
}

/** Rows of a table as plain arrays. */
export function toRows({ values, nCols, nRows }: ReferenceTable): number[][] {
  return Array.from({ length: nRows }, (_, r) => [...values.subarray(r * nCols, (r + 1) * nCols)]);
}

/** Columns of a table, each an array of its own. */
export function toColumns({ values, nCols, nRows }: ReferenceTable): Float64Array[] {
  return Array.from({ length: nCols }, (_, c) =>
    Float64Array.from({ length: nRows }, (_, r) => values[r * nCols + c] ?? NaN),
  );
}

function fromRows(rows: number[][]): ReferenceTable {
  return {
    values: Float64Array.from(rows.flat()),
    nRows: rows.length,
    nCols: rows[0]?.length ?? 0,
  };
}

const mean = (values: number[]): number => values.reduce((a, b) => a + b, 0) / values.length;

function centred(row: number[]): number[] {
  const centre = mean(row);
  return row.map((value) => value - centre);
}

function pivot(ln: number[]): number[] {
  return ln.slice(0, -1).map((value, i) => {
    const later = ln.slice(i + 1);
    return Math.sqrt(later.length / (later.length + 1)) * (value - mean(later));
  });
}

function helmert(ln: number[]): number[] {
  return ln
    .slice(1)
    .map((value, i) => Math.sqrt((i + 1) / (i + 2)) * (mean(ln.slice(0, i + 1)) - value));
}

function standardised(rows: number[][]): number[][] {
  const stats = (rows[0] ?? []).map((_, c) => {
    const column = rows.map((row) => row[c] ?? NaN);
    const centre = mean(column);
    const squares = column.reduce((sum, v) => sum + (v - centre) ** 2, 0);
    return { centre, sd: Math.sqrt(squares / (column.length - 1)) };
  });
  return rows.map((row) =>
    row.map((v, c) => (v - (stats[c]?.centre ?? NaN)) / (stats[c]?.sd ?? NaN)),
  );
}

function principalScores(rows: number[][], k: number): number[][] {
  const table = new Matrix(rows).center('column');
  const { eigenvectorMatrix } = new EVD(table.transpose().mmul(table), { assumeSymmetric: true });
  const last = eigenvectorMatrix.columns - 1;
  const kept = Array.from({ length: k }, (_, i) => last - i);
  return table.mmul(eigenvectorMatrix.subMatrixColumn(kept)).to2DArray();
}
