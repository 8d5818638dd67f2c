import { describe, expect, it } from 'vitest';
import { histogramBins } from '#src/components/charts/histogram-bins.ts';
import { mixtureCdf, mixtureDensity } from '#src/components/charts/mixture.ts';
import { percentToZ, plottingPositions, probabilityTicks, thinByPlace } from '#src/components/charts/probability-scale.ts';

describe('the probability axis', () => {
  // Quantiles of the standard normal, NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.6.7.1 (from memory)
  it.each([
    [50, 0],
    [90, 1.282],
    [95, 1.645],
    [99, 2.326],
    [0.1, -3.09],
  ])('puts %f %% at the normal score %f', (percent, z) => {
    expect(percentToZ(percent)).toBeCloseTo(z, 3);
  });
  it('labels seven marks at most, in rising order, 50 among them', () => {
    const labels = probabilityTicks([-3.4, 3.4], 430).map(({ label }) => label);
    expect(labels).toEqual(['0.1', '1', '10', '50', '90', '99', '99.9']);
    expect(probabilityTicks([-3.4, 3.4], 90).length).toBeLessThan(7);
  });
});

describe('plotting positions', () => {
  it('are the share of length below and half of the own', () => {
    // lengths 1, 2, 1 of values 5, 1, 9: shares (0 + 1) / 4, (2 + 0.5) / 4, (3 + 0.5) / 4 by hand
    const placed = plottingPositions([5, 1, 9], [1, 2, 1]);
    expect(placed.map(({ index }) => index)).toEqual([1, 0, 2]);
    [0.25, 0.625, 0.875].forEach((share, i) => expect(placed[i]?.z).toBeCloseTo(percentToZ(share * 100), 12));
  });
  it('leave room below for what is censored, and take no value at or below zero', () => {
    const [first] = plottingPositions([2, 3, 0, -1, NaN], undefined, 0.5);
    expect(first?.z).toBeCloseTo(percentToZ(62.5), 12);
  });
});

it('thins crowded places and keeps those apart', () => {
  expect(thinByPlace([0, 0.5, 1, 5], (x) => [x, 0], 1)).toEqual([0, 1, 5]);
});

describe('histogram', () => {
  it('shares out the weight in equal steps of the logarithm', () => {
    const bins = histogramBins([1, 10, 100], [1, 1, 2], 'log', 2);
    expect(bins.map(({ share }) => share)).toEqual([0.25, 0.75]);
    expect(bins[0]?.to).toBeCloseTo(10, 10);
  });
  it('keeps one bin for one value and none for no value', () => {
    expect(histogramBins([3, 3], undefined, 'linear')).toEqual([{ from: 2.5, to: 3.5, share: 1 }]);
    expect(histogramBins([NaN, 0], undefined, 'log')).toEqual([]);
  });
});

describe('mixture', () => {
  const parts = [{ label: 'A', share: 0.35, mean: -2, sd: 0.7 }, { label: 'B', share: 0.65, mean: 0.4, sd: 0.5 }];
  it('has a density that is the slope of its distribution', () => {
    const step = 1e-5;
    const slope = (mixtureCdf(0.1 + step, parts) - mixtureCdf(0.1 - step, parts)) / (2 * step);
    expect(mixtureDensity(0.1, parts)).toBeCloseTo(slope, 7);
  });
  it('reaches one', () => {
    expect(mixtureCdf(10, parts)).toBeCloseTo(1, 12);
  });
});
