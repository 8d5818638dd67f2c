import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { VALUE_STATE } from '#kernels/compositions/replacement.ts';
import { bootstrapInterval } from '#kernels/quality/bootstrap.ts';
import {
  duplicatePrecision,
  HARD_PER_RELATIVE_SD,
  precisionGuide,
} from '#kernels/quality/duplicate-precision.ts';
import { normalQuantile } from '#kernels/normal.ts';
import { requirePairs, usablePairs } from '#kernels/quality/pairs.ts';
import { seededRandom } from '#kernels/random.ts';

const { measured, below, above, missing } = VALUE_STATE;
const A = Float64Array.of(1, 2, 4, 10, 0.5, 20);
const B = Float64Array.of(1.1, 1.8, 4.4, 9, 0.6, 22);

describe('duplicatePrecision', () => {
  it('of six pairs: HARD, median 5.012531, average CV 8.288013 % (computed: numpy)', () => {
    const found = duplicatePrecision(A, B, { seed: 1 });
    [4.7619, 5.2632, 4.7619, 5.2632, 9.0909, 4.7619].forEach((value, i) =>
      expect(found.hard[i]).toBeCloseTo(value, 4),
    );
    expect(found.medianHard).toBeCloseTo(5.012531, 6);
    expect(found.cvAverage).toBeCloseTo(8.288013, 6);
    expect(found.cvInterval?.low).toBeLessThan(found.cvAverage);
    expect(found.cvInterval?.high).toBeGreaterThan(found.cvAverage);
    expect(found.notes).toEqual([expect.stringContaining('6 pairs only')]);
  });

  it('recovers the relative error of made-up normal duplicates', () => {
    const random = seededRandom(8);
    const error = 0.06;
    const sides = Array.from({ length: 4000 }, () => Math.exp(random.normal())).map((grade) => [
      grade * (1 + error * random.normal()),
      grade * (1 + error * random.normal()),
    ]);
    const found = duplicatePrecision(
      Float64Array.from(sides, ([a = 0]) => a),
      Float64Array.from(sides, ([, b = 0]) => b),
      { seed: 1 },
    );
    expect(found.cvAverage / 100 / error).toBeCloseTo(1, 1);
    expect(found.medianHard / 100 / HARD_PER_RELATIVE_SD.median / error).toBeCloseTo(1, 1);
    expect(found.hard90 / 100 / HARD_PER_RELATIVE_SD.p90 / error).toBeCloseTo(1, 1);
    expect(found).toMatchObject({ cvInterval: null, notes: [] });
  });

  it('of errors at normal quantiles: median .476936 and 90th percentile 1.163087 of the sd (computed: scipy)', () => {
    // a - b of two errors of relative sd c has sd c sqrt(2): HARD is 50 c sqrt(2) |z| for a + b = 2.
    const error = 1e-3;
    const n = 20_001;
    const z = Float64Array.from({ length: n }, (_, i) => normalQuantile((i + 0.5) / n));
    const found = duplicatePrecision(
      z.map((value) => 1 + (error * value) / Math.SQRT2),
      z.map((value) => 1 - (error * value) / Math.SQRT2),
      { seed: 1 },
    );
    expect(found.medianHard / 100 / error).toBeCloseTo(0.476936, 4);
    expect(found.hard90 / 100 / error).toBeCloseTo(1.163087, 3);
    expect(found.cvAverage / 100 / error).toBeCloseTo(1, 3);
    expect(HARD_PER_RELATIVE_SD.median).toBeCloseTo(normalQuantile(0.75) / Math.SQRT2, 12);
    expect(HARD_PER_RELATIVE_SD.p90).toBeCloseTo(normalQuantile(0.95) / Math.SQRT2, 12);
    expect(HARD_PER_RELATIVE_SD.median).toBeCloseTo(0.476936, 6);
    expect(HARD_PER_RELATIVE_SD.p90).toBeCloseTo(1.163087, 6);
  });

  it('does not change when sides or units change', () => {
    const pair = fc.tuple(
      fc.double({ min: 0.1, max: 1e4, noNaN: true }),
      fc.double({ min: 0.1, max: 1e4, noNaN: true }),
    );
    fc.assert(
      fc.property(fc.array(pair, { minLength: 30, maxLength: 60 }), (pairs) => {
        const a = Float64Array.from(pairs, ([value]) => value);
        const b = Float64Array.from(pairs, ([, value]) => value);
        const found = duplicatePrecision(a, b, { seed: 1 });
        const swapped = duplicatePrecision(b, a, { seed: 1 });
        const scaled = duplicatePrecision(
          a.map((value) => 1000 * value),
          b.map((value) => 1000 * value),
          { seed: 1 },
        );
        expect(swapped.cvAverage).toBeCloseTo(found.cvAverage, 9);
        expect(scaled.cvAverage).toBeCloseTo(found.cvAverage, 9);
        expect(found.hard.every((value) => value >= 0 && value <= 100)).toBe(true);
      }),
      { numRuns: 30 },
    );
  });

  it('is 0 for pairs that repeat, with the same range for the same seed', () => {
    const found = duplicatePrecision(A, A, { seed: 3 });
    expect(found).toMatchObject({ medianHard: 0, cvAverage: 0, cvInterval: { low: 0, high: 0 } });
    expect(duplicatePrecision(A, B, { seed: 3 })).toEqual(duplicatePrecision(A, B, { seed: 3 }));
  });

  it('guides by stage, gold at twice (common practice, from memory)', () => {
    expect(precisionGuide('pulp', false)).toBe(5);
    expect(precisionGuide('field', true)).toBe(40);
  });
});

