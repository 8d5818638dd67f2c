import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { tangentOf } from '#kernels/geometry/directions.ts';
import {
  CAPPED_ALPHA,
  fractureMeasures,
  samplingWeight,
} from '#kernels/geometry/fracture-measures.ts';
import { coreFromPlane } from '#kernels/geometry/oriented-core.ts';
import { planeNormal } from '#kernels/geometry/planes.ts';
import { thicknessOnCore, trueThickness } from '#kernels/geometry/true-thickness.ts';

const thickness = (azimuth: number, dip: number, planeDip: number, dipDirection: number) =>
  trueThickness(10, tangentOf({ azimuth, dip }), planeNormal(planeDip, dipDirection));

describe('true thickness', () => {
  // Computed in python from L |t . n|, L = 10 m.
  it.each([
    [90, -60, 60, 270, 8.660254],
    [90, -60, 30, 270, 10],
    [135, -60, 70, 250, 4.947638],
  ])('hole %d/%d, plane %d→%d: %d m', (azimuth, dip, planeDip, dipDirection, trueM) => {
    expect(thickness(azimuth, dip, planeDip, dipDirection).trueM).toBeCloseTo(trueM, 6);
  });

  it('refuses a hole down the dip of the plane', () => {
    expect(thickness(90, -60, 60, 90)).toMatchObject({
      trueM: null,
      verticalM: null,
      horizontalM: null,
      refusal: 'sub-parallel: the hole meets the plane at 0.0°',
    });
  });

  it('8.660254 m at dip 60 is 17.320508 m vertical and 10 m horizontal (computed)', () => {
    const { verticalM, horizontalM } = thickness(90, -60, 60, 270);
    expect(verticalM).toBeCloseTo(17.320508, 6);
    expect(horizontalM).toBeCloseTo(10, 9);
  });

  it('has no vertical thickness of a vertical plane and no horizontal one of a flat plane', () => {
    expect(thickness(90, -60, 90, 90)).toMatchObject({ verticalM: null });
    expect(trueThickness(10, [0, 0, -1], [0, 0, 1])).toMatchObject({
      trueM: 10,
      verticalM: 10,
      horizontalM: null,
    });
  });

  it('equals L sin alpha of a plane met on the same core', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 359 }),
        fc.integer({ min: -89, max: 0 }),
        fc.integer({ min: 0, max: 90 }),
        fc.integer({ min: 0, max: 359 }),
        (azimuth, dip, planeDip, dipDirection) => {
          const hole = { azimuth, dip };
          const normal = planeNormal(planeDip, dipDirection);
          const { alpha } = coreFromPlane(hole, normal);
          const { trueM, sineOfAngle } = trueThickness(10, tangentOf(hole), normal, 0);
          expect(trueM).toBeCloseTo(10 * Math.sin((alpha * Math.PI) / 180), 6);
          const onCore = thicknessOnCore(10, alpha);
          if (sineOfAngle > 0.1001) expect(onCore).toBeCloseTo(trueM ?? NaN, 6);
          if (sineOfAngle < 0.0999) expect(onCore).toBeNull();
        },
      ),
    );
  });

  it.each([
    [-1, [0, 0, -1], [0, 0, 1]],
    [NaN, [0, 0, -1], [0, 0, 1]],
    [Infinity, [0, 0, -1], [0, 0, 1]],
    [1, [0, 0, -2], [0, 0, 1]],
    [1, [0, 0, -1], [0, 0, NaN]],
  ] as const)('refuses %d m, tangent %j, normal %j', (lengthM, tangent, normal) => {
    expect(() => trueThickness(lengthM, tangent, normal)).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });

  it('refuses what is no angle', () => {
    expect(() => thicknessOnCore(1, 91)).toThrow(/alpha in \[0, 90\]/);
    expect(thicknessOnCore(0, 90)).toBe(0);
  });
});

describe('fracture measures', () => {
  it('weighs alpha 30 twice (identity), and at most 3.864 (1 / sin 15, computed)', () => {
    expect(samplingWeight(30)).toBeCloseTo(2, 12);
    expect(samplingWeight(90)).toBe(1);
    expect(samplingWeight(0)).toBeCloseTo(3.863703, 6);
    expect(samplingWeight(CAPPED_ALPHA)).toBe(samplingWeight(3));
  });

  it('alpha 30, 90, 45 in 10 m: .3 per metre, .441421 m2/m3 (computed)', () => {
    const measures = fractureMeasures(Float64Array.of(30, 90, 45), 10);
    expect(measures.perMetre).toBeCloseTo(0.3, 12);
    expect(measures.areaPerVolume).toBeCloseTo(0.441421, 6);
    expect(measures).toMatchObject({ count: 3, cappedCount: 0 });
  });

  it('counts what was capped, and nothing in bare core', () => {
    expect(fractureMeasures(Float64Array.of(5, 80), 2).cappedCount).toBe(1);
    expect(fractureMeasures(new Float64Array(0), 2)).toMatchObject({
      count: 0,
      perMetre: 0,
      areaPerVolume: 0,
    });
  });

  it('refuses lengths and angles that are none', () => {
    expect(() => fractureMeasures(Float64Array.of(30), 0)).toThrow('logged length > 0 m, found 0');
    expect(() => fractureMeasures(Float64Array.of(30, NaN), 1)).toThrow('found NaN in row 1');
    expect(() => samplingWeight(-1)).toThrow(/alpha in \[0, 90\]/);
    expect(() => samplingWeight(30, 0)).toThrow(/capped alpha/);
  });
});
