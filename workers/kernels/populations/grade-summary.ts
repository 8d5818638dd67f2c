import { quantiles, weightedQuantiles } from '#kernels/statistics/quantile.ts';
import { weightedMoments } from '#kernels/statistics/weighted-moments.ts';
import type { ScreenRows } from './screen-rows.ts';

/** Mean, median and coefficient of variation, rows below detection at half their limit. */
export interface GradeSummary {
  mean: number;
  median: number;
  /** Standard deviation over mean; null with a single row or beyond double range. */
  cv: number | null;
  min: number;
  max: number;
}

/** Statistics of the same rows with and without length weights. */
export interface GradeSummaries {
  unweighted: GradeSummary;
  /** Null when there are no weights. */
  weighted: GradeSummary | null;
  /** Standard deviation of ln grade of the measured rows, unweighted; null with fewer than two. */
  logSd: number | null;
}

/** Summaries of the rows of a screen; at least one row. */
export function summariseGrades({ measured, below, weights }: ScreenRows): GradeSummaries {
  const values = new Float64Array(measured.length + below.length);
  values.set(measured);
  for (let i = 0; i < below.length; i++) values[measured.length + i] = below[i]! / 2;
  const logs = measured.map(Math.log);
  const logVariance =
    logs.length > 1 ? weightedMoments(logs, new Float64Array(logs.length).fill(1)).variance : null;
  return {
    unweighted: summary(values, null),
    weighted: weights && summary(values, weights),
    logSd: logVariance === null ? null : Math.sqrt(logVariance),
  };
}

function summary(values: Float64Array, weights: Float64Array | null): GradeSummary {
  const { mean, variance } = weightedMoments(
    values,
    weights ?? new Float64Array(values.length).fill(1),
  );
  const cv = variance === null ? NaN : Math.sqrt(variance) / mean;
  const asked = [0, 0.5, 1];
  const [min = NaN, median = NaN, max = NaN] = weights
    ? weightedQuantiles(values, weights, asked)
    : quantiles(values, asked);
  return { mean, median, cv: Number.isFinite(cv) ? cv : null, min, max };
}
