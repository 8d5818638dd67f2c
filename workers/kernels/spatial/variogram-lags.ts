import { linearRegression } from 'simple-statistics';
import { KernelError } from '#kernels/kernel-error.ts';
import { weightedMoments } from '#kernels/statistics/weighted-moments.ts';

/** One lag class of an experimental variogram. */
export interface VariogramLag {
  /** Lag class, from 1; its middle is lag x class length. */
  lag: number;
  /** Mean distance of its pairs, m; null without pairs. */
  distanceM: number | null;
  /** Half the mean squared difference; null without pairs. */
  gamma: number | null;
  pairs: number;
  /** Too few pairs to be joined to its neighbours on a plot. */
  isThin: boolean;
}

/** Experimental variogram of one domain; no model is fitted. */
export interface ExperimentalVariogram {
  lags: VariogramLag[];
  /** Values used. */
  n: number;
  /** Variance of the domain's values (n - 1); null below two. */
  variance: number | null;
  /** gamma(1) over the variance: near 1 there is no continuity at this support. */
  firstLagRatio: number | null;
  /** Indicative share of variance at distance 0: a line through lags 1 to 3, not below 0. */
  noiseShare: number | null;
}

/** Pairs a lag needs to be trusted (common practice, from memory). */
export const THIN_PAIRS = 30;

/** Running sums of squared differences by lag class. */
export interface LagSums {
  squares: Float64Array;
  distances: Float64Array;
  pairs: Float64Array;
}

/** @throws {KernelError} `bad-parameter` for a lag that is not > 0 or no whole number of lags. */
export function emptyLagSums(lagM: number, lags: number): LagSums {
  if (!(lagM > 0 && lagM < Infinity && Number.isInteger(lags) && lags >= 1))
    throw new KernelError(
      'bad-parameter',
      `expected a lag > 0 m and 1 or more lags, found ${lagM}, ${lags}`,
    );
  const empty = () => new Float64Array(lags);
  return { squares: empty(), distances: empty(), pairs: empty() };
}

/** Adds a pair to its class; pairs nearer than half a lag or beyond the last class are left out. */
export function addPair(sums: LagSums, distanceM: number, difference: number, lagM: number): void {
  const at = Math.round(distanceM / lagM) - 1;
  if (at < 0 || at >= sums.pairs.length) return;
  sums.squares[at]! += difference * difference;
  sums.distances[at]! += distanceM;
  sums.pairs[at]! += 1;
}

/** The variogram of summed pairs and the values they were made of. */
export function variogramOf(sums: LagSums, values: readonly number[]): ExperimentalVariogram {
  const lags = Array.from(sums.pairs, (pairs, at): VariogramLag => ({
    lag: at + 1,
    distanceM: pairs > 0 ? sums.distances[at]! / pairs : null,
    gamma: pairs > 0 ? sums.squares[at]! / (2 * pairs) : null,
    pairs,
    isThin: pairs < THIN_PAIRS,
  }));
  const n = values.length;
  const variance = n === 0 ? null : weightedMoments(values, new Float64Array(n).fill(1)).variance;
  const first = lags[0]?.gamma ?? null;
  const hasSpread = variance !== null && variance > 0;
  return {
    lags,
    n,
    variance,
    firstLagRatio: hasSpread && first !== null ? first / variance : null,
    noiseShare: hasSpread ? noiseShareOf(lags, variance) : null,
  };
}

function noiseShareOf(lags: readonly VariogramLag[], variance: number): number | null {
  const points = lags
    .slice(0, 3)
    .flatMap(({ distanceM, gamma }) =>
      distanceM !== null && gamma !== null ? [[distanceM, gamma]] : [],
    );
  if (points.length < 3) return null;
  return Math.max(0, linearRegression(points).b / variance);
}

/** How a split changed short-range variance. */
export interface SplitVariogramTest {
  /** Pooled gamma of lags 1 to 3 inside the parts over that of the whole; null without pairs. */
  ratio: number | null;
  pairsBefore: number;
  pairsAfter: number;
}

/**
 * Pooled within-domain gamma of lags 1 to 3 after a split over the same before: below 1 the split
 * removed a step between populations, at 1 it removed nothing.
 *
 * @param before Variogram of the whole.  @param after Variograms of its parts, at the same lag.
 */
export function splitVariogramTest(
  before: ExperimentalVariogram,
  after: readonly ExperimentalVariogram[],
): SplitVariogramTest {
  const pooled = (variograms: readonly ExperimentalVariogram[]) => {
    const lags = variograms.flatMap((variogram) => variogram.lags.slice(0, 3));
    const pairs = lags.reduce((sum, lag) => sum + lag.pairs, 0);
    return { pairs, sum: lags.reduce((sum, lag) => sum + lag.pairs * (lag.gamma ?? 0), 0) };
  };
  const [whole, parts] = [pooled([before]), pooled(after)];
  const isDefined = whole.sum > 0 && parts.pairs > 0;
  return {
    ratio: isDefined ? parts.sum / parts.pairs / (whole.sum / whole.pairs) : null,
    pairsBefore: whole.pairs,
    pairsAfter: parts.pairs,
  };
}
