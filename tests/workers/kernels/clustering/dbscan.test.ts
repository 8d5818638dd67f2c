import fc from 'fast-check';
import { expect, it } from 'vitest';
import { dbscan, type DbscanInput } from '#kernels/clustering/dbscan.ts';

/** Two runs of rows 1 apart, 10 between them, one row alone and one missing. */
const line = [Float64Array.of(0, 1, 2, 12, 13, 14, 15, 40, NaN)];
const group = (change: Partial<DbscanInput> = {}) =>
  dbscan({ columns: line, eps: 1, minPoints: 3, ...change });

it('joins what is within reach, the reach included; ends of a run are border rows', () => {
  const { labels, core, clusters, nNoise, nDropped } = group();
  expect([...labels]).toEqual([2, 2, 2, 1, 1, 1, 1, 0, 0]);
  expect([...core]).toEqual([0, 1, 0, 0, 1, 1, 0, 0, 0]);
  expect([clusters, nNoise, nDropped]).toEqual([2, 1, 1]);
  expect([...group({ weights: [9, 9, 9, 1, 1, 1, 1, 1, 1] }).labels]).toEqual([
    1, 1, 1, 2, 2, 2, 2, 0, 0,
  ]);
});

it('a border row goes to the nearer core', () => {
  // 4.0 is 1.5 from the core at 2.5 and 1.4 from the core at 5.4, and no core itself.
  const between = [Float64Array.of(2.3, 2.4, 2.5, 2.2, 4, 5.4, 5.6, 5.7, 5.8)];
  const { labels, core } = group({ columns: between, eps: 1.5, minPoints: 4 });
  expect(core[4]).toBe(0);
  expect(labels[4]).toBe(labels[5]);
});

it('the order of the rows and a common factor change nothing', () => {
  const value = fc.integer({ min: -8, max: 8 });
  fc.assert(
    fc.property(fc.array(fc.tuple(value, value), { minLength: 1, maxLength: 25 }), (rows) => {
      const run = (used: [number, number][], factor: number) =>
        dbscan({
          columns: [0, 1].map((j) => Float64Array.from(used, (row) => factor * row[j]!)),
          eps: 2 * factor,
          minPoints: 3,
        });
      const found = run(rows, 1);
      expect(run(rows, 8).labels).toEqual(found.labels);
      const back = run([...rows].reverse(), 1);
      expect([...back.core].reverse()).toEqual([...found.core]);
      expect([back.clusters, back.nNoise]).toEqual([found.clusters, found.nNoise]);
    }),
    { numRuns: 100, seed: 2 },
  );
});

it('groups equal rows, and a listener may cancel', () => {
  expect([...group({ columns: [new Float64Array(3).fill(-0)] }).labels]).toEqual([1, 1, 1]);
  const stop = () => {
    throw new Error('cancelled');
  };
  expect(() => group({ onProgress: stop })).toThrow('cancelled');
});

it.each<[string, Partial<DbscanInput>]>([
  ['bad-parameter', { eps: 0 }],
  ['bad-parameter', { eps: NaN }],
  ['bad-parameter', { minPoints: 2.5 }],
  ['too-many-rows', { maxRows: 7 }],
  ['shape', { weights: [1] }],
  ['too-few-rows', { columns: [Float64Array.of(NaN)] }],
  ['not-finite', { columns: [Float64Array.of(Infinity, 1)] }],
])('refuses %s for %j', (code, change) => {
  expect(() => group(change)).toThrow(expect.objectContaining({ code }));
});
