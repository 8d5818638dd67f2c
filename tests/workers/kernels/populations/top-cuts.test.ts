import { expect, it } from 'vitest';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';
import { decileAnalysis, topCutTable } from '#kernels/populations/top-cuts.ts';

const grades = [0.5, 0.8, 1, 1.2, 1.5, 2, 2.5, 3, 5, 40];
const lognormal = (sd: number, n = 1000) =>
  Float64Array.from({ length: n }, (_, i) => Math.exp(sd * normalQuantile((i + 0.5) / n)));

it.each([
  [20, 3.75, 1.563042, 34.782609, 1],
  [10, 2.75, 1.044149, 52.173913, 1],
  [5, 2.25, 0.728868, 60.869565, 1],
])('cap %d gives mean %d, CV %d, metal lost %d %% (computed)', (cap, mean, cv, lost, rowsCut) => {
  const [row] = topCutTable(grades, [cap]);
  expect(row?.mean).toBeCloseTo(mean, 9);
  expect(row?.cv).toBeCloseTo(cv, 6);
  expect(row?.metalLostPercent).toBeCloseTo(lost, 6);
  expect(row?.rowsCut).toBe(rowsCut);
});

it('weights metal by length, and a cap above all changes nothing', () => {
  const [half, none] = topCutTable([1, 10], [5, 100], [3, 1]);
  expect(half?.mean).toBeCloseTo((3 + 5) / 4, 12);
  expect(half?.metalLostPercent).toBeCloseTo((100 * 5) / 13, 10);
  expect(none).toMatchObject({ rowsCut: 0, metalLostPercent: 0 });
});

it('deciles of a lognormal, sd 1.2, trip all three rules (computed)', () => {
  const { deciles, topPercentiles, indications } = decileAnalysis(lognormal(1.2));
  expect(deciles[9]?.metalPercent).toBeCloseTo(46.515, 3);
  expect(deciles[8]?.metalPercent).toBeCloseTo(17.323, 3);
  expect(topPercentiles?.[9]?.metalPercent).toBeCloseTo(12.618, 3);
  expect(indications).toHaveLength(3);
  expect(deciles.reduce((sum, c) => sum + c.metalPercent, 0)).toBeCloseTo(100, 9);
});

it('deciles of a lognormal, sd 1.2, tend to 46.7502, 17.2468 and 13.0009 % (theory, computed)', () => {
  const { deciles, topPercentiles } = decileAnalysis(lognormal(1.2, 400_000));
  const share = (p: number) => 100 * normalCdf(1.2 - normalQuantile(p));
  expect(share(0.9)).toBeCloseTo(46.7502, 4);
  expect(share(0.8) - share(0.9)).toBeCloseTo(17.2468, 4);
  expect(share(0.99)).toBeCloseTo(13.0009, 4);
  // A deterministic sample lacks the far end of the tail: short of theory by about .002 here.
  expect(Math.abs(deciles[9]!.metalPercent - 46.7502)).toBeLessThan(0.004);
  expect(Math.abs(deciles[8]!.metalPercent - 17.2468)).toBeLessThan(0.004);
  expect(Math.abs(topPercentiles![9]!.metalPercent - 13.0009)).toBeLessThan(0.006);
});

it('a lognormal, sd 1.0, trips none (38.9 %, 2.24 times, 9.2 %: computed)', () => {
  const { deciles, topPercentiles, indications } = decileAnalysis(lognormal(1, 100_000));
  expect(deciles[9]!.metalPercent).toBeCloseTo(38.9, 1);
  expect(deciles[9]!.metalPercent / deciles[8]!.metalPercent).toBeCloseTo(2.24, 2);
  expect(topPercentiles![9]!.metalPercent).toBeCloseTo(9.2, 1);
  expect(indications).toEqual([]);
  expect(decileAnalysis(lognormal(1)).indications).toEqual([]);
});

it.each([
  [1.025, 0],
  [1.035, 2],
  [1.05, 3],
])('the three rules begin at sd 1.03 to 1.05 (computed): sd %d trips %i', (sd, count) => {
  expect(decileAnalysis(lognormal(sd, 100_000)).indications).toHaveLength(count);
});

it('cuts ranks as floor(i n / 10), and gives no percentiles below 100 rows', () => {
  const { deciles, topPercentiles } = decileAnalysis(lognormal(1, 27));
  expect(deciles.map((c) => c.rows)).toEqual([2, 3, 3, 2, 3, 3, 2, 3, 3, 3]);
  expect(topPercentiles).toBeNull();
});

it.each([
  ['bad-parameter', () => topCutTable(grades, [0])],
  ['bad-parameter', () => topCutTable(grades, [NaN])],
  ['not-positive', () => topCutTable([1, -1], [5])],
  ['not-finite', () => topCutTable([1, Infinity], [5])],
  ['shape', () => topCutTable([1, 2], [5], [1])],
  ['too-few-rows', () => topCutTable([], [5])],
  ['too-few-rows', () => decileAnalysis([1, 2, 3])],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
