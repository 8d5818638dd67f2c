import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { densityCoverage, densityLine } from '#kernels/quality/density-coverage.ts';
import { recoveryAgainstGrade, spearmanTest } from '#kernels/quality/recovery.ts';
import { valuesOnIntervals } from '#kernels/quality/values-on-intervals.ts';
import { seededRandom } from '#kernels/random.ts';
import { loadReference, numbersOf } from '#tests/support/reference.ts';

const holes = (...starts: number[]) => Int32Array.from(starts);

/** Four holes of 25 rows; grade falls with recovery by `tie`. */
function core(tie: number, seed = 4) {
  const random = seededRandom(seed);
  const recovery = Float64Array.from({ length: 100 }, () => 60 + 40 * random.uniform());
  const grade = recovery.map((percent) => Math.exp(tie * (80 - percent) + 0.3 * random.normal()));
  return { recovery, grade, starts: holes(0, 25, 50, 75, 100) };
}

describe('spearmanTest', () => {
  it('x 1 to 6, y 2 1 4 3 6 5: .828571, t 2.9598, p .041563 (computed: scipy spearmanr)', () => {
    const found = spearmanTest(
      Float64Array.of(1, 2, 3, 4, 5, 6),
      Float64Array.of(2, 1, 4, 3, 6, 5),
    );
    expect(found?.rho).toBeCloseTo(0.828571, 6);
    expect(found?.t).toBeCloseTo(2.9598, 4);
    expect(found?.nominalP).toBeCloseTo(0.041563, 6);
  });

  it('of lead and distance to the river, with ties (computed: scipy spearmanr)', () => {
    const meuse = loadReference('meuse');
    const [lead, distance] = ['lead', 'dist'].map((name) =>
      numbersOf(meuse, meuse.check('meuse.mcd.h'), name),
    );
    const found = spearmanTest(lead!, distance!);
    expect(found?.rho).toBeCloseTo(-0.7323772073188424, 9);
    expect(found!.nominalP / 2.5317786375151425e-27).toBeCloseTo(1, 6);
  });

  it('of a perfect order has p 0; of one value is null', () => {
    const x = Float64Array.of(1, 2, 3, 4);
    expect(spearmanTest(x, x)).toEqual({ rho: 1, t: null, nominalP: 0 });
    expect(
      spearmanTest(
        x,
        x.map((v) => -v),
      ),
    ).toEqual({ rho: -1, t: null, nominalP: 0 });
    expect(
      spearmanTest(
        x,
        x.map(() => 1),
      ),
    ).toBeNull();
  });
});

