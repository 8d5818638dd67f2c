import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fitCensoredLognormal, meanBelowLimit } from '#kernels/compositions/censored-lognormal.ts';
import { replaceByLognormal } from '#kernels/compositions/lognormal-replacement.ts';
import { VALUE_STATE } from '#kernels/compositions/replacement.ts';
import { lowerTailRatio, lowerTailVariance } from '#kernels/compositions/truncated-normal.ts';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';
import { loadReference, numbersOf } from '#tests/support/reference.ts';

const { measured, below, above, missing } = VALUE_STATE;
const EIGHT = Float64Array.of(1.2, 1.5, 2.0, 2.2, 3.1, 3.8, 5.0, 7.5);
const ones = (n: number) => new Float64Array(n).fill(1);

describe('lower tail of the normal', () => {
  it.each([
    [-40, 40.024968847210886, 0.0006226682335286338],
    [-8, 8.12136811223618, 0.014324883442787484],
    [-1, 1.525135276160981, 0.19909766557034903],
    [0, 0.7978845608028654, 0.3633802276324186],
    [3, 0.004437839042125666, 0.9866667884582592],
  ])('below %d: ratio %f, variance %f (scipy 1.17.1)', (z, ratio, variance) => {
    expect(lowerTailRatio(z) / ratio).toBeCloseTo(1, 6);
    expect(lowerTailVariance(z)).toBeCloseTo(variance, 6);
  });

  it('stays finite and of one sign far out', () => {
    for (const z of [-1e6, -2000, -999, -100, 50, 1e6]) {
      expect(lowerTailRatio(z)).toBeGreaterThanOrEqual(0);
      expect(lowerTailRatio(z)).toBeLessThan(Infinity);
      expect(lowerTailVariance(z)).toBeGreaterThanOrEqual(0);
      expect(lowerTailVariance(z)).toBeLessThanOrEqual(1);
    }
  });
});

describe('fitCensoredLognormal', () => {
  it('fits eight values and four below 1.0 (computed: scipy, Nelder-Mead)', () => {
    const fit = fitCensoredLognormal(EIGHT, ones(4));
    expect(fit.logMean).toBeCloseTo(0.479452, 6);
    expect(fit.logSd).toBeCloseTo(0.942058, 6);
    expect(meanBelowLimit(fit, 1)).toBeCloseTo(0.547892, 6);
  });

  it('fits values among three limits (computed: scipy, Nelder-Mead)', () => {
    const values = Float64Array.of(1.2, 0.4, 1.5, 0.7, 2, 2.2, 3.1, 3.8, 5, 7.5, 0.9, 1.1);
    const fit = fitCensoredLognormal(values, Float64Array.of(1, 1, 1, 0.5, 0.5, 0.2));
    expect(fit.logMean).toBeCloseTo(-0.06944196, 6);
    expect(fit.logSd).toBeCloseTo(1.2190503, 6);
    [0.36849404, 0.22972794, 0.11187612].forEach((value, i) =>
      expect(meanBelowLimit(fit, [1, 0.5, 0.2][i]!)).toBeCloseTo(value, 6),
    );
  });

  it('fits cadmium of the Swiss Jura cut at .4 mg/kg (computed: scipy, BFGS and Nelder-Mead)', () => {
    const jura = loadReference('jura_prediction');
    const cadmium = numbersOf(jura, jura.check('jura_prediction.censor_substitution'), 'Cd');
    const kept = cadmium.filter((value) => value >= 0.4);
    const fit = fitCensoredLognormal(kept, new Float64Array(259 - kept.length).fill(0.4));
    expect(fit).toMatchObject({ nMeasured: 233, nBelow: 26 });
    expect(fit.logMean).toBeCloseTo(0.04258665, 6);
    expect(fit.logSd).toBeCloseTo(0.69620919, 6);
    expect(meanBelowLimit(fit, 0.4)).toBeCloseTo(0.29085604, 6);
  });

  it('expects exp(-.592133) = .553146 below 1 of ln 2, 1 (computed)', () => {
    const value = meanBelowLimit({ logMean: Math.LN2, logSd: 1 }, 1);
    expect(value).toBeCloseTo(0.553146, 6);
    expect(Math.log(value)).toBeCloseTo(-0.592133, 6);
  });

  it('expects .244109 of rows below 1 of ln 2, 1 (computed), and finds that fit of such a table', () => {
    expect(normalCdf(-Math.LN2)).toBeCloseTo(0.244109, 6);
    const n = 4000;
    const all = Float64Array.from({ length: n }, (_, i) =>
      Math.exp(Math.LN2 + normalQuantile((i + 0.5) / n)),
    );
    const kept = all.filter((value) => value >= 1);
    expect(1 - kept.length / n).toBeCloseTo(0.244109, 3);
    const fit = fitCensoredLognormal(kept, ones(n - kept.length));
    expect(fit.logMean).toBeCloseTo(Math.LN2, 2);
    expect(fit.logSd).toBeCloseTo(1, 2);
  });

  it('without limits is the mean and sd of logs; a change of unit moves the mean only', () => {
    const plain = fitCensoredLognormal(Float64Array.of(Math.E, Math.E ** 3), new Float64Array(0));
    expect(plain.logMean).toBeCloseTo(2, 12);
    expect(plain.logSd).toBeCloseTo(1, 12);
    const ppm = fitCensoredLognormal(EIGHT, ones(4));
    const ppb = fitCensoredLognormal(
      EIGHT.map((value) => value * 1000),
      ones(4).map((value) => value * 1000),
    );
    expect(ppb.logMean - ppm.logMean).toBeCloseTo(Math.log(1000), 9);
    expect(ppb.logSd).toBeCloseTo(ppm.logSd, 9);
  });

  it.each([
    ['too-few-rows', [1], [1]],
    ['too-few-rows', [], []],
    ['singular', [2, 2, 2], [1]],
    ['not-positive', [1, 0], [1]],
    ['not-positive', [1, NaN], [1]],
    ['not-positive', [1, Infinity], [1]],
    ['not-positive', [1, 2], [-0]],
  ] as const)('refuses with %s: %j below %j', (code, values, limits) => {
    expect(() =>
      fitCensoredLognormal(Float64Array.from(values), Float64Array.from(limits)),
    ).toThrow(expect.objectContaining({ code }));
  });
});

