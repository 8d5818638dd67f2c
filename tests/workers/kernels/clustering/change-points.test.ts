import fc from 'fast-check';
import { expect, it } from 'vitest';
import {
  changePoints,
  labelSegments,
  type ChangePointInput,
} from '#kernels/clustering/change-points.ts';
import { pelt } from '#kernels/clustering/pelt.ts';

/** Expected values from the exact dynamic programme (computed in numpy). */
const x = Float64Array.of(0.1, -0.2, 0.05, 0, 3.1, 2.9, 3.05, 3.0, -1, -1.1, -0.95, -1.05);
const changes = (change: Partial<ChangePointInput> = {}) =>
  changePoints({ columns: [x], sequence: new Uint8Array(12), ...change });
const thirds = [0, 0, 0, 0, 1, 1, 1, 1, 2, 2, 2, 2];

it('finds the segments, the noise and the objective of the worked series', () => {
  const { segmentOf, segments, objective, noise, notes } = changes();
  expect([...segmentOf]).toEqual(thirds);
  expect([segments, notes]).toEqual([3, []]);
  expect(noise[0]).toBeCloseTo(0.209672, 6);
  expect(objective).toBeCloseTo(11.901541, 5);
  // The penalty unless told is 2 ln 12 = 4.969813.
  expect(changes({ penalty: 4.969813 }).objective).toBeCloseTo(objective, 5);
  expect(changes({ penalty: 2 * Math.log(12) }).objective).toBeCloseTo(objective, 12);
  // Differences about zero, not about their median, would give a noise of .157254 (computed).
  const steps = Array.from(x.subarray(1), (value, i) => Math.abs(value - x[i]!)).sort(
    (a, b) => a - b,
  );
  expect(steps[5]! / (0.6744897501960817 * Math.SQRT2)).toBeCloseTo(0.157254, 5);
});

it('has the objectives computed without scaling', () => {
  expect(changes({ scaled: false, penalty: 1 }).objective).toBeCloseTo(2.08625, 9);
  const both = changes({ columns: [x, x.slice().reverse()], scaled: false, penalty: 2 });
  expect(both.objective).toBeCloseTo(4.1725, 9);
  expect([...both.segmentOf]).toEqual(thirds);
});

/** Every split tried, from the definition. */
function exact(points: number[], penalty: number, minLength: number): number {
  const n = points.length;
  if (n < 2 * minLength) return cost(points);
  const best = new Array<number>(n + 1).fill(Infinity);
  best[0] = -penalty;
  for (let t = minLength; t <= n; t++)
    for (let s = 0; s <= t - minLength; s++)
      best[t] = Math.min(best[t]!, best[s]! + cost(points.slice(s, t)) + penalty);
  return best[n]!;
}
function cost(values: number[]): number {
  const mean = values.reduce((a, b) => a + b, 0) / values.length;
  return values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
}

it('equals the exact programme for random series and least lengths', () => {
  const series = fc.array(fc.double({ min: -3, max: 3, noNaN: true }), {
    minLength: 1,
    maxLength: 30,
  });
  fc.assert(
    fc.property(
      series,
      fc.integer({ min: 1, max: 4 }),
      fc.double({ min: 0.05, max: 8, noNaN: true }),
      (values, minLength, penalty) => {
        const { ends, objective } = pelt(
          Float64Array.from(values),
          values.length,
          1,
          penalty,
          minLength,
        );
        expect(objective).toBeCloseTo(exact(values, penalty, minLength), 9);
        const lengths = ends.map((end, i) => end - (ends[i - 1] ?? 0));
        if (values.length >= minLength)
          lengths.forEach((length) => expect(length).toBeGreaterThanOrEqual(minLength));
        expect(lengths.reduce((a, b) => a + b, 0)).toBe(values.length);
      },
    ),
    { numRuns: 300, seed: 7 },
  );
});

it('unit, offset and direction of a column do not matter', () => {
  const moved = changes({ columns: [x.map((value) => 500 - 40 * value)] });
  expect([...moved.segmentOf]).toEqual(thirds);
  expect(moved.objective).toBeCloseTo(changes().objective, 8);
});

it('never joins across a break or a missing row', () => {
  const sequence = [0, 0, 0, 0, 0, 0, 1, 1, 1, 1, 1, 1];
  expect([...changes({ sequence }).segmentOf]).toEqual([0, 0, 0, 0, 1, 1, 2, 2, 3, 3, 3, 3]);
  const holed = x.slice();
  holed[1] = NaN;
  expect([...changes({ columns: [holed] }).segmentOf]).toEqual([
    0, -1, 1, 1, 2, 2, 2, 2, 3, 3, 3, 3,
  ]);
});

it('short and constant series have no change; a constant column is left out and said', () => {
  expect(changes({ columns: [x.slice(0, 3)], sequence: [0, 0, 0] }).segments).toBe(1);
  expect(changes({ columns: [x.slice(0, 1)], sequence: [0] }).segments).toBe(1);
  const flat = changes({ columns: [new Float64Array(12).fill(-0)] });
  expect([flat.segments, flat.objective]).toEqual([1, 0]);
  expect(flat.notes.join()).toContain('no change can be found');
  const one = changes({ columns: [x, new Float64Array(12)] });
  expect([...one.segmentOf]).toEqual(thirds);
  expect(one.notes.join()).toContain('1 of 2 columns');
});

it('labels a segment by the centroid nearest to its mean', () => {
  const { segmentOf } = changes();
  const labels = labelSegments([x], segmentOf, Float64Array.of(3, 0, -1));
  expect([...labels]).toEqual(thirds.map((segment) => [2, 1, 3][segment]));
  expect([...labelSegments([x], segmentOf.fill(-1, 0, 2), Float64Array.of(0))].slice(0, 3)).toEqual(
    [0, 0, 1],
  );
});

it.each<[string, Partial<ChangePointInput>]>([
  ['too-few-parts', { columns: [] }],
  ['shape', { columns: [x.slice(1)] }],
  ['not-finite', { columns: [x.map((v, i) => (i === 2 ? -Infinity : v))] }],
  ['bad-parameter', { minLength: 0 }],
  ['bad-parameter', { penalty: 0 }],
  ['bad-parameter', { penalty: NaN }],
])('refuses %s for %j', (code, change) => {
  expect(() => changes(change)).toThrow(expect.objectContaining({ code }));
  expect(() => labelSegments([x], new Int32Array(12), new Float64Array(0))).toThrow(
    expect.objectContaining({ code: 'shape' }),
  );
});
