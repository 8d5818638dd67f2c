import { describe, expect, it } from 'vitest';
import { tangentOf } from '#kernels/geometry/directions.ts';
import { blindGrid, blindZone } from '#kernels/orientation/blind-zone.ts';
import {
  DEFAULT_LIMITS,
  filterMeasurements,
  lineConfidence,
  type CoreMeasurement,
} from '#kernels/orientation/measurement-filter.ts';

const holes = (...directions: [azimuth: number, dip: number][]) =>
  Float64Array.from(directions.flatMap(([azimuth, dip]) => tangentOf({ azimuth, dip })));

describe('blind zone', () => {
  it('of holes of one direction is sin alpha of all orientations (area of a spherical zone)', () => {
    for (const alpha of [10, 15, 40]) {
      const { share } = blindZone(holes([90, -60], [90, -60]), alpha);
      expect(Math.abs(share - Math.sin((alpha * Math.PI) / 180))).toBeLessThan(0.005);
    }
  });

  it('shrinks to where two bands cross', () => {
    const one = blindZone(holes([90, -60])).share;
    const two = blindZone(holes([90, -60], [270, -60])).share;
    expect(two).toBeGreaterThan(0);
    expect(two).toBeLessThan(one / 3);
    expect(blindZone(holes([0, 0], [90, 0], [0, -90])).share).toBe(0);
  });

  it('reports the spread of the hole directions', () => {
    const { holes: tensor } = blindZone(holes([90, -60], [90, -60]));
    expect(tensor.eigenvalues[0]).toBeCloseTo(1, 12);
  });

  it('shades the rim for vertical holes: vertical planes have level poles', () => {
    const { size, values } = blindGrid(holes([0, -90]), 'equal-area', { size: 21 });
    expect(size).toBe(21);
    expect(values[10 * 21 + 20]).toBe(1);
    expect(values[10 * 21 + 10]).toBe(0);
    expect(values[0]).toBeNaN();
  });

  it('refuses no holes, angles and grids that are none', () => {
    expect(() => blindZone(new Float64Array(0))).toThrow(/found none/);
    expect(() => blindZone(holes([0, -60]), 0)).toThrow(/least alpha in \(0, 90\), found 0/);
    expect(() => blindGrid(holes([0, -60]), 'equal-area', { size: 2 })).toThrow(/3 or more/);
  });
});

describe('filter of measurements', () => {
  const good: CoreMeasurement = { alphaDeg: 10, holeDip: -85, confidence: 'moderate' };

  it('keeps the limits themselves and names the first reason of what it leaves out', () => {
    const rows = [
      good,
      { ...good, alphaDeg: 9.9, holeDip: -89 },
      { ...good, holeDip: -85.1, confidence: 'poor' },
      { ...good, confidence: 'poor' },
      { ...good, alphaDeg: NaN },
    ];
    const { kept, leftOut } = filterMeasurements(rows);
    expect([...kept]).toEqual([0]);
    expect(leftOut).toEqual([
      { row: 1, reason: 'low-alpha' },
      { row: 2, reason: 'steep-hole' },
      { row: 3, reason: 'low-confidence' },
      { row: 4, reason: 'no-angle' },
    ]);
  });

  it('takes other limits', () => {
    const limits = { ...DEFAULT_LIMITS, confidences: ['good'] };
    expect(filterMeasurements([good], limits).kept).toHaveLength(0);
    expect(filterMeasurements([]).leftOut).toEqual([]);
  });
});

describe('confidence of an orientation line', () => {
  it.each([
    [0, 'good'],
    [10, 'good'],
    [-10, 'good'],
    [355, 'good'],
    [10.1, 'moderate'],
    [-20, 'moderate'],
    [20.1, 'poor'],
    [180, 'poor'],
    [null, 'none'],
    [NaN, 'none'],
  ] as const)('lock angle %s is %s', (angle, confidence) => {
    expect(lineConfidence(angle)).toBe(confidence);
  });
});
