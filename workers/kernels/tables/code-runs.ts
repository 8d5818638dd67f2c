import { LOGGING_TOLERANCE_M } from '#kernels/intervals/interval-table.ts';
import { checkCategory, NOT_LOGGED, type Category } from './category.ts';
import { checkIntervalsByHole, type IntervalsByHole } from './intervals-by-hole.ts';

/** Neighbouring intervals of one hole under one code. */
export interface CodeRun {
  first: number;
  last: number;
  code: number;
  /** True when the run before it in the list lies on it: a contact, neither gap nor break between. */
  touchesAbove: boolean;
}

/**
 * Runs of one code down the holes. Gaps of more than the logging tolerance, breaks, changes of code and
 * ends of holes end a run; intervals that are not logged belong to none.
 *
 * @param intervals Intervals in order down each hole.
 * @param label A code for each interval, or NOT_LOGGED.
 * @throws {KernelError} `shape`; `bad-interval`; `overlap`; `bad-parameter` at a code without level.
 */
export function codeRuns(intervals: IntervalsByHole, label: Category): CodeRun[] {
  checkIntervalsByHole(intervals);
  const { holeStarts, fromM, toM, isBreakBefore } = intervals;
  checkCategory(label, fromM.length, 'label');
  const runs: CodeRun[] = [];
  for (let hole = 0; hole + 1 < holeStarts.length; hole++) {
    let open: CodeRun | null = null;
    for (let row = holeStarts[hole]!; row < holeStarts[hole + 1]!; row++) {
      const code = label.codes[row]!;
      const isJoined: boolean =
        open !== null &&
        isBreakBefore?.[row] !== 1 &&
        fromM[row]! - toM[row - 1]! <= LOGGING_TOLERANCE_M;
      if (code === NOT_LOGGED) open = null;
      else if (open && isJoined && open.code === code) open.last = row;
      else {
        open = { first: row, last: row, code, touchesAbove: isJoined };
        runs.push(open);
      }
    }
  }
  return runs;
}

/**
 * Contacts between codes: how often a run of one lies on a run of the other, in either order.
 *
 * @returns Row-major, symmetric, shape (nLevels, nLevels); the diagonal is 0.
 */
export function contactCounts(runs: readonly CodeRun[], nLevels: number): Int32Array {
  const counts = new Int32Array(nLevels * nLevels);
  runs.forEach(({ code, touchesAbove }, i) => {
    const above = runs[i - 1]?.code;
    if (!touchesAbove || above === undefined || above === code) return;
    counts[above * nLevels + code]! += 1;
    counts[code * nLevels + above]! += 1;
  });
  return counts;
}
