import { expect, it } from 'vitest';
import { kMeans } from '#kernels/clustering/k-means.ts';
import { allMemberships, ownMembership, withinVariance } from '#kernels/clustering/membership.ts';

const model = (x: number[], centroids: number[], variance: number) => ({
  columns: [Float64Array.from(x)],
  centroids: Float64Array.from(centroids),
  variance,
});

it('is a logistic curve between two centroids (worked by hand)', () => {
  // centroids 0 and 2, variance 1: log-odds of the first are 2 - 2x
  const rows = allMemberships(model([0, 0.5, 1, 3], [0, 2], 1));
  const first = (x: number) => 1 / (1 + Math.exp(2 * x - 2));
  [0, 0.5, 1, 3].forEach((x, i) => {
    expect(rows[2 * i]).toBeCloseTo(first(x), 12);
    expect(rows[2 * i + 1]).toBeCloseTo(1 - first(x), 12);
  });
  const own = ownMembership(model([0, 0.5, 1, 3], [0, 2], 1));
  [0, 0.5, 1, 3].forEach((x, i) =>
    expect(own[i]).toBeCloseTo(Math.max(first(x), 1 - first(x)), 12),
  );
});

it('own probability is the largest of all K, and all sum to 1', () => {
  const x = Array.from({ length: 200 }, (_, i) => Math.sin(i) * 4);
  const input = model(x, [-3, -1, 0.5, 4], 0.7);
  const [own, all] = [ownMembership(input), allMemberships(input)];
  x.forEach((_, i) => {
    const row = [...all.subarray(4 * i, 4 * i + 4)];
    expect(row.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 12);
    expect(own[i]).toBeCloseTo(Math.max(...row), 12);
  });
});

it('stays finite far away and without spread', () => {
  expect([...ownMembership(model([1e9, -1e9], [0, 2], 1e-6))]).toEqual([1, 1]);
  expect([...ownMembership(model([0, 1], [0, 2], 0))]).toEqual([1, 0.5]);
  expect([...allMemberships(model([0, 1], [0, 2], 0))]).toEqual([1, 0, 0.5, 0.5]);
});

it('is NaN where a coordinate is missing and 1 with a single group', () => {
  expect([...ownMembership(model([1, NaN], [0, 2], 1))]).toEqual([0.5, NaN]);
  expect([...ownMembership(model([1, 5], [0], 1))]).toEqual([1, 1]);
});

it('takes its variance from the fit: W / ((n - K) p)', () => {
  const columns = [Float64Array.of(0, 1, 10, 11)];
  const { inertia, k, p, nUsed } = kMeans({ columns, k: 2, seed: 1 });
  expect(withinVariance(inertia, nUsed, k, p)).toBeCloseTo(0.5, 12);
});

it.each([
  ['too-few-rows', () => withinVariance(1, 3, 3, 1)],
  [
    'shape',
    () =>
      ownMembership({
        columns: [Float64Array.of(1), Float64Array.of(1)],
        centroids: Float64Array.of(1),
        variance: 1,
      }),
  ],
  ['shape', () => ownMembership({ columns: [], centroids: Float64Array.of(1), variance: 1 })],
  ['bad-parameter', () => ownMembership(model([1], [0], -1))],
  ['bad-parameter', () => ownMembership(model([1], [0], NaN))],
  ['not-finite', () => ownMembership(model([Infinity], [0], 1))],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
