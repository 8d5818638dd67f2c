import { expect, it } from 'vitest';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';
import { partitionAt, proposeInflections } from '#kernels/populations/inflection.ts';
import { mixtureData } from '#kernels/populations/mixture-data.ts';

const quantilesOf = (n: number, median: number, sd: number) =>
  Array.from({ length: n }, (_, i) => Math.log(median) + sd * normalQuantile((i + 0.5) / n));
/** 30 % A (median 8, sd .4) and 70 % B (median .5, sd .6). */
const data = mixtureData([...quantilesOf(700, 0.5, 0.6), ...quantilesOf(300, 8, 0.4)]);

it.each([
  [0.5, 0.35],
  [1, 0.613204],
  [2, 0.692778],
  [4, 0.712283],
  [8, 0.849999],
  [16, 0.987532],
])('the mixture recombined from its parts has F(%d) = %d (computed)', (grade, expected) => {
  const { lower, upper } = partitionAt(data, 0.3);
  const at = (c: typeof lower) => c.share * normalCdf((Math.log(grade) - c.mean) / c.sd);
  expect(at(lower) + at(upper)).toBeCloseTo(expected, 5);
});

it('proposes the inflection at the share of the upper population', () => {
  const [first] = proposeInflections(data);
  expect(first?.upperShare).toBeCloseTo(0.3, 1);
  expect(Math.exp(first?.y ?? NaN)).toBeGreaterThan(2);
  expect(Math.exp(first?.y ?? NaN)).toBeLessThan(4);
});

it('proposes nothing sharp for one lognormal', () => {
  const found = proposeInflections(mixtureData(quantilesOf(1000, 2, 0.7)));
  for (const { prominence } of found) expect(prominence).toBeLessThan(0.05);
});

it('reads both populations, their limits and the threshold off the plot (computed)', () => {
  const found = partitionAt(data, 0.3);
  expect(found.accepted).toBe(true);
  expect(found.misfit).toBeLessThan(0.001);
  expect(Math.exp(found.upper1)).toBeCloseTo(3.154728, 5);
  expect(Math.exp(found.lower99)).toBeCloseTo(2.01912, 5);
  expect(Math.exp(found.threshold ?? NaN)).toBeCloseTo(2.742512, 5);
});

it('does not accept a share that is wrong', () => {
  expect(partitionAt(data, 0.5)).toMatchObject({ accepted: false });
});

it('names no threshold where the populations overlap', () => {
  const close = mixtureData([...quantilesOf(500, 1, 0.6), ...quantilesOf(500, 2, 0.6)]);
  expect(partitionAt(close, 0.5).threshold).toBeNull();
});

it.each([
  ['bad-parameter', () => partitionAt(data, 0)],
  ['bad-parameter', () => partitionAt(data, NaN)],
  ['too-few-rows', () => partitionAt(mixtureData([1, 2]), 0.5)],
  ['too-few-rows', () => proposeInflections(mixtureData([1, 2, 3]))],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
