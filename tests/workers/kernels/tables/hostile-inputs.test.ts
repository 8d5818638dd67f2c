import { association, entropy, strengthInWords } from '#kernels/tables/association.ts';
import { campaignCheck } from '#kernels/tables/campaign-check.ts';
import { chiSquareTest, residualSignificance } from '#kernels/tables/chi-square.ts';
import { codeRuns } from '#kernels/tables/code-runs.ts';
import { correctedInformation } from '#kernels/tables/corrected-information.ts';
import { crossTabulate } from '#kernels/tables/cross-tabulation.ts';
import { domainSplitReport } from '#kernels/tables/domain-split-report.ts';
import { energyDistance, energyTest } from '#kernels/tables/energy-distance.ts';
import { groupValues } from '#kernels/tables/grouped-values.ts';
import { holeShiftTest } from '#kernels/tables/hole-shift.ts';
import { kolmogorovSmirnovPairs } from '#kernels/tables/kolmogorov-smirnov.ts';
import { lengthWeightedCounts } from '#kernels/tables/length-weighted-counts.ts';
import { marginsOf, rowShares } from '#kernels/tables/margins.ts';
import { benjaminiHochberg, holm } from '#kernels/tables/multiple-tests.ts';
import { dunnZ, kruskalWallis, mannWhitneyPairs } from '#kernels/tables/rank-tests.ts';
import { midranks } from '#kernels/tables/ranks.ts';
import {
  chiSquareTail,
  fTail,
  incompleteBeta,
  kolmogorovTail,
  logGamma,
  studentTwoSided,
  upperGamma,
} from '#kernels/tables/special-functions.ts';
import { anovaOfLogs } from '#kernels/tables/variance-between.ts';
import { welchTest } from '#kernels/tables/welch.ts';
import { codesOf, halves, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const few = { seed: 1, draws: 19 };
const signs = (n: number) => Int8Array.from({ length: n }, (_, i) => i % 2);
/** A function of one number on every value of a column. */
const each = (of: (value: number) => number) => (values: Float64Array) =>
  Array.from(values, (value) => of(value));

testHostileInputs([
  ['entropy', (weights) => entropy(weights)],
  ['association', (counts) => association(counts, 4)],
  ['chiSquareTest', (counts) => chiSquareTest(counts, 4)],
  ['residualSignificance', (residuals) => residualSignificance(residuals)],
  ['correctedInformation', (counts) => correctedInformation(counts, 4)],
  ['marginsOf', (cells) => marginsOf(cells, 4)],
  ['rowShares', (cells) => rowShares(cells, 4), 'missing'],
  ['crossTabulate', (lengths) => crossTabulate(codesOf(lengths, 3), codesOf(lengths, 2), lengths)],
  [
    'lengthWeightedCounts',
    (lengths) => lengthWeightedCounts(codesOf(lengths, 3), codesOf(lengths, 2), lengths),
  ],
  [
    'codeRuns',
    (fromM) =>
      codeRuns(
        {
          holeStarts: Int32Array.of(0, fromM.length),
          fromM: fromM.toSorted(),
          toM: fromM.toSorted().map((from) => from + 0.001),
        },
        codesOf(fromM, 2),
      ),
  ],
  [
    'domainSplitReport',
    (lengthsM, x, y) =>
      domainSplitReport(
        {
          domains: codesOf(lengthsM, 2),
          lithology: codesOf(lengthsM, 3),
          lengthsM,
          coordinates: [x, y],
          holeStarts: halves(lengthsM),
        },
        few,
      ),
  ],
  ['energyDistance', (x, y) => energyDistance([x], [y])],
  ['energyTest', (x, y) => energyTest([x, y], signs(x.length), halves(x), few)],
  ['groupValues', (values) => groupValues(values, codesOf(values, 3)).nUsed],
  ['kolmogorovSmirnovPairs', (x, y) => kolmogorovSmirnovPairs([x, y])],
  ['benjaminiHochberg', (p) => benjaminiHochberg(p.map((value) => value / 6))],
  ['holm', (p) => holm(p.map((value) => value / 6))],
  ['kruskalWallis', (x, y) => kruskalWallis([x, y])],
  ['mannWhitneyPairs', (x, y) => mannWhitneyPairs([x, y])],
  ['dunnZ', (x, y) => dunnZ([x, y])],
  ['midranks', (values) => midranks(values)],
  ['anovaOfLogs', (x, y) => anovaOfLogs([x, y])],
  ['welchTest', (x, y) => welchTest(x, y)],
  ['logGamma', each(logGamma)],
  ['upperGamma', each((x) => upperGamma(2, x))],
  ['incompleteBeta', each((x) => incompleteBeta(x / 6, 2, 3))],
  ['chiSquareTail', each((x) => chiSquareTail(x, 3))],
  ['fTail', each((x) => fTail(x, 3, 4))],
  ['studentTwoSided', each((x) => studentTwoSided(x, 4))],
  ['kolmogorovTail', each(kolmogorovTail)],
  ['campaignCheck', (column) => campaignCheck(codesOf(column, 3), codesOf(column, 2))],
  ['strengthInWords', (values) => Array.from(values, strengthInWords)],
  [
    'holeShiftTest',
    (values) =>
      holeShiftTest(
        halves(values),
        (source) => Float64Array.of(values[source[0]!]! - values[1]!),
        few,
      ),
  ],
]);
