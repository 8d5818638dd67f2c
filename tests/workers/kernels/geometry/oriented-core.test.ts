import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { tangentOf } from '#kernels/geometry/directions.ts';
import {
  coreFromPlane,
  gammaFromLine,
  lineFromCore,
  planeFromCore,
} from '#kernels/geometry/oriented-core.ts';
import { lineVector } from '#kernels/geometry/planes.ts';

describe('planeFromCore', () => {
  // Computed from vectors, bottom line.
  it.each([
    [90, -60, 30, 0, 90, 90],
    [90, -60, 30, 180, 30, 90],
    [90, -60, 30, 90, 64.341, 343.898],
    [90, -60, 90, 217, 30, 270],
    [315, -55, 45, 40, 74.422842, 163.154496],
    [45, -70, 25, 215, 49.379, 88.225],
    [0, -60, 60, 0, 60, 180],
  ])(
    'hole %d/%d, alpha %d, beta %d is %d→%d',
    (azimuth, dip, alpha, beta, planeDip, dipDirection) => {
      const plane = planeFromCore({ azimuth, dip }, { alpha, beta });
      expect(plane.dip).toBeCloseTo(planeDip, 3);
      expect(plane.dipDirection).toBeCloseTo(dipDirection, 3);
    },
  );

  it('knows no dip direction for a flat plane: 000/−60, 60, 180', () => {
    const plane = planeFromCore({ azimuth: 0, dip: -60 }, { alpha: 60, beta: 180 });
    expect(plane.dip).toBeCloseTo(0, 9);
    expect(plane.dipDirection).toBeNull();
  });

  it('takes the top line and the up-hole end as half a turn each', () => {
    const hole = { azimuth: 315, dip: -55 };
    const bottom = planeFromCore(hole, { alpha: 45, beta: 40 });
    const top = planeFromCore(
      hole,
      { alpha: 45, beta: 220 },
      { referenceLine: 'top', ellipseEnd: 'down-hole' },
    );
    const upHole = planeFromCore(
      hole,
      { alpha: 45, beta: 220 },
      { referenceLine: 'bottom', ellipseEnd: 'up-hole' },
    );
    const both = planeFromCore(
      hole,
      { alpha: 45, beta: 40 },
      { referenceLine: 'top', ellipseEnd: 'up-hole' },
    );
    for (const plane of [top, upHole, both]) {
      expect(plane.dip).toBeCloseTo(bottom.dip, 9);
      expect(plane.dipDirection).toBeCloseTo(bottom.dipDirection ?? NaN, 9);
    }
  });

  it('says what lowers the worth of a reading', () => {
    expect(planeFromCore({ azimuth: 0, dip: -60 }, { alpha: 90, beta: 0 }).cautions).toEqual([
      'beta-undefined',
    ]);
    expect(planeFromCore({ azimuth: 0, dip: -60 }, { alpha: 9, beta: 0 }).cautions).toEqual([
      'beta-poorly-defined',
    ]);
    expect(planeFromCore({ azimuth: 0, dip: -86 }, { alpha: 40, beta: 0 }).cautions).toEqual([
      'steep-hole',
    ]);
    expect(planeFromCore({ azimuth: 0, dip: -60 }, { alpha: 40, beta: 0 }).cautions).toEqual([]);
  });

  it('returns to its angles through the plane (315/−55 gives 45, 40 again)', () => {
    const hole = { azimuth: 315, dip: -55 };
    const back = coreFromPlane(hole, planeFromCore(hole, { alpha: 45, beta: 40 }).normal);
    expect(back.alpha).toBeCloseTo(45, 9);
    expect(back.beta).toBeCloseTo(40, 9);
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 359.9, noNaN: true }),
        fc.double({ min: -89, max: 60, noNaN: true }),
        fc.double({ min: 1, max: 89, noNaN: true }),
        fc.double({ min: 0, max: 359.9, noNaN: true }),
        (azimuth, dip, alpha, beta) => {
          const drilled = { azimuth, dip };
          const found = coreFromPlane(drilled, planeFromCore(drilled, { alpha, beta }).normal);
          expect(found.alpha).toBeCloseTo(alpha, 6);
          const difference = Math.abs(found.beta - beta);
          expect(Math.min(difference, 360 - difference)).toBeLessThan(1e-5);
        },
      ),
    );
    expect(coreFromPlane({ azimuth: 0, dip: -90 }, [0, 0, 1])).toEqual({ alpha: 90, beta: 0 });
  });

  it.each([
    [-1, 0],
    [91, 0],
    [NaN, 0],
    [45, -1],
    [45, 361],
    [45, NaN],
  ])('refuses alpha %d, beta %d', (alpha, beta) => {
    expect(() => planeFromCore({ azimuth: 0, dip: -60 }, { alpha, beta })).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });
});

