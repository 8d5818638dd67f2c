import { describe, expect, it } from 'vitest';
import { normalQuantile } from '#kernels/normal.ts';
import { logHistogram } from '#kernels/populations/log-histogram.ts';
import { mixtureData } from '#kernels/populations/mixture-data.ts';
import {
  normalScores,
  plottingPositions,
  weightedPlottingPositions,
} from '#kernels/populations/plotting-positions.ts';
import { probabilityPlot } from '#kernels/populations/probability-plot.ts';
import { seededRandom } from '#kernels/random.ts';

describe('plotting positions of five values (computed)', () => {
  it.each([
    ['hazen', [0.1, 0.3, 0.5, 0.7, 0.9], [-1.281552, -0.524401, 0]],
    ['weibull', [1 / 6, 2 / 6, 3 / 6, 4 / 6, 5 / 6], [-0.967422, -0.430727, 0]],
    ['blom', [0.119048, 0.309524, 0.5, 0.690476, 0.880952], [-1.179761, -0.497201, 0]],
  ] as const)('%s', (rule, positions, scores) => {
    plottingPositions(5, rule).forEach((p, i) => expect(p).toBeCloseTo(positions[i] ?? NaN, 6));
    scores.forEach((z, i) => expect(normalScores(5, rule)[i]).toBeCloseTo(z, 6));
  });

  it('weighted: 1, 2, 1, .5, .5', () => {
    expect(
      [...weightedPlottingPositions([1, 2, 1, 0.5, 0.5])].map((p) => Number(p.toFixed(12))),
    ).toEqual([0.1, 0.4, 0.7, 0.85, 0.95]);
  });
});

describe('log-probability plot', () => {
  it('puts ties at the middle of their stretch', () => {
    const { z, y, drawnOf } = probabilityPlot(mixtureData([0, 1, 1, 1, 2]));
    expect([...y]).toEqual([0, 1, 2]);
    expect(drawnOf).toBe(3);
    [0.1, 0.5, 0.9].forEach((p, i) => expect(z[i]).toBeCloseTo(normalQuantile(p), 12));
  });

  it('starts above the share below detection', () => {
    const { z } = probabilityPlot(mixtureData([1, 2, 3], [0, 0]));
    [0.5, 0.7, 0.9].forEach((p, i) => expect(z[i]).toBeCloseTo(normalQuantile(p), 12));
  });

  it('keeps both tails whole when it thins', () => {
    const random = seededRandom(2);
    const values = Float64Array.from({ length: 20_000 }, () => random.normal());
    const full = probabilityPlot(mixtureData(values), 50_000);
    const thin = probabilityPlot(mixtureData(values), 400);
    expect(thin.z.length).toBeLessThanOrEqual(400);
    expect(thin.z.length).toBeGreaterThan(300);
    expect(thin.drawnOf).toBe(20_000);
    expect([...thin.y.subarray(0, 66)]).toEqual([...full.y.subarray(0, 66)]);
    expect([...thin.y.subarray(-66)]).toEqual([...full.y.subarray(-66)]);
    const gaps = Array.from(thin.z, (z, i) => (i === 0 ? 0 : z - (thin.z[i - 1] ?? NaN)));
    expect(Math.max(...gaps)).toBeLessThan(0.5);
  });
});

describe('histogram of ln grade', () => {
  it('has bins of about 2 IQR / n^(1/3) and holds every row', () => {
    const random = seededRandom(9);
    const data = mixtureData(Float64Array.from({ length: 1000 }, () => random.normal()));
    const { edges, counts } = logHistogram(data);
    const width = (edges[1] ?? NaN) - (edges[0] ?? NaN);
    expect(width).toBeGreaterThan(0.2);
    expect(width).toBeLessThanOrEqual((2 * 1.5) / 10);
    expect(counts.reduce((a, b) => a + b, 0)).toBeCloseTo(1000, 9);
    expect(edges).toHaveLength(counts.length + 1);
  });

  it('holds one bin for one value, ten for a spike with outliers', () => {
    expect([...logHistogram(mixtureData([2, 2, 2])).counts]).toEqual([3]);
    const spiked = logHistogram(mixtureData([...new Array<number>(50).fill(1), 0, 2]));
    expect(spiked.counts).toHaveLength(10);
  });
});

it.each([
  ['too-few-rows', () => plottingPositions(0)],
  ['too-few-rows', () => weightedPlottingPositions([])],
  ['not-positive', () => weightedPlottingPositions([1, 0])],
  ['not-positive', () => weightedPlottingPositions([1, NaN])],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
