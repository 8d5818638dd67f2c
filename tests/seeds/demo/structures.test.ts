import { describe, expect, it } from 'vitest';
import { coreAngles } from '#seeds/demo/structures.ts';
import { direction, planeNormal } from '#seeds/demo/vectors.ts';

describe('alpha and beta of a plane in core', () => {
  // Vector geometry worked apart from this code; hole azimuth/dip and plane dip/dip direction.
  it.each([
    [90, -60, 30, 90, 30, 180],
    [90, -60, 64.341, 343.898, 30, 90],
    [315, -55, 74.423, 163.154, 45, 40],
    [45, -70, 49.379, 88.225, 25, 215],
  ])(
    'hole %d/%d, plane %d/%d gives alpha %d, beta %d',
    (azimuth, dip, planeDip, planeDirection, alpha, beta) => {
      const angles = coreAngles(planeNormal(planeDip, planeDirection), direction(azimuth, dip));
      expect(angles.alphaDeg).toBeCloseTo(alpha, 2);
      expect(angles.betaDeg).toBeCloseTo(beta, 2);
    },
  );
});