describe('lineFromCore', () => {
  // Computed from vectors: hole 315/−55, alpha 45, beta 40, bottom line.
  it.each([
    [0, 62.863, 220.204],
    [30, 35.898, 241.513],
    [90, 21.635, 79.503],
  ])('gamma %d is %d→%d', (gamma, plunge, trend) => {
    const line = lineFromCore({ azimuth: 315, dip: -55 }, { alpha: 45, beta: 40 }, gamma);
    expect(line.plunge).toBeCloseTo(plunge, 3);
    expect(line.trend).toBeCloseTo(trend, 3);
  });

  it('has the worked plane of that hole: t, normal and dip 74.422842→163.154496 (computed)', () => {
    const hole = { azimuth: 315, dip: -55 };
    [-0.40558, 0.40558, -0.819152].forEach((value, k) =>
      expect(tangentOf(hole)[k]).toBeCloseTo(value, 6),
    );
    const { normal, dip, dipDirection } = planeFromCore(hole, { alpha: 45, beta: 40 });
    [0.279148, -0.921935, 0.268536].forEach((value, k) => expect(normal[k]).toBeCloseTo(value, 6));
    expect(dip).toBeCloseTo(74.422842, 6);
    expect(dipDirection).toBeCloseTo(163.154496, 6);
  });

  it('has the frame of that hole: u, v, r, e and the line of gamma 30 (computed)', () => {
    const hole = { azimuth: 315, dip: -55 };
    // At alpha 0 the normal is the radial line at beta, turned up: u at 0, v at 90, r at 40.
    const radial = (beta: number) => planeFromCore(hole, { alpha: 0, beta }).normal;
    const line = (gamma: number) => lineVector(lineFromCore(hole, { alpha: 45, beta: 40 }, gamma));
    for (const [found, expected] of [
      [radial(0), [-0.579228, 0.579228, 0.573576]],
      [radial(90), [0.707107, 0.707107, 0]],
      [radial(40), [0.010805, 0.898234, 0.439385]],
      [line(0), [-0.294429, -0.348359, -0.88992]],
      [line(30), [-0.711981, -0.386365, -0.58635]],
    ] as const)
      expected.forEach((value, k) => expect(found[k]).toBeCloseTo(value, 6));
  });

  it('counts beta 90 to the north in a hole plunging east, seen looking down the hole', () => {
    // alpha 0: the plane holds the core axis, its normal is the radial line at beta
    const { normal } = planeFromCore({ azimuth: 90, dip: -60 }, { alpha: 0, beta: 90 });
    [0, 1, 0].forEach((value, k) => expect(normal[k]).toBeCloseTo(value, 9));
  });

  it('turns gamma the other way where the convention says so', () => {
    const hole = { azimuth: 315, dip: -55 };
    const leftHanded = {
      referenceLine: 'bottom',
      ellipseEnd: 'down-hole',
      gammaSense: 'left-handed',
    } as const;
    const line = lineFromCore(hole, { alpha: 45, beta: 40 }, -30, leftHanded);
    expect(line.plunge).toBeCloseTo(35.898, 3);
    expect(line.trend).toBeCloseTo(241.513, 3);
  });

  it('returns to its gamma through the line', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 359 }),
        fc.integer({ min: -89, max: 60 }),
        fc.integer({ min: 1, max: 89 }),
        fc.integer({ min: 0, max: 359 }),
        fc.integer({ min: 0, max: 179 }),
        fc.constantFrom('right-handed', 'left-handed'),
        (azimuth, dip, alpha, beta, gamma, gammaSense) => {
          const convention = { referenceLine: 'top', ellipseEnd: 'up-hole', gammaSense } as const;
          const [hole, angles] = [
            { azimuth, dip },
            { alpha, beta },
          ];
          const line = lineVector(lineFromCore(hole, angles, gamma, convention));
          const difference = Math.abs(gammaFromLine(hole, angles, line, convention) - gamma);
          expect(Math.min(difference, 180 - difference)).toBeLessThan(1e-6);
        },
      ),
    );
  });

  it('has no gamma for a line square to the plane', () => {
    const hole = { azimuth: 315, dip: -55 };
    const angles = { alpha: 45, beta: 40 };
    const { normal } = planeFromCore(hole, angles);
    expect(() => gammaFromLine(hole, angles, normal)).toThrow(/a line in the plane/);
    expect(() => gammaFromLine(hole, angles, [NaN, 0, 0])).toThrow(/a line in the plane/);
  });

  it('refuses a gamma that is no angle', () => {
    expect(() => lineFromCore({ azimuth: 0, dip: -60 }, { alpha: 45, beta: 0 }, NaN)).toThrow(
      /gamma/,
    );
  });
});
