import { summarise } from '#kernels/statistics/summary.ts';
import { numbersOf } from '#tests/support/reference.ts';
import type { Adapters } from '../adapter.ts';

/** Moments and percentiles of one column. */
export const UNIVARIATE: Adapters = {
  summary: (set, check) => {
    const found = summarise(numbersOf(set, check));
    const { n, skewness, log } = found;
    return {
      n,
      mean: found.mean,
      sd: found.sd,
      cv: found.cv,
      min: found.min,
      max: found.max,
      median: found.median,
      'mad_1.4826': 1.4826 * found.mad,
      skew_g1: skewness,
      skew_G1: ((skewness ?? NaN) * Math.sqrt(n * (n - 1))) / (n - 2),
      excess_kurtosis_g2: found.excessKurtosis,
      geometric_mean: log?.geometricMean ?? null,
      ln_mean: log?.logMean ?? null,
      ln_sd: log?.logSd ?? null,
      lognormal_cv: log?.lognormalCv ?? null,
    };
  },
  percentiles_type7: (set, check) => {
    const { probabilities = [] } = check.inputs;
    const { percentiles } = summarise(numbersOf(set, check), { probabilities });
    return percentiles.map(({ value }) => value);
  },
};
