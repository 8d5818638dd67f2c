import { KernelError } from '#kernels/kernel-error.ts';

/**
 * Checks a row-major table of compositions: whole rows of at least two parts, all finite and > 0.
 *
 * @returns Number of rows.
 * @throws {KernelError} `shape`; `not-positive` with { row, col } at the first bad value.
 */
export function requireParts(parts: Float64Array, nCols: number): number {
  const nRows = requireShape(parts, nCols);
  for (let i = 0; i < parts.length; i++) {
    const value = parts[i]!;
    if (!(value > 0 && value < Infinity)) {
      throw notPositive(value, Math.floor(i / nCols), i % nCols);
    }
  }
  return nRows;
}

/**
 * Checks that a row-major table has whole rows of at least two parts.
 *
 * @returns Number of rows.
 * @throws {KernelError} `shape`.
 */
export function requireShape(parts: Float64Array, nCols: number): number {
  if (!(nCols >= 2) || !Number.isInteger(nCols) || parts.length % nCols !== 0) {
    throw new KernelError('shape', `${parts.length} values do not fill rows of ${nCols} parts`);
  }
  return parts.length / nCols;
}

/** The refusal of a part that has no logarithm. */
export function notPositive(value: number, row: number, col: number): KernelError {
  const message = `expected a finite part > 0, found ${value} at row ${row}, part ${col}`;
  return new KernelError('not-positive', message, { row, col });
}

/**
 * Checks a table held as one array per part.
 *
 * @param minParts Fewest parts that make sense, >= 2.
 * @returns Number of rows.
 * @throws {KernelError} `too-few-parts`; `shape` with { col } when lengths differ.
 */
export function requireColumns(columns: readonly Float64Array[], minParts = 2): number {
  const [first] = columns;
  if (!first || columns.length < minParts) {
    const message = `expected at least ${minParts} parts, found ${columns.length}`;
    throw new KernelError('too-few-parts', message, { found: columns.length });
  }
  const col = columns.findIndex((column) => column.length !== first.length);
  if (col >= 0) {
    const message = `expected ${first.length} rows in each part, found ${columns[col]?.length} in part ${col}`;
    throw new KernelError('shape', message, { col });
  }
  return first.length;
}

/** A row-major table as one array per part. */
export function columnsOfTable(parts: Float64Array, nCols: number): Float64Array[] {
  if (!(nCols >= 1) || parts.length % nCols !== 0) {
    throw new KernelError('shape', `${parts.length} values do not fill rows of ${nCols} parts`);
  }
  return Array.from({ length: nCols }, (_, col) =>
    Float64Array.from({ length: parts.length / nCols }, (__, row) => parts[row * nCols + col]!),
  );
}
