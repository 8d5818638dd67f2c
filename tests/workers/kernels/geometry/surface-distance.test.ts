import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Vector } from '#kernels/geometry/directions.ts';
import { nearestOnTriangle } from '#kernels/geometry/nearest-on-triangle.ts';
import { bestFitNormal, distancesToSurface } from '#kernels/geometry/surface-distance.ts';
import { prepareSurface } from '#kernels/geometry/triangulated-surface.ts';
import { distancesToFault } from '#kernels/recipe/fault-sides.ts';
import { cube, sheet } from './surfaces.ts';

const triangle: readonly [Vector, Vector, Vector] = [
  [0, 0, 0],
  [10, 0, 0],
  [0, 10, 0],
];

describe('nearest point of a triangle', () => {
  // Computed in python by minimising over barycentric weights.
  it.each([
    [[2, 2, 5], [2, 2, 0], 5, 'inside'],
    [[-3, -4, 0], [0, 0, 0], 5, 'corner'],
    [[10, 10, 0], [5, 5, 0], 7.071068, 'edge'],
    [[5, -2, 1], [5, 0, 0], 2.236068, 'edge'],
  ] as const)('%j → %j at %d, %s', (p, expected, distance, kind) => {
    const { point, feature } = nearestOnTriangle(p, triangle);
    expected.forEach((value, k) => expect(point[k]).toBeCloseTo(value, 12));
    expect(Math.hypot(...p.map((value, k) => value - point[k]!))).toBeCloseTo(distance, 6);
    expect(feature.kind).toBe(kind);
  });

  it('is no further than any other point of the triangle', () => {
    const coordinate = fc.double({ min: -20, max: 20, noNaN: true });
    const share = fc.double({ min: 0, max: 1, noNaN: true });
    fc.assert(
      fc.property(coordinate, coordinate, coordinate, share, share, (x, y, z, a, b) => {
        const [u, v] = a + b > 1 ? [1 - a, 1 - b] : [a, b];
        const { point } = nearestOnTriangle([x, y, z], triangle);
        const other = Math.hypot(x - 10 * u, y - 10 * v, z);
        expect(Math.hypot(x - point[0], y - point[1], z - point[2])).toBeLessThanOrEqual(
          other + 1e-9,
        );
      }),
    );
  });
});

describe('signed distance to a surface', () => {
  it('is that of the plane for a sheet of plane 60→090, inside and beyond its edge', () => {
    const surface = sheet(8, (x) => -Math.tan(Math.PI / 3) * x);
    const fault = { name: 'F', x: 0, y: 0, z: 0, dip: 60, dipDirection: 90 };
    const points = Float64Array.of(
      ...[41, 33, -50],
      ...[20, 44, -60],
      ...[100, 0, 0],
      ...[0, 50, -100],
      ...[-500, 900, 3],
    );
    const { distancesM, isBeyondEdge } = distancesToSurface(points, surface);
    distancesToFault(points, fault).forEach((distance, row) =>
      expect(distancesM[row]).toBeCloseTo(distance, 8),
    );
    // worked: plane 60→090 through the origin
    expect(distancesM[2]).toBeCloseTo(86.60254, 5);
    expect(distancesM[3]).toBeCloseTo(-50, 8);
    expect([...isBeyondEdge]).toEqual([0, 0, 1, 0, 1]);
  });

  it('agrees with a search over all triangles of a folded sheet', () => {
    const surface = sheet(6, (x, y) => 8 * Math.sin(x / 9) + 5 * Math.cos(y / 7));
    const corner = (t: number, k: number): Vector => {
      const at = 3 * surface.triangles[3 * t + k]!;
      return [surface.vertices[at]!, surface.vertices[at + 1]!, surface.vertices[at + 2]!];
    };
    const inside = fc.double({ min: 12, max: 48, noNaN: true });
    const height = fc.double({ min: -12, max: 12, noNaN: true });
    fc.assert(
      fc.property(inside, inside, height, (x, y, z) => {
        const least = Math.min(
          ...Array.from({ length: surface.triangles.length / 3 }, (_, t) => {
            const corners = [corner(t, 0), corner(t, 1), corner(t, 2)] as const;
            const { point } = nearestOnTriangle([x, y, z], corners);
            return Math.hypot(x - point[0], y - point[1], z - point[2]);
          }),
        );
        const { distancesM, isBeyondEdge } = distancesToSurface(Float64Array.of(x, y, z), surface);
        if (isBeyondEdge[0] === 0) expect(Math.abs(distancesM[0]!)).toBeCloseTo(least, 9);
      }),
      { numRuns: 60 },
    );
  });

  it('is positive outside a cube and negative inside, off faces, edges and corners', () => {
    const surface = prepareSurface(cube.vertices, cube.triangles);
    const points = Float64Array.of(
      ...[0.5, 0.5, 0.5],
      ...[0.5, 0.5, 3],
      ...[2, 2, 0.5],
      ...[-1, -1, -1],
      ...[0.9, 0.9, 0.9],
      ...[1, 0.2, 0.3],
    );
    const { distancesM } = distancesToSurface(points, surface);
    [-0.5, 2, Math.SQRT2, Math.sqrt(3), -0.1, 0].forEach((distance, row) =>
      expect(distancesM[row]).toBeCloseTo(distance, 12),
    );
  });

  it('keeps its precision at large grid coordinates', () => {
    const surface = prepareSurface(
      Float64Array.of(650_000, 7_100_000, 0, 650_100, 7_100_000, 0, 650_000, 7_100_100, 0),
      Int32Array.of(0, 1, 2),
    );
    const { distancesM } = distancesToSurface(Float64Array.of(650_020, 7_100_020, -3), surface);
    expect(distancesM[0]).toBeCloseTo(-3, 6);
  });

  it('fits a plane whose normal lies on the + side', () => {
    const [x, y, z] = bestFitNormal(sheet(4, (east) => -Math.tan(Math.PI / 3) * east));
    expect(x).toBeCloseTo(0.866025, 6);
    expect(y).toBeCloseTo(0, 9);
    expect(z).toBeCloseTo(0.5, 6);
  });

  it('has no distance for a point without position, and refuses an infinite one', () => {
    const surface = sheet(1, () => 0);
    expect(distancesToSurface(Float64Array.of(1, NaN, 2), surface).distancesM[0]).toBeNaN();
    expect(distancesToSurface(new Float64Array(0), surface).distancesM).toHaveLength(0);
    expect(() => distancesToSurface(Float64Array.of(1, Infinity, 2), surface)).toThrow('row 0');
    expect(() => distancesToSurface(Float64Array.of(1, 2), surface)).toThrow(/rows of 3/);
  });

  it('answers 1000 points against 5000 triangles fast', () => {
    const surface = sheet(50, (x, y) => 20 * Math.sin(x / 60) * Math.cos(y / 60));
    const points = Float64Array.from({ length: 3000 }, (_, i) => (i * 7919) % 500);
    const started = performance.now();
    const { distancesM } = distancesToSurface(points, surface);
    expect(distancesM.every(Number.isFinite)).toBe(true);
    expect(performance.now() - started).toBeLessThan(5000);
  });
});
