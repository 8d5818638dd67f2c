import { additiveLogRatio } from '#kernels/compositions/additive-log-ratio.ts';
import {
  aitchisonDistance,
  aitchisonNorm,
  perturb,
  power,
} from '#kernels/compositions/aitchison-geometry.ts';
import { balance } from '#kernels/compositions/balances.ts';
import { fitCensoredLognormal, meanBelowLimit } from '#kernels/compositions/censored-lognormal.ts';
import { centredLogRatio } from '#kernels/compositions/centred-log-ratio.ts';
import { close } from '#kernels/compositions/closure.ts';
import { inverseOfCovariance } from '#kernels/compositions/covariance-inverse.ts';
import { pivotBasis } from '#kernels/compositions/ilr-basis.ts';
import {
  inverseIsometricLogRatio,
  isometricLogRatio,
} from '#kernels/compositions/isometric-log-ratio.ts';
import { linkParts } from '#kernels/compositions/link-parts.ts';
import { drawByLogRatio } from '#kernels/compositions/log-ratio-draws.ts';
import { replaceByLogRatioEm } from '#kernels/compositions/log-ratio-em.ts';
import { replaceByLognormal } from '#kernels/compositions/lognormal-replacement.ts';
import { imputeByNeighbours } from '#kernels/compositions/nearest-rows-imputation.ts';
import { profilePart } from '#kernels/compositions/part-profile.ts';
import { partRelations } from '#kernels/compositions/part-relations.ts';
import {
  harmoniseLimit,
  replaceBelowLimit,
  replaceInClosed,
} from '#kernels/compositions/replacement.ts';
import { rowUse } from '#kernels/compositions/row-use.ts';
import { screenParts } from '#kernels/compositions/screen-parts.ts';
import { lowerTailRatio, lowerTailVariance } from '#kernels/compositions/truncated-normal.ts';
import {
  compositionalCentre,
  variation,
  variationOfCovariance,
} from '#kernels/compositions/variation.ts';
import { testHostileInputs } from '#tests/support/hostile-inputs.ts';

const each = (of: (value: number) => unknown) => (values: Float64Array) =>
  Array.from(values, (value) => of(value));
/** Every fifth value below its limit. */
const states = ({ length }: Float64Array) =>
  Uint8Array.from({ length }, (_, i) => Number(i % 5 === 4));
const measured = ({ length }: Float64Array) => new Uint8Array(length);
const square = (column: Float64Array, size: number) =>
  Float64Array.from({ length: size * size }, (_, at) => {
    const [row, col] = [Math.floor(at / size), at % size];
    return column[row === col ? row : size + row + col] ?? NaN;
  });
/** A covariance: products of columns of numbers. */
const covarianceOf = (...columns: Float64Array[]) =>
  Float64Array.from(
    columns.flatMap((a) => columns.map((b) => a.reduce((sum, value, i) => sum + value * b[i]!, 0))),
  );

testHostileInputs([
  ['additiveLogRatio', (parts) => additiveLogRatio(parts, 4)],
  ['aitchisonDistance', (x, y) => aitchisonDistance(x, y)],
  ['aitchisonNorm', (x) => aitchisonNorm(x)],
  ['perturb', (x, y) => perturb(x, y)],
  ['power', (x) => power(x, 0.5)],
  ['power, exponent', (x, e) => Array.from(e, (exponent) => power(x, exponent))],
  ['balance', (x, y, z) => balance([x, y, z], [0], [1, 2]), 'missing'],
  ['fitCensoredLognormal', (values, limits) => fitCensoredLognormal(values, limits.slice(0, 8))],
  ['meanBelowLimit', each((limit) => meanBelowLimit({ logMean: 1, logSd: 1 }, limit))],
  ['meanBelowLimit, fit', each((x) => meanBelowLimit({ logMean: x, logSd: x }, 1))],
  ['centredLogRatio', (parts) => centredLogRatio(parts, 4)],
  ['close', (parts) => close(parts, 4)],
  ['inverseOfCovariance', (x, y) => inverseOfCovariance(covarianceOf(x, y), 2)],
  ['isometricLogRatio', (parts) => isometricLogRatio(parts, pivotBasis(4))],
  ['inverseIsometricLogRatio', (z) => inverseIsometricLogRatio(z, pivotBasis(5))],
  [
    'linkParts',
    (matrix) =>
      linkParts(
        square(
          matrix.map((x) => x - 1),
          3,
        ),
        3,
      ),
  ],
  [
    'drawByLogRatio',
    (a, b, c) =>
      drawByLogRatio([a, b, c], [states(a), measured(b), measured(c)], { seed: 1, draws: 2 }),
    'missing',
  ],
  [
    'replaceByLogRatioEm',
    (a, b, c) =>
      replaceByLogRatioEm([a, b, c], [states(a), measured(b), measured(c)], {
        tolerance: 1e-4,
        maxIterations: 2000,
      }),
    'missing',
  ],
  ['replaceByLognormal', (values) => replaceByLognormal(values, states(values)), 'missing'],
  ['imputeByNeighbours', (a, b, c) => imputeByNeighbours([a, b, c], { k: 3 }), 'missing'],
  ['profilePart', (values) => profilePart(values, states(values))],
  ['partRelations', (x, y, z) => partRelations(variationOfCovariance(covarianceOf(x, y, z), 3), 3)],
  ['harmoniseLimit', (values) => harmoniseLimit(values, states(values), 3), 'missing'],
  [
    'harmoniseLimit, limit',
    (v) => Array.from(v, (x) => harmoniseLimit(v, states(v), x)),
    'missing',
  ],
  ['replaceBelowLimit', (values) => replaceBelowLimit(values, states(values)), 'missing'],
  [
    'replaceInClosed',
    (parts, replacements) =>
      replaceInClosed(
        close(parts, 4),
        4,
        replacements.map((x) => x / 1000),
      ),
  ],
  ['rowUse', (a) => rowUse([states(a), measured(a), measured(a)])],
  [
    'screenParts',
    (a, b, cvs) =>
      screenParts(
        [a, b, cvs].map((values, i) => ({
          element: ['Cu', 'Zn', 'Pb'][i] ?? '',
          profile: profilePart(values, measured(values)),
          cvOfDuplicates: cvs[i] ?? null,
        })),
      ),
  ],
  ['lowerTailRatio', each(lowerTailRatio)],
  ['lowerTailVariance', each(lowerTailVariance)],
  ['compositionalCentre', (parts) => compositionalCentre(parts, 4)],
  ['variation', (parts) => variation(parts, 4)],
  ['variationOfCovariance', (x, y) => variationOfCovariance(covarianceOf(x, y), 2)],
]);
