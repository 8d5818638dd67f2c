import { describe, expect, it } from 'vitest';
import { paintRuns, pickedMiddles, pointAtDepth, sectionAxis, sectionPlace, sequenceStop, stretch } from '#src/components/charts/hole-geometry.ts';
import { buildScene, fitExtent, nearestMiddle, scaleBarM, shortNames } from '#src/components/charts/trace-scene.ts';

const points = [
  { depthM: 0, east: 100, north: 200, elevation: 50 },
  { depthM: 100, east: 100, north: 260, elevation: -30 },
];
const intervals = [
  { row: 7, fromM: 0, toM: 10, slot: 1 },
  { row: 8, fromM: 10, toM: 20, slot: 1 },
  { row: 9, fromM: 20, toM: 30, slot: 2 },
  { row: 10, fromM: 40, toM: 50, slot: 2 },
];
const hole = { name: 'TFD-001', points, intervals };

describe('a place on a hole', () => {
  it('is linear between stations and stops at the ends', () => {
    expect(pointAtDepth(points, 50)).toEqual({ depthM: 50, east: 100, north: 230, elevation: 10 });
    expect(pointAtDepth(points, -5)).toMatchObject({ north: 200 });
    expect(pointAtDepth(points, 400)).toMatchObject({ north: 260 });
    expect(() => pointAtDepth([], 5)).toThrow('expected a hole with stations, found none');
  });
  it('has the stations between two depths', () => {
    const three = [points[0], pointAtDepth(points, 50), points[1]].flatMap((point) => point ?? []);
    expect(stretch(three, 20, 80).map(({ depthM }) => depthM)).toEqual([20, 50, 80]);
  });
});

describe('runs', () => {
  it('join neighbours of one colour and keep gaps', () => {
    expect(paintRuns(intervals)).toEqual([
      { key: 'slot-1', fromM: 0, toM: 20 },
      { key: 'slot-2', fromM: 20, toM: 30 },
      { key: 'slot-2', fromM: 40, toM: 50 },
    ]);
  });
  it('are ringed in their middle', () => {
    expect(pickedMiddles(intervals, (row) => row !== 7)).toEqual([20, 45]);
  });
  it('step by value through the sequence', () => {
    expect([0.1, 0.2, 0.9, 99].map((value) => sequenceStop(value, [0.2, 0.4, 0.6, 0.8, 1]))).toEqual([1, 2, 5, 6]);
    expect(sequenceStop(NaN, [1, 2, 3, 4, 5])).toBeNull();
  });
});

describe('a section', () => {
  const section = { east: 100, north: 0, azimuthDeg: 90, halfWidthM: 20 };
  it('measures along its azimuth and to the right of it', () => {
    const { alongM, offM } = sectionPlace({ east: 130, north: -15 }, section);
    expect(alongM).toBeCloseTo(30, 12);
    expect(offM).toBeCloseTo(15, 12);
  });
  it('reads grid coordinates where it runs with the grid', () => {
    expect(sectionAxis(section)).toEqual({ word: ' E', start: 100, sign: 1 });
    expect(sectionAxis({ ...section, azimuthDeg: 180.4 })).toEqual({ word: ' N', start: 0, sign: -1 });
    expect(sectionAxis({ ...section, azimuthDeg: 30 }).word).toBe(' m');
  });
  it('cuts holes at its corridor', () => {
    const scene = buildScene([hole], ({ north, elevation }) => (north <= 230 ? [north, elevation] : null), true);
    const norths = scene.traces.flat().map(([x]) => x);
    expect(Math.max(...norths)).toBeLessThanOrEqual(230);
    expect(Math.max(...norths)).toBeGreaterThan(225);
  });
});

describe('a scene', () => {
  const scene = buildScene([hole], ({ east, north }) => [east, north], false);
  it('finds the interval under the pointer with its hole', () => {
    expect(nearestMiddle(scene, 101, 203, 10)).toEqual({ row: 7, hole: 'TFD-001' });
    expect(nearestMiddle(scene, 160, 203, 10)).toBeNull();
  });
  it('fits both directions at one scale', () => {
    const fit = fitExtent({ low: [0, 0], high: [100, 400] }, { left: 0, top: 0, width: 200, height: 200 });
    expect(fit.scale).toBeCloseTo(0.47, 12);
    expect(fit.x(100) - fit.x(0)).toBeCloseTo(fit.y(0) - fit.y(100), 12);
  });
  it('has a scale bar of a round length that fits the picture', () => {
    for (const perM of [0.003, 0.13, 0.5, 7]) {
      const px = scaleBarM(perM) * perM;
      expect(px).toBeGreaterThanOrEqual(45);
      expect(px).toBeLessThanOrEqual(115);
    }
  });
  it('shortens names only by the start they share', () => {
    expect([...shortNames(['TFD-019', 'TFD-020', 'TFD-021']).values()]).toEqual(['019', '020', '021']);
    expect([...shortNames(['A1', 'B2', 'C3']).values()]).toEqual(['A1', 'B2', 'C3']);
    expect([...shortNames(['TFD-1', 'TFD-2']).values()]).toEqual(['TFD-1', 'TFD-2']);
  });
});
