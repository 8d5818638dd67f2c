import { biplot } from '#kernels/components/biplot.ts';
import { chiSquareQuantile } from '#kernels/components/chi-square-quantile.ts';
import {
  brokenStick,
  countAboveMean,
  countForShare,
  suggestCount,
} from '#kernels/components/component-count.ts';
import { fitComponents } from '#kernels/components/components.ts';
import { eigenOfCovariance } from '#kernels/components/eigen.ts';
import { consistencyFactor, smallSampleFactor } from '#kernels/components/mcd-factors.ts';
import { fastMcd, mahalanobis } from '#kernels/components/mcd.ts';
import { parallelAnalysis } from '#kernels/components/parallel-analysis.ts';
import { fitRobustComponents } from '#kernels/components/robust-components.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import { ordinary, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const each = (of: (value: number) => unknown) => (values: Float64Array) =>
  Array.from(values, (value) => of(value));
const interleaved = (x: Float64Array, y: Float64Array) =>
  Float64Array.from([...x].flatMap((value, i) => [value, y[i]!]));
const covarianceOf = (...columns: Float64Array[]) =>
  Float64Array.from(
    columns.flatMap((a) => columns.map((b) => a.reduce((sum, value, i) => sum + value * b[i]!, 0))),
  );
const components = fitComponents([ordinary(0), ordinary(1), ordinary(2)]);
const quick = { seed: 1, starts: 20 };

testHostileInputs([
  ['chiSquareQuantile', each((x) => chiSquareQuantile(x / 7, 3))],
  ['chiSquareQuantile, freedom', each((df) => chiSquareQuantile(0.975, df))],
  ['brokenStick', each((p) => brokenStick(Math.round(p)))],
  ['countForShare', (shares) => countForShare(shares)],
  ['countAboveMean', (shares) => countAboveMean(shares)],
  ['suggestCount', (shares) => suggestCount(shares, 2)],
  ['fitComponents', (a, b, c) => fitComponents([a, b, c])],
  [
    'fitComponents, correlation',
    (a, b, c) => fitComponents([a, b, c], { basis: 'log-correlation' }),
  ],
  ['scoreComponents', (a, b, c) => scoreComponents([a, b, c], components, 2), 'missing'],
  ['biplot', each((k) => biplot(components, 'form', Math.ceil(k / 3)))],
  ['eigenOfCovariance', (x, y) => eigenOfCovariance(covarianceOf(x, y), 2)],
  ['fastMcd', (x, y) => fastMcd(interleaved(x, y), 2, quick)],
  [
    'mahalanobis, scatter',
    (x, y) =>
      mahalanobis(
        interleaved(ordinary(), ordinary(1)),
        2,
        Float64Array.of(3, 3),
        covarianceOf(x, y),
      ),
  ],
  ['consistencyFactor', each((x) => consistencyFactor(x / 7, 3))],
  ['smallSampleFactor', each((x) => smallSampleFactor(0.75, Math.round(10 * x), 3, 'raw'))],
  ['parallelAnalysis', (a, b, c) => parallelAnalysis([a, b, c], { seed: 1, permutations: 20 })],
  ['fitRobustComponents', (a, b, c) => fitRobustComponents([a, b, c], quick)],
]);
