import { codeRuns } from '#kernels/tables/code-runs.ts';
import type { Category } from '#kernels/tables/category.ts';
import type { IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';
import { MISLOGGING_RULES } from './mislogging-rules.ts';

/** Successive composites whose chemistry denies their log. */
export interface MisloggingFlag {
  hole: number;
  /** First and last row. */
  first: number;
  last: number;
  fromM: number;
  toM: number;
  logged: string;
  suggested: string;
  /** Greatest probability of the logged code, and least of the suggested one, over rows and classifiers. */
  loggedAtMost: number;
  suggestedAtLeast: number;
}

interface Scored {
  classOf: Int32Array;
  classes: readonly string[];
  /** One table for each classifier, row-major (n, classes). */
  probabilities: readonly Float64Array[];
}

/**
 * Runs of flagged composites: inside one logged run, not touching a logged contact, all of them denied
 * by every classifier in favour of one and the same other code.
 */
export function flaggedRuns(
  intervals: IntervalsByHole,
  logged: Category,
  { classOf, classes, probabilities }: Scored,
): MisloggingFlag[] {
  const k = classes.length;
  const runs = codeRuns(intervals, logged);
  const flags: MisloggingFlag[] = [];
  runs.forEach((run, at) => {
    const from = run.touchesAbove ? run.first + 1 : run.first;
    const to = runs[at + 1]?.touchesAbove === true ? run.last - 1 : run.last;
    for (let row = from; row <= to;) {
      const meant = meantClass(row, classOf[row]!, k, probabilities);
      let last = row;
      while (
        meant >= 0 &&
        last < to &&
        meantClass(last + 1, classOf[last + 1]!, k, probabilities) === meant
      )
        last += 1;
      if (meant >= 0 && last - row + 1 >= MISLOGGING_RULES.run) {
        const own = classOf[row]!;
        const over = (code: number, pick: (...values: number[]) => number) =>
          pick(
            ...probabilities.flatMap((table) =>
              Array.from({ length: last - row + 1 }, (_, i) => table[(row + i) * k + code]!),
            ),
          );
        flags.push({
          hole: holeOf(intervals.holeStarts, row),
          first: row,
          last,
          fromM: intervals.fromM[row]!,
          toM: intervals.toM[last]!,
          logged: classes[own]!,
          suggested: classes[meant]!,
          loggedAtMost: over(own, Math.max),
          suggestedAtLeast: over(meant, Math.min),
        });
      }
      row = last + 1;
    }
  });
  return flags;
}

/** The other class that every classifier means instead of the logged one; -1 when they do not. */
function meantClass(
  row: number,
  own: number,
  k: number,
  probabilities: readonly Float64Array[],
): number {
  if (own < 0) return -1;
  for (let other = 0; other < k; other++) {
    const isMeant = probabilities.every(
      (table) =>
        table[row * k + own]! < MISLOGGING_RULES.logged &&
        table[row * k + other]! > MISLOGGING_RULES.other,
    );
    if (other !== own && isMeant) return other;
  }
  return -1;
}

function holeOf(holeStarts: Int32Array, row: number): number {
  let hole = 0;
  while (holeStarts[hole + 1]! <= row) hole += 1;
  return hole;
}
