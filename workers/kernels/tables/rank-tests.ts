import { normalCdf } from '#kernels/normal.ts';
import { checkGroups, pairsOf } from './grouped-values.ts';
import { benjaminiHochberg, holm } from './multiple-tests.ts';
import { exactTwoSidedP, MOST_ROWS_EXACT } from './rank-sum-law.ts';
import { joined, midranks, rankSums } from './ranks.ts';
import { chiSquareTail } from './special-functions.ts';

/** Kruskal-Wallis test: do the groups lie at one level. */
export interface KruskalWallis {
  h: number;
  df: number;
  /** Asymptotic, for independent rows: nominal down-hole. */
  nominalP: number;
  /** Share of rank variance between groups, H / (n - 1). */
  epsilonSquared: number;
}

/**
 * Kruskal-Wallis H with tie correction. When every value is the same, H is 0 and p is 1.
 *
 * @param groups Two or more groups, each with a value; no NaN.
 * @throws {KernelError} `too-few-groups`; `not-finite`.
 * @see Kruskal & Wallis (1952), Journal of the American Statistical Association 47, 583-621.
 */
export function kruskalWallis(groups: readonly Float64Array[]): KruskalWallis {
  checkGroups(groups);
  const { ranks, tieSum } = midranks(joined(groups));
  const n = ranks.length;
  const df = groups.length - 1;
  const ties = 1 - tieSum / (n ** 3 - n);
  if (!(ties > 0)) return { h: 0, df, nominalP: 1, epsilonSquared: 0 };
  let squares = 0;
  rankSums(ranks, groups).forEach((sum, group) => {
    const size = groups[group]!.length;
    squares += size * (sum / size - (n + 1) / 2) ** 2;
  });
  const h = ((12 / (n * (n + 1))) * squares) / ties;
  return { h, df, nominalP: chiSquareTail(h, df), epsilonSquared: h / (n - 1) };
}

/** Mann-Whitney test of one pair of groups. */
export interface MannWhitney {
  first: number;
  second: number;
  /** Pairs of values with the first group's above the second's, ties a half. */
  u: number;
  /** Two-sided, normal approximation with tie and continuity correction; nominal down-hole. */
  nominalP: number;
  /** Two-sided over all orders of independent rows; null with ties or more than 50 rows. */
  exactP: number | null;
  pHolm: number;
  pBenjaminiHochberg: number;
  /** 2 u / (n1 n2) - 1: chance of first above second less the chance of below. */
  cliffsDelta: number;
}

/**
 * Mann-Whitney tests of every pair of groups, with the nominal p adjusted over the pairs.
 *
 * @param groups Two or more groups, each with a value; no NaN.
 * @throws {KernelError} `too-few-groups`; `not-finite`.
 * @see Mann & Whitney (1947), Annals of Mathematical Statistics 18, 50-60; Cliff (1993) (from memory).
 */
export function mannWhitneyPairs(groups: readonly Float64Array[]): MannWhitney[] {
  checkGroups(groups);
  const tests = pairsOf(groups.length).map(([first, second]) => ({
    first,
    second,
    ...mannWhitney(groups[first]!, groups[second]!),
  }));
  const p = Float64Array.from(tests, ({ nominalP }) => nominalP);
  const byHolm = holm(p);
  const byBenjaminiHochberg = benjaminiHochberg(p);
  return tests.map((test, i) => ({
    ...test,
    pHolm: byHolm[i]!,
    pBenjaminiHochberg: byBenjaminiHochberg[i]!,
  }));
}

function mannWhitney(a: Float64Array, b: Float64Array) {
  const { ranks, tieSum } = midranks(joined([a, b]));
  const n = ranks.length;
  const product = a.length * b.length;
  const [sumA = 0] = rankSums(ranks, [a, b]);
  const u = sumA - (a.length * (a.length + 1)) / 2;
  const sd = Math.sqrt((product / 12) * (n + 1 - tieSum / (n * (n - 1))));
  const away = Math.max(0, Math.abs(u - product / 2) - 0.5);
  const nominalP = sd > 0 ? Math.min(1, 2 * normalCdf(-away / sd)) : 1;
  const isExact = tieSum === 0 && n <= MOST_ROWS_EXACT;
  const exactP = isExact ? exactTwoSidedP(u, a.length, b.length) : null;
  return { u, nominalP, exactP, cliffsDelta: (2 * u) / product - 1 };
}

/**
 * Dunn's z of every pair of groups after a Kruskal-Wallis test: first minus second mean rank over
 * its standard error, ranks over all groups, tie-corrected. All values tied gives 0.
 *
 * @returns In the order 01, 02, ..., 12, ...
 * @throws {KernelError} `too-few-groups`; `not-finite`.
 * @see Dunn (1964), Technometrics 6, 241-252.
 */
export function dunnZ(groups: readonly Float64Array[]): Float64Array {
  checkGroups(groups);
  const { ranks, tieSum } = midranks(joined(groups));
  const n = ranks.length;
  const variance = (n * (n + 1)) / 12 - tieSum / (12 * (n - 1));
  const meanRanks = rankSums(ranks, groups).map((sum, group) => sum / groups[group]!.length);
  return Float64Array.from(pairsOf(groups.length), ([a, b]) => {
    if (!(variance > 0)) return 0;
    const sizes = 1 / groups[a]!.length + 1 / groups[b]!.length;
    return (meanRanks[a]! - meanRanks[b]!) / Math.sqrt(variance * sizes);
  });
}
