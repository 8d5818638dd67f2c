import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { passingBablok } from '#kernels/quality/passing-bablok.ts';
import { compareQuantiles } from '#kernels/quality/quantile-comparison.ts';
import { reducedMajorAxis } from '#kernels/quality/reduced-major-axis.ts';
import { seededRandom } from '#kernels/random.ts';
import { loadReference, numbersOf } from '#tests/support/reference.ts';

const X = Float64Array.of(1, 2, 4, 10, 0.5, 20);
const Y = Float64Array.of(1.1, 1.8, 4.4, 9, 0.6, 22);
const seed = 1;

/** Lead and zinc of 155 soils of the Meuse flood plain (Rikken & Van Rijn 1993), mg/kg. */
const meuse = loadReference('meuse');
const [lead, zinc] = ['lead', 'zinc'].map((name) =>
  numbersOf(meuse, meuse.check('meuse.mcd.h'), name),
);

const line = (slope: number, intercept: number) => X.map((x) => intercept + slope * x);

describe('reducedMajorAxis', () => {
  it('of six pairs (computed: numpy)', () => {
    const found = reducedMajorAxis(X, Y);
    expect(found.slope).toBeCloseTo(1.083798, 6);
    expect(found.intercept).toBeCloseTo(-0.290402, 6);
    expect(found.r).toBeCloseTo(0.99537, 6);
    expect(found.slopeSe).toBeCloseTo(0.042527, 6);
    expect(found.interceptSe).toBeCloseTo(0.417911, 6);
    expect(found).toMatchObject({ n: 6, hasProportionalBias: true, hasConstantBias: false });
  });

  it('of lead and zinc in soils (computed: numpy 2.4.6)', () => {
    const found = reducedMajorAxis(lead!, zinc!);
    expect(found.r).toBeCloseTo(0.9546913, 6);
    expect(found.slope).toBeCloseTo(3.297463267707855, 9);
    expect(found.intercept).toBeCloseTo(-35.987092494731826, 6);
    expect(found.slopeSe).toBeCloseTo(0.07882136519649277, 9);
    expect(found.interceptSe).toBeCloseTo(14.9965975905287, 6);
    expect(found.outliers.length).toBeGreaterThan(0);
    expect(found.withoutOutliers?.n).toBe(155 - found.outliers.length);
  });

  it('treats both methods alike: swapping them inverts the line', () => {
    const [forward, back] = [reducedMajorAxis(X, Y), reducedMajorAxis(Y, X)];
    expect(back.slope).toBeCloseTo(1 / forward.slope, 12);
    expect(back.intercept).toBeCloseTo(-forward.intercept / forward.slope, 12);
  });

  it('gives an exact line back, falling ones too', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.1, max: 10, noNaN: true }),
        fc.double({ min: -5, max: 5, noNaN: true }),
        fc.constantFrom(1, -1),
        (size, intercept, sign) => {
          const found = reducedMajorAxis(X, line(sign * size, intercept));
          expect(found.slope).toBeCloseTo(sign * size, 9);
          expect(found.intercept).toBeCloseTo(intercept, 8);
          expect(found.outliers).toEqual([]);
          expect(found.withoutOutliers).toBeNull();
        },
      ),
    );
  });

  it('refits without a pair far off the line, and warns of methods that hardly agree', () => {
    const random = seededRandom(4);
    const x = Float64Array.from({ length: 40 }, (_, i) => i + 1);
    const y = x.map((value) => value + 0.1 * random.normal());
    y[20] = 60;
    const found = reducedMajorAxis(x, y);
    expect(found.outliers).toContain(20);
    expect(found.withoutOutliers?.slope).toBeCloseTo(1, 2);
    const noise = reducedMajorAxis(
      x,
      x.map(() => random.normal()),
    );
    expect(noise.notes).toEqual([expect.stringContaining('hardly agree')]);
  });

  it('sees no bias between equal columns', () => {
    expect(reducedMajorAxis(X, X)).toMatchObject({
      slope: 1,
      r: 1,
      hasProportionalBias: false,
      hasConstantBias: false,
    });
  });

  it.each([
    ['singular', [3, 3, 3, 3, 3], [1, 2, 3, 4, 5]],
    ['singular', [1, 2, 3, 4, 5], [-0, 0, 0, 0, 0]],
    ['too-few-rows', [1, 2, 3, 4], [1, 2, 3, 4]],
    ['shape', [1, 2, 3, 4, 5], [1]],
    ['not-finite', [1, 2, 3, 4, NaN], [1, 2, 3, 4, 5]],
    ['not-finite', [1, 2, 3, 4, 5], [1, 2, 3, 4, -Infinity]],
  ] as const)('refuses with %s: %j, %j', (code, x, y) => {
    expect(() => reducedMajorAxis(Float64Array.from(x), Float64Array.from(y))).toThrow(
      expect.objectContaining({ code }),
    );
    if (code !== 'singular' || new Set(x).size === 1) {
      expect(() => passingBablok(Float64Array.from(x), Float64Array.from(y), { seed })).toThrow(
        expect.objectContaining({ code }),
      );
    }
  });
});

