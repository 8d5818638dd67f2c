import { describe, expect, it } from 'vitest';
import { compareMethods } from '#kernels/quality/method-comparison.ts';
import { logitOfRatio, solubleRatio } from '#kernels/quality/soluble-ratio.ts';
import { seededRandom } from '#kernels/random.ts';

const seed = 1;
const random = seededRandom(2);
const grades = Float64Array.from({ length: 60 }, () => Math.exp(3 + random.normal()));
const noisy = (share: number) => grades.map((value) => value * (1 + share * random.normal()));

describe('compareMethods', () => {
  it('calls methods that agree comparable', () => {
    const found = compareMethods(grades, noisy(0.02), { seed });
    expect(found).toMatchObject({ verdict: 'comparable', conversion: null });
    expect(found.sentence).toMatch(/^Comparable: bias/);
  });

  it('calls a linear difference convertible, with the line and its range', () => {
    const other = noisy(0.02).map((value) => (value - 1) / 1.2);
    const found = compareMethods(other, grades, { seed });
    expect(found.verdict).toBe('convertible');
    expect(found.conversion?.slope).toBeCloseTo(1.2, 1);
    expect(found.conversion?.from).toBe(Math.min(...other));
    expect(found.conversion?.to).toBe(Math.max(...other));
    expect(found.biasPercent).toBeGreaterThan(20);
  });

  it('calls methods that scatter not comparable', () => {
    const found = compareMethods(
      noisy(0.6).map(Math.abs),
      grades.map((value) => 2 * value),
      { seed },
    );
    expect(found).toMatchObject({ verdict: 'not-comparable', conversion: null });
  });

  it('calls a column and itself comparable', () => {
    expect(compareMethods(grades, grades, { seed })).toMatchObject({
      verdict: 'comparable',
      biasPercent: 0,
    });
  });

  it.each([
    ['singular', grades.map(() => 2), grades],
    ['singular', grades.map((value) => -value), grades.map((value) => -value)],
    ['singular', grades.map((value) => 100 - value), grades],
    ['too-few-rows', grades.subarray(0, 4), grades.subarray(0, 4)],
    ['shape', grades.subarray(0, 9), grades.subarray(0, 8)],
    ['not-finite', grades.map(() => NaN), grades],
  ] as const)('refuses with %s', (code, other, reference) => {
    expect(() => compareMethods(other, reference, { seed })).toThrow(
      expect.objectContaining({ code }),
    );
  });
});

describe('solubleRatio', () => {
  const one = (
    total: number,
    soluble: number,
    options: { limit?: number; cvAverage?: number } = {},
  ) => solubleRatio(Float64Array.of(total), Float64Array.of(soluble), { limit: 0, ...options });

  it('.41 of .50 % is .82, class 4; with a CV of 5 % the error limit is 1.10 (computed)', () => {
    const found = one(0.5, 0.41, { cvAverage: 0.05 });
    expect(found.ratio[0]).toBeCloseTo(0.82, 12);
    expect(found.classes[0]).toBe(4);
    expect(found.errorLimit).toBeCloseTo(1.1, 12);
  });

  it.each([
    [100, 0, 1],
    [100, 20, 1],
    [100, 20.1, 2],
    [100, 50, 2],
    [100, 80, 3],
    [100, 104, 4],
    [100, 105, 4],
  ])('%d total and %d soluble: class %i', (total, soluble, expected) => {
    const found = one(total, soluble);
    expect(found.classes[0]).toBe(expected);
    expect(found.isError[0]).toBe(0);
    expect(found.ratio[0]).toBe(soluble / total);
  });

  it('tells an error, keeps the ratio and gives no class', () => {
    const found = one(100, 106);
    expect([found.ratio[0], found.classes[0], found.isError[0], found.nErrors]).toEqual([
      1.06, 0, 1, 1,
    ]);
  });

  it('gives no ratio to a missing value or a total near its limit', () => {
    const found = solubleRatio(
      Float64Array.of(NaN, 100, 9.9, 0, 10),
      Float64Array.of(1, NaN, 1, 0, 5),
      { limit: 1 },
    );
    expect([...found.ratio]).toEqual([NaN, NaN, NaN, NaN, 0.5]);
    expect(found).toMatchObject({ nUsed: 1, nMissing: 2, nNearLimit: 2, nErrors: 0 });
  });

  it('logit is antisymmetric about a half and finite at the ends', () => {
    const found = logitOfRatio(Float64Array.of(0, 0.25, 0.5, 0.75, 1, 1.04, NaN));
    expect(found[2]).toBe(0);
    expect(found[3]).toBeCloseTo(Math.log(3), 12);
    expect(found[1]).toBeCloseTo(-Math.log(3), 12);
    expect(found[4]).toBeCloseTo(Math.log(99), 9);
    expect(found[5]).toBe(found[4]);
    expect(found[0]).toBeCloseTo(-Math.log(99), 9);
    expect(found[6]).toBeNaN();
  });

  it.each([
    ['shape', () => solubleRatio(new Float64Array(1), new Float64Array(2), { limit: 0 })],
    ['bad-parameter', () => one(1, 1, { limit: -1 })],
    ['bad-parameter', () => one(1, 1, { cvAverage: NaN })],
    ['not-positive', () => one(-1, 1)],
    ['not-positive', () => one(1, Infinity)],
    ['bad-parameter', () => logitOfRatio(new Float64Array(1), 0)],
    ['bad-parameter', () => logitOfRatio(new Float64Array(1), 0.5)],
  ] as const)('refuses with %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });
});
