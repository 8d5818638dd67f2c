import { intervalFault, LOGGING_TOLERANCE_M, type IntervalTable } from './interval-table.ts';

/** Something wrong with the intervals of one hole; rows are those of the table. */
export interface IntervalProblem {
  code: 'bad-interval' | 'past-end' | 'overlap' | 'gap';
  row: number;
  /** The interval above, for an overlap or a gap; null otherwise. */
  otherRow: number | null;
  fromM: number;
  toM: number;
  message: string;
}

/**
 * Finds every row that is no interval, passes the end of the hole, or overlaps the rows above it,
 * and every gap between rows. Touching intervals are no overlap. O(n log n).
 *
 * @param table Intervals of one hole in any order. Not modified.
 * @param options.endOfHoleM Length of the hole; not checked when left out.
 * @param options.toleranceM Ends closer than this are the same end.
 * @returns By ascending depth, rows that are no interval first.
 */
export function findIntervalProblems(
  { fromM, toM }: IntervalTable,
  options: { endOfHoleM?: number; toleranceM?: number } = {},
): IntervalProblem[] {
  const { endOfHoleM = Infinity, toleranceM = LOGGING_TOLERANCE_M } = options;
  const problems: IntervalProblem[] = [];
  const rows: number[] = [];
  for (let row = 0; row < fromM.length; row++) {
    const [top, bottom] = [fromM[row]!, toM[row] ?? NaN];
    const fault = intervalFault(top, bottom);
    if (fault === null) rows.push(row);
    else
      problems.push({
        code: 'bad-interval',
        row,
        otherRow: null,
        fromM: top,
        toM: bottom,
        message: fault,
      });
  }
  rows.sort((a, b) => fromM[a]! - fromM[b]! || toM[a]! - toM[b]! || a - b);
  let deepest: number | null = null;
  for (const row of rows) {
    const [top, bottom] = [fromM[row]!, toM[row]!];
    if (deepest !== null) {
      const reached = toM[deepest]!;
      const problem = compareEnds(
        row,
        deepest,
        top,
        Math.min(reached, bottom),
        reached,
        toleranceM,
      );
      if (problem) problems.push(problem);
    }
    if (bottom > endOfHoleM + toleranceM) {
      const message = `ends at ${bottom} m, past the end of the hole at ${endOfHoleM} m`;
      problems.push({ code: 'past-end', row, otherRow: null, fromM: top, toM: bottom, message });
    }
    if (deepest === null || bottom > toM[deepest]!) deepest = row;
  }
  return problems;
}

function compareEnds(
  row: number,
  otherRow: number,
  top: number,
  sharedEnd: number,
  reached: number,
  toleranceM: number,
): IntervalProblem | null {
  const step = top - reached;
  if (step > toleranceM) {
    const message = `gap of ${step.toFixed(2)} m from ${reached} to ${top} m`;
    return { code: 'gap', row, otherRow, fromM: reached, toM: top, message };
  }
  if (step >= -toleranceM) return null;
  const message = `overlaps row ${otherRow} by ${(sharedEnd - top).toFixed(2)} m from ${top} to ${sharedEnd} m`;
  return { code: 'overlap', row, otherRow, fromM: top, toM: sharedEnd, message };
}
