import { scaledBesselI0 } from '#kernels/orientation/bessel.ts';
import { binghamMoments } from '#kernels/orientation/bingham-moments.ts';
import { binghamFit } from '#kernels/orientation/bingham.ts';
import { blindGrid, blindZone } from '#kernels/orientation/blind-zone.ts';
import { besselRatio, circularSummary, vonMisesKappa } from '#kernels/orientation/circular.ts';
import { densityBeyondRim } from '#kernels/orientation/density-beyond-rim.ts';
import { countingCircle, densityGrid } from '#kernels/orientation/density-grid.ts';
import { axialUniformity, directionalUniformity, fabric } from '#kernels/orientation/fabric.ts';
import { fisherKappa, fisherMean } from '#kernels/orientation/fisher.ts';
import {
  DEFAULT_LIMITS,
  filterMeasurements,
  lineConfidence,
} from '#kernels/orientation/measurement-filter.ts';
import { orientationDifference } from '#kernels/orientation/orientation-difference.ts';
import { orientationSummary, polesOf } from '#kernels/orientation/orientation-summary.ts';
import { orientationTensor } from '#kernels/orientation/orientation-tensor.ts';
import { greatCircle, lineAtPoint, projectLines } from '#kernels/orientation/projection.ts';
import { strikeRose } from '#kernels/orientation/rose.ts';
import { strengthTest } from '#kernels/orientation/strength-test.ts';
import { flipToAxis } from '#kernels/orientation/unit-vectors.ts';
import { directionsOf, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const each = (of: (value: number) => unknown) => (values: Float64Array) =>
  Array.from(values, (value) => of(value));
/** A kernel of unit vectors as one of three columns. */
const ofVectors =
  (of: (vectors: Float64Array) => unknown) => (x: Float64Array, y: Float64Array, z: Float64Array) =>
    of(directionsOf(x, y, z));
const planesOf = (dips: Float64Array, directions: Float64Array) =>
  Array.from(dips, (dip, i) => ({
    dip: 15 * dip,
    dipDirection: 60 * directions[i]!,
    confidence: 'good',
  }));
/** Shares of three eigenvalues that sum to 1. */
const shares = (a: number, b: number, c: number) => {
  const [s1 = NaN, s2 = NaN, s3 = NaN] = [a, b, c].sort((p, q) => q - p);
  return [s1 / (a + b + c), s2 / (a + b + c), s3 / (a + b + c)] as const;
};
const ofEigenvalues =
  (of: (eigenvalues: readonly [number, number, number]) => unknown) =>
  (x: Float64Array, y: Float64Array, z: Float64Array) =>
    Array.from(x, (a, i) => of(shares(a, y[i]!, z[i]!)));

testHostileInputs([
  ['scaledBesselI0', each(scaledBesselI0)],
  ['binghamFit', ofEigenvalues((eigenvalues) => binghamFit(eigenvalues, 20))],
  ['binghamMoments', each((k) => binghamMoments(-k, -k))],
  ['blindZone', ofVectors((tangents) => blindZone(tangents))],
  ['blindGrid', ofVectors((tangents) => blindGrid(tangents, 'equal-area', { size: 9 })), 'missing'],
  ['besselRatio', each(besselRatio)],
  ['circularSummary', (angles) => circularSummary(angles, { axial: true })],
  ['vonMisesKappa', each((r) => vonMisesKappa(r / 7))],
  ['countingCircle', each((n) => countingCircle(n))],
  [
    'densityGrid',
    ofVectors((vectors) => densityGrid(vectors, 'equal-angle', { size: 9 })),
    'missing',
  ],
  ['axialUniformity', ofEigenvalues((eigenvalues) => axialUniformity(eigenvalues, 20))],
  ['directionalUniformity', each((r) => directionalUniformity(r, 20))],
  ['fabric', ofEigenvalues((eigenvalues) => fabric(eigenvalues))],
  ['fisherKappa', each((r) => fisherKappa(r / 7))],
  ['fisherMean', ofVectors((vectors) => fisherMean(vectors))],
  [
    'filterMeasurements',
    (alphas, dips) =>
      filterMeasurements(
        Array.from(alphas, (alphaDeg, i) => ({
          alphaDeg: 10 * alphaDeg,
          holeDip: -10 * dips[i]!,
          confidence: 'good',
        })),
        DEFAULT_LIMITS,
      ),
  ],
  ['lineConfidence', each(lineConfidence)],
  [
    'orientationDifference',
    ofVectors((poles) => {
      const n = poles.length / 3;
      const holes = Int32Array.from({ length: n }, (_, i) => i % 8);
      const isSecond = Uint8Array.from(holes, (hole) => hole % 2);
      return orientationDifference(poles, holes, isSecond, { seed: 1, draws: 99 });
    }),
  ],
  [
    'orientationSummary',
    (dips, directions) =>
      orientationSummary(planesOf(dips, directions), {
        classes: [{ name: 'all', confidences: ['good'] }],
      }),
  ],
  ['polesOf', (dips, directions) => polesOf(planesOf(dips, directions))],
  ['orientationTensor', ofVectors((vectors) => orientationTensor(vectors))],
  [
    'orientationTensor, weighted',
    (x, y, z, weights) => orientationTensor(directionsOf(x, y, z), weights),
  ],
  ['projectLines', ofVectors((vectors) => projectLines(vectors, 'equal-area'))],
  ['lineAtPoint', each((x) => lineAtPoint(x / 10, x / 10, 'equal-area'))],
  ['greatCircle', each((dip) => greatCircle({ dip, dipDirection: dip }, 'equal-angle', 8))],
  ['strikeRose', (strikes) => strikeRose(strikes)],
  ['strengthTest', ofVectors((vectors) => strengthTest(vectors, { seed: 1, draws: 99 }))],
  ['flipToAxis', ofVectors((vectors) => flipToAxis(vectors, [0, 0, 1]))],
  [
    'densityBeyondRim',
    ofVectors((v) => densityBeyondRim(densityGrid(v, 'equal-area', { size: 9 }), 'equal-area')),
  ],
]);
