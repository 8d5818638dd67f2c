import { expect, it } from 'vitest';
import { fingerprints } from '#kernels/clustering/fingerprints.ts';
import { seededRandom } from '#kernels/random.ts';

it('is the group median less the median of all labelled rows (worked by hand)', () => {
  const columns = [Float64Array.of(1, 2, 3, 10, 20, 99), Float64Array.of(0, NaN, 4, -1, -3, 99)];
  const found = fingerprints(columns, [1, 1, 1, 2, 2, 0]);
  expect(found.labels).toEqual([1, 2]);
  expect([...found.overall]).toEqual([3, -0.5]);
  expect([...found.values]).toEqual([-1, 2.5, 12, -1.5]);
});

it('weights medians by length when lengths are given', () => {
  const column = Float64Array.of(0, 1, 2, 3, 4);
  const equal = fingerprints([column], [1, 1, 1, 1, 1], new Float64Array(5).fill(2));
  expect(equal.overall[0]).toBe(2);
  expect(
    fingerprints([column], [1, 1, 1, 1, 1], Float64Array.of(1, 1, 1, 1, 40)).overall[0],
  ).toBeGreaterThan(3);
});

it('agrees with sorting on many rows', () => {
  const random = seededRandom(6);
  const column = Float64Array.from({ length: 5001 }, () => Math.round(20 * random.normal()) / 10);
  const labels = Array.from(column, (_, i) => 1 + (i % 2));
  const median = (rows: number[]) => {
    const sorted = [...rows].sort((a, b) => a - b);
    return (
      (sorted[Math.floor((rows.length - 1) / 2)]! + sorted[Math.ceil((rows.length - 1) / 2)]!) / 2
    );
  };
  const { overall, values } = fingerprints([column], labels);
  expect(overall[0]).toBe(median([...column]));
  expect(values[1]).toBeCloseTo(
    median([...column].filter((_, i) => i % 2 === 1)) - overall[0]!,
    12,
  );
});

it('is NaN for a group without a value of the part', () => {
  expect([...fingerprints([Float64Array.of(1, NaN)], [1, 2]).values]).toEqual([0, NaN]);
});

it.each([
  ['too-few-rows', () => fingerprints([Float64Array.of(1)], [0])],
  ['shape', () => fingerprints([Float64Array.of(1, 2)], [1])],
  ['not-finite', () => fingerprints([Float64Array.of(1, Infinity)], [1, 1])],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
