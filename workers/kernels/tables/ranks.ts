import { KernelError } from '#kernels/kernel-error.ts';

/** Midranks of a list, with what ties take from the variance of rank statistics. */
export interface Ranks {
  /** From 1; tied values share the mean of their ranks. */
  ranks: Float64Array;
  /** Sum of t^3 - t over sets of t tied values. */
  tieSum: number;
}

/**
 * Midranks.
 *
 * @throws {KernelError} `not-finite` with { row } at NaN (infinities have a rank).
 */
export function midranks(values: Float64Array): Ranks {
  const gap = values.findIndex(Number.isNaN);
  if (gap >= 0)
    throw new KernelError('not-finite', `expected values, found NaN in row ${gap}`, { row: gap });
  const order = Array.from(values.keys()).sort((a, b) =>
    values[a]! < values[b]! ? -1 : values[a]! > values[b]! ? 1 : 0,
  );
  const ranks = new Float64Array(values.length);
  let tieSum = 0;
  for (let start = 0, end = 0; start < order.length; start = end) {
    while (end < order.length && values[order[end]!] === values[order[start]!]) end++;
    const tied = end - start;
    tieSum += tied ** 3 - tied;
    for (let i = start; i < end; i++) ranks[order[i]!] = (start + end + 1) / 2;
  }
  return { ranks, tieSum };
}

/** The values of several groups one after the other. */
export function joined(groups: readonly Float64Array[]): Float64Array {
  const all = new Float64Array(groups.reduce((sum, group) => sum + group.length, 0));
  let start = 0;
  for (const group of groups) {
    all.set(group, start);
    start += group.length;
  }
  return all;
}

/** Sum of ranks of each group of a joined list. */
export function rankSums(ranks: Float64Array, groups: readonly Float64Array[]): Float64Array {
  let start = 0;
  return Float64Array.from(groups, ({ length }) => {
    const sum = ranks.subarray(start, start + length).reduce((total, rank) => total + rank, 0);
    start += length;
    return sum;
  });
}
