import { describe, expect, it } from 'vitest';
import { desurvey } from '#kernels/geometry/minimum-curvature.ts';
import { positionAtDepth } from '#kernels/geometry/position-at-depth.ts';
import { piecesOfLeg, traceHole } from '#kernels/geometry/trace.ts';

const path = desurvey(
  [0, 0, 0],
  [
    { depthM: 0, azimuth: 0, dip: -60 },
    { depthM: 30, azimuth: 0, dip: -55 },
    { depthM: 60, azimuth: 0, dip: -55 },
  ],
);

describe('traceHole', () => {
  /** Distance of the arc from its chord in the middle of a stretch, m. */
  const sagitta = (fromM: number, toM: number) => {
    const [a, middle, b] = [fromM, (fromM + toM) / 2, toM].map(
      (depthM) => positionAtDepth(path, depthM).position,
    );
    return Math.hypot(...middle!.map((x, k) => x - (a![k]! + b![k]!) / 2));
  };

  it('cuts 30 m turning 5° into three pieces at .05 m (computed: sagitta .327197, then .036361)', () => {
    expect(piecesOfLeg(30, (5 * Math.PI) / 180, 0.05)).toBe(3);
    expect(sagitta(0, 30)).toBeCloseTo(0.327197, 6);
    // R (1 - cos(5°/6)) is .03636039; a ninth of m β / 8 gives .036361
    expect(sagitta(10, 20)).toBeCloseTo(0.0363604, 7);
    expect(sagitta(10, 20)).toBeLessThan(0.036361);
    expect([...traceHole(path, 60).depthsM]).toEqual([0, 10, 20, 30, 60]);
  });

  it('stays within its tolerance of the arc', () => {
    const { depthsM, positions } = traceHole(path, 30, { toleranceM: 0.05 });
    for (let i = 0; i + 1 < depthsM.length; i++) {
      const arc = positionAtDepth(path, (depthsM[i]! + depthsM[i + 1]!) / 2).position;
      const chord = arc.map((_, k) => (positions[3 * i + k]! + positions[3 * i + 3 + k]!) / 2);
      expect(Math.hypot(...arc.map((x, k) => x - chord[k]!))).toBeLessThan(0.05);
    }
  });

  it('makes interval ends vertices and stops at the end of the hole', () => {
    expect([...traceHole(path, 45, { alsoAtM: [1.5, 44, 50] }).depthsM]).toEqual([
      0, 1.5, 10, 20, 30, 44, 45,
    ]);
  });

  it.each([
    [0, 60],
    [-1, 60],
    [NaN, 60],
    [0.05, 0],
    [0.05, NaN],
  ])('refuses tolerance %d, end %d', (toleranceM, end) => {
    expect(() => traceHole(path, end, { toleranceM })).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });
});
