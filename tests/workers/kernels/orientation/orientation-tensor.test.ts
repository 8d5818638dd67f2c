import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { axialUniformity, directionalUniformity, fabric } from '#kernels/orientation/fabric.ts';
import { orientationTensor } from '#kernels/orientation/orientation-tensor.ts';
import { flipToAxis } from '#kernels/orientation/unit-vectors.ts';
import { seededRandom } from '#kernels/random.ts';
import { lines, rotated } from './directions.ts';

/** Five lines; values of this file computed in numpy from the definitions unless said. */
const five = lines([10, 40], [15, 45], [20, 50], [5, 42], [12, 55]);

describe('tensor', () => {
  it('has the eigenvalues of the worked five lines', () => {
    const { eigenvalues, n, nEffective } = orientationTensor(five);
    [0.98733, 0.010311, 0.002359].forEach((s, k) => expect(eigenvalues[k]).toBeCloseTo(s, 6));
    expect([n, nEffective]).toEqual([5, 5]);
  });

  it('weighs by length of record: a weight of two is the same direction twice', () => {
    const twice = orientationTensor(Float64Array.from([...five, ...five.subarray(0, 3)]));
    const weighed = orientationTensor(five, Float64Array.of(2, 1, 1, 1, 1));
    weighed.eigenvalues.forEach((s, k) => expect(s).toBeCloseTo(twice.eigenvalues[k]!, 12));
    // Kish (1965): 6 squared over 8
    expect(weighed.nEffective).toBeCloseTo(4.5, 12);
  });

  it('turns with the data, whatever signs the axes carry', () => {
    const angle = fc.integer({ min: 0, max: 359 });
    const line = fc.tuple(angle, fc.integer({ min: -89, max: 89 }));
    fc.assert(
      fc.property(fc.array(line, { minLength: 3, maxLength: 20 }), angle, angle, (list, z, x) => {
        const vectors = lines(...list);
        const turned = rotated(vectors, z, x).map((value, i) => (i < 6 ? -value : value));
        const before = orientationTensor(vectors);
        const after = orientationTensor(turned);
        before.eigenvalues.forEach((s, k) => expect(after.eigenvalues[k]).toBeCloseTo(s, 10));
        expect(before.eigenvalues.reduce((sum, s) => sum + s, 0)).toBeCloseTo(1, 12);
        const [s1, s2] = before.eigenvalues;
        if (s1 - s2 < 1e-3) return;
        const [axis] = [rotated(Float64Array.from(before.axes[0]), z, x)];
        const cosine = after.axes[0].reduce((sum, value, i) => sum + value * axis[i]!, 0);
        expect(Math.abs(cosine)).toBeCloseTo(1, 8);
      }),
    );
  });

  it('refuses what are no unit vectors or weights', () => {
    expect(() => orientationTensor(new Float64Array(0))).toThrow('expected directions, found none');
    expect(() => orientationTensor(Float64Array.of(1, 0))).toThrow(
      '2 numbers do not fill rows of 3',
    );
    expect(() => orientationTensor(Float64Array.of(0, 0, 1, 1, 1, 0))).toThrow('in row 1');
    expect(() => orientationTensor(Float64Array.of(NaN, 0, 1))).toThrow(
      'expected length 1, found NaN',
    );
    expect(() => orientationTensor(five, Float64Array.of(1))).toThrow(
      'expected 5 weights, found 1',
    );
    expect(() => orientationTensor(five, Float64Array.of(1, 1, 0, 1, 1))).toThrow(
      'found 0 in row 2',
    );
  });
});

it.each([0, 5e-324, 1e-310, 1e-160, 1e-20])('axes off one line by %d stay on it', (off) => {
  const { eigenvalues, axes } = orientationTensor(
    Float64Array.of(1, off, 2 * off, -1, 3 * off, off, 1, -off, 5 * off),
  );
  expect(eigenvalues[0]).toBeCloseTo(1, 12);
  expect(eigenvalues[1] + eigenvalues[2]).toBeCloseTo(0, 12);
  expect(Math.abs(axes[0][0])).toBeCloseTo(1, 12);
});

describe('signs', () => {
  it('flips steep poles together: |sum| .069799 becomes 1.998782 (88 to 090 and 88 to 270)', () => {
    const [c, s] = [Math.cos((88 * Math.PI) / 180), Math.sin((88 * Math.PI) / 180)];
    const poles = Float64Array.of(s, 0, c, -s, 0, c);
    const length = (v: Float64Array) => Math.hypot(v[0]! + v[3]!, v[1]! + v[4]!, v[2]! + v[5]!);
    expect(length(poles)).toBeCloseTo(0.069799, 6);
    const { axes } = orientationTensor(poles);
    expect(length(flipToAxis(poles, axes[0]))).toBeCloseTo(1.998782, 6);
  });
});

describe('fabric', () => {
  it('has the worked shape and strength', () => {
    const worked = fabric([0.7, 0.2, 0.1]);
    expect(worked.k).toBeCloseTo(1.807355, 6);
    expect(worked.c).toBeCloseTo(1.94591, 6);
    expect([worked.point, worked.girdle, worked.random].map((x) => Number(x.toFixed(12)))).toEqual([
      0.5, 0.2, 0.3,
    ]);
    const data = fabric(orientationTensor(five).eigenvalues);
    expect(data.k).toBeCloseTo(3.092469, 5);
    expect(data.c).toBeCloseTo(6.036896, 5);
  });

  it('has no shape where the logarithms have none', () => {
    expect(fabric([1, 0, 0])).toMatchObject({ k: null, c: null, point: 1 });
    expect(fabric([0.5, 0.5, 0])).toMatchObject({ k: null, c: null, girdle: 1 });
    expect(fabric([0.8, 0.1, 0.1]).k).toBeNull();
    expect(fabric([1 / 3, 1 / 3, 1 / 3])).toMatchObject({ k: null, c: 0 });
  });

  it('tests uniformity: S .7 .2 .1 with 20 axes gives 31.0, p 9.4e-6', () => {
    const test = axialUniformity([0.7, 0.2, 0.1], 20);
    expect(test.statistic).toBeCloseTo(31, 10);
    expect(test.p).toBeCloseTo(9.4e-6, 7);
  });

  it('tests directions: a resultant of 7.2179 of 20 stands at the 5 % point 7.8147', () => {
    const test = directionalUniformity(7.2179, 20);
    expect(test.statistic).toBeCloseTo(7.8147, 3);
    expect(test.p).toBeCloseTo(0.05, 4);
  });

  it('keeps the 95 % point of S1 of 20 uniform axes, .537 within .01 (20 000 runs in numpy)', () => {
    const random = seededRandom(11);
    const largest = Float64Array.from({ length: 4000 }, () => {
      const vectors = new Float64Array(60);
      for (let i = 0; i < 60; i += 3) {
        const v = [random.normal(), random.normal(), random.normal()];
        const length = Math.hypot(...v);
        vectors.set(
          v.map((x) => x / length),
          i,
        );
      }
      return orientationTensor(vectors).eigenvalues[0];
    }).sort();
    expect(largest[3800]).toBeGreaterThan(0.527);
    expect(largest[3800]).toBeLessThan(0.547);
  });
});
