import { LOGGING_TOLERANCE_M } from '#kernels/intervals/interval-table.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { checkCategory, type Category } from '#kernels/tables/category.ts';
import {
  checkIntervalsByHole,
  lengthsOf,
  type IntervalsByHole,
} from '#kernels/tables/intervals-by-hole.ts';
import { metresByCode, UNASSIGNED, type CodeMetres } from './domain-codes.ts';

export interface RunLengthRule {
  /** Shortest run to keep, 3 m unless told. */
  minLengthM?: number;
  /** Codes with a shortest run of their own. */
  minLengthByCode?: ReadonlyMap<string, number>;
  /** 1 where a code may not change, as where it was set by hand. UNASSIGNED never changes. */
  isLocked?: Uint8Array;
}

export interface RunLengthResult {
  domains: Category;
  /** 1 in runs that stay too short, as nothing beside them can take them. */
  isShort: Uint8Array;
  changedMetres: number;
  /** Of all metres, 0..1. */
  changedShare: number;
  before: CodeMetres[];
  after: CodeMetres[];
  notes: string[];
}

const DEFAULT_LENGTH_M = 3;
const ROUNDING_M = 1e-9;
/** Share of metres changed above which the result is worth a second look. */
const MUCH_CHANGED = 0.15;

/**
 * Joins runs too short to be domains of their own to their neighbours. Within each stretch between
 * hard breaks (hole ends, gaps, faults, locked or unassigned intervals) the shortest run below its
 * code's minimum takes its neighbours' code where they agree, else that of the longer neighbour; ties
 * go to the upper. Repeated until none is left; running it again changes nothing.
 *
 * @param intervals Intervals in order down each hole; `isBreakBefore` marks faults.
 * @param domains A code for every interval. Not modified.
 * @throws {KernelError} `shape`; `bad-interval`; `overlap`; `bad-parameter` at a negative length.
 */
export function joinShortRuns(
  intervals: IntervalsByHole,
  domains: Category,
  rule: RunLengthRule = {},
  onProgress?: (share: number) => void,
): RunLengthResult {
  checkIntervalsByHole(intervals);
  const n = intervals.fromM.length;
  checkCategory(domains, n, 'domain');
  if (rule.isLocked && rule.isLocked.length !== n) {
    throw new KernelError('shape', `expected ${n} locks, found ${rule.isLocked.length}`);
  }
  const least = leastLengths(domains.levels, rule);
  const codes = domains.codes.slice();
  const isShort = new Uint8Array(n);
  const holes = intervals.holeStarts.length - 1;
  for (let hole = 0; hole < holes; hole++) {
    for (const runs of stretches(intervals, domains, rule.isLocked, hole)) {
      joinWithin(runs, least);
      for (const { first, last, code, lengthM } of runs) {
        codes.fill(code, first, last + 1);
        if (lengthM < least[code]! - ROUNDING_M) isShort.fill(1, first, last + 1);
      }
    }
    onProgress?.((hole + 1) / holes);
  }
  return compare(domains, { levels: domains.levels, codes }, lengthsOf(intervals), isShort);
}

interface Run {
  first: number;
  last: number;
  code: number;
  lengthM: number;
}

function leastLengths(levels: readonly string[], rule: RunLengthRule): number[] {
  return levels.map((level) => {
    const least = rule.minLengthByCode?.get(level) ?? rule.minLengthM ?? DEFAULT_LENGTH_M;
    if (least >= 0) return least;
    throw new KernelError(
      'bad-parameter',
      `expected a shortest run >= 0 m for ${level}, found ${least}`,
    );
  });
}

/** Runs of one code in each stretch of a hole without hard break. */
function stretches(
  intervals: IntervalsByHole,
  domains: Category,
  isLocked: Uint8Array | undefined,
  hole: number,
): Run[][] {
  const { holeStarts, fromM, toM, isBreakBefore } = intervals;
  const unassigned = domains.levels.indexOf(UNASSIGNED);
  const lists: Run[][] = [];
  let list: Run[] | null = null;
  for (let row = holeStarts[hole]!; row < holeStarts[hole + 1]!; row++) {
    const code = domains.codes[row]!;
    if (code < 0 || code === unassigned || isLocked?.[row] === 1) {
      list = null;
      continue;
    }
    const isFirst = row === holeStarts[hole]!;
    const isBreak =
      isBreakBefore?.[row] === 1 || (!isFirst && fromM[row]! - toM[row - 1]! > LOGGING_TOLERANCE_M);
    if (list === null || isBreak) lists.push((list = []));
    const run = list[list.length - 1];
    const lengthM = toM[row]! - fromM[row]!;
    if (run?.code === code) {
      run.last = row;
      run.lengthM += lengthM;
    } else list.push({ first: row, last: row, code, lengthM });
  }
  return lists;
}

/** Joins runs in place until every one is long enough or stands alone. */
function joinWithin(runs: Run[], least: readonly number[]): void {
  while (runs.length > 1) {
    const at = shortestBelow(runs, least);
    if (at < 0) return;
    runs[at]!.code = neighbourCode(runs[at - 1], runs[at + 1]);
    const start = runs[at - 1]?.code === runs[at]!.code ? at - 1 : at;
    let end = at;
    while (runs[end + 1]?.code === runs[at]!.code) end++;
    const lengthM = runs.slice(start, end + 1).reduce((sum, run) => sum + run.lengthM, 0);
    const joined = {
      first: runs[start]!.first,
      last: runs[end]!.last,
      code: runs[at]!.code,
      lengthM,
    };
    runs.splice(start, end - start + 1, joined);
  }
}

function shortestBelow(runs: readonly Run[], least: readonly number[]): number {
  let at = -1;
  runs.forEach(({ code, lengthM }, i) => {
    if (lengthM >= least[code]! - ROUNDING_M) return;
    if (at < 0 || lengthM < runs[at]!.lengthM - ROUNDING_M) at = i;
  });
  return at;
}

function neighbourCode(upper: Run | undefined, lower: Run | undefined): number {
  if (!upper || !lower) return (upper ?? lower)?.code ?? -1;
  return lower.lengthM > upper.lengthM + ROUNDING_M ? lower.code : upper.code;
}

function compare(
  before: Category,
  after: Category,
  lengthsM: Float64Array,
  isShort: Uint8Array,
): RunLengthResult {
  let [changedMetres, total] = [0, 0];
  lengthsM.forEach((length, row) => {
    total += length;
    if (before.codes[row] !== after.codes[row]) changedMetres += length;
  });
  const changedShare = total > 0 ? changedMetres / total : 0;
  const notes: string[] = [];
  if (changedShare > MUCH_CHANGED) {
    notes.push(
      `The run-length rule changes ${(100 * changedShare).toFixed(1)} % of the metres, more than 15 %.`,
    );
  }
  return {
    domains: after,
    isShort,
    changedMetres,
    changedShare,
    before: metresByCode(before, lengthsM),
    after: metresByCode(after, lengthsM),
    notes,
  };
}
