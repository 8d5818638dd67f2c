import { sortedAscending } from '#kernels/statistics/sort-ascending.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import type { Random } from '#kernels/random.ts';
import { dipStatistic, type Dip } from './dip.ts';
import { SCALED_DIPS, TAIL_PROBABILITIES } from './dip-table.ts';

/** A p value read from a table: `exact` inside it, else beyond its first or last column. */
export interface TablePValue {
  p: number;
  bound: 'within' | 'above' | 'below';
  /** For reading: `0.043`, `> 0.999`, `< 0.001`. */
  text: string;
}

/** Fewest values a dip is judged on. */
export const MIN_DIP_ROWS = 10;

/**
 * p value of a dip against the uniform distribution, the hardest unimodal one to tell apart, from a
 * table of simulated quantiles of √n dip: linear in 1/√n between its rows, then in probability.
 * Rows of a drill hole are not independent: the p value is nominal.
 *
 * @param dip From `dipStatistic`.
 * @param n Values it was taken from, >= 10.
 * @throws {KernelError} `too-few-rows`; `bad-parameter` for a dip outside (0, 1/4].
 */
export function dipPValue(dip: number, n: number): TablePValue {
  if (!(n >= MIN_DIP_ROWS))
    throw new KernelError(
      'too-few-rows',
      `the dip is judged on at least ${MIN_DIP_ROWS} values, found ${n}`,
      { n },
    );
  if (!(dip > 0 && dip <= 0.25))
    throw new KernelError('bad-parameter', `expected a dip in (0, 0.25], found ${dip}`, { dip });
  const quantiles = quantilesFor(n);
  const scaled = Math.sqrt(n) * dip;
  const tails = TAIL_PROBABILITIES;
  const [first, last] = [tails[0] ?? 1, tails[tails.length - 1] ?? 0];
  const upper = quantiles.findIndex((quantile) => quantile >= scaled);
  if (upper === 0) return { p: first, bound: 'above', text: `> ${first}` };
  if (upper < 0) return { p: last, bound: 'below', text: `< ${last}` };
  const [low, high] = [quantiles[upper - 1]!, quantiles[upper]!];
  const share = high > low ? (scaled - low) / (high - low) : 1;
  const p = tails[upper - 1]! + share * (tails[upper]! - tails[upper - 1]!);
  return { p, bound: 'within', text: p < 0.01 ? p.toFixed(4) : p.toFixed(3) };
}

/** Quantiles of √n dip for any n, between the rows of the table. */
function quantilesFor(n: number): readonly number[] {
  const rows = SCALED_DIPS;
  const at = rows.findIndex((row) => row.n >= n);
  if (at === 0) return rows[0]!.scaledDips;
  if (at < 0) return rows[rows.length - 1]!.scaledDips;
  const [small, large] = [rows[at - 1]!, rows[at]!];
  const place = (size: number) => 1 / Math.sqrt(size);
  const share = (place(small.n) - place(n)) / (place(small.n) - place(large.n));
  return small.scaledDips.map((value, i) => value + share * (large.scaledDips[i]! - value));
}

/** A dip with its p value; null below ten values. */
export interface DipTest extends Dip {
  n: number;
  pValue: TablePValue | null;
}

/**
 * Dip test of unimodality. Rounded values inflate the dip: spread ties first (`spreadTies`).
 *
 * @param values ln grade, finite, any order.
 * @throws {KernelError} `too-few-rows` when empty, `not-finite`.
 * @see Hartigan & Hartigan (1985), Ann. Stat. 13, 70-84.
 */
export function dipTest(values: ArrayLike<number>): DipTest {
  const found = dipStatistic(values);
  return {
    ...found,
    n: values.length,
    pValue: values.length < MIN_DIP_ROWS ? null : dipPValue(found.dip, values.length),
  };
}

/**
 * Copies of rounded values spread at random over the step they were rounded to, so that ties no
 * longer look like modes. The step of a value is the last decimal place it is written with (10 for
 * 120, .01 for .53) or the gap to the next different value when that is smaller; values without a
 * copy stay as they are.
 *
 * @param values Finite, any order (grades, not logarithms).
 * @returns Values in ascending order, each within half a step of its original.
 * @throws {KernelError} `too-few-rows`, `not-finite`.
 */
export function spreadTies(values: ArrayLike<number>, random: Random): Float64Array {
  requireFinite(values, 'values');
  const sorted = sortedAscending(values);
  const out = sorted.slice();
  for (let from = 0; from < sorted.length;) {
    const value = sorted[from]!;
    let to = from + 1;
    while (to < sorted.length && sorted[to] === value) to += 1;
    if (to - from > 1) {
      const gapBelow = from > 0 ? value - sorted[from - 1]! : Infinity;
      const gapAbove = to < sorted.length ? sorted[to]! - value : Infinity;
      const step = Math.min(gapBelow, gapAbove, lastPlace(value));
      for (let i = from; i < to; i++) out[i] = value + (random.uniform() - 0.5) * step;
    }
    from = to;
  }
  return out.sort();
}

/** The unit of the last non-zero decimal digit a number is written with. */
function lastPlace(value: number): number {
  if (value === 0) return 0;
  const [digits = '', exponent = '0'] = value.toExponential().split('e');
  const decimals = digits.includes('.') ? digits.length - digits.indexOf('.') - 1 : 0;
  return 10 ** (Number(exponent) - decimals);
}
