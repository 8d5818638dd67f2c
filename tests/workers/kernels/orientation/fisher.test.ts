import { describe, expect, it } from 'vitest';
import { dot } from '#kernels/geometry/directions.ts';
import { lineOf } from '#kernels/geometry/planes.ts';
import { fisherKappa, fisherMean } from '#kernels/orientation/fisher.ts';
import {
  circularSummary,
  vonMisesKappa,
  vonMisesKappaStart,
} from '#kernels/orientation/circular.ts';
import { fabric } from '#kernels/orientation/fabric.ts';
import { orientationTensor } from '#kernels/orientation/orientation-tensor.ts';
import { vectorAt } from '#kernels/orientation/unit-vectors.ts';
import { expectWithin, type ReferenceResult } from '#tests/support/expect-within.ts';
import { loadReference, numbersOf, type ReferenceCheck } from '#tests/support/reference.ts';
import { lines } from './directions.ts';

const DEGREES = 180 / Math.PI;

describe('Fisher mean', () => {
  it('has the worked five lines (computed in numpy from Fisher 1953)', () => {
    const mean = fisherMean(lines([10, 40], [15, 45], [20, 50], [5, 42], [12, 55]));
    const { trend, plunge } = lineOf(mean.mean ?? [0, 0, 0]);
    expect(trend).toBeCloseTo(12.1536, 4);
    expect(plunge).toBeCloseTo(46.507, 4);
    expect(mean.resultant).toBeCloseTo(4.968198, 6);
    expect(mean.kappa).toBeCloseTo(125.7796, 4);
    expect(mean.alpha95Deg).toBeCloseTo(6.8487, 4);
  });

  it('has no precision for one direction or equal ones, no mean for opposite ones', () => {
    expect(fisherMean(lines([10, 40]))).toMatchObject({ n: 1, kappa: null, alpha95Deg: null });
    expect(fisherMean(lines([10, 40], [10, 40], [10, 40]))).toMatchObject({
      kappa: null,
      kappaMl: null,
    });
    const opposite = fisherMean(Float64Array.of(0, 0, 1, 0, 0, -1));
    expect(opposite).toMatchObject({ mean: null, alpha95Deg: null });
    expect(fisherMean(Float64Array.of(0, 0, 1, 1, 0, 0)).alpha95Deg).toBeNull();
  });

  it('inverts the mean resultant from flat to tight', () => {
    for (const k of [0.01, 0.5, 3, 40, 5000]) {
      expect(fisherKappa(1 / Math.tanh(k) - 1 / k) / k).toBeCloseTo(1, 5);
    }
    expect(fisherKappa(0)).toBe(0);
    expect(() => fisherKappa(1)).toThrow('expected a mean resultant in [0, 1), found 1');
  });
});

describe('circle', () => {
  it('halves the doubled angles of strikes: 010 and 170 give 000 with R .939693', () => {
    const axial = circularSummary(Float64Array.of(10, 170), { axial: true });
    expect((axial.meanDeg ?? 90) % 180).toBeCloseTo(0, 10);
    expect(axial.meanResultant).toBeCloseTo(0.939693, 6);
  });

  it('has no mean when angles cancel and no concentration when they are one', () => {
    expect(circularSummary(Float64Array.of(0, 180), { axial: false })).toMatchObject({
      meanDeg: null,
      sdRad: null,
    });
    expect(circularSummary(Float64Array.of(30, 30), { axial: false })).toMatchObject({
      kappa: null,
    });
    expect(() => circularSummary(new Float64Array(0), { axial: true })).toThrow('found none');
    expect(() => circularSummary(Float64Array.of(1, NaN), { axial: true })).toThrow(
      'found NaN in row 1',
    );
    expect(() => vonMisesKappa(-0.1)).toThrow('found -0.1');
  });

  it('turns with the angles', () => {
    const angles = Float64Array.of(350, 5, 20, 80, 300);
    const before = circularSummary(angles, { axial: false });
    const after = circularSummary(
      angles.map((angle) => angle + 77),
      { axial: false },
    );
    expect((after.meanDeg ?? 0) - (before.meanDeg ?? 0)).toBeCloseTo(
      77 - 360 * Number((before.meanDeg ?? 0) > 283),
      8,
    );
    expect(after.kappa).toBeCloseTo(before.kappa ?? NaN, 8);
  });

  it('keeps its precision for tight angles, where k is near 1 / (2 (1 - R))', () => {
    expect(vonMisesKappa(1 - 1 / 4000) / 2000).toBeCloseTo(1, 3);
    expect(vonMisesKappa(0)).toBe(0);
  });
});

