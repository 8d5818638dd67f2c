import type { CoreInterval, DepthInterval } from '../charts/core-types.ts';

/** Index of the interval that holds a depth, or null in a gap. Intervals in depth order. */
export function intervalAt(intervals: readonly DepthInterval[], depthM: number): number | null {
  let [low, high] = [0, intervals.length - 1];
  while (low <= high) {
    const middle = (low + high) >> 1;
    const interval = intervals[middle];
    if (interval === undefined) return null;
    if (depthM < interval.fromM) high = middle - 1;
    else if (depthM >= interval.toM) low = middle + 1;
    else return middle;
  }
  return null;
}

/** Rows of the intervals that a drag from one depth to another touches, either way round. */
export function rowsBetween(intervals: readonly CoreInterval[], oneM: number, otherM: number): number[] {
  const [low, high] = oneM < otherM ? [oneM, otherM] : [otherM, oneM];
  return intervals.filter(({ fromM, toM }) => toM > low && fromM < high).map(({ row }) => row);
}

/** The next interval down or up the hole; from nowhere, the first one at or below `startM`. */
export function stepFrom(intervals: readonly DepthInterval[], now: number | null, by: number, startM: number): number | null {
  if (intervals.length === 0) return null;
  if (now === null) {
    const first = intervals.findIndex(({ toM }) => toM > startM);
    return first < 0 ? intervals.length - 1 : first;
  }
  return Math.min(intervals.length - 1, Math.max(0, now + by));
}

/** Rows from one index to another, both included. */
export function rowsAlong(intervals: readonly CoreInterval[], anchor: number, cursor: number): number[] {
  const [low, high] = anchor < cursor ? [anchor, cursor] : [cursor, anchor];
  return intervals.slice(low, high + 1).map(({ row }) => row);
}

/** Unbroken stretches of chosen intervals. */
export function chosenRuns(intervals: readonly CoreInterval[], isChosen: (row: number) => boolean): DepthInterval[] {
  const runs: DepthInterval[] = [];
  for (const { row, fromM, toM } of intervals) {
    if (!isChosen(row)) continue;
    const last = runs.at(-1);
    if (last !== undefined && Math.abs(last.toM - fromM) < 1e-6) last.toM = toM;
    else runs.push({ fromM, toM });
  }
  return runs;
}
