import { fitComponents, type ComponentBasis } from '#kernels/components/components.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import { centredLogRatio } from '#kernels/compositions/centred-log-ratio.ts';
import { helmertBasis, pivotBasis } from '#kernels/compositions/ilr-basis.ts';
import { isometricLogRatio } from '#kernels/compositions/isometric-log-ratio.ts';
import { summarise } from '#kernels/statistics/summary.ts';
import { rawTable, toColumns } from '#tests/support/reference-transform.ts';
import { numbersOf, type ReferenceCheck, type ReferenceSet } from '#tests/support/reference.ts';

/** The values of a check with one column, after its `transform` (none means raw). */
export function transformedValues(set: ReferenceSet, check: ReferenceCheck): Float64Array {
  const values = numbersOf(set, check);
  const { transform = 'raw' } = check.inputs;
  if (transform === 'raw') return values;
  if (transform === 'ln') return values.map(Math.log);
  throw new Error(`${check.id}: no transform ${transform} of one column`);
}

/** The columns of a check after its `transform`, computed by the kernels. */
export function transformedColumns(set: ReferenceSet, check: ReferenceCheck): Float64Array[] {
  const { transform = 'raw' } = check.inputs;
  if (transform.endsWith('_std')) {
    const plain = { ...check.inputs, transform: transform.slice(0, -'_std'.length) };
    return transformedColumns(set, { ...check, inputs: plain }).map(standardised);
  }
  const table = rawTable(set, check);
  const { values, nRows, nCols } = table;
  const columnsOf = (made: Float64Array) =>
    toColumns({ values: made, nRows, nCols: made.length / nRows });
  switch (transform) {
    case 'raw':
      return toColumns(table);
    case 'ln':
      return toColumns(table).map((column) => column.map(Math.log));
    case 'ln_cor':
      return toColumns(table).map((column) => standardised(column.map(Math.log)));
    case 'clr':
    case 'clr_cov':
      return columnsOf(centredLogRatio(values, nCols));
    case 'ilr_pivot':
      return columnsOf(isometricLogRatio(values, pivotBasis(nCols)));
    case 'ilr_helmert':
      return columnsOf(isometricLogRatio(values, helmertBasis(nCols)));
    case 'pca_clr_cov_scores':
      return principalScores(toColumns(table), 'clr-covariance', check.inputs.components ?? 2);
    default:
      throw new Error(`${check.id}: no transform ${transform}`);
  }
}

/** Scores on the first components. */
function principalScores(
  columns: Float64Array[],
  basis: ComponentBasis,
  count: number,
): Float64Array[] {
  return scoreComponents(columns, fitComponents(columns, { basis }), count);
}

function standardised(column: Float64Array): Float64Array {
  const { mean, sd } = summarise(column);
  return column.map((value) => (value - mean) / (sd ?? NaN));
}

/** Rows of columns: `rows[i][j]` is row i of column j. */
export function rowsOfColumns(columns: readonly Float64Array[]): number[][] {
  return Array.from({ length: columns[0]?.length ?? 0 }, (_, row) =>
    columns.map((column) => column[row] ?? NaN),
  );
}

/** Rows of a row-major table. */
export function rowsOfTable(values: ArrayLike<number>, nCols: number): number[][] {
  const flat = Array.from(values);
  return Array.from({ length: flat.length / nCols }, (_, row) =>
    flat.slice(row * nCols, (row + 1) * nCols),
  );
}

/** The rows a check reports, all when it names none; rows count from 1. */
export function reported<T>(check: ReferenceCheck, rows: readonly T[]): T[] {
  const { report_rows: numbers } = check.inputs;
  if (!numbers) return [...rows];
  return numbers.map((number) => {
    const row = rows[number - 1];
    if (row === undefined) throw new Error(`${check.id}: no row ${number} of ${rows.length}`);
    return row;
  });
}