describe('reference: published azimuths, summarised in R', () => {
  const sets = (['islay_azimuths', 'crossbed_azimuths'] as const).map((name) => loadReference(name));
  const checks = sets.flatMap((set) => set.checksOf('directions').map((check) => ({ set, check })));

  it.each(checks)('$check.id', ({ set, check }) => {
    const axial = check.inputs['axial'] === true;
    const summary = circularSummary(numbersOf(set, check), { axial });
    expectWithin(check, {
      n: summary.n,
      mean_deg: summary.meanDeg,
      rbar: summary.meanResultant,
      circular_sd_rad: summary.sdRad,
      kappa_ml: summary.kappa,
      kappa_best_fisher: vonMisesKappaStart(summary.meanResultant),
      rayleigh_z: summary.rayleighZ,
      rayleigh_p: summary.rayleighP,
    });
  });
});

/** The reference counts longitude from x towards y and latitude towards +z. */
const longitudeLatitude = ([x, y, z]: readonly [number, number, number]) => ({
  lon: (Math.atan2(y, x) * DEGREES + 360) % 360,
  lat: Math.asin(z) * DEGREES,
});

const calculations: Record<string, (vectors: Float64Array) => ReferenceResult> = {
  fisher_mean: (vectors) => {
    const { n, resultant, mean, kappa, kappaMl, alpha95Deg } = fisherMean(vectors);
    const { lon, lat } = longitudeLatitude(mean ?? [0, 0, 0]);
    return {
      N: n,
      R: resultant,
      mean_lon: lon,
      mean_lat: lat,
      kappa,
      kappa_ml: kappaMl,
      alpha95_deg: alpha95Deg,
    };
  },
  orientation_tensor: (vectors) => {
    const { tensor, eigenvalues } = orientationTensor(vectors);
    return { tensor, eigenvalues };
  },
  orientation_tensor_axes: (vectors) => {
    const { axes } = orientationTensor(vectors);
    return [0, 1, 2].map((i) => axes.map((axis) => axis[i]!));
  },
  woodcock: (vectors) => {
    const { c, k } = fabric(orientationTensor(vectors).eigenvalues);
    return { C: c, K: k };
  },
  axial_mean: (vectors) => {
    const axis = orientationTensor(vectors).axes[0];
    let sum = 0;
    for (let row = 0; row < vectors.length / 3; row++) {
      sum += Math.acos(Math.min(1, Math.abs(dot(vectorAt(vectors, row), axis)))) * DEGREES;
    }
    return { ...longitudeLatitude(axis), mean_angle: sum / (vectors.length / 3) };
  },
};

describe('reference: published remanence directions, summarised in R', () => {
  const set = loadReference('magnetic_remanence');
  const vectorsOf = (check: ReferenceCheck) => {
    const [lon, lat] = ['lon_column', 'lat_column'].map((key) =>
      numbersOf(set, check, String(check.inputs[key])),
    );
    const radians = (angles: Float64Array | undefined, row: number) =>
      (angles?.[row] ?? NaN) / DEGREES;
    return Float64Array.from(
      Array.from(lon ?? []).flatMap((_, row) => {
        const [a, b] = [radians(lon, row), radians(lat, row)];
        return [Math.cos(b) * Math.cos(a), Math.cos(b) * Math.sin(a), Math.sin(b)];
      }),
    );
  };

  it.each(set.checksOf('directions').map((check) => ({ check })))('$check.id', ({ check }) => {
    const calculate = calculations[check.function];
    if (!calculate) throw new Error(`no kernel for ${check.function}`);
    expectWithin(check, calculate(vectorsOf(check)));
  });
});
