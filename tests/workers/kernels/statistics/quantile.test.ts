import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { quantiles, weightedQuantiles } from '#kernels/statistics/quantile.ts';

describe('quantiles', () => {
  it('interpolates at (n - 1) p (by hand)', () => {
    expect(quantiles([4, 1, 3, 2], [0, 0.25, 0.5, 1])).toEqual([1, 1.75, 2.5, 4]);
  });

  it('weights: x 1, 2, 4 with w 1, 2, 1 sit at p 0, .5, 1; quartile 1.5 (computed: python)', () => {
    expect(weightedQuantiles([4, 1, 2], [1, 1, 2], [0, 0.25, 0.5, 1])).toEqual([1, 1.5, 2, 4]);
  });

  it('equal weights give type 7', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 40 }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (values, p) => {
          const [plain = NaN] = quantiles(values, [p]);
          const [weighted = NaN] = weightedQuantiles(
            values,
            values.map(() => 1.5),
            [p],
          );
          expect(Math.abs(weighted - plain)).toBeLessThanOrEqual(
            1e-9 * (1 + Math.max(...values.map(Math.abs))),
          );
        },
      ),
    );
  });

  it('leaves out rows of weight zero and answers for a single row', () => {
    expect(weightedQuantiles([7, 100], [2, 0], [0, 0.5, 1])).toEqual([7, 7, 7]);
  });

  it.each([
    ['bad-parameter', [1, 2], [1.01]],
    ['bad-parameter', [1, 2], [NaN]],
    ['too-few-rows', [], [0.5]],
    ['not-finite', [1, NaN], [0.5]],
  ])('refuses with %s: values %j, probabilities %j', (code, values, probabilities) => {
    expect(() => quantiles(values, probabilities)).toThrow(expect.objectContaining({ code }));
    expect(() =>
      weightedQuantiles(
        values,
        values.map(() => 1),
        probabilities,
      ),
    ).toThrow(expect.objectContaining({ code }));
  });
});
