import { describe, expect, it } from 'vitest';
import {
  effectiveCount,
  weightedMean,
  weightedMoments,
  weightedVariance,
} from '#kernels/statistics/weighted-moments.ts';

describe('weighted moments', () => {
  it('weights the mean by length (by hand: (1 + 4 + 3) / 4)', () => {
    expect(weightedMean([1, 2, 3], [1, 2, 1])).toBe(2);
  });

  it('gives variance .8 for x 1, 2, 3 and w 1, 2, 1 (computed: python, reliability weights)', () => {
    expect(weightedVariance([1, 2, 3], [1, 2, 1])).toBeCloseTo(0.8, 12);
  });

  it('gives the n - 1 variance under equal weights, whatever their size', () => {
    expect(weightedVariance([2, 4, 4, 4, 5, 5, 7, 9], new Array<number>(8).fill(1.5))).toBeCloseTo(
      32 / 7,
      12,
    );
  });

  it('gives 4.121951 effective rows for 1, 1, 2, 2, .5 (Kish 1965; computed: python)', () => {
    expect(effectiveCount([1, 1, 2, 2, 0.5])).toBeCloseTo(4.121951, 6);
  });

  it('knows no variance when one row carries all the weight', () => {
    expect(weightedMoments([3, 9], [2, 0])).toMatchObject({
      mean: 3,
      variance: null,
      skewness: null,
    });
    expect(() => weightedVariance([3], [2])).toThrow(
      expect.objectContaining({ code: 'too-few-rows' }),
    );
  });

  it.each([
    ['shape', [1, 2], [1]],
    ['too-few-rows', [], []],
    ['not-finite', [1, NaN], [1, 1]],
    ['not-finite', [1, 2], [1, Infinity]],
    ['bad-parameter', [1, 2], [1, -1]],
    ['bad-parameter', [1, 2], [0, 0]],
  ])('refuses with %s: values %j, weights %j', (code, values, weights) => {
    expect(() => weightedMean(values, weights)).toThrow(expect.objectContaining({ code }));
  });
});