describe('recoveryAgainstGrade', () => {
  it('flags grade that falls with recovery', () => {
    const { recovery, grade, starts } = core(0.05);
    const found = recoveryAgainstGrade(recovery, grade, starts, { seed: 1 });
    expect(found.rho).toBeLessThan(-0.6);
    expect(found).toMatchObject({ n: 100, isFlagged: true, nMissing: 0, errorRows: [] });
    expect(found.shiftedP).toBe(1 / 1000);
    expect(found.lowRecoveryDifference).toBeGreaterThan(20);
    expect(found.sentence).toContain('may bias');
  });

  it('does not flag grade that goes its own way', () => {
    const { recovery, grade, starts } = core(0);
    const found = recoveryAgainstGrade(recovery, grade, starts, { seed: 1 });
    expect(found.isFlagged).toBe(false);
    expect(found.shiftedP).toBeGreaterThan(0.05);
    expect(found.sentence).toContain('does not clearly change');
  });

  it('shifts p for likeness down the hole: the nominal p is smaller', () => {
    // Both sides step once down each hole: two values a hole are not fifty.
    const recovery = Float64Array.from({ length: 100 }, (_, i) =>
      i % 50 < 25 ? 70 + (i % 3) : 97 - (i % 3),
    );
    const grade = recovery.map((_, i) => (i % 50 < 25 ? 3 : 2) + 0.01 * (i % 7));
    const found = recoveryAgainstGrade(recovery, grade, holes(0, 50, 100), { seed: 1 });
    expect(found.nominalP).toBeLessThan(1e-9);
    expect(found.shiftedP).toBeGreaterThan(0.0009);
  });

  it('bins by recovery and keeps the bins together complete', () => {
    const recovery = Float64Array.of(0, 49.9, 50, 70, 80, 90, 95, 100, 105, 106, NaN);
    const grade = Float64Array.of(1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11);
    const found = recoveryAgainstGrade(recovery, grade, holes(0, 11), { seed: 1 });
    expect(found.bins.map(({ from, to, n, meanGrade }) => [from, to, n, meanGrade])).toEqual([
      [0, 50, 2, 1.5],
      [50, 70, 1, 3],
      [70, 80, 1, 4],
      [80, 90, 1, 5],
      [90, 95, 1, 6],
      [95, 105, 3, 8],
    ]);
    expect(found).toMatchObject({ n: 9, nMissing: 1, errorRows: [9], isFlagged: null });
    expect(found.sentence).toContain('too few for a verdict');
    expect(found.lowRecoveryDifference).toBeCloseTo(100 * (2.5 / 7 - 1), 9);
  });

  it('leaves out holes whose rows all fall away, and empty holes', () => {
    const { recovery, grade } = core(0.05);
    recovery.fill(NaN, 25, 50);
    const found = recoveryAgainstGrade(recovery, grade, holes(0, 25, 50, 50, 100), {
      seed: 1,
      draws: 99,
    });
    expect(found).toMatchObject({ n: 75, nMissing: 25 });
    expect(found.shiftedP).toBe(1 / 100);
  });

  it('of constant recovery has no correlation and no flag', () => {
    const { grade, starts } = core(0);
    const found = recoveryAgainstGrade(new Float64Array(100).fill(100), grade, starts, { seed: 1 });
    expect(found).toMatchObject({ rho: null, shiftedP: null, isFlagged: false });
  });

  it.each([
    ['shape', [90, 90, 90], [1, 2], [0, 3]],
    ['shape', [90, 90, 90], [1, 2, 3], [0, 2]],
    ['shape', [90, 90, 90], [1, 2, 3], [0, 2, 1, 3]],
    ['too-few-rows', [90, 90, NaN], [1, 2, 3], [0, 3]],
    ['bad-parameter', [90, 90, -1], [1, 2, 3], [0, 3]],
    ['not-finite', [90, 90, 90], [1, 2, Infinity], [0, 3]],
    ['not-finite', [90, 90, Infinity], [1, 2, 3], [0, 3]],
  ] as const)('refuses with %s: %j, %j, holes at %j', (code, recovery, grade, starts) => {
    expect(() =>
      recoveryAgainstGrade(
        Float64Array.from(recovery),
        Float64Array.from(grade),
        Int32Array.from(starts),
        { seed: 1 },
      ),
    ).toThrow(expect.objectContaining({ code }));
  });

  it('stops when the progress report throws', () => {
    const { recovery, grade, starts } = core(0);
    const onProgress = () => {
      throw new Error('cancelled');
    };
    expect(() => recoveryAgainstGrade(recovery, grade, starts, { seed: 1, onProgress })).toThrow(
      'cancelled',
    );
  });
});

describe('valuesOnIntervals', () => {
  const runs = { from: Float64Array.of(0, 3, 6, 10), to: Float64Array.of(3, 6, 9, 12) };
  const recovery = Float64Array.of(100, 70, NaN, 90);

  it('weights by the length shared (by hand)', () => {
    const samples = { from: Float64Array.of(0, 2, 5, 8, 20), to: Float64Array.of(2, 4, 8, 11, 21) };
    const found = valuesOnIntervals(runs, recovery, samples);
    expect([...found.values]).toEqual([100, 85, 70, 90, NaN]);
    [1, 1, 1 / 3, 1 / 3, 0].forEach((share, row) =>
      expect(found.covered[row]).toBeCloseTo(share, 12),
    );
  });

  it('keeps metres times value where the targets tile the sources', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0.1, max: 5, noNaN: true }), { minLength: 1, maxLength: 12 }),
        (lengths) => {
          const scale = 9 / lengths.reduce((a, b) => a + b, 0);
          let depth = 0;
          const ends = lengths.map((length) => (depth += length * scale));
          const to = Float64Array.from(ends);
          const from = Float64Array.from([0, ...ends.slice(0, -1)]);
          const values = Float64Array.of(100, 70, 40, 0);
          const found = valuesOnIntervals(runs, values, { from, to });
          const metal = found.values.reduce(
            (sum, value, i) => sum + (value || 0) * found.covered[i]! * (to[i]! - from[i]!),
            0,
          );
          expect(metal).toBeCloseTo(3 * 210, 6);
        },
      ),
      { numRuns: 30 },
    );
  });

  it.each([
    ['shape', { from: Float64Array.of(0), to: new Float64Array(0) }],
    ['not-finite', { from: Float64Array.of(NaN), to: Float64Array.of(1) }],
    ['bad-parameter', { from: Float64Array.of(1), to: Float64Array.of(1) }],
    ['bad-parameter', { from: Float64Array.of(0, 1), to: Float64Array.of(2, 3) }],
  ] as const)('refuses with %s', (code, intervals) => {
    expect(() => valuesOnIntervals(runs, recovery, intervals)).toThrow(
      expect.objectContaining({ code }),
    );
    const values = new Float64Array(intervals.from.length);
    expect(() => valuesOnIntervals(intervals, values, runs)).toThrow(
      expect.objectContaining({ code }),
    );
  });

  it('refuses values that do not fit their intervals', () => {
    expect(() => valuesOnIntervals(runs, new Float64Array(2), runs)).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
  });
});

