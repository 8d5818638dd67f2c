import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { expOfNegative } from '#kernels/exp.ts';

describe('exponential of zero and negative numbers', () => {
  it('is that of the language to 1e-15', () => {
    fc.assert(
      fc.property(fc.double({ min: -699, max: 0, noNaN: true }), (x) => {
        expect(Math.abs(expOfNegative(x) / Math.exp(x) - 1)).toBeLessThan(1e-15);
      }),
      { numRuns: 2000 },
    );
  });

  it.each([
    [0, 1],
    [-0, 1],
    [-701, 0],
    [-Infinity, 0],
    [NaN, NaN],
  ])('of %d is %d', (x, expected) => expect(expOfNegative(x)).toBe(expected));
});
