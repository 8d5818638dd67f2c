import { capLadder } from '#kernels/populations/cap-ladder.ts';
import {
  lognormalCv,
  lognormalMean,
  logSdOfCv,
  readCv,
} from '#kernels/populations/coefficient-of-variation.ts';
import { dipPValue, dipTest, spreadTies } from '#kernels/populations/dip-test.ts';
import { dipStatistic } from '#kernels/populations/dip.ts';
import { disintegration } from '#kernels/populations/disintegration.ts';
import { evenOddsPoint } from '#kernels/populations/even-odds.ts';
import { summariseGrades } from '#kernels/populations/grade-summary.ts';
import { partitionAt, proposeInflections } from '#kernels/populations/inflection.ts';
import { logHistogram } from '#kernels/populations/log-histogram.ts';
import { fitLognormalMixtures } from '#kernels/populations/lognormal-mixture.ts';
import { metalAtRisk } from '#kernels/populations/metal-at-risk.ts';
import { mixedness } from '#kernels/populations/mixedness.ts';
import { mixtureData } from '#kernels/populations/mixture-data.ts';
import { fitNormalMixture } from '#kernels/populations/normal-mixture.ts';
import { andersonDarling, andersonDarlingP, lilliefors } from '#kernels/populations/normality.ts';
import { partitionPlot, zoneOf } from '#kernels/populations/partition-plot.ts';
import { proposePartitions } from '#kernels/populations/partition-proposals.ts';
import {
  normalScores,
  weightedPlottingPositions,
} from '#kernels/populations/plotting-positions.ts';
import { probabilityPlot } from '#kernels/populations/probability-plot.ts';
import { screenPopulation } from '#kernels/populations/screen-population.ts';
import { screenRows } from '#kernels/populations/screen-rows.ts';
import { clearestCut } from '#kernels/populations/separation.ts';
import { shapiroWilk } from '#kernels/populations/shapiro-wilk.ts';
import { countModes, criticalBandwidth, silvermanTest } from '#kernels/populations/silverman.ts';
import { fitSkewedPopulation } from '#kernels/populations/skewed-population.ts';
import { decileAnalysis, topCutTable } from '#kernels/populations/top-cuts.ts';
import { fitTruncatedPopulation } from '#kernels/populations/truncated-population.ts';
import { unmixSearch } from '#kernels/populations/unmix-search.ts';
import { seededRandom } from '#kernels/random.ts';
import { codesOf, halves, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const each = (of: (value: number) => unknown) => (values: Float64Array) =>
  Array.from(values, (value) => of(value));
const dataOf = (y: Float64Array) => mixtureData(y);

const componentOf = (means: Float64Array, sds: Float64Array, i: number) => ({
  share: 0.5,
  mean: means[i] ?? NaN,
  sd: (sds[i] ?? NaN) / 9,
});

testHostileInputs([
  ['capLadder', (values, weights) => capLadder(values, { weights })],
  ['readCv', each(readCv)],
  ['lognormalMean', each((x) => lognormalMean(x, 1))],
  ['lognormalCv', each((x) => lognormalCv(x))],
  ['logSdOfCv', each(logSdOfCv)],
  ['dipPValue', each((x) => dipPValue(x / 24, 24))],
  ['dipTest', (values) => dipTest(values)],
  ['dipStatistic', (values) => dipStatistic(values)],
  ['disintegration', (values) => disintegration(values)],
  ['summariseGrades', (values, weights) => summariseGrades(screenRows(values, weights, null))],
  ['proposeInflections', (y) => proposeInflections(dataOf(y))],
  ['partitionAt', (y) => partitionAt(dataOf(y), 0.3)],
  ['proposePartitions', (y) => proposePartitions(dataOf(y))],
  ['logHistogram', (y) => logHistogram(dataOf(y))],
  ['fitLognormalMixtures', (y) => fitLognormalMixtures(dataOf(y), 2)],
  ['fitNormalMixture', (y, weights) => fitNormalMixture(mixtureData(y, [], weights), 2)],
  ['fitNormalMixture, rows below limits', (y, below) => fitNormalMixture(mixtureData(y, below), 2)],
  [
    'metalAtRisk',
    (values) => metalAtRisk(values, halves(values), { perPeriod: 5, seed: 1, draws: 100 }),
  ],
  ['mixedness', (y) => mixedness(y, 1)],
  ['andersonDarling', (values) => andersonDarling(values)],
  ['lilliefors', (values) => lilliefors(values)],
  ['shapiroWilk', (values) => shapiroWilk(values)],
  ['weightedPlottingPositions', (weights) => weightedPlottingPositions(weights)],
  ['probabilityPlot', (y) => probabilityPlot(dataOf(y))],
  ['screenPopulation', (values, weights) => screenPopulation(values, weights, null)],
  ['criticalBandwidth', (values) => criticalBandwidth(values, 1, 512)],
  ['silvermanTest', (values) => silvermanTest(values, 1, 1, 9)],
  ['fitSkewedPopulation', (y) => fitSkewedPopulation(dataOf(y))],
  ['fitTruncatedPopulation', (y) => fitTruncatedPopulation(dataOf(y))],
  ['topCutTable', (values, weights) => topCutTable(values, [2, 4], weights)],
  ['decileAnalysis', (values, weights) => decileAnalysis(values, weights)],
  [
    'unmixSearch',
    (y, depth) =>
      unmixSearch(
        {
          target: [y],
          holeStarts: halves(y),
          splitters: [
            { name: 'rock', kind: 'category', category: codesOf(y, 2) },
            { name: 'depth', kind: 'numeric', values: depth },
          ],
        },
        { seed: 1, draws: 19, minRows: 4 },
      ),
  ],
  ['countModes', (values) => countModes(values.toSorted(), 0.5, 64)],
  [
    'countModes, bandwidth',
    (v) => Array.from(v, (h) => countModes(Float64Array.of(1, 2, 9), h, 64)),
  ],
  [
    'evenOddsPoint',
    (means, sds) => evenOddsPoint(componentOf(means, sds, 0), componentOf(means, sds, 1)),
  ],
  [
    'clearestCut',
    (means, sds) => clearestCut([componentOf(means, sds, 3), componentOf(means, sds, 0)]),
  ],
  ['normalScores', (v) => Array.from(v, (n) => normalScores(Math.round(n)))],
  ['spreadTies', (values) => spreadTies(values, seededRandom(1))],
  ['andersonDarlingP', each(andersonDarlingP)],
  [
    'partitionPlot',
    (y) => {
      const partition = partitionAt(dataOf(y), 0.3);
      return [
        partitionPlot(dataOf(y), partition, 20),
        ...Array.from(y, (at) => zoneOf(partition, at)),
      ];
    },
  ],
]);
