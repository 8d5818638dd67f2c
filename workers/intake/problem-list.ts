import type { FileCheck, RowProblem } from '#contract/files.ts';

export interface FoundProblem extends RowProblem {
  /** The record as it stands in the file. */
  original: string;
}

/** More than this many are counted but not listed. */
export const MOST_LISTED = 50_000;
const MARKS = 400;

/** Collects row problems, counts them by code and remembers which rows they touch. */
export class ProblemList {
  readonly listed: FoundProblem[] = [];
  readonly #counts = new Map<string, { code: string; severity: RowProblem['severity']; count: number }>();
  readonly #rows = new Map<number, RowProblem['severity']>();

  add(problem: FoundProblem): void {
    if (this.listed.length < MOST_LISTED) this.listed.push(problem);
    const key = `${problem.severity} ${problem.code}`;
    const entry = this.#counts.get(key) ?? { code: problem.code, severity: problem.severity, count: 0 };
    entry.count += 1;
    this.#counts.set(key, entry);
    if (this.#rows.get(problem.row) !== 'aside') this.#rows.set(problem.row, problem.severity);
  }

  count(severity: RowProblem['severity']): number {
    return [...this.#rows.values()].filter((found) => found === severity).length;
  }

  byCode(): FileCheck['byCode'] {
    return [...this.#counts.values()].sort((a, b) => b.count - a.count);
  }

  /** Runs of neighbouring touched rows, to draw the file as one run; merged until few enough. */
  marks(): FileCheck['marks'] {
    const rows = [...this.#rows].sort(([a], [b]) => a - b);
    for (let gap = 1; ; gap *= 4) {
      const marks = mergeRows(rows, gap);
      if (marks.length <= MARKS) return marks;
    }
  }
}

function mergeRows(rows: [number, RowProblem['severity']][], gap: number): FileCheck['marks'] {
  const marks: FileCheck['marks'] = [];
  for (const [row, severity] of rows) {
    const last = marks.at(-1);
    if (last && last.severity === severity && row - last.toRow <= gap) last.toRow = row;
    else marks.push({ fromRow: row, toRow: row, severity });
  }
  return marks;
}
