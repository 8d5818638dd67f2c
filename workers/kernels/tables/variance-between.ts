import { KernelError } from '#kernels/kernel-error.ts';
import { checkGroups } from './grouped-values.ts';
import { joined } from './ranks.ts';
import { fTail } from './special-functions.ts';

/** One-way analysis of variance of ln values. */
export interface LogAnova {
  /** Null when the groups have no spread inside (the ratio has no finite value). */
  f: number | null;
  df1: number;
  df2: number;
  /** For independent rows: nominal down-hole. Null with f. */
  nominalP: number | null;
  /** Share of the sum of squares between groups; null when all values are equal. */
  betweenShare: number | null;
}

/**
 * One-way analysis of variance on natural logarithms: how much of the spread of grades lies between
 * groups.
 *
 * @param groups Two or more groups of values > 0, more values than groups.
 * @throws {KernelError} `too-few-groups`; `too-few-rows`; `not-positive` with { group, row }.
 */
export function anovaOfLogs(groups: readonly Float64Array[]): LogAnova {
  checkGroups(groups);
  const logs = groups.map((values, group) =>
    values.map((value, row) => checkedLog(value, group, row)),
  );
  const all = joined(logs);
  const df1 = groups.length - 1;
  const df2 = all.length - groups.length;
  if (df2 < 1) {
    throw new KernelError(
      'too-few-rows',
      `expected more values than the ${groups.length} groups, found ${all.length}`,
    );
  }
  const within = logs.reduce((sum, group) => sum + squaresAbout(group, meanOf(group)), 0);
  const total = squaresAbout(all, meanOf(all));
  const between = Math.max(0, total - within);
  const negligible = 1e-28 * all.length * Math.max(1, meanOf(all) ** 2);
  if (total <= negligible) return { f: null, df1, df2, nominalP: null, betweenShare: null };
  if (within <= negligible)
    return { f: null, df1, df2, nominalP: null, betweenShare: between / total };
  const f = between / df1 / (within / df2);
  return { f, df1, df2, nominalP: fTail(f, df1, df2), betweenShare: between / total };
}

function checkedLog(value: number, group: number, row: number): number {
  if (value > 0 && value < Infinity) return Math.log(value);
  const where = `value ${row} of group ${group}`;
  throw new KernelError('not-positive', `expected a value > 0, found ${value} as ${where}`, {
    group,
    row,
  });
}

const meanOf = (values: Float64Array): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;

const squaresAbout = (values: Float64Array, centre: number): number =>
  values.reduce((sum, value) => sum + (value - centre) ** 2, 0);
