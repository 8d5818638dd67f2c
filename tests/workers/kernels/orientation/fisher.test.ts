import { describe, expect, it } from 'vitest';
import { lineOf } from '#kernels/geometry/planes.ts';
import { fisherKappa, fisherMean } from '#kernels/orientation/fisher.ts';
import { circularSummary, vonMisesKappa } from '#kernels/orientation/circular.ts';
import { lines } from './directions.ts';

describe('Fisher mean', () => {
  it('has the worked five lines (computed in numpy from Fisher 1953)', () => {
    const mean = fisherMean(lines([10, 40], [15, 45], [20, 50], [5, 42], [12, 55]));
    const { trend, plunge } = lineOf(mean.mean ?? [0, 0, 0]);
    expect(trend).toBeCloseTo(12.1536, 4);
    expect(plunge).toBeCloseTo(46.507, 4);
    expect(mean.resultant).toBeCloseTo(4.968198, 6);
    expect(mean.kappa).toBeCloseTo(125.7796, 4);
    expect(mean.alpha95Deg).toBeCloseTo(6.8487, 4);
    // Not the large-sample 140 / sqrt(k N), which is poor for five (computed: 5.58).
    expect(140 / Math.sqrt((mean.kappa ?? NaN) * 5)).toBeCloseTo(5.58, 2);
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
