import { KernelError } from '#kernels/kernel-error.ts';

/** Half a centimetre of logging rounding (m): closer ends are the same end. */
export const LOGGING_TOLERANCE_M = 0.005;

/** Intervals [from, to) of one hole, depths down the hole (m), one entry per row. */
export interface IntervalTable {
  fromM: Float64Array;
  toM: Float64Array;
}

/** Length two intervals share (m); touching intervals share none. */
export function overlapM(fromA: number, toA: number, fromB: number, toB: number): number {
  return Math.max(0, Math.min(toA, toB) - Math.max(fromA, fromB));
}

/** Why a single interval is no interval, or null when it is one. */
export function intervalFault(fromM: number, toM: number): string | null {
  if (!Number.isFinite(fromM) || !Number.isFinite(toM)) {
    return `expected two depths, found ${fromM} to ${toM}`;
  }
  if (fromM < 0) return `expected a depth >= 0, found ${fromM}`;
  return toM > fromM ? null : `expected an end below ${fromM} m, found ${toM}`;
}

/**
 * Row numbers by ascending depth, after checking every row.
 *
 * @throws {KernelError} `shape` when the columns differ in length; `bad-interval` with { row } at
 *   the first row that is no interval.
 */
export function orderByDepth({ fromM, toM }: IntervalTable): Uint32Array {
  if (fromM.length !== toM.length) {
    throw new KernelError('shape', `${fromM.length} from depths against ${toM.length} to depths`);
  }
  const order = new Uint32Array(fromM.length);
  let isSorted = true;
  for (let row = 0; row < fromM.length; row++) {
    const fault = intervalFault(fromM[row]!, toM[row]!);
    if (fault) throw new KernelError('bad-interval', `${fault} at row ${row}`, { row });
    order[row] = row;
    if (row > 0 && fromM[row]! < fromM[row - 1]!) isSorted = false;
  }
  if (isSorted) return order;
  return order.sort((a, b) => fromM[a]! - fromM[b]! || toM[a]! - toM[b]! || a - b);
}

/**
 * {@link orderByDepth} of a table that must not overlap itself by more than the tolerance.
 *
 * @throws {KernelError} `overlap` with { row, otherRow, lengthM } at the first overlap.
 */
export function orderWithoutOverlap(table: IntervalTable, toleranceM: number): Uint32Array {
  const order = orderByDepth(table);
  for (let i = 1; i < order.length; i++) {
    const [row, otherRow] = [order[i]!, order[i - 1]!];
    const lengthM = table.toM[otherRow]! - table.fromM[row]!;
    if (lengthM > toleranceM) {
      const message = `rows ${otherRow} and ${row} overlap by ${lengthM.toFixed(3)} m`;
      throw new KernelError('overlap', message, { row, otherRow, lengthM });
    }
  }
  return order;
}

/** Length covered by at least one interval (m). */
export function coveredM(table: IntervalTable): number {
  let [covered, reached] = [0, -Infinity];
  for (const row of orderByDepth(table)) {
    const from = Math.max(table.fromM[row]!, reached);
    if (table.toM[row]! > from) {
      covered += table.toM[row]! - from;
      reached = table.toM[row]!;
    }
  }
  return covered;
}
