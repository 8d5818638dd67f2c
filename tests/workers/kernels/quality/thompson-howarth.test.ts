import { describe, expect, it } from 'vitest';
import { normalQuantile } from '#kernels/normal.ts';
import {
  binomialTail,
  CONTROL_LINES,
  precisionAt,
  precisionControl,
  thompsonHowarth,
} from '#kernels/quality/thompson-howarth.ts';
import { seededRandom } from '#kernels/random.ts';

/** Duplicates of lognormal grades with sd = s0 + k c, the same for the same seed. */
function duplicates(n: number, s0: number, k: number, seed: number) {
  const random = seededRandom(seed);
  const a = new Float64Array(n);
  const b = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const grade = Math.exp(1 + random.normal());
    const sd = s0 + k * grade;
    a[i] = Math.max(0, grade + sd * random.normal());
    b[i] = Math.max(0, grade + sd * random.normal());
  }
  return { a, b };
}

/** Pairs whose group means and median differences are set by hand. */
function groupsOf(groups: readonly (readonly [number, number])[]) {
  const centres = groups.flatMap((group) => Array.from({ length: 11 }, () => group));
  return {
    a: Float64Array.from(centres, ([mean, difference]) => mean + difference / 2),
    b: Float64Array.from(centres, ([mean, difference]) => mean - difference / 2),
  };
}

describe('thompsonHowarth', () => {
  it('finds s0 .10 and k .05 of 5000 made-up pairs (band of 20 seeds computed: numpy)', () => {
    for (const seed of [1, 2, 3]) {
      const { a, b } = duplicates(5000, 0.1, 0.05, seed);
      const found = thompsonHowarth(a, b);
      expect(found.s0).toBeGreaterThan(0.06);
      expect(found.s0).toBeLessThan(0.15);
      expect(found.k).toBeGreaterThan(0.04);
      expect(found.k).toBeLessThan(0.062);
      expect(found.notes).toEqual([]);
    }
  });

  it('draws the line through groups of eleven, times 1.04836 (published factor; line by hand)', () => {
    const { a, b } = groupsOf([
      [10, 1.2],
      [20, 2.2],
      [30, 3.2],
      [40, 4.2],
      [50, 5.2],
    ]);
    const found = thompsonHowarth(a, b);
    expect(found.k).toBeCloseTo(0.1 * 1.04836, 5);
    expect(found.s0).toBeCloseTo(0.2 * 1.04836, 5);
    expect(found.groups.map(({ n }) => n)).toEqual([11, 11, 11, 11, 11]);
    expect(precisionAt(found, 10)).toBeCloseTo(2 * 0.104836 + (2 * 0.209672) / 10, 5);
  });

  it('overstates an even error by 2.7 %: the median of eleven |z| is .69259 on average, not .67449', () => {
    // E of the sixth of eleven |z|: sum of quantiles under the beta law with shapes 6 and 6 (scipy's
    // quadrature and a 4,000-step sum here agree to six digits). Left uncorrected, as published.
    const steps = 4000;
    const beta = (u: number) => 2772 * (u * (1 - u)) ** 5;
    let mean = 0;
    for (let i = 0; i < steps; i++) {
      const u = (i + 0.5) / steps;
      mean += (normalQuantile((1 + u) / 2) * beta(u)) / steps;
    }
    expect(mean).toBeCloseTo(0.692586, 6);
    const random = seededRandom(31);
    const side = () => Float64Array.from({ length: 55_000 }, () => 100 + random.normal());
    const { groups } = thompsonHowarth(side(), side());
    const average = groups.reduce((sum, group) => sum + group.medianDifference, 0) / groups.length;
    // 5,000 groups: standard error .19 / 71 = .003
    expect(Math.abs(average / Math.SQRT2 - mean)).toBeLessThan(0.01);
    expect(average / Math.SQRT2).toBeGreaterThan(0.67449 + 0.006);
  });

  it('joins pairs left over, those of highest mean, to the last group', () => {
    const { a, b } = duplicates(60, 0.1, 0.05, 4);
    expect(thompsonHowarth(a, b).groups.map(({ n }) => n)).toEqual([11, 11, 11, 11, 16]);
  });

  it('goes through 0 when the intercept is negative, and takes one error when the slope is', () => {
    const steep = groupsOf([
      [10, 0.1],
      [20, 2],
      [30, 4],
      [40, 6],
      [50, 8],
    ]);
    const through = thompsonHowarth(steep.a, steep.b);
    expect(through.s0).toBe(0);
    expect(through.k / 1.0483580825).toBeCloseTo((1 + 40 + 120 + 240 + 400) / 5500, 9);
    expect(through.notes).toEqual([expect.stringContaining('drawn through 0')]);
    const falling = groupsOf([
      [10, 5],
      [20, 4],
      [30, 3],
      [40, 2],
      [50, 1],
    ]);
    const flat = thompsonHowarth(falling.a, falling.b);
    expect(flat).toMatchObject({ k: 0, notes: [expect.stringContaining('does not grow')] });
    expect(flat.s0).toBeCloseTo(3 * 1.0483580825, 9);
  });

  it('of pairs of one grade takes one error', () => {
    const { a, b } = groupsOf([
      [10, 1],
      [10, 1],
      [10, 1],
      [10, 1],
      [10, 1],
    ]);
    const found = thompsonHowarth(a, b);
    expect(found.k).toBe(0);
    expect(found.s0).toBeCloseTo(1.0483580825, 9);
  });

  it.each([
    ['too-few-rows', duplicates(49, 0.1, 0.05, 1)],
    ['shape', { a: new Float64Array(60), b: new Float64Array(50) }],
    ['not-finite', { a: new Float64Array(60).fill(NaN), b: new Float64Array(60) }],
    ['not-positive', { a: new Float64Array(60).fill(-1), b: new Float64Array(60) }],
  ] as const)('refuses with %s', (code, { a, b }) => {
    expect(() => thompsonHowarth(a, b)).toThrow(expect.objectContaining({ code }));
  });

  it('refuses a precision at concentration 0', () => {
    expect(() => precisionAt({ s0: 1, k: 0 }, 0)).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });
});

