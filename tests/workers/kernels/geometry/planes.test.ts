import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { directionOf, gridAzimuth, tangentOf, wrapAzimuth } from '#kernels/geometry/directions.ts';
import {
  lineOf,
  planeNormal,
  planeOf,
  planeOfPole,
  poleOf,
  strikeOf,
  upwardNormal,
} from '#kernels/geometry/planes.ts';

describe('planes', () => {
  it('gives plane 60→090 the pole 30→270 and normal (.866025, 0, .5) (computed: python)', () => {
    expect(poleOf({ dip: 60, dipDirection: 90 })).toEqual({ trend: 270, plunge: 30 });
    planeNormal(60, 90).forEach((x, k) => expect(x).toBeCloseTo([0.866025, 0, 0.5][k]!, 6));
  });

  it('turns a vertical plane to a dip direction in [0, 180), whatever the sense of its normal', () => {
    for (const direction of [0, 45, 90, 179, 180, 225, 270, 359]) {
      const { dip, dipDirection } = planeOf(planeNormal(90, direction));
      expect(dip).toBe(90);
      expect(dipDirection).toBeCloseTo(direction % 180, 9);
    }
    expect(upwardNormal([-1, 0, 1e-12])).toEqual([1, -0, 0]);
    expect(planeOf([0, -5, 0])).toEqual({ dip: 90, dipDirection: 0 });
  });

  it('knows no dip direction for a flat plane', () => {
    expect(planeOf([0, 0, -2])).toEqual({ dip: 0, dipDirection: null });
    expect(planeNormal(0, null)).toEqual([0, 0, 1]);
    expect(strikeOf({ dip: 0, dipDirection: null })).toBeNull();
    expect(poleOf({ dip: 0, dipDirection: null })).toEqual({ trend: 0, plunge: 90 });
  });

  it('returns from plane to normal to plane, and from plane to pole to plane', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 89.99, noNaN: true }),
        fc.double({ min: 0, max: 359.99, noNaN: true }),
        (dip, dipDirection) => {
          for (const back of [
            planeOf(planeNormal(dip, dipDirection)),
            planeOfPole(poleOf({ dip, dipDirection })),
          ]) {
            expect(back.dip).toBeCloseTo(dip, 8);
            const difference = Math.abs((back.dipDirection ?? NaN) - dipDirection);
            expect(Math.min(difference, 360 - difference)).toBeLessThan(1e-6);
          }
        },
      ),
    );
  });

  it.each([
    [() => planeNormal(91, 0)],
    [() => planeNormal(30, -1)],
    [() => planeNormal(30, null)],
    [() => planeNormal(NaN, 0)],
    [() => upwardNormal([0, 0, 0])],
    [() => upwardNormal([NaN, 0, 1])],
    [() => poleOf({ dip: 10, dipDirection: null })],
    [() => planeOfPole({ trend: 0, plunge: 95 })],
  ])('refuses what is no plane: %s', (call) => {
    expect(call).toThrow(expect.objectContaining({ code: 'bad-parameter' }));
  });
});

describe('directions', () => {
  it('points the tangent down the hole (by hand)', () => {
    const [east, north, up] = tangentOf({ azimuth: 90, dip: -30 });
    expect(east).toBeCloseTo(Math.sqrt(3) / 2, 12);
    expect(north).toBeCloseTo(0, 12);
    expect(up).toBeCloseTo(-0.5, 12);
  });

  it('knows no azimuth for a vertical hole and reads 360 as 0', () => {
    expect(directionOf(tangentOf({ azimuth: 123, dip: -90 }))).toEqual({ azimuth: null, dip: -90 });
    expect(directionOf(tangentOf({ azimuth: 360, dip: -45 })).azimuth).toBeCloseTo(0, 9);
    expect([wrapAzimuth(360), wrapAzimuth(-10), wrapAzimuth(725), wrapAzimuth(-1e-20)]).toEqual([
      0, 350, 5, 0,
    ]);
  });

  it('adds declination and takes convergence off (by hand)', () => {
    expect(gridAzimuth(355, 10, -1.5)).toBe(6.5);
  });

  it('points a line down', () => {
    expect(lineOf([0, 1, 1])).toEqual({ trend: 180, plunge: expect.closeTo(45, 9) });
    expect(lineOf([0, 0, 1])).toEqual({ trend: 0, plunge: 90 });
  });
});
