import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { scaledBesselI0 } from '#kernels/orientation/bessel.ts';
import { binghamMoments } from '#kernels/orientation/bingham-moments.ts';
import { binghamFit } from '#kernels/orientation/bingham.ts';
import { orientationTensor } from '#kernels/orientation/orientation-tensor.ts';
import { seededRandom } from '#kernels/random.ts';
import { rotated } from './directions.ts';
import { uniformAxes } from '#kernels/orientation/strength-test.ts';

describe('Bessel function', () => {
  // scipy 1.17.1, scipy.special.i0e.
  it.each([
    [0, 1],
    [0.5, 0.64503527044915],
    [3, 0.24300035416182536],
    [19.9, 0.09000858886438959],
    [20.1, 0.08955376362061344],
    [500, 0.017845706500153165],
  ])('exp(-x) I0(x) at %d', (x, value) => {
    expect(scaledBesselI0(x) / value).toBeCloseTo(1, 13);
  });
});

describe('Bingham normalising constant', () => {
  // scipy 1.17.1: two-dimensional quadrature over height and longitude (integrate.dblquad).
  it.each([
    [-1, -0.5, -0.4668239815806563],
    [-10, -2, -2.006116997954278],
    [-30, -0.3, -1.9634407331309356],
    [-60, -40, -4.574048538394714],
  ])('k %d, %d', (k1, k2, logConstant) => {
    expect(binghamMoments(k1, k2).logConstant).toBeCloseTo(logConstant, 11);
  });

  it('has the moments of the uniform distribution: 1/3, variance 4/45, covariance -2/45', () => {
    const { logConstant, means, covariance } = binghamMoments(0, 0);
    expect(logConstant).toBeCloseTo(0, 12);
    means.forEach((mean) => expect(mean).toBeCloseTo(1 / 3, 12));
    [4 / 45, 4 / 45, -2 / 45].forEach((value, i) => expect(covariance[i]).toBeCloseTo(value, 12));
  });

  it('has the derivatives of its logarithm as moments', () => {
    const k = fc.double({ min: -80, max: -0.1, noNaN: true });
    fc.assert(
      fc.property(k, k, (a, b) => {
        const [k1, k2] = [Math.min(a, b), Math.max(a, b)];
        const h = 1e-4;
        const log = (x: number, y: number) => binghamMoments(x, y).logConstant;
        const { means } = binghamMoments(k1, k2);
        const width = k2 - k1 > 2 * h;
        if (!width) return;
        expect((log(k1 + h, k2) - log(k1 - h, k2)) / (2 * h)).toBeCloseTo(means[0], 6);
        expect((log(k1, k2 + h) - log(k1, k2 - h)) / (2 * h)).toBeCloseTo(means[1], 6);
      }),
      { numRuns: 25 },
    );
  });
});

describe('Bingham fit', () => {
  // scipy 1.17.1: Nelder-Mead on the same likelihood with the quadrature above.
  it.each([
    [[0.7, 0.2, 0.1], -5.694371, -2.941763, 0.75830573],
    [[0.5, 0.45, 0.05], -10.103553, -0.220697, 0.77483931],
    [[0.9, 0.06, 0.04], -13.135522, -9.018635, 1.95925352],
    [[0.4, 0.33, 0.27], -0.989855, -0.463465, 0.03187496],
  ] as const)('S %j', (eigenvalues, k1, k2, gain) => {
    const { fit } = binghamFit(eigenvalues, 50);
    expect(fit?.k1).toBeCloseTo(k1, 5);
    expect(fit?.k2).toBeCloseTo(k2, 5);
    expect(fit?.logLikelihoodPerAxis).toBeCloseTo(gain, 7);
  });

  it('gives the moments back', () => {
    const share = fc.double({ min: 0.001, max: 1, noNaN: true });
    fc.assert(
      fc.property(share, share, share, (a, b, c) => {
        const [s3 = 0, s2 = 0, s1 = 0] = [a, b, c]
          .map((s) => s / (a + b + c))
          .sort((x, y) => x - y);
        const { fit } = binghamFit([s1, s2, s3], 100);
        const { means } = binghamMoments(fit?.k1 ?? NaN, fit?.k2 ?? NaN);
        expect(means[0]).toBeCloseTo(s3, 8);
        expect(means[1]).toBeCloseTo(s2, 8);
      }),
      { numRuns: 40 },
    );
  });

  it('is uniform for equal eigenvalues, with no axis to bound', () => {
    expect(binghamFit([1 / 3, 1 / 3, 1 / 3], 50).fit).toEqual({
      k1: 0,
      k2: 0,
      logLikelihoodPerAxis: 0,
      halfAnglesDeg: { towardsSecond: null, towardsThird: null },
    });
  });

  it('bounds the axis by sin^2 = 5.991465 / (2 n (S1 - Sj)(-kj)), tighter with more axes', () => {
    const half = (n: number) => binghamFit([0.7, 0.2, 0.1], n).fit?.halfAnglesDeg;
    const sine2 = 5.991464547 / (2 * 50 * 0.5 * 2.9417633);
    expect(half(50)?.towardsSecond).toBeCloseTo((Math.asin(Math.sqrt(sine2)) * 180) / Math.PI, 4);
    expect(half(200)?.towardsThird).toBeLessThan(half(50)?.towardsThird ?? 0);
    expect(half(1)?.towardsSecond).toBeNull();
  });

  it('turns with the axes: rotation changes nothing', () => {
    const vectors = uniformAxes(40, seededRandom(4)).map(
      (value, i) => (i % 3 === 2 ? 3 : 1) * value,
    );
    for (let i = 0; i < vectors.length; i += 3) {
      const length = Math.hypot(vectors[i]!, vectors[i + 1]!, vectors[i + 2]!);
      for (let k = i; k < i + 3; k++) vectors[k]! /= length;
    }
    const k1 = (axes: Float64Array) =>
      binghamFit(orientationTensor(axes).eigenvalues, 40).fit?.k1 ?? NaN;
    expect(k1(rotated(vectors, 71, 33))).toBeCloseTo(k1(vectors), 7);
  });

  it('says why flat fabrics have no fit, and refuses what is no tensor', () => {
    expect(binghamFit([0.6, 0.4, 0], 30)).toEqual({
      fit: null,
      refusal: 'No Bingham fit: the axes lie in one plane or on one line.',
    });
    for (const bad of [
      [0.2, 0.7, 0.1],
      [0.7, 0.2, 0.2],
      [1.1, 0, -0.1],
      [NaN, 0.5, 0.5],
    ] as const) {
      expect(() => binghamFit(bad, 30)).toThrow(expect.objectContaining({ code: 'bad-parameter' }));
    }
    expect(() => binghamFit([0.7, 0.2, 0.1], 0)).toThrow(/of 0/);
  });
});
