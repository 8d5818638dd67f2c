import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import * as z from 'zod';
import { dipPValue, dipTest, spreadTies } from '#kernels/populations/dip-test.ts';
import { SCALED_DIPS, TAIL_PROBABILITIES } from '#kernels/populations/dip-table.ts';
import { dipStatistic } from '#kernels/populations/dip.ts';
import { seededRandom } from '#kernels/random.ts';
import { quantilesOf, simulate } from './fixtures/make-dip-table.ts';

/** 63 values of Hartigan & Hartigan (1985), quoted there as dip .059. */
const STATISTICS_63 = [
  [30, 1],
  [33, 1],
  [35, 1],
  [36, 1],
  [37, 2],
  [39, 5],
  [40, 4],
  [41, 1],
  [42, 1],
  [43, 3],
  [44, 2],
  [45, 2],
  [46, 2],
  [47, 2],
  [48, 3],
  [49, 1],
  [50, 2],
  [51, 1],
  [52, 2],
  [53, 5],
  [54, 2],
  [57, 2],
  [59, 1],
  [60, 3],
  [61, 4],
  [62, 4],
  [63, 1],
  [66, 1],
  [70, 1],
  [72, 2],
].flatMap(([value = NaN, count = 0]) => new Array<number>(count).fill(value));

it('the example of the paper: 63 values, dip .059, p .087', () => {
  const { dip, n, pValue } = dipTest(STATISTICS_63);
  expect(n).toBe(63);
  expect(dip).toBeCloseTo(0.0595238, 7); // by linear programme; .059 in the paper
  expect(pValue?.p).toBeCloseTo(0.0867, 2); // R diptest: .08672
});

it.each([
  [[1, 2, 3, 4, 5, 6, 7, 8], 1 / 16],
  [[1, 2, 3, 4, 11, 12, 13, 14], 0.175],
  [[0, 0.1, 0.2, 0.9, 1], 0.175],
  [[0, 0, 1, 1], 0.25],
  [[4], 0.5],
  [[4, 4, 4, 4], 1 / 8],
])('dip of %j is %d', (values, expected) => {
  expect(dipStatistic(values).dip).toBeCloseTo(expected, 12); // worked from the definition
});

it('agrees with linear programmes on small samples, half of them with ties', () => {
  const file = new URL('./fixtures/dip-by-linear-programme.json', import.meta.url);
  const cases = z
    .array(z.object({ values: z.array(z.number()), dip: z.number() }))
    .parse(JSON.parse(readFileSync(file, 'utf8')));
  expect(cases).toHaveLength(80);
  for (const { values, dip } of cases)
    expect(dipStatistic(values).dip, values.join(' ')).toBeCloseTo(dip, 9);
});

it('does not change with order, shift, scale or mirror', () => {
  const random = seededRandom(4);
  const values = Array.from(
    { length: 60 },
    () => random.normal() + (random.uniform() < 0.4 ? 3 : 0),
  );
  const { dip } = dipStatistic(values);
  for (const other of [
    [...values].reverse(),
    values.map((x) => 5 + 100 * x),
    values.map((x) => -x),
  ]) {
    expect(dipStatistic(other).dip).toBeCloseTo(dip, 12);
  }
});

it('places the mode where the data are dense', () => {
  const { modeFrom, modeTo } = dipStatistic([0, 5, 9, 9.5, 9.6, 9.7, 9.8, 10, 14, 20]);
  expect(modeFrom).toBeGreaterThanOrEqual(9);
  expect(modeTo).toBeLessThanOrEqual(10);
});

