import { dipTest } from '#kernels/populations/dip-test.ts';
import type { Adapters } from '../adapter.ts';
import { transformedValues } from '../transform.ts';

/** The dip of one column and its p value. */
export const DIP: Adapters = {
  dip_statistic: (set, check) => dipTest(transformedValues(set, check)).dip,
  dip_p_value: (set, check) => dipTest(transformedValues(set, check)).pValue?.p ?? null,
};
