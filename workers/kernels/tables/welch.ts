import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import { studentTwoSided } from './special-functions.ts';

/** Do two groups have one mean, when their spreads may differ. */
export interface WelchTest {
  /** Mean of the first less mean of the second, in the unit of the values. */
  difference: number;
  /** Null with `df` and p when neither group has any spread. */
  t: number | null;
  df: number | null;
  /** Two-sided, for independent rows: nominal down-hole. */
  nominalP: number | null;
}

/**
 * Welch's t test of two groups: each keeps its own variance, and the degrees of freedom follow from
 * both.
 *
 * @param a, b Values in one unit, at least two each. Not modified.
 * @throws {KernelError} `too-few-rows` with { found }; `not-finite`, with { row } at a value that is
 *   none, without when squares overflow.
 * @see Welch (1947), The generalization of Student's problem when several different population
 *   variances are involved, Biometrika 34, 28-35 (from memory).
 */
export function welchTest(a: ArrayLike<number>, b: ArrayLike<number>): WelchTest {
  const [first, second] = [meanOf(a), meanOf(b)];
  const [u, v] = [squaredErrorOf(a, first), squaredErrorOf(b, second)];
  const difference = first - second;
  const error = Math.sqrt(u + v);
  if (!(Number.isFinite(difference) && Number.isFinite(error))) {
    const found = `found means ${difference} apart with a standard error of ${error}`;
    throw new KernelError('not-finite', `expected values with finite squares, ${found}`);
  }
  // Rounding leaves equal values a spread of about an ulp of their size.
  if (!(error > 1e-14 * Math.max(Math.abs(first), Math.abs(second))))
    return { difference, t: null, df: null, nominalP: null };
  const [shareU, shareV] = [u / (u + v), v / (u + v)];
  const df = 1 / (shareU ** 2 / (a.length - 1) + shareV ** 2 / (b.length - 1));
  const t = difference / error;
  return { difference, t, df, nominalP: studentTwoSided(t, df) };
}

function meanOf(values: ArrayLike<number>): number {
  if (values.length < 2) {
    const message = `expected two values or more in a group, found ${values.length}`;
    throw new KernelError('too-few-rows', message, { found: values.length });
  }
  requireFinite(values, 'values of a group');
  let mean = 0;
  for (let row = 0; row < values.length; row++) mean += values[row]! / values.length;
  return mean;
}

/** Variance of the mean: s² / n. */
function squaredErrorOf(values: ArrayLike<number>, mean: number): number {
  let squares = 0;
  for (let row = 0; row < values.length; row++) squares += (values[row]! - mean) ** 2;
  return squares / (values.length - 1) / values.length;
}
