import { intervalFault, LOGGING_TOLERANCE_M } from '#kernels/intervals/interval-table.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { checkHoleStarts } from './hole-shift.ts';

/** Intervals of several holes in one table: hole after hole, down each hole. */
export interface IntervalsByHole {
  /** First row of each hole, then the number of rows. */
  holeStarts: Int32Array;
  fromM: Float64Array;
  toM: Float64Array;
  /** 1 where nothing may be joined across the top of an interval, as at a fault. */
  isBreakBefore?: Uint8Array;
}

/**
 * Refuses intervals that are not in order down their holes.
 *
 * @throws {KernelError} `shape`; `bad-interval` with { row } at a depth that is none; `overlap` with
 *   { row } where an interval starts above the end of the one before it.
 */
export function checkIntervalsByHole({
  holeStarts,
  fromM,
  toM,
  isBreakBefore,
}: IntervalsByHole): void {
  const n = checkHoleStarts(holeStarts);
  if (fromM.length !== n || toM.length !== n || (isBreakBefore && isBreakBefore.length !== n)) {
    const found = [fromM.length, toM.length, isBreakBefore?.length ?? n].join(', ');
    throw new KernelError('shape', `expected ${n} rows by the hole starts, found ${found}`);
  }
  for (let hole = 0; hole + 1 < holeStarts.length; hole++) {
    for (let row = holeStarts[hole]!; row < holeStarts[hole + 1]!; row++) {
      const fault = intervalFault(fromM[row]!, toM[row]!);
      if (fault) throw new KernelError('bad-interval', `${fault} in row ${row}`, { row });
      if (row > holeStarts[hole]! && toM[row - 1]! - fromM[row]! > LOGGING_TOLERANCE_M) {
        const message = `row ${row} starts at ${fromM[row]} m, above the end ${toM[row - 1]} m of row ${row - 1}`;
        throw new KernelError('overlap', message, { row });
      }
    }
  }
}

/** Length of each interval in metres. */
export function lengthsOf({ fromM, toM }: IntervalsByHole): Float64Array {
  return fromM.map((from, row) => toM[row]! - from);
}
