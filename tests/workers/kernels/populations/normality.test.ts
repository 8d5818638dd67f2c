import { describe, expect, it } from 'vitest';
import {
  logSdOfCv,
  lognormalCv,
  lognormalMean,
  readCv,
} from '#kernels/populations/coefficient-of-variation.ts';
import { andersonDarling, andersonDarlingP, lilliefors } from '#kernels/populations/normality.ts';
import { shapiroWilk } from '#kernels/populations/shapiro-wilk.ts';
import { seededRandom } from '#kernels/random.ts';

const grades = [1.2, 0.8, 2.1, 3.3, 0.5, 1.9, 2.7, 1.1, 0.9, 4.5];

describe('p of an adjusted Anderson-Darling statistic', () => {
  it.each([
    // Published points of D'Agostino & Stephens (1986), which a public page on the test prints too:
    // 10 % .631, 5 % .752, 2.5 % .873, 1 % 1.035.
    [0.631, 0.1],
    [0.752, 0.05],
    [0.873, 0.025],
    [1.035, 0.01],
  ])('%d is the %d point', (adjusted, p) => {
    expect(Math.abs(andersonDarlingP(adjusted) / p - 1)).toBeLessThan(0.015);
  });

  it('steps from .1169 up to .1194 at .6, where the branches do not join (computed)', () => {
    expect(andersonDarlingP(0.6 - 1e-12)).toBeCloseTo(0.1169, 4);
    expect(andersonDarlingP(0.6)).toBeCloseTo(0.1194, 4);
  });

  it('never rises past 10, where the quadratic would turn up again at 153', () => {
    expect(andersonDarlingP(200)).toBe(andersonDarlingP(10));
    expect(andersonDarlingP(10)).toBeLessThan(1e-20);
    expect(5.709 / (2 * 0.0186)).toBeCloseTo(153.5, 1);
  });
});

describe('ten grades (computed; R nortest the same)', () => {
  it('Anderson-Darling on ln grade and on grade', () => {
    const found = andersonDarling(grades.map(Math.log));
    expect(found.statistic).toBeCloseTo(0.161211, 6);
    expect(found.adjusted).toBeCloseTo(0.176929, 6);
    expect(found.p).toBeCloseTo(0.9215, 4);
    expect(andersonDarling(grades).statistic).toBeCloseTo(0.398006, 6);
    expect(andersonDarling(grades).p).toBeCloseTo(0.2968, 4);
  });

  it('Lilliefors on ln grade; p .8297 lies beyond its formula', () => {
    const found = lilliefors(grades.map(Math.log));
    expect(found.statistic).toBeCloseTo(0.14093, 6);
    expect(found).toMatchObject({ p: null, text: '> 0.10' });
  });
});

it("Lilliefors rejects near 5 % at .886 / sqrt(n) (asymptotic point, D'Agostino & Stephens 1986)", () => {
  const random = seededRandom(12);
  let rejected = 0;
  for (let run = 0; run < 2000; run++) {
    const { p } = lilliefors(Array.from({ length: 60 }, () => random.normal()));
    if (p !== null && p <= 0.05) rejected += 1;
  }
  expect(rejected / 2000).toBeGreaterThan(0.035);
  expect(rejected / 2000).toBeLessThan(0.066);
});

it('says "< 1e-20" where the Anderson-Darling formula turns up again', () => {
  const random = seededRandom(3);
  const values = Array.from({ length: 2000 }, () => Math.exp(2 * random.normal()));
  expect(andersonDarling(values).text).toBe('< 1e-20');
});

it('shift and scale change no test', () => {
  const moved = grades.map((g) => 40 + 3 * g);
  expect(andersonDarling(moved).statistic).toBeCloseTo(andersonDarling(grades).statistic, 10);
  expect(shapiroWilk(moved).statistic).toBeCloseTo(shapiroWilk(grades).statistic, 10);
  expect(lilliefors(moved).statistic).toBeCloseTo(lilliefors(grades).statistic, 10);
});

it('Shapiro-Wilk of three values is exact: evenly spaced W 1, p 1', () => {
  const { statistic, p } = shapiroWilk([1, 2, 3]);
  expect(statistic).toBeCloseTo(1, 12);
  expect(p).toBeCloseTo(1, 6);
});

it('Shapiro-Wilk of five values lies between 0 and 1 and falls with an outlier', () => {
  const even = shapiroWilk([1, 2, 3, 4, 5]);
  const odd = shapiroWilk([1, 2, 3, 4, 500]);
  expect(even.statistic).toBeGreaterThan(0.95);
  expect(odd.statistic).toBeLessThan(0.6);
  expect(odd.p).toBeLessThan(0.01);
});

it.each([
  [0.3, 'low'],
  [0.5, 'moderate'],
  [1, 'high'],
  [1.5, 'high'],
  [2.2, 'very-high'],
])('CV %d reads %s (common practice)', (cv, level) => {
  expect(readCv(cv).level).toBe(level);
});

it('mean and CV of a lognormal, mu 1, sigma .8; sigma of CV 1, 1.5 and 2 (computed)', () => {
  expect(lognormalMean(1, 0.8)).toBeCloseTo(3.743421, 6);
  expect(lognormalCv(0.8)).toBeCloseTo(0.946827, 6);
  [
    [1, 0.832555],
    [1.5, 1.085659],
    [2, 1.268636],
  ].forEach(([cv = NaN, sd = NaN]) => {
    expect(logSdOfCv(cv)).toBeCloseTo(sd, 6);
    expect(lognormalCv(sd)).toBeCloseTo(cv, 5);
  });
});

it.each([
  ['too-few-rows', () => andersonDarling([1, 2, 3])],
  ['constant', () => andersonDarling(new Float64Array(20).fill(3))],
  ['constant', () => shapiroWilk([2, 2, 2, 2])],
  ['too-few-rows', () => shapiroWilk([1, 2])],
  ['too-many-rows', () => shapiroWilk(Float64Array.from({ length: 5001 }, (_, i) => i))],
  ['not-finite', () => shapiroWilk([1, 2, NaN])],
  ['not-finite', () => lilliefors([1, 2, 3, 4, Infinity])],
  ['too-few-rows', () => lilliefors([1, 2])],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
