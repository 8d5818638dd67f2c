import { quantiles } from '#kernels/statistics/quantile.ts';
import { summarise } from '#kernels/statistics/summary.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import { groupValues } from '#kernels/tables/grouped-values.ts';
import { kolmogorovSmirnovPairs } from '#kernels/tables/kolmogorov-smirnov.ts';
import { dunnZ, kruskalWallis, mannWhitneyPairs } from '#kernels/tables/rank-tests.ts';
import { anovaOfLogs } from '#kernels/tables/variance-between.ts';
import { numbersOf, textsOf, type ReferenceCheck } from '#tests/support/reference.ts';
import { inputText, type Adapter, type Adapters } from '../adapter.ts';
import type { ReferenceResult } from '../compare.ts';

/** A calculation on the values of each class, classes in the order of their names. */
const byClass =
  (calculate: (groups: Float64Array[], check: ReferenceCheck) => ReferenceResult): Adapter =>
  (set, check) => {
    const labels = categoryFrom(textsOf(set, check, inputText(check, 'group_column')));
    return calculate(groupValues(numbersOf(set, check), labels).groups, check);
  };

/** One column compared between the classes of another. */
export const GROUP_TEST: Adapters = {
  kruskal_wallis: byClass((groups) => {
    const { h, df, nominalP, epsilonSquared } = kruskalWallis(groups);
    return { H: h, df, p: nominalP, epsilon2: epsilonSquared };
  }),
  mann_whitney_pairwise: byClass((groups) => {
    const tests = mannWhitneyPairs(groups);
    return {
      U: tests.map(({ u }) => u),
      p: tests.map(({ nominalP }) => nominalP),
      p_holm: tests.map(({ pHolm }) => pHolm),
      p_bh: tests.map(({ pBenjaminiHochberg }) => pBenjaminiHochberg),
      cliffs_delta: tests.map(({ cliffsDelta }) => cliffsDelta),
    };
  }),
  dunn_z: byClass((groups) => dunnZ(groups)),
  ks_two_sample_pairwise: byClass((groups) => {
    const tests = kolmogorovSmirnovPairs(groups);
    return { D: tests.map(({ d }) => d), p_asymptotic: tests.map(({ nominalP }) => nominalP) };
  }),
  anova_ln: byClass((groups) => {
    const { f, nominalP, betweenShare } = anovaOfLogs(groups);
    return { F: f, p: nominalP, between_share: betweenShare };
  }),
  percentiles_by_group: byClass((groups, { inputs }) =>
    groups.map((values) => quantiles(values, inputs.probabilities ?? [])),
  ),
  cv_by_group: byClass((groups) => {
    const summaries = groups.map((values) => summarise(values));
    return {
      n: summaries.map(({ n }) => n),
      mean: summaries.map(({ mean }) => mean),
      sd: summaries.map(({ sd }) => sd),
      cv: summaries.map(({ cv }) => cv),
    };
  }),
};
