import { describe, expect, it } from 'vitest';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';
import { partitionAt } from '#kernels/populations/inflection.ts';
import { mixtureData } from '#kernels/populations/mixture-data.ts';
import { partitionPlot, zoneOf } from '#kernels/populations/partition-plot.ts';
import { proposePartitions } from '#kernels/populations/partition-proposals.ts';

const quantilesOf = (n: number, median: number, sd: number) =>
  Array.from({ length: n }, (_, i) => Math.log(median) + sd * normalQuantile((i + 0.5) / n));
/** 30 % A (median 8, sd .4) and 70 % B (median .5, sd .6). */
const rows = [...quantilesOf(700, 0.5, 0.6), ...quantilesOf(300, 8, 0.4)];
const data = mixtureData(rows);
const partition = partitionAt(data, 0.3);

it('plots each population on its own line where the other is negligible', () => {
  const { upper, lower } = partitionPlot(data, partition, 2000);
  for (const { z, y } of upper.filter(({ y }) => y > Math.log(5)))
    expect(z).toBeCloseTo((y - Math.log(8)) / 0.4, 1);
  for (const { z, y } of lower.filter(({ y }) => y < Math.log(1)))
    expect(z).toBeCloseTo((y - Math.log(0.5)) / 0.6, 1);
});

it('half of the upper population lies above 8: exceedance over .3 is .500004 (computed)', () => {
  const { lower, upper } = partition;
  const exceedance = [lower, upper].reduce(
    (sum, c) => sum + c.share * (1 - normalCdf((Math.log(8) - c.mean) / c.sd)),
    0,
  );
  expect(exceedance / 0.3).toBeCloseTo(0.500004, 5);
});

it('gives the plotted curve back within the misfit', () => {
  const { recombined } = partitionPlot(data, partition, 2000);
  const n = rows.length;
  recombined.forEach(({ z }, i) => {
    expect(Math.abs(normalCdf(z) - (i + 0.5) / n)).toBeLessThanOrEqual(partition.misfit + 1e-12);
  });
});

it('keeps the ends when it thins', () => {
  const whole = partitionPlot(data, partition, 2000).recombined;
  const thin = partitionPlot(data, partition, 10).recombined;
  expect(thin).toHaveLength(10);
  expect([thin[0], thin[9]]).toEqual([whole[0], whole.at(-1)]);
});

it.each([
  [0.5, 'lower'],
  [2.7, 'lower'],
  [2.8, 'upper'],
  [0, 'lower'],
])('grade %d is %s: the threshold is 2.742512 (computed)', (grade, zone) => {
  expect(zoneOf(partition, Math.log(grade))).toBe(zone);
});

it('names an overlap zone where populations overlap', () => {
  const close = mixtureData([...quantilesOf(500, 1, 0.6), ...quantilesOf(500, 2, 0.6)]);
  const found = partitionAt(close, 0.5);
  expect(zoneOf(found, (found.lower99 + found.upper1) / 2)).toBe('overlap');
  expect(zoneOf(found, found.lower99 + 1)).toBe('upper');
  expect(zoneOf(found, found.upper1 - 1)).toBe('lower');
});

it.each([
  ['bad-parameter', () => partitionPlot(data, partition, 1)],
  ['not-finite', () => zoneOf(partition, NaN)],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});

describe('proposed partitions', () => {
  it('find the two populations of the mixture', () => {
    const [best] = proposePartitions(data);
    expect(best?.partition.accepted).toBe(true);
    expect(best?.partition.upper.share).toBeCloseTo(0.3, 1);
    expect(Math.exp(best?.partition.upper.mean ?? NaN)).toBeCloseTo(8, 0);
    expect(Math.exp(best?.partition.lower.mean ?? NaN)).toBeCloseTo(0.5, 1);
  });

  it('come by misfit, upper above lower', () => {
    const three = mixtureData([
      ...quantilesOf(400, 0.1, 0.3),
      ...quantilesOf(400, 1, 0.3),
      ...quantilesOf(200, 10, 0.3),
    ]);
    const found = proposePartitions(three);
    const misfits = found.map(({ partition: { misfit } }) => misfit);
    expect(found.length).toBeGreaterThan(0);
    expect(misfits).toEqual([...misfits].sort((a, b) => a - b));
    for (const { partition: p } of found) expect(p.upper.mean).toBeGreaterThan(p.lower.mean);
  });

  it('refuse a limit of 0 and too few values', () => {
    expect(() => proposePartitions(data, 0)).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
    expect(() => proposePartitions(mixtureData([1, 2, 3]))).toThrow(
      expect.objectContaining({ code: 'too-few-rows' }),
    );
  });
});
