import { dot, toDegrees, toRadians } from '#kernels/geometry/directions.ts';
import { circularSummary, vonMisesKappaStart } from '#kernels/orientation/circular.ts';
import { fabric } from '#kernels/orientation/fabric.ts';
import { fisherMean } from '#kernels/orientation/fisher.ts';
import { orientationTensor } from '#kernels/orientation/orientation-tensor.ts';
import { vectorAt } from '#kernels/orientation/unit-vectors.ts';
import { numbersOf, type ReferenceCheck, type ReferenceSet } from '#tests/support/reference.ts';
import { inputText, type Adapter, type Adapters } from '../adapter.ts';
import type { ReferenceResult } from '../compare.ts';

type Triple = readonly [number, number, number];

function degreesOf(set: ReferenceSet, check: ReferenceCheck, column: string): Float64Array {
  const { unit = 'degrees' } = check.inputs;
  if (unit !== 'degrees' && unit !== 'radians')
    throw new Error(`${check.id}: expected degrees or radians, found ${String(unit)}`);
  const angles = numbersOf(set, check, column);
  return unit === 'degrees' ? angles : angles.map(toDegrees);
}

/** Unit vectors of longitudes from x towards y and latitudes towards +z. */
function vectorsOf(set: ReferenceSet, check: ReferenceCheck): Float64Array {
  const lon = degreesOf(set, check, inputText(check, 'lon_column')).map(toRadians);
  const lat = degreesOf(set, check, inputText(check, 'lat_column')).map(toRadians);
  return Float64Array.from(
    [...lon].flatMap((a, row) => {
      const b = lat[row] ?? NaN;
      return [Math.cos(b) * Math.cos(a), Math.cos(b) * Math.sin(a), Math.sin(b)];
    }),
  );
}

const longitudeLatitude = ([x, y, z]: Triple) => ({
  lon: (toDegrees(Math.atan2(y, x)) + 360) % 360,
  lat: toDegrees(Math.asin(z)),
});

const ofVectors =
  (calculate: (vectors: Float64Array) => ReferenceResult): Adapter =>
  (set, check) =>
    calculate(vectorsOf(set, check));

function axialMean(vectors: Float64Array): ReferenceResult {
  const [x, y, z] = orientationTensor(vectors).axes[0];
  const axis: Triple = z < 0 ? [-x, -y, -z] : [x, y, z];
  const count = vectors.length / 3;
  let sum = 0;
  for (let row = 0; row < count; row++)
    sum += toDegrees(Math.acos(Math.min(1, Math.abs(dot(vectorAt(vectors, row), axis)))));
  return { ...longitudeLatitude(axis), mean_angle: sum / count };
}

/** Directions on the circle and on the sphere. */
export const DIRECTIONS: Adapters = {
  circular_summary: (set, check) => {
    const angles = degreesOf(set, check, inputText(check, 'column'));
    const summary = circularSummary(angles, { axial: check.inputs['axial'] === true });
    return {
      n: summary.n,
      mean_deg: summary.meanDeg,
      rbar: summary.meanResultant,
      circular_sd_rad: summary.sdRad,
      kappa_ml: summary.kappa,
      kappa_best_fisher: vonMisesKappaStart(summary.meanResultant),
      rayleigh_z: summary.rayleighZ,
      rayleigh_p: summary.rayleighP,
    };
  },
  fisher_mean: ofVectors((vectors) => {
    const { n, resultant, mean, kappa, kappaMl, alpha95Deg } = fisherMean(vectors);
    const { lon, lat } = longitudeLatitude(mean ?? [NaN, NaN, NaN]);
    return {
      N: n,
      R: resultant,
      mean_lon: lon,
      mean_lat: lat,
      kappa,
      kappa_ml: kappaMl,
      alpha95_deg: alpha95Deg,
    };
  }),
  orientation_tensor: ofVectors((vectors) => {
    const { tensor, eigenvalues } = orientationTensor(vectors);
    return { tensor, eigenvalues };
  }),
  orientation_tensor_axes: ofVectors((vectors) => {
    const { axes } = orientationTensor(vectors);
    return [0, 1, 2].map((i) => axes.map((axis) => axis[i] ?? NaN));
  }),
  woodcock: ofVectors((vectors) => {
    const { c, k } = fabric(orientationTensor(vectors).eigenvalues);
    return { C: c, K: k };
  }),
  axial_mean: ofVectors(axialMean),
};
