import fc from 'fast-check';
import { expect, it } from 'vitest';
import { categoryFrom, compareCodePoints } from '#kernels/tables/category.ts';
import { crossTabulate } from '#kernels/tables/cross-tabulation.ts';
import { marginsOf, rowShares } from '#kernels/tables/margins.ts';

const domain = categoryFrom(['A', 'A', 'B', 'B', null, 'A', null]);
const rock = categoryFrom(['tuff', 'vein', 'tuff', 'tuff', 'vein', null, null]);
const lengths = Float64Array.from([2, 1, 2, 3, 4, 5, 6]);

it('counts intervals and metres with both labels and sets the rest beside the table', () => {
  const table = crossTabulate(domain, rock, lengths);
  expect(table.rowLevels).toEqual(['A', 'B']);
  expect(table.colLevels).toEqual(['tuff', 'vein']);
  expect([...table.counts]).toEqual([1, 1, 2, 0]);
  expect([...table.metres]).toEqual([2, 1, 5, 0]);
  expect([...table.rowNotLogged.metres]).toEqual([5, 0]);
  expect([...table.colNotLogged.metres]).toEqual([0, 4]);
  expect([table.nUsed, table.nDropped]).toEqual([4, 3]);
  expect(table.notes).toEqual([]);
});

it('removes levels without an interval and says so', () => {
  const rows = { levels: ['A', 'B', 'C'], codes: Int32Array.from([0, 0, 2, 1]) };
  const cols = { levels: ['x', 'y', 'z'], codes: Int32Array.from([0, 2, 2, -1]) };
  const table = crossTabulate(rows, cols, new Float64Array(4).fill(1));
  expect(table.rowLevels).toEqual(['A', 'C']);
  expect(table.colLevels).toEqual(['x', 'z']);
  expect([...table.counts]).toEqual([1, 1, 0, 1]);
  expect(table.notes).toEqual(['row B removed: no interval', 'column y removed: no interval']);
});

const label = fc.option(fc.constantFrom('p', 'q', 'r'), { nil: null });
const row = fc.tuple(label, label, fc.double({ min: 0, max: 10, noNaN: true }));

it('conserves metres and intervals, whatever the order of rows', () => {
  fc.assert(
    fc.property(fc.array(row, { minLength: 1, maxLength: 40 }), (rows) => {
      const tableOf = (list: typeof rows) =>
        crossTabulate(
          categoryFrom(list.map(([a]) => a)),
          categoryFrom(list.map(([, b]) => b)),
          Float64Array.from(list, ([, , length]) => length),
        );
      const table = tableOf(rows);
      const both = rows.filter(([a, b]) => a !== null && b !== null);
      const metres = both.reduce((sum, [, , length]) => sum + length, 0);
      expect(table.metres.reduce((sum, m) => sum + m, 0)).toBeCloseTo(metres, 9);
      expect(table.counts.reduce((sum, m) => sum + m, 0)).toBe(both.length);
      expect([...tableOf([...rows].reverse()).counts]).toEqual([...table.counts]);
    }),
  );
});

it('sorts levels by code point, beyond the first plane too', () => {
  expect(['b', 'a', 'B', 'aa'].sort(compareCodePoints)).toEqual(['B', 'a', 'aa', 'b']);
  expect(compareCodePoints('\u{1F600}', '\uFB01')).toBeGreaterThan(0);
});

it('shares metres by row; a row without metres has no shares', () => {
  expect([...rowShares(Float64Array.from([1, 3, 0, 0]), 2)]).toEqual([0.25, 0.75, NaN, NaN]);
});

it('refuses columns that do not fit, bad codes, lengths and cells', () => {
  const one = categoryFrom(['x']);
  expect(() => crossTabulate(one, one, lengths)).toThrow('expected 7 row label codes, found 1');
  const bad = { levels: ['x'], codes: Int32Array.from([1]) };
  expect(() => crossTabulate(one, bad, Float64Array.of(1))).toThrow(
    'expected a column label code in -1..0, found 1 in row 0',
  );
  expect(() => crossTabulate(one, one, Float64Array.of(-1))).toThrow(
    'expected a length >= 0 m, found -1 in row 0',
  );
  expect(() => marginsOf(Float64Array.of(1, 2, 3), 2)).toThrow('3 cells do not fill rows of 2');
  expect(() => marginsOf(Float64Array.of(1, NaN), 2)).toThrow('found NaN in row 0, column 1');
});
