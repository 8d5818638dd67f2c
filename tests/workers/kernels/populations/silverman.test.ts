import { expect, it } from 'vitest';
import { countModes, criticalBandwidth, silvermanTest } from '#kernels/populations/silverman.ts';
import { seededRandom } from '#kernels/random.ts';

it('two points one apart from 0 merge at bandwidth 1 (theory)', () => {
  expect(criticalBandwidth([-1, 1], 1)).toBeCloseTo(1, 3);
});

it('critical bandwidths of eight values (computed, grid 4096)', () => {
  const values = [1, 2, 3, 4, 11, 12, 13, 14];
  expect(Math.abs(criticalBandwidth(values, 1) - 4.867028)).toBeLessThan(1e-3);
  expect(Math.abs(criticalBandwidth(values, 2) - 0.643444)).toBeLessThan(1e-3);
});

it('counts the modes that are there', () => {
  expect(countModes(Float64Array.of(0, 10, 20), 1, 600)).toBe(3);
  expect(countModes(Float64Array.of(0, 10, 20), 30, 600)).toBe(1);
});

it('tells two clusters from one mode', () => {
  const random = seededRandom(2);
  const two = Float64Array.from({ length: 120 }, (_, i) => (i % 2) * 5 + random.normal());
  const one = Float64Array.from({ length: 120 }, () => random.normal());
  expect(silvermanTest(two, 1, 1, 100).p).toBeLessThan(0.05);
  expect(silvermanTest(two, 2, 1, 100).p).toBeGreaterThan(0.1);
  expect(silvermanTest(one, 1, 1, 100).p).toBeGreaterThan(0.1);
  expect(silvermanTest(one, 1, 1, 100)).toEqual(silvermanTest(one, 1, 1, 100));
});

it.each([
  ['constant', () => criticalBandwidth([1, 1], 1)],
  ['bad-parameter', () => criticalBandwidth([1, 2], 0)],
  ['not-finite', () => criticalBandwidth([1, NaN], 1)],
  ['too-few-rows', () => silvermanTest([1, 2], 1, 1)],
  ['too-many-rows', () => silvermanTest(new Float64Array(5001), 1, 1)],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
