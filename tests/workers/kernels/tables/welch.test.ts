import fc from 'fast-check';
import { expect, it } from 'vitest';
import { welchTest } from '#kernels/tables/welch.ts';

const A = [2.1, 1.8, 2.4, 2.0, 1.9, 2.2];
const B = [0.6, 0.7, 0.5, 0.8, 0.55, 0.65];

it('t 14.536653, df 7.352941, p 1.1045e-6 of six values a side (computed: scipy ttest_ind)', () => {
  const { difference, t, df, nominalP } = welchTest(A, B);
  expect(difference).toBeCloseTo(12.4 / 6 - 3.8 / 6, 12);
  expect(t).toBeCloseTo(14.536653, 6);
  expect(df).toBeCloseTo(7.352941, 6);
  expect((nominalP ?? NaN) / 1.1045470881171092e-6).toBeCloseTo(1, 9);
});

it('is the pooled t of two groups with one size and spread (by hand: 2 / sqrt(2/3), df 4)', () => {
  const { t, df } = welchTest([3, 4, 5], [1, 2, 3]);
  expect(t).toBeCloseTo(2 / Math.sqrt(2 / 3), 12);
  expect(df).toBeCloseTo(4, 12);
});

it('turns with the groups and keeps t under a change of unit', () => {
  const list = fc.array(fc.integer({ min: -50, max: 50 }), { minLength: 2, maxLength: 12 });
  fc.assert(
    fc.property(list, list, (a, b) => {
      const found = welchTest(a, b);
      const turned = welchTest(b, a);
      const scaled = welchTest(
        a.map((x) => 7 * x + 3),
        b.map((x) => 7 * x + 3),
      );
      if (found.t === null) expect([turned.t, scaled.t]).toEqual([null, null]);
      else {
        expect(turned.t).toBeCloseTo(-found.t, 9);
        expect(scaled.t).toBeCloseTo(found.t, 9);
        expect(found.df).toBeLessThanOrEqual(a.length + b.length - 2 + 1e-9);
      }
    }),
  );
});

it('has no t without spread, and takes one of a group alone', () => {
  expect(welchTest([0.1, 0.1, 0.1], [5, 5])).toEqual({
    difference: expect.closeTo(-4.9, 12),
    t: null,
    df: null,
    nominalP: null,
  });
  expect(welchTest([-0, 0], [0, -0]).t).toBeNull();
  expect(welchTest([2, 2, 2], [1, 3, 5])).toMatchObject({ df: 2 });
});

it.each([
  ['too-few-rows', [1], [1, 2]],
  ['too-few-rows', [1, 2], []],
  ['not-finite', [1, NaN], [1, 2]],
  ['not-finite', [1, 2], [1, -Infinity]],
  ['not-finite', [1e200, -1e200], [1, 2]],
])('refuses %s: %j, %j', (code, a, b) => {
  expect(() => welchTest(a, b)).toThrow(expect.objectContaining({ code }));
});
