import { medianAbsoluteDeviation } from 'simple-statistics';
import { quantiles, weightedQuantiles } from './quantile.ts';
import { effectiveCount, weightedMoments } from './weighted-moments.ts';

/** Moments of ln x: what a lognormal reading of the values rests on. */
export interface LogSummary {
  geometricMean: number;
  logMean: number;
  /** Null when a single row carries all the weight. */
  logSd: number | null;
  /** sqrt(exp(logSd^2) - 1): the coefficient of variation of that lognormal. */
  lognormalCv: number | null;
}

/** Description of one variable. Null marks what the values cannot give, never a zero. */
export interface Summary {
  n: number;
  /** Sum of the weights: metres when weighted by length, otherwise n. */
  totalWeight: number;
  effectiveN: number;
  min: number;
  max: number;
  mean: number;
  sd: number | null;
  cv: number | null;
  skewness: number | null;
  excessKurtosis: number | null;
  median: number;
  /** Median absolute deviation, unweighted and raw; divide by .67449 for a robust sd. */
  mad: number;
  percentiles: { probability: number; value: number }[];
  /** Null when any value is <= 0. */
  log: LogSummary | null;
}

/** Probabilities reported unless others are asked for. */
export const DEFAULT_PROBABILITIES: readonly number[] = [
  0.01, 0.025, 0.05, 0.1, 0.25, 0.5, 0.75, 0.9, 0.95, 0.975, 0.99,
];

/**
 * Summary of one variable, weighted by interval length when lengths are given. Percentiles are type
 * 7; the variance is unbiased (n - 1, or reliability weights); skewness is m3 / m2^1.5.
 *
 * @param values Finite values. Not modified.
 * @param options.weights Interval lengths (m); equal weights when left out.
 * @param options.probabilities Of the percentiles, each in [0, 1].
 * @throws {KernelError} `too-few-rows`, `not-finite`, `shape`, `bad-parameter`.
 */
export function summarise(
  values: Float64Array,
  options: { weights?: Float64Array; probabilities?: readonly number[] } = {},
): Summary {
  const { weights, probabilities = DEFAULT_PROBABILITIES } = options;
  const used = weights ?? new Float64Array(values.length).fill(1);
  const moments = weightedMoments(values, used);
  const asked = [0, 0.5, 1, ...probabilities];
  const [min = NaN, median = NaN, max = NaN, ...found] = weights
    ? weightedQuantiles(values, weights, asked)
    : quantiles(values, asked);
  const sd = moments.variance === null ? null : Math.sqrt(moments.variance);
  return {
    n: values.length,
    totalWeight: used.reduce((sum, weight) => sum + weight, 0),
    effectiveN: effectiveCount(used),
    min,
    max,
    mean: moments.mean,
    sd,
    cv: sd === null || moments.mean === 0 ? null : sd / moments.mean,
    skewness: moments.skewness,
    excessKurtosis: moments.excessKurtosis,
    median,
    mad: medianAbsoluteDeviation(Array.from(values)),
    percentiles: probabilities.map((probability, i) => ({ probability, value: found[i] ?? NaN })),
    log: values.every((value) => value > 0) ? summariseLogs(values, used) : null,
  };
}

function summariseLogs(values: Float64Array, weights: Float64Array): LogSummary {
  const { mean, variance } = weightedMoments(values.map(Math.log), weights);
  return {
    geometricMean: Math.exp(mean),
    logMean: mean,
    logSd: variance === null ? null : Math.sqrt(variance),
    lognormalCv: variance === null ? null : Math.sqrt(Math.expm1(variance)),
  };
}