describe('replaceByLognormal', () => {
  const withBelow = (limits: readonly number[]) => ({
    values: Float64Array.of(...EIGHT, ...limits),
    states: Uint8Array.from({ length: 8 + limits.length }, (_, i) => (i < 8 ? measured : below)),
  });

  it('gives each value the mean below its own limit', () => {
    const { values, states } = withBelow([1, 0.5, 1]);
    const found = replaceByLognormal(values, states, { minMeasured: 8 });
    const fit = fitCensoredLognormal(EIGHT, Float64Array.of(1, 0.5, 1));
    expect(found.fit).toEqual(fit);
    expect([...found.values.subarray(0, 8)]).toEqual([...EIGHT]);
    expect([...found.values.subarray(8)]).toEqual([1, 0.5, 1].map((l) => meanBelowLimit(fit, l)));
    expect([...found.isReplaced.subarray(7)]).toEqual([0, 1, 1, 1]);
    expect(found).toMatchObject({ nReplaced: 3, notes: [] });
    expect([...values.subarray(8)]).toEqual([1, 0.5, 1]);
  });

  it('replaces simply under ten measured values, and says so', () => {
    const { values, states } = withBelow([1]);
    const found = replaceByLognormal(values, states);
    expect(found.values[8]).toBe(0.65);
    expect(found.fit).toBeNull();
    expect(found.notes).toEqual([expect.stringContaining('only 8 values were measured')]);
  });

  it('replaces simply when the spread is not to be believed or there is none', () => {
    const { values, states } = withBelow([1]);
    const wide = replaceByLognormal(values, states, { minMeasured: 8, maxLogSd: 0.1 });
    expect(wide.notes).toEqual([expect.stringContaining('too wide')]);
    const constant = replaceByLognormal(
      Float64Array.of(2, 2, 2, 1),
      Uint8Array.of(measured, measured, measured, below),
      { minMeasured: 3 },
    );
    expect(constant.values[3]).toBe(0.65);
    expect(constant.notes).toEqual([expect.stringContaining('no distribution')]);
  });

  it('takes the smallest measured value for an unknown limit, and keeps missing ones missing', () => {
    const found = replaceByLognormal(
      Float64Array.of(...EIGHT, NaN, NaN, 20),
      Uint8Array.of(...new Uint8Array(8), below, missing, above),
      { minMeasured: 8 },
    );
    expect(found.values[8]).toBeLessThan(1.2);
    expect(found.values[9]).toBeNaN();
    expect(found.values[10]).toBe(20);
    expect(found.fit?.nMeasured).toBe(9);
    expect(found.notes).toEqual([expect.stringContaining('unknown limit')]);
  });

  it('leaves a column without values below detection as it is, in shared memory when asked', () => {
    const out = new Float64Array(new SharedArrayBuffer(64));
    const found = replaceByLognormal(EIGHT, new Uint8Array(8), { out });
    expect(found.values).toBe(out);
    expect([...out]).toEqual([...EIGHT]);
    expect(found).toMatchObject({ fit: null, nReplaced: 0, notes: [] });
  });

  it('keeps every replacement under its limit and every other value', () => {
    const cell = fc.tuple(
      fc.double({ min: 0.01, max: 1000, noNaN: true }),
      fc.constantFrom(measured, measured, below),
    );
    fc.assert(
      fc.property(fc.array(cell, { minLength: 1, maxLength: 60 }), (cells) => {
        const values = Float64Array.from(cells, ([value]) => value);
        const states = Uint8Array.from(cells, ([, state]) => state);
        const found = replaceByLognormal(values, states, { minMeasured: 5 });
        cells.forEach(([value, state], row) => {
          if (state !== below) expect(found.values[row]).toBe(value);
          else expect(found.values[row]).toBeLessThan(value);
          expect(found.values[row]).toBeGreaterThan(0);
        });
      }),
      { numRuns: 50 },
    );
  });

  it.each([
    ['shape', [1, 2], [0], {}],
    ['not-positive', [-1, 2], [0, 1], {}],
    ['bad-parameter', [1, 2], [0, 1], { fraction: 0 }],
    ['bad-parameter', [1, 2], [0, 1], { minMeasured: 1 }],
    ['bad-parameter', [1, 2], [0, 1], { maxLogSd: 0 }],
    ['too-few-rows', [NaN], [1], {}],
  ] as const)('refuses with %s: %j, %j, %j', (code, values, states, options) => {
    expect(() =>
      replaceByLognormal(Float64Array.from(values), Uint8Array.from(states), options),
    ).toThrow(expect.objectContaining({ code }));
  });
});
