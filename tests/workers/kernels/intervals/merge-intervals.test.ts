import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { coveredM, overlapM } from '#kernels/intervals/interval-table.ts';
import { mergeIntervals } from '#kernels/intervals/merge-intervals.ts';
import { apartTable, tableOf } from './support.ts';

describe('mergeIntervals', () => {
  it('cuts {(0,2,A),(2,5,B)} by {(0,1,x),(1,3,y),(4,6,z)} (computed: Node)', () => {
    const merged = mergeIntervals(
      tableOf([
        [0, 2],
        [2, 5],
      ]),
      tableOf([
        [0, 1],
        [1, 3],
        [4, 6],
      ]),
    );
    const rows = Array.from(merged.fromM, (from, i) => [
      from,
      merged.toM[i],
      'AB'[merged.rowA[i]!] ?? null,
      'xyz'[merged.rowB[i]!] ?? null,
    ]);
    expect(rows).toEqual([
      [0, 1, 'A', 'x'],
      [1, 2, 'A', 'y'],
      [2, 3, 'B', 'y'],
      [3, 4, 'B', null],
      [4, 5, 'B', 'z'],
      [5, 6, null, 'z'],
    ]);
    expect(merged.tooShort).toEqual([]);
  });

  it('moves near ends onto the first table', () => {
    const merged = mergeIntervals(
      tableOf([[0, 2]]),
      tableOf([
        [0, 2.004],
        [2.004, 3],
      ]),
    );
    expect([...merged.fromM]).toEqual([0, 2]);
    expect([...merged.toM]).toEqual([2, 3]);
    expect([...merged.rowB]).toEqual([0, 1]);
  });

  it('gives no piece where neither table has anything, and none for empty tables', () => {
    const merged = mergeIntervals(
      tableOf([
        [0, 1],
        [5, 6],
      ]),
      tableOf([[0, 1]]),
    );
    expect([...merged.fromM]).toEqual([0, 5]);
    expect(mergeIntervals(tableOf([]), tableOf([])).fromM).toHaveLength(0);
  });

  it('names rows too short to show', () => {
    expect(mergeIntervals(tableOf([[0, 1]]), tableOf([[1, 1.002]])).tooShort).toEqual([
      { table: 'b', row: 0 },
    ]);
  });

  it('conserves metres: each source is reproduced, and shared length is the intersection', () => {
    fc.assert(
      fc.property(apartTable, apartTable, (a, b) => {
        const merged = mergeIntervals(a, b);
        const sum = (keep: (i: number) => boolean) =>
          merged.fromM.reduce(
            (total, from, i) => (keep(i) ? total + merged.toM[i]! - from : total),
            0,
          );
        a.fromM.forEach((from, row) =>
          expect(sum((i) => merged.rowA[i] === row)).toBeCloseTo(a.toM[row]! - from, 9),
        );
        b.fromM.forEach((from, row) =>
          expect(sum((i) => merged.rowB[i] === row)).toBeCloseTo(b.toM[row]! - from, 9),
        );
        const shared = a.fromM.reduce(
          (total, from, i) =>
            total +
            b.fromM.reduce(
              (part, fromB, j) => part + overlapM(from, a.toM[i]!, fromB, b.toM[j]!),
              0,
            ),
          0,
        );
        expect(sum((i) => merged.rowA[i]! >= 0 && merged.rowB[i]! >= 0)).toBeCloseTo(shared, 9);
        expect(shared).toBeCloseTo(
          coveredM(a) +
            coveredM(b) -
            coveredM({
              fromM: Float64Array.of(...a.fromM, ...b.fromM),
              toM: Float64Array.of(...a.toM, ...b.toM),
            }),
          9,
        );
      }),
    );
  });

  it.each([
    ['bad-interval', [[2, 1]]],
    ['bad-interval', [[-1, 1]]],
    ['bad-interval', [[0, NaN]]],
    [
      'overlap',
      [
        [0, 2],
        [1, 3],
      ],
    ],
  ] as const)('refuses with %s: %j', (code, rows) => {
    expect(() => mergeIntervals(tableOf(rows), tableOf([]))).toThrow(
      expect.objectContaining({ code }),
    );
    expect(() => mergeIntervals(tableOf([]), tableOf(rows))).toThrow(
      expect.objectContaining({ code }),
    );
  });

  it('merges 40 000 rows in well under a second', () => {
    const long = tableOf(Array.from({ length: 40_000 }, (_, i) => [i, i + 1] as const));
    const shifted = tableOf(Array.from({ length: 40_000 }, (_, i) => [i + 0.5, i + 1.5] as const));
    const started = performance.now();
    expect(mergeIntervals(long, shifted).fromM).toHaveLength(80_001);
    expect(performance.now() - started).toBeLessThan(3000);
  });
});