describe('densityCoverage', () => {
  it('counts metres with density, weighs by length and names outliers (by hand)', () => {
    const lengths = Float64Array.of(1, 2, 1, 4, 1, 1);
    const density = Float64Array.of(2.7, 2.8, NaN, 2.75, 2.72, 4.9);
    const found = densityCoverage(lengths, density);
    expect(found).toMatchObject({ metres: 10, metresWithDensity: 9, n: 5, isProvisional: true });
    expect(found.share).toBeCloseTo(0.9, 12);
    expect(found.mean).toBeCloseTo((2.7 + 5.6 + 11 + 2.72 + 4.9) / 9, 12);
    expect(found.outliers).toEqual([5]);
  });

  it('of thirty values is not provisional; of none has no mean', () => {
    const lengths = new Float64Array(30).fill(1);
    const known = densityCoverage(
      lengths,
      lengths.map(() => 2.7),
    );
    expect(known).toMatchObject({ isProvisional: false, share: 1, outliers: [] });
    expect(known.mean).toBeCloseTo(2.7, 12);
    expect(
      densityCoverage(
        lengths,
        lengths.map(() => NaN),
      ),
    ).toMatchObject({
      n: 0,
      share: 0,
      mean: null,
      isProvisional: true,
    });
  });

  it.each([
    ['shape', [1, 1], [2.7]],
    ['too-few-rows', [], []],
    ['bad-parameter', [1, -1], [2.7, 2.7]],
    ['bad-parameter', [1, NaN], [2.7, 2.7]],
    ['bad-parameter', [0, -0], [2.7, 2.7]],
    ['not-positive', [1, 1], [2.7, 0]],
    ['not-positive', [1, 1], [2.7, Infinity]],
  ] as const)('refuses with %s: %j, %j', (code, lengths, density) => {
    expect(() => densityCoverage(Float64Array.from(lengths), Float64Array.from(density))).toThrow(
      expect.objectContaining({ code }),
    );
  });
});

describe('densityLine', () => {
  const grade = Float64Array.of(2, 3.5, 1, 4.2, 5, 2.8);

  it('of six pairs (computed: scipy linregress)', () => {
    const found = densityLine(grade, Float64Array.of(2.6, 2.8, 2.5, 2.9, 3.1, 2.65));
    expect(found.slope).toBeCloseTo(0.1469670980820209, 9);
    expect(found.intercept).toBeCloseTo(2.305184780913769, 9);
    expect(found.rSquared).toBeCloseTo(0.9536419273136294, 9);
    expect(found).toMatchObject({ n: 6, isUsable: true });
  });

  it('is not usable when grade explains little', () => {
    expect(densityLine(grade, Float64Array.of(3, 2.6, 2.6, 2.9, 2.6, 2.9)).isUsable).toBe(false);
  });

  it.each([
    ['singular', grade, grade.map(() => 2.7)],
    ['singular', grade.map(() => 1), grade],
    ['too-few-rows', grade.subarray(0, 4), grade.subarray(0, 4)],
    ['not-finite', grade, grade.with(2, NaN)],
  ] as const)('refuses with %s', (code, x, y) => {
    expect(() => densityLine(x, y)).toThrow(expect.objectContaining({ code }));
  });
});
