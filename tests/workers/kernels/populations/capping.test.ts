import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { capLadder } from '#kernels/populations/cap-ladder.ts';
import { disintegration } from '#kernels/populations/disintegration.ts';
import { metalAtRisk } from '#kernels/populations/metal-at-risk.ts';
import { topCutTable } from '#kernels/populations/top-cuts.ts';
import { seededRandom } from '#kernels/random.ts';

const grades = [0.5, 0.8, 1, 1.2, 1.5, 2, 2.5, 3, 5, 40];

describe('disintegration', () => {
  it('finds the step from 5 to 40 in the last two of ten grades (by hand)', () => {
    const { steps, largest, firstBreak } = disintegration(grades);
    expect(steps).toEqual([{ rank: 9, below: 5, above: 40, relative: 7 }]);
    expect(largest).toEqual(steps[0]);
    expect(firstBreak).toEqual(steps[0]);
  });

  it('finds the lowest break and the largest apart in a longer tail (by hand)', () => {
    const { largest, firstBreak } = disintegration(grades, { tailShare: 0.5, step: 0.25 });
    expect(largest?.below).toBe(5);
    expect(firstBreak).toMatchObject({ below: 3, above: 5 });
  });

  it('finds none among equal grades or even steps', () => {
    expect(disintegration(new Float64Array(20).fill(2))).toEqual({
      steps: [],
      largest: null,
      firstBreak: null,
    });
    const even = Float64Array.from({ length: 100 }, (_, i) => 100 + i);
    expect(disintegration(even).firstBreak).toBeNull();
  });

  it('does not depend on the unit or the order', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 1, max: 5000 }), { minLength: 10, maxLength: 60 }),
        (list) => {
          const found = disintegration(list).largest;
          const scaled = disintegration([...list].reverse().map((g) => g * 8)).largest;
          expect(scaled?.relative).toBe(found?.relative);
          expect(scaled?.rank).toBe(found?.rank);
        },
      ),
    );
  });
});

describe('cap ladder', () => {
  it('ends at the maximum, where nothing is cut, and gives the table of caps', () => {
    const ladder = capLadder(grades, { from: 0.8, count: 5 });
    expect(ladder).toHaveLength(5);
    expect(ladder[4]).toMatchObject({ cap: 40, metalLostPercent: 0, rowsCut: 0 });
    expect(ladder).toEqual(
      topCutTable(
        grades,
        ladder.map(({ cap }) => cap),
      ),
    );
  });

  it('never loses less metal at a lower cap', () => {
    const lost = capLadder(grades, { from: 0 }).map((row) => row.metalLostPercent);
    expect(lost).toEqual([...lost].sort((a, b) => b - a));
  });

  it('is one cap when the grades do not vary', () => {
    expect(capLadder([2, 2, 2])).toHaveLength(1);
  });
});

describe('metal at risk', () => {
  const random = seededRandom(4);
  const values = Float64Array.from({ length: 400 }, () => Math.exp(1.2 * random.normal()));
  const holeStarts = Int32Array.from({ length: 41 }, (_, hole) => 10 * hole);

  it('caps so that the expected capped metal is the low percentile', () => {
    const { cap, low, expected, share } = metalAtRisk(values, holeStarts, {
      perPeriod: 50,
      seed: 1,
    });
    const capped = values.reduce((sum, value) => sum + Math.min(value, cap ?? NaN), 0) / 400;
    expect(50 * capped).toBeCloseTo(low, 6);
    expect(share).toBeCloseTo(1 - low / expected, 12);
    expect(expected).toBeCloseTo((50 * values.reduce((a, b) => a + b, 0)) / 400, 9);
  });

  it('finds the low percentile a normal law of sums gives (central limit, 4 standard errors)', () => {
    // one composite a hole: sums of independent grades
    const single = Int32Array.from({ length: 401 }, (_, hole) => hole);
    const mean = values.reduce((a, b) => a + b, 0) / 400;
    const sd = Math.sqrt(values.reduce((a, b) => a + (b - mean) ** 2, 0) / 400);
    const { low } = metalAtRisk(values, single, { perPeriod: 2000, seed: 2, draws: 400 });
    const spread = sd * Math.sqrt(2000);
    expect(Math.abs(low - (2000 * mean - 0.8416 * spread))).toBeLessThan((4 * 1.43 * spread) / 20);
  });

  it('is the same for the same seed and lower for runs of grade that stay together', () => {
    const options = { perPeriod: 30, seed: 3 };
    expect(metalAtRisk(values, holeStarts, options)).toEqual(
      metalAtRisk(values, holeStarts, options),
    );
    const sorted = values.slice().sort();
    expect(metalAtRisk(sorted, holeStarts, options).low).toBeLessThan(
      metalAtRisk(values, holeStarts, options).low,
    );
  });

  it('names no cap when grades do not vary, or when none is low enough', () => {
    const flat = new Float64Array(20).fill(3);
    const starts = Int32Array.of(0, 10, 20);
    expect(metalAtRisk(flat, starts, { perPeriod: 5, seed: 1 })).toMatchObject({
      cap: null,
      low: 15,
    });
    const spread = Float64Array.from({ length: 20 }, (_, i) => (i < 10 ? 1 : 100));
    const found = metalAtRisk(spread, starts, { perPeriod: 5, seed: 1 });
    expect(found.cap).toBeNull();
    expect(found.note).toContain('90th percentile');
  });
});

const nine = new Float64Array(9).fill(1);
it.each([
  ['too-few-rows', () => disintegration(nine)],
  ['not-positive', () => disintegration([0, ...grades])],
  ['not-positive', () => disintegration([-0, ...grades])],
  ['not-finite', () => disintegration([NaN, ...grades])],
  ['bad-parameter', () => disintegration(grades, { tailShare: 0, step: 0.1 })],
  ['bad-parameter', () => capLadder(grades, { count: 1 })],
  ['bad-parameter', () => capLadder(grades, { from: 2 })],
  ['not-positive', () => capLadder([1, 0])],
  ['too-few-rows', () => metalAtRisk(nine, Int32Array.of(0, 9), { perPeriod: 2, seed: 1 })],
  ['shape', () => metalAtRisk(nine, Int32Array.of(0, 8), { perPeriod: 2, seed: 1 })],
  [
    'bad-parameter',
    () => metalAtRisk(Float64Array.from(grades), Int32Array.of(0, 10), { perPeriod: 0, seed: 1 }),
  ],
  [
    'not-finite',
    () =>
      metalAtRisk(Float64Array.from([...grades, Infinity]), Int32Array.of(0, 11), {
        perPeriod: 2,
        seed: 1,
      }),
  ],
  [
    'not-positive',
    () =>
      metalAtRisk(Float64Array.from([...grades, 0]), Int32Array.of(0, 11), {
        perPeriod: 2,
        seed: 1,
      }),
  ],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
