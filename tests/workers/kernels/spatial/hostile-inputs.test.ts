import {
  cellSizesFor,
  declusterCurve,
  declusterWeights,
} from '#kernels/spatial/cell-declustering.ts';
import { contactProfiles } from '#kernels/spatial/contact-profile.ts';
import { directionalVariograms } from '#kernels/spatial/directional-variogram.ts';
import { downHoleVariograms } from '#kernels/spatial/down-hole-variogram.ts';
import { normalScoreTransform } from '#kernels/spatial/normal-score-transform.ts';
import { coordinateAlong, lineDirection } from '#kernels/spatial/positions.ts';
import { swathProfile } from '#kernels/spatial/swath.ts';
import { splitVariogramTest } from '#kernels/spatial/variogram-lags.ts';
import { codesOf, halves, metresOf, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const byHole = (column: Float64Array) => ({ holeStarts: halves(column), ...metresOf(column) });
const cell = { x: 2, y: 2, z: 2 };

testHostileInputs([
  ['declusterWeights', (x, y, z) => declusterWeights({ x, y, z }, cell)],
  [
    'declusterWeights, cell',
    (v) => Array.from(v, (x) => declusterWeights({ x: v, y: v, z: v }, { ...cell, x })),
  ],
  ['declusterCurve', (x, y, values) => declusterCurve({ x, y, z: x }, values, { sizesM: [1, 3] })],
  ['cellSizesFor', (x, y, z) => cellSizesFor({ x, y, z })],
  [
    'contactProfiles',
    (values, obliquity) =>
      contactProfiles(byHole(values), codesOf(values, 3), values, {
        compositeM: 1,
        seed: 1,
        obliquity: obliquity.map((x) => x / 7),
      }),
  ],
  [
    'directionalVariograms',
    (x, y, values) =>
      directionalVariograms({ x, y, z: x }, codesOf(values, 2), values, { lagM: 1, lags: 3 }),
  ],
  [
    'downHoleVariograms',
    (values) =>
      downHoleVariograms(byHole(values), codesOf(values, 1), values, { lagM: 1, lags: 4 }),
  ],
  [
    'splitVariogramTest',
    (before, after) => {
      const of = (values: Float64Array) =>
        downHoleVariograms(byHole(values), codesOf(values, 1), values, { lagM: 1, lags: 4 });
      const [whole] = of(before);
      return whole ? splitVariogramTest(whole, of(after)) : null;
    },
  ],
  ['normalScoreTransform', (values) => normalScoreTransform(values), 'missing'],
  ['lineDirection', (v) => Array.from(v, (trend) => lineDirection(trend, trend))],
  ['coordinateAlong', (x, y, z) => coordinateAlong({ x, y, z }, [0, 1, 0])],
  ['swathProfile', (along, values) => swathProfile(along, values, { widthM: 1 })],
  ['swathProfile, weighted', (x, v, weights) => swathProfile(x, v, { widthM: 1, weights })],
]);
