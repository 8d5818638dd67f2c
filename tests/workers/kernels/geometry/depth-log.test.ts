import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { categoryCurve, depthsOf, depthSteps, gradeCurve } from '#kernels/geometry/depth-log.ts';
import { apartTable, tableOf } from '../intervals/support.ts';

const intervals = tableOf([
  [0, 2],
  [2, 3],
  [5, 6],
]);

describe('depth curves', () => {
  it('lays samples at the middles of the steps', () => {
    const steps = depthSteps(0, 2.1, 0.5);
    expect([...depthsOf(steps)]).toEqual([0.25, 0.75, 1.25, 1.75, 2.25]);
    expect(depthSteps(0, 2, 0.5).count).toBe(4);
  });

  it('takes the category with from <= depth < to, and none in a gap (worked by hand)', () => {
    const steps = { startM: 0, stepM: 1, count: 7 };
    const curve = categoryCurve(intervals, Int32Array.of(4, 5, 6), steps);
    expect([...curve]).toEqual([4, 4, 5, -1, -1, 6, -1]);
  });

  it('averages grades over a step, and gives none where less than half is covered', () => {
    const steps = { startM: 1, stepM: 2, count: 3 };
    // 0-2: 10; 2-4: half covered at 20; 4-6: half at 30
    expect([...gradeCurve(intervals, Float64Array.of(10, 20, 30), steps)]).toEqual([10, 20, 30]);
    const wide = { startM: 1.5, stepM: 3, count: 2 };
    const curve = gradeCurve(intervals, Float64Array.of(10, 20, 30), wide);
    expect(curve[0]).toBeCloseTo(40 / 3, 12);
    expect(curve[1]).toBeNaN();
    expect(gradeCurve(intervals, Float64Array.of(10, NaN, 30), steps)[1]).toBeNaN();
  });

  it('returns the metal within one step at each end (identity)', () => {
    fc.assert(
      fc.property(
        apartTable,
        fc.double({ min: 0.1, max: 3, noNaN: true }),
        fc.double({ min: 0, max: 50, noNaN: true }),
        (table, stepM, grade) => {
          // one covered stretch: the intervals pushed together
          let depth = 0;
          const touching = tableOf(
            [...table.fromM].map((from, row) => {
              const top = depth;
              depth += table.toM[row]! - from;
              return [top, depth] as const;
            }),
          );
          if (depth === 0) return;
          const values = touching.fromM.map((_, row) => grade + row);
          const curve = gradeCurve(touching, values, depthSteps(0, depth, stepM));
          const metal = values.reduce(
            (sum, value, row) => sum + value * (touching.toM[row]! - touching.fromM[row]!),
            0,
          );
          const found = curve.reduce((sum, v) => sum + (Number.isNaN(v) ? 0 : v * stepM), 0);
          expect(Math.abs(found - metal)).toBeLessThanOrEqual(
            stepM * (grade + values.length) + 1e-6,
          );
        },
      ),
    );
  });

  it('refuses steps, shapes and overlaps', () => {
    const steps = { startM: 0, stepM: 1, count: 2 };
    const refuses = (code: string, run: () => unknown) =>
      expect(run).toThrow(expect.objectContaining({ code }));
    for (const bad of [
      { ...steps, stepM: 0 },
      { ...steps, count: 0 },
      { ...steps, count: 1.5 },
      { ...steps, startM: NaN },
    ]) {
      refuses('bad-parameter', () => gradeCurve(intervals, new Float64Array(3), bad));
    }
    refuses('bad-parameter', () => depthSteps(0, 10, -1));
    refuses('bad-parameter', () => depthSteps(5, 5, 1));
    refuses('shape', () => categoryCurve(intervals, Int32Array.of(1), steps));
    const overlapping = tableOf([
      [0, 2],
      [1, 3],
    ]);
    refuses('overlap', () => gradeCurve(overlapping, new Float64Array(2), steps));
    expect([...gradeCurve(tableOf([]), new Float64Array(0), steps)]).toEqual([NaN, NaN]);
  });
});
