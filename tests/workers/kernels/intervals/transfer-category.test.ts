import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { overlapM } from '#kernels/intervals/interval-table.ts';
import { transferCategory } from '#kernels/intervals/transfer-category.ts';
import { apartTable, tableOf } from './support.ts';

const logs = (rows: readonly (readonly [number, number, number])[]) => ({
  ...tableOf(rows.map(([from, to]) => [from, to] as const)),
  code: Int32Array.from(rows, ([, , code]) => code),
});

describe('transferCategory', () => {
  it('takes the longest overlapped category, with its dominance (by hand)', () => {
    const found = transferCategory(
      tableOf([
        [0, 2],
        [2, 4],
        [4, 6],
      ]),
      logs([
        [0, 2.6, 0],
        [2.6, 5.8, 1],
      ]),
    );
    expect([...found.code]).toEqual([0, 1, 1]);
    expect(found.dominance[1]).toBeCloseTo(0.7, 12);
    expect([...found.isMixed]).toEqual([0, 0, 0]);
    expect(found.loggedShare[2]).toBeCloseTo(0.9, 12);
  });

  it('flags a sample across a contact that neither side dominates', () => {
    const found = transferCategory(
      tableOf([[0, 2]]),
      logs([
        [0, 1.2, 3],
        [1.2, 5, 4],
      ]),
    );
    expect([found.code[0], found.isMixed[0]]).toEqual([3, 1]);
  });

  it('gives a tie to the upper category, in any row order', () => {
    expect(
      transferCategory(
        tableOf([[0, 2]]),
        logs([
          [1, 2, 8],
          [0, 1, 9],
        ]),
      ).code[0],
    ).toBe(9);
    expect(
      transferCategory(
        tableOf([[0.1, 0.3]]),
        logs([
          [0, 0.2, 1],
          [0.2, 1, 2],
        ]),
      ).code[0],
    ).toBe(1);
  });

  it('adds pieces of one category together', () => {
    const found = transferCategory(
      tableOf([[0, 4]]),
      logs([
        [0, 1, 5],
        [1, 2.9, 6],
        [2.9, 4, 5],
      ]),
    );
    expect(found.code[0]).toBe(5);
    expect(found.dominance[0]).toBeCloseTo(2.1 / 4, 12);
  });

  it('accepts no category under half, and knows nothing where nothing is logged', () => {
    const found = transferCategory(
      tableOf([
        [0, 3],
        [10, 11],
        [3, 4],
      ]),
      logs([
        [0, 1.1, 0],
        [1.1, 2.1, 1],
        [2.1, 3, 2],
        [3, 4, -1],
      ]),
    );
    expect([...found.code]).toEqual([-1, -1, -1]);
    expect(found.dominance[0]).toBeCloseTo(1.1 / 3, 12);
    expect([...found.loggedShare]).toEqual([1, 0, 0]);
    expect([...found.isMixed]).toEqual([1, 0, 0]);
  });

  it('conserves logged metres over samples that tile the hole', () => {
    fc.assert(
      fc.property(
        apartTable,
        apartTable,
        fc.infiniteStream(fc.integer({ min: 0, max: 3 })),
        (samples, table, stream) => {
          const code = Int32Array.from(table.fromM, () => Number(stream.next().value));
          const found = transferCategory(samples, { ...table, code });
          samples.fromM.forEach((from, row) => {
            const to = samples.toM[row]!;
            const logged = table.fromM.reduce(
              (sum, fromL, i) => sum + overlapM(from, to, fromL, table.toM[i]!),
              0,
            );
            expect(found.loggedShare[row]! * (to - from)).toBeCloseTo(logged, 9);
            if (found.code[row]! >= 0)
              expect(found.dominance[row]).toBeGreaterThanOrEqual(0.5 - 1e-9);
          });
        },
      ),
    );
  });

  it.each([
    [
      'overlap',
      [
        [0, 2, 0],
        [1, 3, 1],
      ],
      {},
    ],
    ['bad-interval', [[1, 1, 0]], {}],
    ['bad-parameter', [[0, 1, 0]], { acceptShare: 1.2 }],
    ['bad-parameter', [[0, 1, 0]], { mixedBelow: NaN }],
  ] as const)('refuses with %s: %j %j', (code, rows, options) => {
    expect(() => transferCategory(tableOf([[0, 1]]), logs(rows), options)).toThrow(
      expect.objectContaining({ code }),
    );
  });

  it('refuses columns of different lengths', () => {
    const short = { ...tableOf([[0, 1]]), code: new Int32Array(2) };
    expect(() => transferCategory(tableOf([[0, 1]]), short)).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
  });
});
