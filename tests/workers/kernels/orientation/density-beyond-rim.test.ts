import { describe, expect, it } from 'vitest';
import { densityBeyondRim } from '#kernels/orientation/density-beyond-rim.ts';
import { densityGrid } from '#kernels/orientation/density-grid.ts';
import { uniformAxes } from '#kernels/orientation/strength-test.ts';
import { seededRandom } from '#kernels/random.ts';
import { lines } from './directions.ts';

describe('densityBeyondRim', () => {
  it.each(['equal-area', 'equal-angle'] as const)(
    'leaves the inside alone and fills the outside within its range (%s)',
    (net) => {
      for (const size of [3, 21, 40]) {
        const grid = densityGrid(uniformAxes(30, seededRandom(1)), net, { size });
        const filled = densityBeyondRim(grid, net);
        const inside = [...grid.values].filter((value) => !Number.isNaN(value));
        filled.forEach((value, node) => {
          expect(Number.isFinite(value)).toBe(true);
          const own = grid.values[node]!;
          if (!Number.isNaN(own)) expect(value).toBe(own);
          expect(value).toBeGreaterThanOrEqual(Math.min(...inside) - 1e-9);
          expect(value).toBeLessThanOrEqual(Math.max(...inside) + 1e-9);
        });
      }
    },
  );

  it('carries a cluster at the rim over it on both sides', () => {
    const cluster = lines(...Array.from({ length: 30 }, (): [number, number] => [45, 1]));
    const size = 41;
    const filled = densityBeyondRim(densityGrid(cluster, 'equal-area', { size }), 'equal-area');
    // just outside the rim to the north-east, where the lower ends lie to the south-west
    const node = (x: number, y: number) =>
      filled[
        Math.round(((y + 1) / 2) * (size - 1)) * size + Math.round(((x + 1) / 2) * (size - 1))
      ]!;
    expect(node(0.75, 0.75)).toBeGreaterThan(6);
    expect(node(-0.75, -0.75)).toBeGreaterThan(6);
    expect(node(0.75, -0.75)).toBeLessThan(0);
  });
});