describe('precisionControl', () => {
  it('counts pairs past the lines of the stated precision', () => {
    const sd = 1;
    const off = (line: number) => 10 + line * sd;
    const a = Float64Array.of(10, 10, 10, 10, 10);
    const b = Float64Array.of(10, off(2.3), off(2.4), off(3.6), off(3.7));
    const found = precisionControl(a, b, { s0: sd, k: 0 });
    expect(found).toMatchObject({ nPairs: 5, beyond90: 3, beyond99: 1 });
    expect(found.p99).toBeCloseTo(1 - 0.99 ** 5, 12);
    expect(CONTROL_LINES.p90).toBeCloseTo(2.326174, 6);
    expect(CONTROL_LINES.p99).toBeCloseTo(3.642773, 6);
  });

  it('of duplicates that keep to the precision finds about a tenth past the first line', () => {
    const { a, b } = duplicates(2000, 0.1, 0.05, 9);
    const { beyond90, beyond99 } = precisionControl(a, b, { s0: 0.1, k: 0.05 });
    expect(beyond90 / 2000).toBeCloseTo(0.1, 1);
    expect(beyond99 / 2000).toBeLessThan(0.02);
  });

  it('50 pairs, 10 or more past a chance of .1: .024538 (computed: scipy binom.sf)', () => {
    expect(binomialTail(50, 10, 0.1)).toBeCloseTo(0.024538, 6);
    expect(binomialTail(50, 0, 0.1)).toBe(1);
    expect(binomialTail(3, 3, 0.5)).toBeCloseTo(0.125, 12);
  });

  it.each([
    [
      'bad-parameter',
      () => precisionControl(new Float64Array(5), new Float64Array(5), { s0: 0, k: 0 }),
    ],
    [
      'bad-parameter',
      () => precisionControl(new Float64Array(5), new Float64Array(5), { s0: -1, k: 1 }),
    ],
    [
      'too-few-rows',
      () => precisionControl(new Float64Array(4), new Float64Array(4), { s0: 1, k: 0 }),
    ],
    [
      'not-positive',
      () => precisionControl(new Float64Array(5).fill(-1), new Float64Array(5), { s0: 1, k: 0 }),
    ],
    ['bad-parameter', () => binomialTail(5, 6, 0.1)],
    ['bad-parameter', () => binomialTail(5, 2, NaN)],
  ] as const)('refuses with %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });
});