describe('passingBablok', () => {
  it('of six pairs (computed: python)', () => {
    const found = passingBablok(X, Y, { seed });
    expect(found).toMatchObject({ n: 6, nSlopes: 15, shift: 0 });
    expect(found.slope).toBeCloseTo(1.085714, 6);
    expect(found.intercept).toBeCloseTo(0.035714, 6);
    expect(found.slopeInterval.low).toBeCloseTo(0.766667, 6);
    expect(found.slopeInterval.high).toBeCloseTo(1.3, 6);
    expect(found.interceptInterval.low).toBeCloseTo(-0.8, 6);
    expect(found.interceptInterval.high).toBeCloseTo(0.833333, 6);
    expect(found.notes).toEqual([expect.stringContaining('6 pairs only')]);
  });

  it('of lead and zinc in soils (computed: numpy 2.4.6 from the definition)', () => {
    const found = passingBablok(lead!, zinc!, { seed });
    expect(found).toMatchObject({ n: 155, nSlopes: 11_924, shift: 703 });
    expect(found.slope).toBeCloseTo(3.030991867836332, 9);
    expect(found.intercept).toBeCloseTo(-18.580585259652935, 6);
    expect(found.slopeInterval.low).toBeCloseTo(2.869565217391304, 9);
    expect(found.slopeInterval.high).toBeCloseTo(3.260759493670886, 9);
    expect(found.interceptInterval.low).toBeCloseTo(-40.60253164556963, 6);
    expect(found.interceptInterval.high).toBeCloseTo(-6.521739130434781, 6);
  });

  it('does not depend on the order of rows, equal x with different y included', () => {
    const x = Float64Array.of(1, 1, 2, 3, 4, 4, 5, 6);
    const y = Float64Array.of(1.2, 0.9, 2.1, 2.8, 4.3, 4.1, 4.9, 6.2);
    const first = passingBablok(x, y, { seed });
    fc.assert(
      fc.property(fc.shuffledSubarray([0, 1, 2, 3, 4, 5, 6, 7], { minLength: 8 }), (order) => {
        const { slope, intercept, slopeInterval } = passingBablok(
          Float64Array.from(order, (i) => x[i]!),
          Float64Array.from(order, (i) => y[i]!),
          { seed },
        );
        expect({ slope, slopeInterval }).toEqual({
          slope: first.slope,
          slopeInterval: first.slopeInterval,
        });
        expect(intercept).toBeCloseTo(first.intercept, 12);
      }),
      { numRuns: 20 },
    );
  });

  it('is not moved by an outlier and inverts when the methods change places', () => {
    const x = Float64Array.from({ length: 60 }, (_, i) => 1 + i);
    const y = x.map((value, i) => 1.1 * value + 0.5 + 0.2 * Math.sin(7 * i));
    const before = passingBablok(x, y, { seed });
    const after = passingBablok(x, y.with(30, 900), { seed });
    expect(after.slope).toBeCloseTo(before.slope, 2);
    expect(passingBablok(y, x, { seed }).slope).toBeCloseTo(1 / before.slope, 3);
    expect(before.slopeInterval.low).toBeLessThanOrEqual(before.slope);
    expect(before.slopeInterval.high).toBeGreaterThanOrEqual(before.slope);
  });

  it('samples a large set with its seed, and says so', () => {
    const random = seededRandom(6);
    const x = Float64Array.from({ length: 2100 }, () => Math.exp(random.normal()));
    const y = x.map((value) => value * (1 + 0.05 * random.normal()));
    const found = passingBablok(x, y, { seed: 5 });
    expect(found.n).toBe(2000);
    expect(found.notes).toEqual(['a sample of 2000 of 2100 pairs was used']);
    expect(found.slope).toBeCloseTo(1, 1);
  });

  it('refuses methods that do not rise together', () => {
    expect(() => passingBablok(X, line(-3, 100), { seed })).toThrow(
      expect.objectContaining({ code: 'singular' }),
    );
    expect(() =>
      passingBablok(
        X.map(() => 2),
        X.map(() => 2),
        { seed },
      ),
    ).toThrow(expect.objectContaining({ code: 'singular' }));
  });
});

describe('compareQuantiles', () => {
  it('of sets that differ by a factor lies on a line of that slope', () => {
    const second = X.map((value) => 1.1 * value);
    const found = compareQuantiles(X, second, { seed });
    expect(found.biasPercent).toBeCloseTo(10, 9);
    expect(found.probabilities[0]).toBeCloseTo(1 / 12, 12);
    found.first.forEach((value, i) => expect(found.second[i]! / value).toBeCloseTo(1.1, 9));
    expect(found.biasInterval.low).toBeLessThan(10);
    expect(found.biasInterval.high).toBeGreaterThan(10);
  });

  it('takes sets of different size, and the same range for the same seed', () => {
    const found = compareQuantiles(lead!, X, { seed });
    expect(found.first).toHaveLength(6);
    expect(compareQuantiles(lead!, X, { seed })).toEqual(found);
    expect(compareQuantiles(X, X, { seed }).biasPercent).toBe(0);
  });

  it.each([
    ['too-few-rows', [1, 2], [1, 2, 3, 4, 5]],
    ['too-few-rows', [1, 2, 3, 4, 5], []],
    ['not-finite', [1, 2, 3, 4, NaN], [1, 2, 3, 4, 5]],
    ['singular', [0, 0, 0, 0, -0], [1, 2, 3, 4, 5]],
  ] as const)('refuses with %s: %j, %j', (code, first, second) => {
    expect(() =>
      compareQuantiles(Float64Array.from(first), Float64Array.from(second), { seed }),
    ).toThrow(expect.objectContaining({ code }));
  });
});
