import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { countingCircle, densityGrid } from '#kernels/orientation/density-grid.ts';
import { greatCircle, lineAtPoint, projectLines } from '#kernels/orientation/projection.ts';
import { strikeRose } from '#kernels/orientation/rose.ts';
import { lines } from './directions.ts';

const nets = ['equal-area', 'equal-angle'] as const;

describe('projection', () => {
  it.each([
    // Geometry of the two nets, computed from r = sqrt(2) sin(c/2) and r = tan(c/2).
    [90, 0, [1, 0], [1, 0]],
    [90, 30, [0.707107, 0], [0.57735, 0]],
    [45, 60, [0.258819, 0.258819], [0.189469, 0.189469]],
    [123, 90, [0, 0], [0, 0]],
  ] as const)('line %i/%i', (trend, plunge, area, angle) => {
    for (const [net, [x, y]] of [
      ['equal-area', area],
      ['equal-angle', angle],
    ] as const) {
      const point = projectLines(lines([trend, plunge]), net);
      expect(point[0]).toBeCloseTo(x, 6);
      expect(point[1]).toBeCloseTo(y, 6);
    }
  });

  it('shows the lower end of an upward pole', () => {
    const up = projectLines(lines([90, -30]), 'equal-area');
    const down = projectLines(lines([270, 30]), 'equal-area');
    up.forEach((value, i) => expect(value).toBeCloseTo(down[i]!, 12));
  });

  it('finds the line back from its point', () => {
    const line = fc.tuple(
      fc.double({ min: 0, max: 360, noNaN: true }),
      fc.double({ min: 0.01, max: 90, noNaN: true }),
    );
    fc.assert(
      fc.property(line, fc.constantFrom(...nets), (given, net) => {
        const vector = lines(given);
        const [x = NaN, y = NaN] = projectLines(vector, net);
        lineAtPoint(x, y, net).forEach((value, i) => expect(value).toBeCloseTo(vector[i]!, 9));
      }),
    );
    expect(() => lineAtPoint(0.9, 0.9, 'equal-area')).toThrow('expected a point in the circle');
  });

  it.each(nets)('draws a plane as lines all square to its pole, ending on the rim (%s)', (net) => {
    const circle = greatCircle({ dip: 60, dipDirection: 90 }, net, 40);
    const pole = lines([270, 30]);
    for (let i = 0; i <= 40; i++) {
      const line = lineAtPoint(circle[2 * i]!, circle[2 * i + 1]!, net);
      expect(line.reduce((sum, value, k) => sum + value * pole[k]!, 0)).toBeCloseTo(0, 9);
    }
    const [x = 0, y = 0] = circle;
    expect(x).toBeCloseTo(0, 9);
    expect(y).toBeCloseTo(1, 9);
    expect(circle[81]).toBeCloseTo(-1, 9);
    expect(circle[40]).toBeCloseTo(projectLines(lines([90, 60]), net)[0]!, 9);
  });

  it('draws a vertical plane as a diameter and a horizontal one as the rim', () => {
    const vertical = greatCircle({ dip: 90, dipDirection: 0 }, 'equal-area', 10);
    for (let i = 0; i <= 10; i++) expect(vertical[2 * i + 1]).toBeCloseTo(0, 9);
    const level = greatCircle({ dip: 0, dipDirection: null }, 'equal-angle', 10);
    for (let i = 0; i <= 10; i++)
      expect(Math.hypot(level[2 * i]!, level[2 * i + 1]!)).toBeCloseTo(1, 9);
    expect(level[10]).toBeCloseTo(-level[0]!, 9);
    expect(() => greatCircle({ dip: 95, dipDirection: 0 }, 'equal-area')).toThrow(
      'expected a dip of a plane in [0, 90], found 95',
    );
    expect(() => greatCircle({ dip: 5, dipDirection: 0 }, 'equal-area', 1)).toThrow(
      'expected 2 or more steps, found 1',
    );
  });
});

describe('density', () => {
  it.each([
    // Kamb (1959) with k = 3, computed: area k^2 / (n + k^2).
    [50, 0.152542, 32.0638, 7.627119, 2.542373],
    [100, 0.082569, 23.4466, undefined, undefined],
  ])('counting circle of %i axes', (n, area, angle, expected, sd) => {
    const circle = countingCircle(n);
    expect(circle.area).toBeCloseTo(area, 6);
    expect(circle.halfAngleDeg).toBeCloseTo(angle, 4);
    if (expected !== undefined) expect(circle.expected).toBeCloseTo(expected, 6);
    if (sd !== undefined) expect(circle.sd).toBeCloseTo(sd, 6);
  });

  it('peaks at the axis of a cluster and shows a level one on both sides of the rim', () => {
    const cluster = lines(...Array.from({ length: 20 }, (): [number, number] => [90, 0]));
    const shares: number[] = [];
    const grid = densityGrid(cluster, 'equal-area', {
      size: 21,
      onProgress: (share) => shares.push(share),
    });
    const peak = (20 - grid.expected) / grid.sd;
    expect(grid.values[10 * 21 + 20]).toBeCloseTo(peak, 12);
    expect(grid.values[10 * 21]).toBeCloseTo(peak, 12);
    expect(grid.values[10 * 21 + 10]).toBeCloseTo(-grid.expected / grid.sd, 12);
    expect(grid.values[0]).toBeNaN();
    expect(shares.at(-1)).toBe(1);
  });

  it('does not mind which end of an axis is given', () => {
    const axes = lines([10, 20], [200, 40], [330, 70]);
    const turned = axes.map((value) => -value);
    expect(densityGrid(turned, 'equal-angle').values).toEqual(
      densityGrid(axes, 'equal-angle').values,
    );
  });

  it('refuses empty data and bad grids', () => {
    expect(() => countingCircle(0)).toThrow('expected axes to count, found none');
    expect(() => countingCircle(5, 0)).toThrow('expected k > 0, found 0');
    expect(() => densityGrid(lines([1, 1]), 'equal-area', { size: 2 })).toThrow(
      'expected 3 or more grid nodes',
    );
  });
});

describe('rose', () => {
  it('counts strikes by petal with comparable areas', () => {
    const rose = strikeRose(Float64Array.of(5, 185, -175, 365, 90, 179.9));
    expect(rose).toHaveLength(18);
    expect(rose[0]).toEqual({ fromDeg: 0, toDeg: 10, count: 4, radius: 1 });
    expect(rose[9]).toMatchObject({ count: 1, radius: 0.5 });
    expect(rose[17]?.count).toBe(1);
    expect(strikeRose(Float64Array.of(-1e-20))[0]?.count).toBe(1);
  });

  it('is empty without strikes and refuses bad widths and gaps', () => {
    expect(strikeRose(new Float64Array(0)).every(({ radius }) => radius === 0)).toBe(true);
    expect(() => strikeRose(Float64Array.of(1), 7)).toThrow(
      'expected a divisor of 180 degrees, found 7',
    );
    expect(() => strikeRose(Float64Array.of(NaN))).toThrow('found NaN in row 0');
  });
});