describe('usablePairs', () => {
  it('says what it dropped and why', () => {
    const a = Float64Array.of(...A, NaN, 0, 30, 30, 0.3, 50);
    const b = Float64Array.of(...B, 3, 0, 0.5, 31, 40, 60);
    const states = {
      a: Uint8Array.of(...new Uint8Array(10), measured, missing),
      b: Uint8Array.of(...new Uint8Array(8), below, above, measured, measured),
    };
    const found = usablePairs(a, b, { states, limit: 0.05 });
    expect([...found.rows]).toEqual([0, 1, 2, 3, 4, 5]);
    expect(found.dropped).toEqual({ missing: 2, censored: 2, nearLimit: 1, zero: 1 });
  });

  it.each([
    ['shape', [1, 2, 3, 4, 5], [1], {}],
    [
      'shape',
      [1, 2, 3, 4, 5],
      [1, 2, 3, 4, 5],
      { states: { a: new Uint8Array(1), b: new Uint8Array(5) } },
    ],
    ['too-few-rows', [1, 2, 3, 4], [1, 2, 3, 4], {}],
    ['too-few-rows', [1, 2, 3, 4, 5], [1, 2, 3, 4, 5], { limit: 0.2 }],
    ['too-few-rows', [], [], {}],
    ['not-positive', [1, 2, 3, 4, -5], [1, 2, 3, 4, 5], {}],
    ['not-positive', [1, 2, 3, 4, 5], [1, 2, 3, 4, Infinity], {}],
    ['bad-parameter', [1, 2, 3, 4, 5], [1, 2, 3, 4, 5], { limit: -1 }],
    ['bad-parameter', [1, 2, 3, 4, 5], [1, 2, 3, 4, 5], { limitMultiple: NaN }],
  ] as const)('refuses with %s: %j, %j, %j', (code, a, b, options) => {
    expect(() => usablePairs(Float64Array.from(a), Float64Array.from(b), options)).toThrow(
      expect.objectContaining({ code }),
    );
  });

  it('names the row of a value that is none', () => {
    expect(() => requirePairs(A, B.with(4, NaN))).toThrow(
      expect.objectContaining({ code: 'not-finite', detail: { row: 4 } }),
    );
  });
});

describe('bootstrapInterval', () => {
  it('of a mean is about two standard errors on each side', () => {
    const random = seededRandom(5);
    const values = Float64Array.from({ length: 400 }, () => 10 + random.normal());
    const meanOf = (rows: Uint32Array) =>
      rows.reduce((sum, row) => sum + values[row]!, 0) / rows.length;
    const { low = NaN, high = NaN } = bootstrapInterval(400, meanOf, { seed: 2 }) ?? {};
    expect((high - low) / (2 * 1.96 * 0.05)).toBeCloseTo(1, 0);
    expect(low).toBeLessThan(10);
    expect(high).toBeGreaterThan(10);
  });

  it('leaves draws without a value out', () => {
    expect(bootstrapInterval(3, () => NaN, { seed: 1 })).toBeNull();
    expect(bootstrapInterval(1, () => 7, { seed: 1 })).toEqual({ low: 7, high: 7 });
  });

  it.each([
    [0, {}],
    [3, { draws: 5 }],
    [3, { level: 1 }],
  ])('refuses %i rows, %j', (n, options) => {
    expect(() => bootstrapInterval(n, () => 1, { seed: 1, ...options })).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });
});
