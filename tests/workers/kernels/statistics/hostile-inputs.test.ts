import { quantiles, weightedQuantiles } from '#kernels/statistics/quantile.ts';
import { rankCorrelation } from '#kernels/statistics/rank-correlation.ts';
import { signFlipTest } from '#kernels/statistics/sign-flip.ts';
import { summarise } from '#kernels/statistics/summary.ts';
import { theilSen } from '#kernels/statistics/theil-sen.ts';
import {
  effectiveCount,
  weightedMean,
  weightedMoments,
  weightedVariance,
} from '#kernels/statistics/weighted-moments.ts';
import { testHostileInputs } from '#tests/support/hostile-inputs.ts';

testHostileInputs([
  ['quantiles', (values) => quantiles(values, [0, 0.25, 0.5, 1])],
  ['weightedQuantiles', (x, w) => weightedQuantiles(x, w, [0, 0.25, 0.5, 1])],
  ['rankCorrelation', (x, y) => rankCorrelation(x, y)],
  ['signFlipTest', (differences) => signFlipTest(differences, { seed: 1, draws: 19 })],
  ['summarise', (values) => summarise(values, { probabilities: [0.5] })],
  ['summarise, weighted', (values, weights) => summarise(values, { weights })],
  ['theilSen', (x, y) => theilSen(x, y)],
  ['weightedMean', (x, w) => weightedMean(x, w)],
  ['weightedVariance', (x, w) => weightedVariance(x, w)],
  ['weightedMoments', (x, w) => weightedMoments(x, w)],
  ['effectiveCount', (weights) => effectiveCount(weights)],
]);
