import { LOGGING_TOLERANCE_M, orderWithoutOverlap, type IntervalTable } from './interval-table.ts';

/** Elementary pieces of two tables; a row of -1 means that the table has nothing there. */
export interface MergedIntervals extends IntervalTable {
  rowA: Int32Array;
  rowB: Int32Array;
  /** Rows shorter than the tolerance, which no piece shows. */
  tooShort: { table: 'a' | 'b'; row: number }[];
}

/**
 * Cuts two tables of one hole at the ends of both, so that each piece has one row of each table or
 * none. Ends closer than the tolerance merge onto the end of the first table. Depths covered by
 * neither table give no piece. O(n log n).
 *
 * @param a First table: its ends are kept. Rows in any order, without overlaps.
 * @param b Second table. Rows in any order, without overlaps.
 * @throws {KernelError} `shape`, `bad-interval`, `overlap` with the rows.
 */
export function mergeIntervals(
  a: IntervalTable,
  b: IntervalTable,
  toleranceM: number = LOGGING_TOLERANCE_M,
): MergedIntervals {
  const [orderA, orderB] = [orderWithoutOverlap(a, toleranceM), orderWithoutOverlap(b, toleranceM)];
  const breaks = commonBreaks(a, b, toleranceM);
  const tooShort: MergedIntervals['tooShort'] = [];
  const cover = (table: IntervalTable, order: Uint32Array, name: 'a' | 'b') => {
    const rows = new Int32Array(Math.max(breaks.length - 1, 0)).fill(-1);
    for (const row of order) {
      const first = nearestBreak(breaks, table.fromM[row]!);
      const last = nearestBreak(breaks, table.toM[row]!);
      if (first === last) tooShort.push({ table: name, row });
      rows.fill(row, first, last);
    }
    return rows;
  };
  const [coverA, coverB] = [cover(a, orderA, 'a'), cover(b, orderB, 'b')];
  const pieces = Array.from(coverA.keys()).filter((i) => coverA[i]! >= 0 || coverB[i]! >= 0);
  return {
    fromM: Float64Array.from(pieces, (i) => breaks[i]!),
    toM: Float64Array.from(pieces, (i) => breaks[i + 1]!),
    rowA: Int32Array.from(pieces, (i) => coverA[i]!),
    rowB: Int32Array.from(pieces, (i) => coverB[i]!),
    tooShort,
  };
}

/** Ends of the first table, then those of the second that stand apart from all others. */
function commonBreaks(a: IntervalTable, b: IntervalTable, toleranceM: number): Float64Array {
  const ownA = standingApart(sortedEnds(a), toleranceM);
  const extra = sortedEnds(b).filter((depth) => {
    const near = ownA.length > 0 ? ownA[nearestBreak(ownA, depth)]! : Infinity;
    return Math.abs(near - depth) >= toleranceM;
  });
  const ownB = standingApart(extra, toleranceM);
  const breaks = new Float64Array(ownA.length + ownB.length);
  breaks.set(ownA);
  breaks.set(ownB, ownA.length);
  return breaks.sort();
}

function sortedEnds({ fromM, toM }: IntervalTable): Float64Array {
  const ends = new Float64Array(2 * fromM.length);
  ends.set(fromM);
  ends.set(toM, fromM.length);
  return ends.sort();
}

/** The first of each run of ends that lie closer than the tolerance to it. */
function standingApart(sorted: Float64Array, toleranceM: number): Float64Array {
  const kept = new Float64Array(sorted.length);
  let count = 0;
  for (const depth of sorted) {
    if (count === 0 || depth - kept[count - 1]! >= toleranceM) kept[count++] = depth;
  }
  return kept.slice(0, count);
}

/** Index of the break nearest to a depth; the lower of two equally near. */
function nearestBreak(breaks: Float64Array, depth: number): number {
  let [low, high] = [0, breaks.length - 1];
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (breaks[middle]! < depth) low = middle + 1;
    else high = middle;
  }
  return low > 0 && depth - breaks[low - 1]! <= breaks[low]! - depth ? low - 1 : low;
}
