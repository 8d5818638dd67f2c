import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { findIntervalProblems } from '#kernels/intervals/interval-problems.ts';
import { coveredM } from '#kernels/intervals/interval-table.ts';
import { apartTable, tableOf } from './support.ts';

const brief = (rows: readonly (readonly [number, number])[], options = {}) =>
  findIntervalProblems(tableOf(rows), options).map(({ code, row, otherRow, fromM, toM }) => [
    code,
    row,
    otherRow,
    fromM,
    toM,
  ]);

describe('findIntervalProblems', () => {
  it('finds gaps and overlaps between neighbours, whatever the row order', () => {
    expect(
      brief([
        [4, 6],
        [0, 2],
        [3, 4.5],
      ]),
    ).toEqual([
      ['gap', 2, 1, 2, 3],
      ['overlap', 0, 2, 4, 4.5],
    ]);
  });

  it('finds rows inside a long one, each against the row that reaches deepest', () => {
    expect(
      brief([
        [0, 10],
        [2, 3],
        [5, 6],
        [10, 11],
      ]),
    ).toEqual([
      ['overlap', 1, 0, 2, 3],
      ['overlap', 2, 0, 5, 6],
    ]);
  });

  it('lets touching rows and rounding of half a centimetre pass', () => {
    expect(
      brief([
        [0, 2],
        [2, 3],
        [3.005, 4],
        [3.996, 5],
      ]),
    ).toEqual([]);
    expect(
      brief([
        [0, 2],
        [2.006, 3],
      ]),
    ).toEqual([['gap', 1, 0, 2, 2.006]]);
  });

  it('finds rows that are no interval, and rows past the end of the hole', () => {
    expect(
      brief([
        [2, 2],
        [-1, 1],
        [0, NaN],
        [0, 5],
      ]).map(([code, row]) => [code, row]),
    ).toEqual([
      ['bad-interval', 0],
      ['bad-interval', 1],
      ['bad-interval', 2],
    ]);
    expect(
      brief(
        [
          [0, 5],
          [5, 7.5],
        ],
        { endOfHoleM: 7 },
      ),
    ).toEqual([['past-end', 1, null, 5, 7.5]]);
    expect(brief([[0, 7.004]], { endOfHoleM: 7 })).toEqual([]);
  });

  it('accounts for every metre: covered + gaps = depth reached', () => {
    fc.assert(
      fc.property(apartTable, (table) => {
        const problems = findIntervalProblems(table);
        expect(problems.every(({ code }) => code === 'gap')).toBe(true);
        const gaps = problems.reduce((sum, { fromM, toM }) => sum + toM - fromM, 0);
        const reached =
          table.toM.length === 0 ? 0 : table.toM[table.toM.length - 1]! - table.fromM[0]!;
        expect(coveredM(table) + gaps).toBeCloseTo(reached, 9);
      }),
    );
  });
});
