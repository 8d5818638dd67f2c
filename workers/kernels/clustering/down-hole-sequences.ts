import { KernelError } from '#kernels/kernel-error.ts';

/** Intervals in order: hole by hole, depth ascending. */
export interface DownHoleRows {
  /** Hole of each interval: any number per hole, rows of a hole together. */
  hole: ArrayLike<number>;
  fromM: Float64Array;
  toM: Float64Array;
}

/**
 * Numbers the unbroken stretches of core: a new sequence starts at a new hole, where the gap above an
 * interval is longer than `maxGapM`, and at the rows listed in `breaks` (a fault crossing).
 *
 * @param maxGapM Default: twice the median interval length.
 * @param breaks Rows that start a new sequence.
 * @returns Sequence number per row, from 0 upwards.
 * @throws {KernelError} `shape`; `bad-parameter` with { row } for an interval without length or one
 *   that starts above the one before it.
 */
export function downHoleSequences(
  rows: DownHoleRows,
  maxGapM = 2 * medianLength(rows),
  breaks: ReadonlySet<number> = new Set(),
): Int32Array {
  const { hole, fromM, toM } = rows;
  const n = hole.length;
  if (fromM.length !== n || toM.length !== n)
    throw new KernelError('shape', `${n} holes, ${fromM.length} froms, ${toM.length} tos`);
  if (!(maxGapM >= 0))
    throw new KernelError('bad-parameter', `expected a gap >= 0 m, found ${maxGapM}`);
  const sequence = new Int32Array(n);
  for (let row = 0, current = 0; row < n; row++) {
    if (!(toM[row]! > fromM[row]!)) {
      throw new KernelError(
        'bad-parameter',
        `expected an interval with length, found ${fromM[row]} to ${toM[row]} m in row ${row}`,
        { row },
      );
    }
    const sameHole = row > 0 && hole[row] === hole[row - 1];
    if (sameHole && fromM[row]! < fromM[row - 1]!) {
      throw new KernelError(
        'bad-parameter',
        `expected depths to ascend, found ${fromM[row]} m below ${fromM[row - 1]} m in row ${row}`,
        { row },
      );
    }
    const joined = sameHole && fromM[row]! - toM[row - 1]! <= maxGapM && !breaks.has(row);
    if (row > 0 && !joined) current += 1;
    sequence[row] = current;
  }
  return sequence;
}

function medianLength({ fromM, toM }: DownHoleRows): number {
  const lengths = Float64Array.from(toM, (to, row) => to - (fromM[row] ?? NaN)).sort();
  return lengths[lengths.length >> 1] ?? 0;
}
