import { notPositive } from '#kernels/compositions/require-parts.ts';
import { f64Bytes, type Lab } from '#kernels/dense/lab.ts';
import { columnsByFour, type DenseMath } from '#kernels/dense/dense-math.ts';

/** Rows logs are taken of at a time: 256 rows of 48 parts stay in the second-level cache. */
export const BLOCK_ROWS = 256;

/** Natural logs of a block of rows, one stretch of `BLOCK_ROWS` per part; unused parts are 0. */
export interface LogBlock {
  math: DenseMath;
  logs: Float64Array;
  /** Taken off the logs of each part. */
  shift: Float64Array;
  /** Row numbers in the block, the first `count` of them. */
  rows: Uint32Array;
  count: number;
}

/** Bytes of a lab that a block takes. */
export const logBlockBytes = (nParts: number): number =>
  f64Bytes(columnsByFour(nParts) * BLOCK_ROWS, nParts);

/** Room for a block; the number of parts is rounded up to a multiple of four. */
export function emptyLogBlock(lab: Lab, nParts: number): LogBlock {
  return {
    math: lab.math,
    logs: lab.f64(columnsByFour(nParts) * BLOCK_ROWS),
    shift: lab.f64(nParts),
    rows: new Uint32Array(BLOCK_ROWS),
    count: 0,
  };
}

/**
 * Takes logs of up to `BLOCK_ROWS` used rows, less the block's shift.
 *
 * @param columns One array per part; shared memory is fine.
 * @param from First row to look at; rows are those with `mask[row] !== 0`, all without a mask.
 * @param to End of the rows to look at.
 * @returns Row to go on from.
 * @throws {KernelError} `not-positive` with { row, col }.
 */
export function fillLogBlock(
  columns: readonly Float64Array[],
  mask: Uint8Array | null,
  from: number,
  to: number,
  block: LogBlock,
): number {
  const { math, logs, shift, rows } = block;
  let [row, count] = [from, 0];
  for (; row < to && count < BLOCK_ROWS; row++) {
    if (mask === null || mask[row] !== 0) rows[count++] = row;
  }
  block.count = count;
  const isWhole = count === row - from;
  for (const [col, column] of columns.entries()) {
    const at = col * BLOCK_ROWS;
    if (isWhole) logs.set(column.subarray(from, row), at);
    else for (let i = 0; i < count; i++) logs[at + i] = column[rows[i]!]!;
  }
  const bad = math.lnLess(logs, BLOCK_ROWS, count, columns.length, shift);
  if (bad >= 0) throw notPositive(logs[bad]!, rows[bad % BLOCK_ROWS]!, Math.floor(bad / BLOCK_ROWS));
  return row;
}
