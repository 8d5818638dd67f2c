import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  harmoniseLimit,
  replaceBelowLimit,
  replaceInClosed,
  VALUE_STATE,
} from '#kernels/compositions/replacement.ts';

const { measured, below, above, missing, notAnalysed } = VALUE_STATE;

describe('replaceInClosed', () => {
  it('turns (0, .4, .6) with limit .01 into (.0065, .3974, .5961) (computed; identity)', () => {
    const found = replaceInClosed(
      Float64Array.of(0, 0.4, 0.6),
      3,
      new Float64Array(3).fill(0.65 * 0.01),
    );
    [0.0065, 0.3974, 0.5961].forEach((value, i) => expect(found[i]).toBeCloseTo(value, 12));
    expect(found[1]! / found[2]!).toBeCloseTo(0.4 / 0.6, 12);
    expect(found[1]! / found[2]!).toBeCloseTo(0.6667, 4);
  });

  it('shrinks the measured parts, which an open table leaves: ratios .016356 and .016250 (computed)', () => {
    const closed = replaceInClosed(
      Float64Array.of(0, 0.4, 0.6),
      3,
      new Float64Array(3).fill(0.65 * 0.01),
    );
    expect(closed[0]! / closed[1]!).toBeCloseTo(0.016356, 6);
    const limit = replaceBelowLimit(Float64Array.of(0.01), Uint8Array.of(below)).values[0]!;
    expect(limit / 0.4).toBeCloseTo(0.01625, 6);
    expect(limit / 0.4 / (closed[0]! / closed[1]!)).toBeCloseTo(1 - 0.65 * 0.01, 12);
  });

  it.each([
    ['shape', [0, 1], 2, [0.1]],
    ['bad-parameter', [0, 0.5, 0.4], 3, [0.1, 0.1, 0.1]],
    ['bad-parameter', [0, 0.4, 0.6], 3, [0, 0.1, 0.1]],
    ['bad-parameter', [0, 0.4, 0.6], 3, [1, 0.1, 0.1]],
    ['not-positive', [-0.1, 0.5, 0.6], 3, [0.1, 0.1, 0.1]],
    ['not-positive', [NaN, 0.5, 0.6], 3, [0.1, 0.1, 0.1]],
  ] as const)('refuses with %s: %j', (code, parts, nCols, replacements) => {
    expect(() =>
      replaceInClosed(Float64Array.from(parts), nCols, Float64Array.from(replacements)),
    ).toThrow(expect.objectContaining({ code }));
  });
});

describe('replaceBelowLimit', () => {
  it('uses each cell’s own limit and leaves the rest', () => {
    const found = replaceBelowLimit(
      Float64Array.of(7, 0.5, 2, 100, NaN, NaN),
      Uint8Array.of(measured, below, below, above, missing, notAnalysed),
    );
    expect([...found.values]).toEqual([7, 0.325, 1.3, 100, NaN, NaN]);
    expect([...found.isReplaced]).toEqual([0, 1, 1, 0, 0, 0]);
    expect(found).toMatchObject({ nReplaced: 2, notes: [] });
  });

  it('halves the smallest measured value when the replacement would pass it, and says so', () => {
    const found = replaceBelowLimit(
      Float64Array.of(0.2, 5, 1),
      Uint8Array.of(measured, measured, below),
    );
    expect([...found.values]).toEqual([0.2, 5, 0.1]);
    expect(found.notes).toEqual([expect.stringContaining('half of it')]);
  });

  it('keeps a coarse limit above values of a finer method', () => {
    const found = replaceBelowLimit(
      Float64Array.of(0.2, 5, 0.1),
      Uint8Array.of(measured, below, below),
    );
    expect(found.values[1]).toBeCloseTo(3.25, 12);
    expect(found.notes).toEqual([]);
  });

  it('takes the smallest measured value for an unknown limit, and says so', () => {
    const found = replaceBelowLimit(
      Float64Array.of(2, NaN, 8),
      Uint8Array.of(measured, below, measured),
      { fraction: 0.5 },
    );
    expect([...found.values]).toEqual([2, 1, 8]);
    expect(found.notes).toEqual([expect.stringContaining('unknown limit')]);
  });

  it('writes into shared memory when asked', () => {
    const out = new Float64Array(new SharedArrayBuffer(16));
    expect(
      replaceBelowLimit(Float64Array.of(3, 2), Uint8Array.of(measured, below), { out }).values,
    ).toBe(out);
    expect([...out]).toEqual([3, 1.3]);
  });

  it('leaves a column without values below detection as it is, every replacement under its limit otherwise', () => {
    const cell = fc.tuple(
      fc.double({ min: 0.01, max: 1000, noNaN: true }),
      fc.constantFrom(measured, below, above),
    );
    fc.assert(
      fc.property(
        fc.array(cell, { minLength: 1, maxLength: 40 }),
        fc.double({ min: 0.1, max: 1, noNaN: true }),
        (cells, fraction) => {
          const values = Float64Array.from(cells, ([value]) => value);
          const found = replaceBelowLimit(
            values,
            Uint8Array.from(cells, ([, state]) => state),
            { fraction },
          );
          cells.forEach(([value, state], row) => {
            if (state === below) expect(found.values[row]).toBeLessThanOrEqual(value);
            else expect(found.values[row]).toBe(value);
            expect(found.values[row]).toBeGreaterThan(0);
          });
        },
      ),
    );
  });

  it.each([
    ['shape', [1, 2], [0], {}],
    ['bad-parameter', [1], [0], { fraction: 0 }],
    ['bad-parameter', [1], [0], { fraction: 1.1 }],
    ['not-positive', [0], [0], {}],
    ['not-positive', [1, NaN], [0, 0], {}],
    ['not-positive', [Infinity], [2], {}],
    ['too-few-rows', [NaN, NaN], [1, 3], {}],
  ] as const)('refuses with %s: values %j, states %j, %j', (code, values, states, options) => {
    expect(() =>
      replaceBelowLimit(Float64Array.from(values), Uint8Array.from(states), options),
    ).toThrow(expect.objectContaining({ code }));
  });
});

describe('harmoniseLimit', () => {
  it('brings finer limits and small values to one limit', () => {
    const found = harmoniseLimit(
      Float64Array.of(0.3, 5, 0.1, 10, NaN),
      Uint8Array.of(measured, measured, below, below, missing),
      1,
    );
    expect([...found.values]).toEqual([1, 5, 1, 10, NaN]);
    expect([...found.states]).toEqual([below, measured, below, below, missing]);
    expect(found.nChanged).toBe(2);
  });

  it('refuses a limit that is none', () => {
    expect(() => harmoniseLimit(Float64Array.of(1), Uint8Array.of(0), 0)).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
    expect(() => harmoniseLimit(Float64Array.of(1), new Uint8Array(2), 1)).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
  });
});
