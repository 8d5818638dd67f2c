import { KernelError } from '#kernels/kernel-error.ts';

/** Complete rows of a table, packed row by row for fast distances. */
export interface PackedPoints {
  /** Row-major, shape (n, p). */
  points: Float64Array;
  n: number;
  p: number;
  /** Index of each packed row in the input columns; null when every row was complete. */
  rowOf: Uint32Array | null;
  /** Rows left out because a coordinate is missing (NaN). */
  nDropped: number;
}

/** Where rows are packed. */
export interface PackingOptions {
  /** Coordinates per row once padded with zeros, at least as many as columns. */
  stride?: number;
  /** Room for all rows, zero where rows are padded. */
  room?: Float64Array;
}

/**
 * Packs columns into rows. A row with a missing coordinate (NaN) is left out and counted; an
 * infinite one, or one beyond 1e150, is refused.
 *
 * @param columns p arrays of one length, any one unit per column.
 * @throws {KernelError} `too-few-parts` without columns; `shape` when lengths differ; `not-finite`
 *   with { row, col }; `too-few-rows` when no row is complete.
 */
export function packPoints(columns: readonly Float64Array[], options: PackingOptions = {}): PackedPoints {
  const nRows = columns[0]?.length ?? 0;
  if (columns.length === 0) throw new KernelError('too-few-parts', 'expected at least one column, found none');
  for (const [col, column] of columns.entries()) {
    if (column.length !== nRows) {
      throw new KernelError(
        'shape',
        `column ${col} has ${column.length} rows, the first has ${nRows}`,
        { col },
      );
    }
  }
  const p = options.stride ?? columns.length;
  const points = options.room ?? new Float64Array(nRows * p);
  if (nRows > 0 && packAll(columns, points, p)) return { points, n: nRows, p, rowOf: null, nDropped: 0 };
  const rowOf = completeRows(columns, nRows);
  const n = rowOf.length;
  if (n === 0) throw new KernelError('too-few-rows', `none of ${nRows} rows is complete in all ${columns.length} columns`, { nRows });
  for (const [col, column] of columns.entries()) {
    for (let i = 0; i < n; i++) points[i * p + col] = column[rowOf[i]!]!;
  }
  return { points: points.subarray(0, n * p), n, p, rowOf, nDropped: nRows - n };
}

/** Rows packed at a time, so that a block of every column stays in cache. */
const BLOCK = 2048;
/** Larger coordinates cannot be squared and summed. */
const LARGEST = 1e150;

/** Packs all rows; false as soon as a coordinate is missing or too large. */
function packAll(columns: readonly Float64Array[], points: Float64Array, stride: number): boolean {
  const nRows = columns[0]?.length ?? 0;
  for (let start = 0; start < nRows; start += BLOCK) {
    const end = Math.min(nRows, start + BLOCK);
    for (const [col, column] of columns.entries()) {
      if (!copyBlock(column, points, col, stride, start, end)) return false;
    }
  }
  return true;
}

/** Copies part of a column to its places in the rows; false when it holds an unusable value. */
function copyBlock(column: Float64Array, points: Float64Array, col: number, stride: number, start: number, end: number): boolean {
  let usable = true;
  for (let i = start, to = start * stride + col; i < end; i++, to += stride) {
    const value = column[i]!;
    points[to] = value;
    usable &&= Math.abs(value) <= LARGEST;
  }
  return usable;
}

/** Indices of rows without NaN. */
function completeRows(columns: readonly Float64Array[], nRows: number): Uint32Array {
  const rows = new Uint32Array(nRows);
  let count = 0;
  for (let row = 0; row < nRows; row++) {
    let complete = true;
    for (let col = 0; col < columns.length; col++) {
      const value = columns[col]![row]!;
      if (Math.abs(value) > LARGEST) {
        const message = `expected a coordinate up to ${LARGEST}, found ${value} in row ${row}, column ${col}`;
        throw new KernelError('not-finite', message, { row, col });
      }
      complete &&= !Number.isNaN(value);
    }
    if (complete) rows[count++] = row;
  }
  return rows.slice(0, count);
}

/** The packed rows' share of a per-row array (weights, labels), in packed order. */
export function packedWeights(
  weights: Float64Array | undefined,
  packed: PackedPoints,
  nRows: number,
): Float64Array | null {
  if (!weights) return null;
  if (weights.length !== nRows) {
    throw new KernelError('shape', `${weights.length} weights for ${nRows} rows`);
  }
  const out = packed.rowOf
    ? Float64Array.from(packed.rowOf, (row) => weights[row] ?? NaN)
    : weights;
  for (let i = 0; i < out.length; i++) {
    const weight = out[i]!;
    if (!(weight > 0 && weight < Infinity)) {
      const row = packed.rowOf?.[i] ?? i;
      throw new KernelError(
        'not-positive',
        `expected a weight > 0, found ${weight} in row ${row}`,
        { row },
      );
    }
  }
  return out;
}

/** True when at least `wanted` rows differ from each other. */
export function hasDistinctRows({ points, n, p }: PackedPoints, wanted: number): boolean {
  const found: number[] = [];
  for (let i = 0; i < n && found.length < wanted; i++) {
    const isNew = found.every((other) => {
      for (let j = 0; j < p; j++) if (points[i * p + j] !== points[other * p + j]) return true;
      return false;
    });
    if (isNew) found.push(i);
  }
  return found.length >= wanted;
}

/** Copies the given rows of a packed table. */
export function takeRows(points: Float64Array, p: number, rows: Uint32Array): Float64Array {
  const out = new Float64Array(rows.length * p);
  for (let i = 0; i < rows.length; i++) {
    const from = rows[i]! * p;
    for (let j = 0; j < p; j++) out[i * p + j] = points[from + j]!;
  }
  return out;
}
