import { describe, expect, it } from 'vitest';
import { normalCdf } from '#kernels/normal.ts';
import { rankCorrelation } from '#kernels/statistics/rank-correlation.ts';
import { signFlipTest } from '#kernels/statistics/sign-flip.ts';
import { theilSen } from '#kernels/statistics/theil-sen.ts';
import computed from '../spatial/fixtures/spatial.json' with { type: 'json' };

const east = Float64Array.from(computed.x);
const grades = Float64Array.from(computed.value);
describe('rank correlation and Theil-Sen line', () => {
  it('agree with scipy, ties too', () => {
    const tied = rankCorrelation(
      east.map((x) => roundHalfEven(x / 20)),
      grades.map(roundHalfEven),
    );
    expect(tied).toBeCloseTo(computed.tiedSpearman, 12);
    const line = theilSen(east, grades);
    expect(line.slope).toBeCloseTo(computed.theilSen[0] ?? NaN, 12);
    expect(line.intercept).toBeCloseTo(computed.theilSen[1] ?? NaN, 12);
  });

  it('say null of constants', () => {
    expect(rankCorrelation(Float64Array.of(1, 1, 1), Float64Array.of(1, 2, 3))).toBeNull();
  });
});

const roundHalfEven = (x: number) =>
  Math.abs(x % 1) === 0.5 ? 2 * Math.round(x / 2) : Math.round(x);

describe('sign flips', () => {
  it('of one difference say nothing; of equal ones 2 of 2^m', () => {
    expect(signFlipTest(Float64Array.of(3), { seed: 1 }).p).toBe(1);
    expect(signFlipTest(new Float64Array(8).fill(-2), { seed: 1 })).toMatchObject({
      reached: 2,
      p: 2 / 256,
    });
    expect(signFlipTest(Float64Array.of(0, -0), { seed: 1 }).p).toBe(1);
  });

  it('drawn at random come near the share of all flips', () => {
    const random = Float64Array.from({ length: 40 }, (_, i) => ((i * 7) % 11) - 4.2);
    const mean = random.reduce((a, b) => a + b, 0) / 40;
    const sd = Math.sqrt(random.reduce((a, b) => a + b * b, 0)) / 40;
    const { p, enumerated, flips } = signFlipTest(random, { seed: 5 });
    expect(enumerated).toBe(false);
    expect(flips).toBe(999);
    // Central limit: two-sided normal p of mean / sd under flips, within 4 standard errors.
    const z = Math.abs(mean) / sd;
    const normal = 2 * normalCdf(-z);
    const error = Math.sqrt((normal * (1 - normal)) / flips);
    expect(Math.abs(p - normal)).toBeLessThan(4 * error);
    expect(signFlipTest(random, { seed: 5 }).p).toBe(p);
  });
});

const two = Float64Array.of(1, 2);
const sixGrades = new Float64Array(6);
it.each([
  ['too-few-rows', () => rankCorrelation(two, two)],
  ['shape', () => rankCorrelation(two, sixGrades)],
  ['constant', () => theilSen([1, 1], [1, 2])],
  ['too-few-rows', () => theilSen([1], [1])],
  ['shape', () => theilSen([1, 2], [1])],
  ['too-many-rows', () => theilSen(new Float64Array(2001), new Float64Array(2001))],
  ['too-few-rows', () => signFlipTest(new Float64Array(0), { seed: 1 })],
  ['not-finite', () => signFlipTest(Float64Array.of(NaN), { seed: 1 })],
  ['bad-parameter', () => signFlipTest(Float64Array.of(1), { seed: 1, draws: 0 })],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
