import { expect, it } from 'vitest';
import { exactTwoSidedP, ordersByU } from '#kernels/tables/rank-sum-law.ts';
import { mannWhitneyPairs } from '#kernels/tables/rank-tests.ts';

/** Orders by u written out: every choice of m places among m + n. */
function enumerated(m: number, n: number): number[] {
  const counts = new Array<number>(m * n + 1).fill(0);
  for (let places = 0; places < 1 << (m + n); places++) {
    let [first, second, u] = [0, 0, 0];
    for (let i = 0; i < m + n; i++) {
      if (places & (1 << i)) {
        first++;
        u += second;
      } else second++;
    }
    if (first === m) counts[u]! += 1;
  }
  return counts;
}

it.each([
  [1, 1],
  [3, 2],
  [2, 6],
  [5, 5],
])('%i and %i rows: all orders counted', (m, n) => {
  expect([...ordersByU(m, n)]).toEqual(enumerated(m, n));
});

it('25 and 25 rows: orders sum to C(50, 25) exactly and lie evenly about the middle', () => {
  const orders = ordersByU(25, 25);
  expect(orders.reduce((sum, count) => sum + count, 0)).toBe(126_410_606_437_752);
  expect([...orders]).toEqual([...orders].reverse());
});

it('p of values by hand and by scipy (mannwhitneyu, exact)', () => {
  expect(exactTwoSidedP(0, 3, 4)).toBeCloseTo(2 / 35, 15);
  expect(exactTwoSidedP(36, 6, 6)).toBeCloseTo(0.0021645021645021645, 15);
  expect(exactTwoSidedP(3, 3, 5)).toBeCloseTo(0.25, 15);
  expect(exactTwoSidedP(2, 2, 2)).toBe(1);
});

it('is given without ties and up to fifty rows', () => {
  const run = (n: number, shift: number) => Float64Array.from({ length: n }, (_, i) => i + shift);
  expect(mannWhitneyPairs([run(3, 0), run(4, 9)])[0]?.exactP).toBeCloseTo(2 / 35, 15);
  expect(mannWhitneyPairs([run(3, 0), run(4, 1)])[0]?.exactP).toBeNull();
  expect(mannWhitneyPairs([run(25, 0), run(25, 0.5)])[0]?.exactP).toBeGreaterThan(0.8);
  expect(mannWhitneyPairs([run(26, 0), run(25, 0.5)])[0]?.exactP).toBeNull();
});

it.each([
  [0, 3, 0],
  [30, 21, 0],
  [2.5, 2, 0],
  [NaN, 2, 0],
  [3, 4, -1],
  [3, 4, 13],
  [3, 4, 1.5],
  [3, 4, NaN],
])('refuses groups of %d and %d with u %d', (m, n, u) => {
  expect(() => exactTwoSidedP(u, m, n)).toThrow(expect.objectContaining({ code: 'bad-parameter' }));
});
