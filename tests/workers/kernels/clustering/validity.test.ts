import { describe, expect, it } from 'vitest';
import { adjustedRandIndex, crosstabLabels } from '#kernels/clustering/agreement.ts';
import { silhouette } from '#kernels/clustering/silhouette.ts';
import { groupValidity } from '#kernels/clustering/validity.ts';
import { seededRandom } from '#kernels/random.ts';

const six = [Float64Array.from([0, 0, 1, 5, 5, 6]), Float64Array.from([0, 1, 0, 5, 6, 5])];
const halves = [1, 1, 1, 2, 2, 2];

describe('six points in two halves (computed from the definitions)', () => {
  it('has its silhouette widths', () => {
    const { mean, byLabel, n, sampled } = silhouette(six, halves);
    expect(mean).toBeCloseTo(0.839816, 6);
    expect(byLabel.map((group) => group.mean)).toEqual([
      expect.closeTo((0.867792 + 2 * 0.824933) / 3, 6),
      expect.closeTo((0.849074 + 2 * 0.836083) / 3, 6),
    ]);
    expect([n, sampled]).toEqual([6, false]);
  });

  it('has its other indices, and W + B is the total', () => {
    const found = groupValidity(six, halves);
    expect(found.calinskiHarabasz).toBeCloseTo(112.5, 9);
    expect(found.daviesBouldin).toBeCloseTo(0.18499, 6);
    expect(found.simplifiedSilhouette).toBeCloseTo(0.907679, 6);
    expect(found.between).toBeCloseTo(75, 9);
    expect(found.within + found.between).toBeCloseTo(77.666667, 6);
  });
});

it('gives a lone row silhouette 0', () => {
  const { byLabel } = silhouette([Float64Array.of(0, 1, 9)], [1, 1, 2]);
  expect(byLabel[1]).toEqual({ label: 2, rows: 1, mean: 0 });
});

it('has no silhouette and no indices with one group', () => {
  expect(silhouette(six, [1, 1, 1, 1, 1, 1]).mean).toBeNull();
  expect(groupValidity(six, [4, 4, 4, 4, 4, 4])).toMatchObject({
    calinskiHarabasz: null,
    daviesBouldin: null,
    simplifiedSilhouette: null,
    k: 1,
  });
});

it('stays finite when every row is the same point', () => {
  const same = [new Float64Array(6).fill(2)];
  expect(silhouette(same, halves).mean).toBe(0);
  expect(groupValidity(same, halves).simplifiedSilhouette).toBe(0);
});

it('leaves unassigned and incomplete rows out', () => {
  const columns = six.map((column) => Float64Array.from([...column, 50, NaN]));
  const found = silhouette(columns, [...halves, 0, 2]);
  expect(found).toEqual(silhouette(six, halves));
  expect(groupValidity(columns, [...halves, 0, 2])).toEqual(groupValidity(six, halves));
});

it('a sample of rows comes close to all of them and is reproducible', () => {
  const random = seededRandom(8);
  const labels = Array.from({ length: 2400 }, (_, i) => (i % 3) + 1);
  const columns = [0, 1].map((j) =>
    Float64Array.from(labels, (label) => (j === 0 ? 4 * label : label * label) + random.normal()),
  );
  const all = silhouette(columns, labels);
  const drawn = silhouette(columns, labels, { sampleSize: 600, seed: 4 });
  expect(drawn).toMatchObject({ n: 600, sampled: true });
  expect(Math.abs((drawn.mean ?? 9) - (all.mean ?? 0))).toBeLessThan(0.03);
  expect(silhouette(columns, labels, { sampleSize: 600, seed: 4 })).toEqual(drawn);
});

it.each([
  [[1, 1, 1, 2, 2, 2], [1, 1, 2, 2, 3, 3], 0.242424],
  [[1, 1, 2, 2], [1, 1, 2, 3], 0.571429],
  [[1, 1, 2, 2], [7, 7, 3, 3], 1],
  [[1, 1, 1], [2, 2, 2], 1],
])('adjusted Rand of %j and %j is %d', (a, b, expected) => {
  expect(adjustedRandIndex(a, b)).toBeCloseTo(expected, 6); // worked by hand from the definition
  expect(adjustedRandIndex(b, a)).toBeCloseTo(expected, 6);
});

it('adjusted Rand looks only at rows labelled in both', () => {
  expect(adjustedRandIndex([1, 1, 2, 2, 0, 1], [1, 1, 2, 3, 2, 0])).toBeCloseTo(0.571429, 6);
  expect(adjustedRandIndex([0, 1], [1, 0])).toBeNull();
});

it('cross-tabulates with weights and keeps the margins', () => {
  const table = crosstabLabels([1, 1, 3, 0], [2, 5, 5, 5], Float64Array.of(1, 2, 4, 8));
  expect(table).toEqual({
    rows: [1, 3],
    cols: [2, 5],
    counts: Float64Array.of(1, 2, 0, 4),
    rowTotals: [3, 4],
    colTotals: [1, 6],
    total: 7,
    nUnassigned: 1,
  });
});

it('has no ratio where groups have no spread or one mean', () => {
  const spots = [Float64Array.of(0, 0, 4, 4)];
  expect(groupValidity(spots, [1, 1, 2, 2])).toMatchObject({
    within: 0,
    calinskiHarabasz: null,
    daviesBouldin: 0,
  });
  expect(groupValidity([Float64Array.of(-1, 1, -2, 2)], [1, 1, 2, 2])).toMatchObject({
    calinskiHarabasz: 0,
    daviesBouldin: null,
  });
});

it.each([
  ['shape', () => silhouette(six, [1, 2])],
  ['shape', () => crosstabLabels([1], [1, 2])],
  ['shape', () => crosstabLabels([1], [1], new Float64Array(2))],
  ['bad-parameter', () => groupValidity(six, [1, 1, 1, 2, 2, -1])],
  ['bad-parameter', () => groupValidity(six, [1, 1, 1, 2, 2, NaN])],
  ['too-few-rows', () => silhouette(six, [0, 0, 0, 0, 0, 0])],
  ['not-finite', () => silhouette([Float64Array.of(1, -Infinity)], [1, 2])],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
