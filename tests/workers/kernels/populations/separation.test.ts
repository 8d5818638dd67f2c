import { expect, it } from 'vitest';
import { clearestCut, valleyOf } from '#kernels/populations/separation.ts';

const at = (mean: number, share = 0.5, sd = 1) => ({ share, mean, sd });

it('Ashman D of two unit normals is their distance (definition)', () => {
  expect(clearestCut([at(0), at(3)])?.ashmanD).toBeCloseTo(3, 12);
  expect(clearestCut([at(0, 0.5, 1), at(3, 0.5, 2)])?.ashmanD).toBeCloseTo(3 / Math.sqrt(2.5), 12);
});

it('two equal normals have a valley beyond two standard deviations, none at two (theory)', () => {
  expect(valleyOf([at(0), at(2)])).toBeCloseTo(1, 6);
  expect(valleyOf([at(0), at(2.2)])).toBeLessThan(1);
  expect(valleyOf([at(0), at(4)])).toBeCloseTo((2 * Math.exp(-2)) / (1 + Math.exp(-8)), 3);
  expect(valleyOf([at(0), at(12)])).toBeLessThan(1e-6);
});

it('cuts three components where they stand clearest, each side taken as one', () => {
  const cut = clearestCut([at(0, 0.4, 0.5), at(1, 0.3, 0.5), at(5, 0.3, 0.5)]);
  expect(cut).toMatchObject({ lowerCount: 2 });
  expect(cut?.lowerShare).toBeCloseTo(0.7, 12);
  expect(cut?.lowerMedian).toBeCloseTo(Math.exp(3 / 7), 12);
  expect(cut?.upperMedian).toBeCloseTo(Math.exp(5), 9);
});

it('passes over cuts that leave a side under 5 %', () => {
  expect(clearestCut([at(0, 0.96), at(9, 0.04)])).toBeNull();
  expect(clearestCut([at(0, 0.96), at(9, 0.04)], 0.03)?.upperShare).toBe(0.04);
  expect(clearestCut([at(0, 1)])).toBeNull();
});
