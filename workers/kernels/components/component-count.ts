import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';

/** Fewest and most components a grouping stands on unless a person says otherwise. */
const FEWEST = 2;
const MOST = 10;

/**
 * Broken-stick shares: what component k of p would take of the variance if it were broken at random,
 * b_k = (1/p) sum_{j=k..p} 1/j.
 *
 * @param p Number of components, >= 1.
 * @returns p shares, descending, sum 1.
 * @throws {KernelError} `bad-parameter` for p < 1.
 * @see Jackson (1993), Stopping rules in principal components analysis, Ecology 74.
 */
export function brokenStick(p: number): number[] {
  if (!(p >= 1) || !Number.isInteger(p)) {
    throw new KernelError('bad-parameter', `expected at least 1 component, found ${p}`);
  }
  const shares = new Array<number>(p).fill(0);
  let sum = 0;
  for (let k = p; k >= 1; k--) {
    sum += 1 / k;
    shares[k - 1] = sum / p;
  }
  return shares;
}

/** How many leading values exceed their counterpart, stopping at the first that does not. */
export function countAbove(values: ArrayLike<number>, limits: ArrayLike<number>): number {
  let k = 0;
  while (k < values.length && k < limits.length && values[k]! > limits[k]!) k++;
  return k;
}

/** Fewest components that together take a share of the variance. */
export function countForShare(shares: ArrayLike<number>, wanted = 0.8): number {
  if (!(wanted > 0 && wanted <= 1)) {
    throw new KernelError('bad-parameter', `expected a share in (0, 1], found ${wanted}`);
  }
  let [k, sum] = [0, 0];
  while (k < shares.length && sum < wanted - 1e-12) sum += shares[k++]!;
  return k;
}

/**
 * Kaiser's count: components that take more than the mean share. For information beside the other
 * readings; it keeps too many where parts are many, and was meant for correlations.
 *
 * @param shares Of the total variance, or eigenvalues, of every component there is.
 * @throws {KernelError} `not-finite`; `too-few-rows` without shares.
 * @see Kaiser (1960), The application of electronic computers to factor analysis.
 */
export function countAboveMean(shares: ArrayLike<number>): number {
  requireFinite(shares, 'shares');
  const all = Array.from(shares);
  const mean = all.reduce((sum, share) => sum + share, 0) / all.length;
  // Equal shares are all the mean, to rounding: none stands above it.
  return all.filter((share) => share > mean * (1 + 1e-12)).length;
}

/** Three readings of how many components to keep, and the one proposed. */
export interface ComponentCount {
  brokenStick: number;
  parallel: number;
  /** Components for 80 % of the variance. */
  cumulative80: number;
  suggested: number;
  sentence: string;
}

/**
 * Proposes max(2, parallel analysis), at most ten and at most as many as exist.
 *
 * @param shares Of the total variance, descending.
 * @param parallel Components kept by parallel analysis.
 */
export function suggestCount(shares: ArrayLike<number>, parallel: number): ComponentCount {
  const p = shares.length;
  const suggested = Math.min(Math.max(FEWEST, parallel), MOST, p);
  const byStick = countAbove(shares, brokenStick(p));
  const cumulative80 = countForShare(shares);
  const sentence =
    `Parallel analysis keeps ${parallel}, the broken stick ${byStick}; ` +
    `80 % of the variance takes ${cumulative80}. ${suggested} proposed.`;
  return { brokenStick: byStick, parallel, cumulative80, suggested, sentence };
}
