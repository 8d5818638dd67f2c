import { andersonDarling } from '#kernels/populations/normality.ts';
import { shapiroWilk } from '#kernels/populations/shapiro-wilk.ts';
import type { Adapters } from '../adapter.ts';
import { transformedValues } from '../transform.ts';

/** Tests of one column against a normal distribution. */
export const NORMALITY: Adapters = {
  shapiro_wilk: (set, check) => {
    const { statistic, p } = shapiroWilk(transformedValues(set, check));
    return { W: statistic, p };
  },
  anderson_darling: (set, check) => {
    const { statistic, p } = andersonDarling(transformedValues(set, check));
    return { A2: statistic, p };
  },
};
