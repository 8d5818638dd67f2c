import { describe, expect, it } from 'vitest';
import { drawingNote, drawingOf } from '#src/components/charts/scatter-paint.ts';
import { boxPolygon, nearestRow, projector, rowsByRule, rowsInPolygon, scatterPoints } from '#src/components/charts/scatter-points.ts';
import { rayFactor } from '#src/components/charts/scatter-rays.tsx';
import { readLimit } from '#src/components/charts/scatter-rule.tsx';
import { addToTrail } from '#src/components/charts/use-scatter-gesture.ts';

const AREA = { left: 50, top: 10, width: 100, height: 100 };
const REST = { k: 1, x: 0, y: 0 };
const all = () => true;
const linear = { xKind: 'linear', yKind: 'linear', xDomain: [0, 10], yDomain: [0, 10] } as const;
// row 0 at (50, 110), row 1 at (100, 60), row 2 at (150, 10) on the screen; row 3 has no y
const points = scatterPoints(Float64Array.of(0, 5, 10, 4), Float64Array.of(0, 5, 10, NaN), linear);

describe('points', () => {
  it('leave out rows without a value, and say how many', () => {
    expect(Array.from(points.rows)).toEqual([0, 1, 2]);
    expect(points.leftOut).toBe(1);
  });
  it('lie evenly by logarithm on a log axis, without zero', () => {
    const logged = scatterPoints(Float64Array.of(0, 1, 10, 100), Float64Array.of(1, 1, 2, 3), { ...linear, xKind: 'log', xDomain: [1, 100] });
    expect(Array.from(logged.rows)).toEqual([1, 2, 3]);
    expect(Array.from(logged.u, (u) => Math.round(u * 1e9) / 1e9)).toEqual([0, 0.5, 1]);
  });
  it('may be none at all', () => {
    const none = scatterPoints(Float64Array.of(NaN), Float64Array.of(1), linear);
    expect(nearestRow(none, projector(AREA, REST), 60, 60, 12, all)).toBeNull();
    expect(rowsInPolygon(none, projector(AREA, REST), boxPolygon([0, 0], [200, 200]), all)).toEqual([]);
  });
});

describe('the pointer', () => {
  const view = projector(AREA, REST);
  it('finds the nearest point within its reach', () => {
    expect(nearestRow(points, view, 106, 66, 12, all)).toBe(1);
    expect(nearestRow(points, view, 110, 70, 12, all)).toBeNull();
    expect(nearestRow(points, view, 52, 108, 12, all)).toBe(0);
  });
  it('passes over hidden points', () => {
    expect(nearestRow(points, view, 100, 60, 12, (row) => row !== 1)).toBeNull();
  });
  it('reaches as far on the screen under a zoom', () => {
    const near = projector(AREA, { k: 4, x: -150, y: -150 }); // row 1 stays at (100, 60)
    expect(near.x(0.5)).toBe(100);
    expect(nearestRow(points, near, 111, 60, 12, all)).toBe(1);
    expect(nearestRow(points, near, 113, 60, 12, all)).toBeNull();
  });
});

describe('choosing', () => {
  const view = projector(AREA, REST);
  it('takes what a box holds, either way round', () => {
    expect(rowsInPolygon(points, view, boxPolygon([40, 50], [110, 120]), all)).toEqual([0, 1]);
    expect(rowsInPolygon(points, view, boxPolygon([110, 120], [40, 50]), all)).toEqual([0, 1]);
  });
  it('takes what a lasso holds, not what its bounding box does', () => {
    const triangle: [number, number][] = [[40, 120], [160, 120], [40, 70]];
    expect(rowsInPolygon(points, view, triangle, all)).toEqual([0]);
  });
  it('takes rows by typed limits, ends included, open where nothing is typed', () => {
    const [x, y, category] = [Float64Array.of(0, 5, 10, 4), Float64Array.of(0, 5, 10, NaN), Float64Array.of(0, 1, 1, 1)];
    expect(rowsByRule(x, y, category, { x: [5, null], y: [null, null], category: null })).toEqual([1, 2]);
    expect(rowsByRule(x, y, category, { x: [null, null], y: [null, 5], category: 1 })).toEqual([1]);
    expect(rowsByRule(x, y, category, { x: [null, 5], y: [null, null], category: null })).toEqual([0, 1]);
  });
  it('reads limits with a comma or a true minus, and knows what is no number', () => {
    expect([readLimit('0,5'), readLimit('\u22122'), readLimit('  '), readLimit('high')]).toEqual([0.5, -2, null, undefined]);
  });
  it('thins the trail of a lasso', () => {
    expect(addToTrail([[0, 0]], [1, 1])).toEqual([[0, 0]]);
    expect(addToTrail([[0, 0]], [3, 1])).toEqual([[0, 0], [3, 1]]);
  });
});

describe('what is drawn', () => {
  it('is a mark each up to 10,000 points, then dots with one mark in so many, and says so', () => {
    expect(drawingOf(10_000)).toEqual({ dots: false, every: 1 });
    expect(drawingOf(200_000)).toEqual({ dots: true, every: 50 });
    expect(drawingNote(10_000)).toBeNull();
    expect(drawingNote(200_000)).toBe('every point a dot, 1 in 50 a mark');
  });
  it('scales rays by one factor so that all stay inside', () => {
    const reach = { xDomain: [-10, 10], yDomain: [-5, 5] } as const;
    const rays = [{ label: 'Cu', x: 1, y: 0 }, { label: 'K', x: 0.2, y: -2 }];
    expect(rayFactor(rays, reach)).toBeCloseTo(0.88 * 2.5, 12);
  });
});
