import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { faultDistanceBins } from '#kernels/geometry/fault-distance-bins.ts';
import { faultPieces, type EndDistances } from '#kernels/geometry/fault-pieces.ts';
import { tableOf } from '../intervals/support.ts';

const ends = (...rows: [number, number][]): EndDistances => ({
  atFromM: Float64Array.from(rows, ([from]) => from),
  atToM: Float64Array.from(rows, ([, to]) => to),
});

/** Pieces as rows of source row, from, to, block. */
const listed = (pieces: ReturnType<typeof faultPieces>) =>
  Array.from(pieces.row, (row, i) => [
    row,
    pieces.fromM[i],
    pieces.toM[i],
    pieces.block.levels[pieces.block.codes[i]!] ?? null,
  ]);

describe('faultPieces', () => {
  it('cuts at d1 / (d1 - d2) of the length, not by majority (worked by hand)', () => {
    const pieces = faultPieces(
      tableOf([
        [10, 14],
        [14, 16],
      ]),
      [ends([3, -1], [-1, -2])],
    );
    expect(listed(pieces)).toEqual([
      [0, 10, 13, '+'],
      [0, 13, 14, '-'],
      [1, 14, 16, '-'],
    ]);
  });

  it('cuts at two faults, and not at one that has stopped', () => {
    const intervals = tableOf([[0, 8]]);
    const distances = [ends([2, -6]), ends([6, -2])];
    expect(listed(faultPieces(intervals, distances))).toEqual([
      [0, 0, 2, '++'],
      [0, 2, 6, '-+'],
      [0, 6, 8, '--'],
    ]);
    // fault 0 exists below fault 1 only: it cuts nothing above it
    const stops = [{ fault: 0, stopsAt: 1, existsOn: 'below' as const }];
    expect(listed(faultPieces(intervals, distances, stops))).toEqual([
      [0, 0, 6, '.+'],
      [0, 6, 8, '--'],
    ]);
  });

  it('gives no block without a position, and one block without faults', () => {
    expect(listed(faultPieces(tableOf([[0, 1]]), [ends([NaN, 1])]))).toEqual([[0, 0, 1, null]]);
    expect(listed(faultPieces(tableOf([[0, 1]]), []))).toEqual([[0, 0, 1, '']]);
    expect(listed(faultPieces(tableOf([]), [ends()]))).toEqual([]);
  });

  it('conserves metres and leaves every interval whole', () => {
    const distance = fc.double({ min: -50, max: 50, noNaN: true });
    const rows = fc.array(fc.tuple(distance, distance, distance, distance), { maxLength: 8 });
    fc.assert(
      fc.property(rows, (cells) => {
        const intervals = tableOf(cells.map((_, i) => [3 * i, 3 * i + 3] as const));
        const pieces = faultPieces(intervals, [
          ends(...cells.map(([a, b]): [number, number] => [a, b])),
          ends(...cells.map(([, , a, b]): [number, number] => [a, b])),
        ]);
        cells.forEach((_, row) => {
          const own = [...pieces.row.keys()].filter((i) => pieces.row[i] === row);
          expect(pieces.fromM[own[0]!]).toBe(3 * row);
          expect(pieces.toM[own.at(-1)]).toBe(3 * row + 3);
          own.slice(1).forEach((i) => expect(pieces.fromM[i]).toBe(pieces.toM[i - 1]));
        });
      }),
    );
  });

  it('refuses shapes, intervals and stops that are none', () => {
    expect(() => faultPieces(tableOf([[0, 1]]), [ends()])).toThrow(/1 distances/);
    expect(() => faultPieces(tableOf([[1, 1]]), [ends([1, 1])])).toThrow(/row 0/);
    const stops = [{ fault: 0, stopsAt: 0, existsOn: 'above' as const }];
    expect(() => faultPieces(tableOf([[0, 1]]), [ends([1, 1])], stops)).toThrow(/stopping/);
  });
});

describe('faultDistanceBins', () => {
  const distances = Float64Array.of(-2, 4.9, 5, 30, -120, NaN);
  const values = Float64Array.of(10, 20, 30, NaN, 50, 60);
  const lengths = Float64Array.of(1, 3, 2, 2, 2, 2);
  const holes = Int32Array.of(0, 1, 1, 1, 2, 2);

  it('weights by length, counts holes, and ends at 5, 10, 25, 50, 100 m (worked by hand)', () => {
    const bins = faultDistanceBins(distances, values, lengths, holes);
    expect(bins.map(({ fromM, holes: n, metres, mean }) => [fromM, n, metres, mean])).toEqual([
      [0, 2, 4, 17.5],
      [5, 1, 2, 30],
      [10, 0, 0, null],
      [25, 0, 0, null],
      [50, 0, 0, null],
      [100, 1, 2, 50],
    ]);
    expect(bins.at(-1)?.toM).toBe(Infinity);
  });

  it('can look at one side', () => {
    const means = (side: 'above' | 'below') =>
      faultDistanceBins(distances, values, lengths, holes, { side, breaksM: [0, 50] }).map(
        ({ mean }) => mean,
      );
    expect(means('above')).toEqual([24, null]);
    expect(means('below')).toEqual([10, 50]);
  });

  it('refuses breaks, lengths and shapes that are none', () => {
    const bins = (breaksM: number[], l = lengths) =>
      faultDistanceBins(distances, values, l, holes, { breaksM });
    expect(() => bins([])).toThrow(/ascend from 0/);
    expect(() => bins([0, 5, 5])).toThrow(/ascend from 0/);
    expect(() => bins([1, 5])).toThrow(/ascend from 0/);
    expect(() => bins([0], Float64Array.of(1, 0, 1, 1, 1, 1))).toThrow('found 0 in row 1');
    expect(() => bins([0], new Float64Array(2))).toThrow(/found 6, 2, 6/);
  });
});
