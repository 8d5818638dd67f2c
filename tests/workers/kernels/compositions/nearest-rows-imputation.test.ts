import { describe, expect, it } from 'vitest';
import { aitchisonDistance } from '#kernels/compositions/aitchison-geometry.ts';
import { imputeByNeighbours } from '#kernels/compositions/nearest-rows-imputation.ts';

/** Four donors and a target that misses the first part. */
const table = () => [
  Float64Array.of(10, 11, 30, 12, NaN),
  Float64Array.of(20, 22, 10, 19, 21),
  Float64Array.of(70, 72, 60, 69, 71),
];

describe('imputeByNeighbours', () => {
  it('scales and takes the median of three: 10.672199 (computed)', () => {
    const columns = table();
    const found = imputeByNeighbours(columns, { k: 3 });
    expect(found.columns[0]![4]).toBeCloseTo(10.672199, 6);
    expect(found).toMatchObject({ nImputed: 1, nLeft: 0, nAtLimit: 0, notes: [] });
    expect([...found.isImputed[0]!]).toEqual([0, 0, 0, 0, 1]);
    expect(found.columns[1]).toEqual(columns[1]);
    expect(columns[0]![4]).toBeNaN();
  });

  it('ranks donors by the Aitchison distance on shared parts (computed: .024470 .023005 .405598 .050565)', () => {
    const [, b = new Float64Array(0), c = new Float64Array(0)] = table();
    const shared = (row: number) => Float64Array.of(b[row]!, c[row]!);
    const distances = [0, 1, 2, 3].map((row) => aitchisonDistance(shared(row), shared(4)));
    [0.02447, 0.023005, 0.405598, 0.050565].forEach((value, row) =>
      expect(distances[row]).toBeCloseTo(value, 6),
    );
    // Nearest first: rows 1, 0, 3; with one neighbour its scaled value is taken.
    expect(imputeByNeighbours(table(), { k: 1 }).columns[0]![4]).toBeCloseTo(10.672199, 6);
    const two = imputeByNeighbours(table(), { k: 2 }).columns[0]![4]!;
    expect(two).toBeCloseTo((10.672199 + 10.319884) / 2, 6);
    // The third alone: the last donor without the others.
    const last = table().map((column) => column.slice(3));
    expect(imputeByNeighbours(last, { k: 1 }).columns[0]![1]).toBeCloseTo(12.797311, 6);
  });

  it('does not depend on the scale of rows: the target keeps its own', () => {
    const scaled = table().map((column) =>
      column.map((value, row) => value * [3, 1, 7, 0.1, 5][row]!),
    );
    expect(imputeByNeighbours(scaled, { k: 3 }).columns[0]![4]! / 5).toBeCloseTo(10.672199, 6);
  });

  it('gives a composition back that is a multiple of a donor', () => {
    const [a = new Float64Array(0), b = new Float64Array(0), c = new Float64Array(0)] = table();
    b[4] = 2 * 19;
    c[4] = 2 * 69;
    expect(imputeByNeighbours([a, b, c], { k: 1 }).columns[0]![4]).toBeCloseTo(24, 9);
  });

  it('leaves cells with too few donors missing, and says so', () => {
    const found = imputeByNeighbours(table());
    expect(found.columns[0]![4]).toBeNaN();
    expect(found).toMatchObject({ nImputed: 0, nLeft: 1 });
    expect(found.notes).toEqual([expect.stringContaining('fewer than 5 rows')]);
  });

  it('leaves a row with one part left missing', () => {
    const columns = table();
    columns[1]![4] = NaN;
    expect(imputeByNeighbours(columns, { k: 3 })).toMatchObject({ nImputed: 0, nLeft: 2 });
  });

  it('raises a value to the detection limit, and says so', () => {
    const found = imputeByNeighbours(table(), { k: 3, limits: Float64Array.of(12, 1, 1) });
    expect(found.columns[0]![4]).toBe(12);
    expect(found.notes).toEqual([expect.stringContaining('detection limit')]);
  });

  it('compares only rows that have all the parts of the row to fill', () => {
    const columns = [...table(), Float64Array.of(5, NaN, 5, 5, 5)];
    // Row 1, nearest so far, misses the fourth part: rows 0, 2 and 3 are left.
    const found = imputeByNeighbours(columns, { k: 3 });
    const fewer = columns.map((column) => column.filter((_, row) => row !== 1));
    expect(found.columns[0]![4]).toBe(imputeByNeighbours(fewer, { k: 3 }).columns[0]![3]);
  });

  it('without missing cells gives the input', () => {
    const whole = table().map((column) => column.subarray(0, 4));
    const found = imputeByNeighbours(whole);
    expect(found.columns).toEqual(whole.map((column) => column.slice()));
    expect(found.nImputed).toBe(0);
  });

  it.each([
    ['too-few-parts', () => imputeByNeighbours(table().slice(1))],
    ['shape', () => imputeByNeighbours([...table(), new Float64Array(2)])],
    ['not-positive', () => imputeByNeighbours(table().map((column) => column.map(() => -0)))],
    ['not-positive', () => imputeByNeighbours(table().map((column) => column.map(() => Infinity)))],
    ['bad-parameter', () => imputeByNeighbours(table(), { k: 0 })],
    ['bad-parameter', () => imputeByNeighbours(table(), { k: 2.5 })],
    ['bad-parameter', () => imputeByNeighbours(table(), { limits: new Float64Array(1) })],
    ['bad-parameter', () => imputeByNeighbours(table(), { limits: Float64Array.of(NaN, 1, 1) })],
  ] as const)('refuses with %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });

  it('names the row and part of a bad value, and stops when the progress report throws', () => {
    const columns = table();
    columns[2]![3] = -1;
    expect(() => imputeByNeighbours(columns)).toThrow(
      expect.objectContaining({ code: 'not-positive', detail: { row: 3, col: 2 } }),
    );
    const onProgress = () => {
      throw new Error('cancelled');
    };
    expect(() => imputeByNeighbours(table(), { onProgress })).toThrow('cancelled');
  });
});
