import { describe, expect, it } from 'vitest';
import { prepareSurface } from '#kernels/geometry/triangulated-surface.ts';
import { cube } from './surfaces.ts';

describe('prepareSurface', () => {
  it('winds a flat sheet counter-clockwise seen from above, whichever way it came', () => {
    const square = Float64Array.of(0, 0, 0, 1, 0, 0, 1, 1, 0, 0, 1, 0);
    for (const triangles of [
      [0, 1, 2, 0, 2, 3],
      [0, 2, 1, 0, 3, 2],
      [0, 1, 2, 0, 3, 2],
    ]) {
      const surface = prepareSurface(square, Int32Array.from(triangles));
      expect([...surface.normals]).toEqual([0, 0, 1, 0, 0, 1]);
      expect(surface).toMatchObject({ isClosed: false, areaM2: 1 });
    }
  });

  it('faces a vertical sheet east', () => {
    const sheet = Float64Array.of(5, 0, 0, 5, 1, 0, 5, 0, 1);
    expect([...prepareSurface(sheet, Int32Array.of(0, 2, 1)).normals]).toEqual([1, 0, 0]);
  });

  it('turns a closed surface outward and knows that it has no edge', () => {
    const surface = prepareSurface(cube.vertices, cube.triangles);
    expect(surface.isClosed).toBe(true);
    expect(surface.areaM2).toBeCloseTo(6, 12);
    // outward: each normal points away from the middle of the cube
    for (let t = 0; t < 12; t++) {
      const corner = surface.triangles[3 * t]!;
      const away = [0, 1, 2].reduce(
        (sum, k) => sum + surface.normals[3 * t + k]! * (surface.vertices[3 * corner + k]! - 0.5),
        0,
      );
      expect(away).toBeCloseTo(0.5, 12);
    }
  });

  it('joins vertices within a micrometre and drops triangles without area and repeats', () => {
    const vertices = Float64Array.of(
      ...[0, 0, 0],
      ...[1, 0, 0],
      ...[0, 1, 0],
      ...[1, 5e-7, 0],
      ...[1, 1, 0],
      ...[2, 0, 0],
    );
    const surface = prepareSurface(
      vertices,
      Int32Array.of(0, 1, 2, 3, 4, 2, 0, 1, 5, 1, 3, 4, 2, 0, 1),
    );
    expect(surface.vertices).toHaveLength(15);
    expect(surface.triangles).toHaveLength(6);
    expect(surface.neighbours.filter((t) => t >= 0)).toHaveLength(2);
    expect(surface.notes).toEqual([
      '1 vertices lay on others and were joined to them',
      '2 triangles without area were dropped',
      '1 repeated triangles were dropped',
      'open surface: its sides are extended beyond its edge',
    ]);
  });

  it('refuses a band with one side only', () => {
    const n = 6;
    const vertices: number[] = [];
    for (let i = 0; i < n; i++) {
      const [turn, twist] = [(2 * Math.PI * i) / n, (Math.PI * i) / n];
      for (const half of [-1, 1]) {
        const r = 5 + half * Math.cos(twist);
        vertices.push(r * Math.cos(turn), r * Math.sin(turn), half * Math.sin(twist));
      }
    }
    const triangles = Array.from({ length: n }, (_, i) => {
      const [a, b] = [2 * i, 2 * i + 1];
      const [c, d] = i + 1 < n ? [a + 2, b + 2] : [1, 0];
      return [a, b, c, b, d, c];
    });
    expect(() =>
      prepareSurface(Float64Array.from(vertices), Int32Array.from(triangles.flat())),
    ).toThrow(/two sides, found one side only/);
  });

  it('refuses three triangles on an edge, strange corners, NaN and nothing', () => {
    const vertices = Float64Array.of(0, 0, 0, 1, 0, 0, 0, 1, 0, 0, 0, 1, 0, -1, 0);
    const run = (triangles: number[], at = vertices) =>
      prepareSurface(at, Int32Array.from(triangles));
    const refuses = (code: string, call: () => unknown) =>
      expect(call).toThrow(expect.objectContaining({ code }));
    refuses('bad-parameter', () => run([0, 1, 2, 0, 1, 3, 0, 1, 4]));
    refuses('bad-parameter', () => run([0, 1, 5]));
    refuses('bad-parameter', () => run([0, 1, -1]));
    refuses('shape', () => run([0, 1]));
    refuses('too-few-rows', () => run([]));
    refuses('too-few-rows', () => run([0, 1, 1]));
    refuses('not-finite', () => run([0, 1, 2], Float64Array.of(0, 0, NaN)));
  });
});
