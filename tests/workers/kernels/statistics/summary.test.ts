import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { summarise } from '#kernels/statistics/summary.ts';

describe('summarise', () => {
  it('answers null, not zero, for what one row cannot give', () => {
    const found = summarise(Float64Array.of(5));
    expect(found).toMatchObject({
      n: 1,
      mean: 5,
      median: 5,
      sd: null,
      cv: null,
      skewness: null,
      mad: 0,
    });
    expect(found.log?.logSd).toBeNull();
  });

  it('gives a constant column no spread and no skewness', () => {
    const found = summarise(new Float64Array(7).fill(0.1));
    expect(found).toMatchObject({ mean: 0.1, sd: 0, cv: 0, skewness: null, excessKurtosis: null });
  });

  it('gives no log summary when a value is not positive', () => {
    expect(summarise(Float64Array.of(0, 1, 2)).log).toBeNull();
    expect(summarise(Float64Array.of(-1, 1)).cv).toBeNull();
  });

  it('counts a length of two as two equal rows of one in mean and range', () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.tuple(fc.double({ min: 0.01, max: 1e4, noNaN: true }), fc.integer({ min: 1, max: 4 })),
          { minLength: 2, maxLength: 30 },
        ),
        (rows) => {
          const weighted = summarise(
            Float64Array.from(rows, ([x]) => x),
            { weights: Float64Array.from(rows, ([, w]) => w) },
          );
          const repeated = summarise(
            Float64Array.from(rows.flatMap(([x, w]) => new Array<number>(w).fill(x))),
          );
          expect(weighted.mean).toBeCloseTo(repeated.mean, 6);
          expect([weighted.min, weighted.max]).toEqual([repeated.min, repeated.max]);
          expect(weighted.totalWeight).toBe(repeated.n);
        },
      ),
    );
  });

  it.each([
    ['too-few-rows', []],
    ['not-finite', [1, NaN]],
    ['not-finite', [1, -Infinity]],
  ])('refuses with %s: %j', (code, values) => {
    expect(() => summarise(Float64Array.from(values))).toThrow(expect.objectContaining({ code }));
  });
});
