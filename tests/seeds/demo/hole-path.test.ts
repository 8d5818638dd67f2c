import { describe, expect, it } from 'vitest';
import { holePath } from '#seeds/demo/hole-path.ts';

const ORIGIN = { x: 0, y: 0, z: 0 };

describe('minimum curvature path', () => {
  it('meets the published worked leg: 15°/020° to 25°/045° over 100', () => {
    // A drilling-formula worked example: north 27.22, east 19.45, vertical 94.01.
    const path = holePath(ORIGIN, [
      { depthM: 0, azimuthDeg: 20, dipDeg: -75 },
      { depthM: 100, azimuthDeg: 45, dipDeg: -65 },
    ]);
    const end = path.positionAt(100);
    expect(end.y).toBeCloseTo(27.22, 2);
    expect(end.x).toBeCloseTo(19.45, 2);
    expect(end.z).toBeCloseTo(-94.01, 2);
  });

  it('turns a quarter circle: vertical to horizontal over 100 m reaches 200/π both ways', () => {
    const path = holePath(ORIGIN, [
      { depthM: 0, azimuthDeg: 0, dipDeg: -90 },
      { depthM: 100, azimuthDeg: 0, dipDeg: 0 },
    ]);
    expect(path.positionAt(100).y).toBeCloseTo(200 / Math.PI, 9);
    expect(path.positionAt(100).z).toBeCloseTo(-200 / Math.PI, 9);
    expect(path.tangentAt(50).z).toBeCloseTo(-Math.SQRT1_2, 9);
  });

  it('runs straight on below the last station and refuses a hole without one', () => {
    const path = holePath(ORIGIN, [{ depthM: 0, azimuthDeg: 90, dipDeg: -30 }]);
    expect(path.positionAt(40).z).toBeCloseTo(-20, 9);
    expect(path.positionAt(40).x).toBeCloseTo(40 * Math.cos(Math.PI / 6), 9);
    expect(() => holePath(ORIGIN, []).positionAt(1)).toThrow('at least one survey station');
  });
});
