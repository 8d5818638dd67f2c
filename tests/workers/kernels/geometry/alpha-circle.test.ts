import { describe, expect, it } from 'vitest';
import { polesOfAlpha } from '#kernels/geometry/alpha-circle.ts';
import { dot, tangentOf } from '#kernels/geometry/directions.ts';
import { coreFromPlane } from '#kernels/geometry/oriented-core.ts';
import { checkUnitVectors, vectorAt } from '#kernels/orientation/unit-vectors.ts';

describe('polesOfAlpha', () => {
  it.each([
    [315, -55, 45],
    [0, -90, 30],
    [90, 0, 0],
    [10, -60, 90],
  ])('hole %d/%d, alpha %d: every pole is met at that alpha', (azimuth, dip, alpha) => {
    const hole = { azimuth, dip };
    const poles = polesOfAlpha(hole, alpha, 12);
    expect(checkUnitVectors(poles)).toBe(12);
    for (let row = 0; row < 12; row++) {
      const pole = vectorAt(poles, row);
      expect(dot(pole, tangentOf(hole))).toBeCloseTo(Math.sin((alpha * Math.PI) / 180), 12);
      expect(coreFromPlane(hole, pole).alpha).toBeCloseTo(alpha, 6);
    }
  });

  it('refuses angles and steps that are none', () => {
    const hole = { azimuth: 0, dip: -60 };
    expect(() => polesOfAlpha(hole, 91)).toThrow(/alpha in \[0, 90\], found 91/);
    expect(() => polesOfAlpha(hole, NaN)).toThrow(/found NaN/);
    expect(() => polesOfAlpha(hole, 45, 2)).toThrow(/3 or more steps/);
  });
});
