import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  chooseDetermination,
  GRADE_STATE,
  type Determination,
} from '#kernels/units/determinations.ts';

const { missing, measured, below, above } = GRADE_STATE;

const determination = (name: string, ...cells: [ppm: number, state: number][]): Determination => ({
  name,
  ppm: Float64Array.from(cells, ([ppm]) => ppm),
  state: Uint8Array.from(cells, ([, state]) => state),
});

describe('chooseDetermination', () => {
  it('takes the routine method, and the over-range one where that is capped (worked by hand)', () => {
    const routine = determination(
      'routine',
      [500, measured],
      [10_000, above],
      [0.5, below],
      [NaN, missing],
      [10_000, above],
      [NaN, missing],
    );
    const ore = determination(
      'ore grade',
      [520, measured],
      [23_000, measured],
      [300, measured],
      [40, below],
      [400_000, above],
      [NaN, missing],
    );
    const chosen = chooseDetermination([routine, ore]);
    expect([...chosen.ppm]).toEqual([500, 23_000, 0.5, 40, 400_000, NaN]);
    expect([...chosen.state]).toEqual([measured, measured, below, below, above, missing]);
    expect([...chosen.source]).toEqual([0, 1, 0, 1, 1, -1]);
    expect(chosen).toMatchObject({ taken: [2, 3], overRange: 1 });
  });

  it('follows the order given', () => {
    const [a, b] = [determination('a', [1, measured]), determination('b', [2, measured])];
    expect(chooseDetermination([a, b]).ppm[0]).toBe(1);
    expect(chooseDetermination([b, a]).ppm[0]).toBe(2);
  });

  it('changes no grade: each one chosen stands in a determination', () => {
    const cell = fc.tuple(
      fc.double({ min: 0, max: 1e6, noNaN: true }),
      fc.integer({ min: 0, max: 3 }),
    );
    const column = fc.array(cell, { minLength: 5, maxLength: 5 });
    fc.assert(
      fc.property(column, column, column, (...columns) => {
        const given = columns.map((cells, i) => determination(`${i}`, ...cells));
        const { ppm, state, source, taken } = chooseDetermination(given);
        source.forEach((i, row) => {
          if (i >= 0) {
            expect(ppm[row]).toBe(given[i]!.ppm[row]);
            expect(state[row]).toBe(given[i]!.state[row]);
          } else expect(given.every((one) => one.state[row] === missing)).toBe(true);
        });
        expect(taken.reduce((sum, n) => sum + n, 0)).toBe(source.filter((i) => i >= 0).length);
      }),
    );
  });

  it('refuses nothing, unlike lengths, and cells that are none', () => {
    expect(() => chooseDetermination([])).toThrow(/found none/);
    const one = determination('one', [1, measured]);
    expect(() => chooseDetermination([one, determination('two')])).toThrow('0 and 0 of two');
    expect(() => chooseDetermination([determination('x', [NaN, measured])])).toThrow('in row 0');
    expect(() => chooseDetermination([determination('x', [-1, below])])).toThrow('in row 0');
    expect(() => chooseDetermination([determination('x', [1, 4])])).toThrow('in row 0');
  });
});