describe('p value', () => {
  // R package diptest, table qDiptab (1,000,001 samples per n), columns .50 .90 .95 .99 .999
  it.each([
    [10, [0.09778, 0.13046, 0.13961, 0.15968, 0.18061]],
    [20, [0.07334, 0.09723, 0.10513, 0.12062, 0.13857]],
    [30, [0.06145, 0.08148, 0.08817, 0.10148, 0.11716]],
    [50, [0.04885, 0.06491, 0.07027, 0.0812, 0.09409]],
    [100, [0.03546, 0.04715, 0.05113, 0.05902, 0.06845]],
    [200, [0.02558, 0.034, 0.03684, 0.04269, 0.04972]],
    [500, [0.01645, 0.02188, 0.02373, 0.02745, 0.03202]],
    [1000, [0.01174, 0.01561, 0.01693, 0.01961, 0.02287]],
    [2000, [0.00836, 0.0111, 0.01204, 0.01397, 0.01627]],
    [5000, [0.00531, 0.00706, 0.00765, 0.00886, 0.01035]],
    [10000, [0.00377, 0.005, 0.00542, 0.00628, 0.00732]],
    [72000, [0.3785, 0.5026, 0.5452, 0.6327, 0.7386].map((x) => x / Math.sqrt(72000))],
  ])('agrees with the published table at n %i', (n, quantiles) => {
    [0.5, 0.1, 0.05, 0.01, 0.001].forEach((p, i) => {
      const found = dipPValue(quantiles[i] ?? NaN, n).p;
      expect(Math.abs(found - p), `p ${p}, found ${found}`).toBeLessThan(
        0.012 * Math.sqrt(4 * p * (1 - p)) + 2e-4,
      );
    });
  });

  it('between rows: n 63, 90 % at .058240 and 95 % at .063076 (same table)', () => {
    expect(Math.abs(dipPValue(0.05824, 63).p - 0.1)).toBeLessThan(0.004);
    expect(Math.abs(dipPValue(0.063076, 63).p - 0.05)).toBeLessThan(0.003);
  });

  it('says so beyond the table', () => {
    expect(dipPValue(0.001, 500)).toEqual({ p: 0.999, bound: 'above', text: '> 0.999' });
    expect(dipPValue(0.1, 500)).toEqual({ p: 0.001, bound: 'below', text: '< 0.001' });
  });

  it('is made by the script beside it', () => {
    const row = SCALED_DIPS.find(({ n }) => n === 30)?.scaledDips ?? [];
    const again = quantilesOf(simulate(30, 20_000, 99)); // another seed, fewer samples
    TAIL_PROBABILITIES.forEach((p, i) => {
      if (p < 0.02 || p > 0.98) return;
      expect(Math.abs((again[i] ?? NaN) - (row[i] ?? NaN)), `p ${p}`).toBeLessThan(0.008);
    });
  });

  it('falls as the dip grows, row by row', () => {
    for (const { scaledDips } of SCALED_DIPS) {
      expect(scaledDips).toHaveLength(TAIL_PROBABILITIES.length);
      expect(scaledDips).toEqual([...scaledDips].sort((a, b) => a - b));
    }
  });
});

it('gives no p value below ten rows', () => {
  expect(dipTest([1, 2, 9, 10]).pValue).toBeNull();
});

describe('spreadTies', () => {
  it('spreads rounded values over their step and leaves single values alone', () => {
    const out = spreadTies([0.5, 0.5, 0.5, 0.6, 3.25], seededRandom(1));
    expect(out.filter((x) => Math.abs(x - 0.5) <= 0.05)).toHaveLength(3);
    expect(new Set(out).size).toBe(5);
    expect([...out.subarray(3)]).toEqual([0.6, 3.25]);
  });

  it('takes 10 as the step of 120, and no more than the gap to the next value', () => {
    const wide = spreadTies([120, 120, 120, 900], seededRandom(2));
    expect(Math.max(...wide.subarray(0, 3)) - Math.min(...wide.subarray(0, 3))).toBeLessThanOrEqual(
      10,
    );
    expect(Math.max(...wide.subarray(0, 3)) - Math.min(...wide.subarray(0, 3))).toBeGreaterThan(
      0.5,
    );
    const narrow = spreadTies([120, 120, 121], seededRandom(2));
    expect(narrow[1]! - narrow[0]!).toBeLessThanOrEqual(1);
  });

  it('takes the false modes out of rounded values', () => {
    const random = seededRandom(5);
    const rounded = Float64Array.from(
      { length: 400 },
      () => Math.round(8 * Math.exp(0.5 * random.normal())) / 10,
    );
    expect(dipTest(rounded).pValue?.p).toBeLessThan(0.05);
    expect(dipTest(spreadTies(rounded, seededRandom(1))).pValue?.p).toBeGreaterThan(0.3);
  });

  it('keeps two clusters of ties apart', () => {
    const values = [...new Array<number>(20).fill(1), ...new Array<number>(20).fill(5)];
    expect(dipTest(spreadTies(values, seededRandom(3))).pValue?.p).toBeLessThan(0.01);
  });
});

it.each([
  ['too-few-rows', () => dipStatistic([])],
  ['not-finite', () => dipStatistic([1, NaN])],
  ['not-finite', () => dipStatistic([1, -Infinity])],
  ['too-few-rows', () => dipPValue(0.1, 9)],
  ['bad-parameter', () => dipPValue(0, 100)],
  ['bad-parameter', () => dipPValue(0.3, 100)],
  ['not-finite', () => spreadTies([NaN], seededRandom(1))],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
