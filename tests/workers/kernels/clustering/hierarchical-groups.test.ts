import fc from 'fast-check';
import { expect, it } from 'vitest';
import { adjustedRandIndex } from '#kernels/clustering/agreement.ts';
import { changePoints } from '#kernels/clustering/change-points.ts';
import { dbscan } from '#kernels/clustering/dbscan.ts';
import { hdbscan } from '#kernels/clustering/hdbscan.ts';
import { hierarchicalGroups } from '#kernels/clustering/hierarchical-groups.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';

/** Three groups of rows in turn, 9 apart. */
const random = seededRandom(8);
const columns = [0, 1].map((j) =>
  Float64Array.from({ length: 240 }, (_, i) => random.normal() + (j === 0 ? 9 : -9) * (i % 3)),
);

it('a tree of micro-groups finds the groups a tree of all rows finds, and says so', () => {
  const whole = hierarchicalGroups({ columns, linkage: 'ward', k: 3, seed: 1 });
  const micro = hierarchicalGroups({
    columns,
    linkage: 'ward',
    k: 3,
    seed: 1,
    maxRows: 100,
    microGroups: 30,
  });
  expect(whole.notes).toEqual([]);
  expect(micro.notes.join()).toContain('30 k-means micro-groups were joined instead');
  expect(adjustedRandIndex(micro.labels, whole.labels)).toBe(1);
  expect(micro.tree.heights).toHaveLength(29);
  // The last joins are those of the whole rows: sizes are counted.
  expect(micro.tree.heights[28]! / whole.tree.heights[238]!).toBeCloseTo(1, 6);
});

it('weights decide the numbering, and what the parts refuse is refused', () => {
  const weights = Float64Array.from({ length: 240 }, (_, i) => (i % 3 === 2 ? 5 : 1));
  for (const maxRows of [5000, 100]) {
    const input = { columns, linkage: 'average', k: 3, seed: 1, maxRows, microGroups: 30 } as const;
    expect(hierarchicalGroups({ ...input, weights }).labels[2]).toBe(1);
    expect(() => hierarchicalGroups({ ...input, k: 0 })).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  }
});

it('odd inputs to trees, density groups and change points: a refusal with a reason, or finite answers', () => {
  const value = fc.oneof(
    fc.double(),
    fc.constantFrom(0, -0, 1, 5e-324, 1e-300, 1e150, -1e150, NaN, Infinity, -Infinity),
    fc.integer({ min: -3, max: 3 }),
  );
  const table = fc
    .tuple(fc.integer({ min: 1, max: 2 }), fc.integer({ min: 1, max: 9 }))
    .chain(([p, n]) =>
      fc.array(
        fc.array(value, { minLength: n, maxLength: n }).map((column) => Float64Array.from(column)),
        {
          minLength: p,
          maxLength: p,
        },
      ),
    );
  const orRefused = (call: () => void): void => {
    try {
      call();
    } catch (error) {
      expect(error).toBeInstanceOf(KernelError);
    }
  };
  fc.assert(
    fc.property(table, fc.constantFrom('ward', 'average', 'complete'), (odd, linkage) => {
      const n = odd[0]?.length ?? 0;
      orRefused(() => {
        const { tree, labels } = hierarchicalGroups({ columns: odd, linkage, k: 2, seed: 1 });
        expect(tree.heights.every(Number.isFinite)).toBe(true);
        expect(labels.filter((label) => label > 0)).toHaveLength(tree.n);
      });
      orRefused(() => {
        const { nNoise, labels, nUsed } = dbscan({ columns: odd, eps: 1, minPoints: 2 });
        expect(labels.filter((label) => label > 0)).toHaveLength(nUsed - nNoise);
      });
      orRefused(() => {
        const { strength, nUsed } = hdbscan({ columns: odd, minClusterSize: 2, minSamples: 1 });
        expect(strength.filter(Number.isFinite)).toHaveLength(nUsed);
      });
      orRefused(() => {
        const { objective, segmentOf, segments } = changePoints({
          columns: odd,
          sequence: new Uint8Array(n),
        });
        expect(Number.isFinite(objective)).toBe(true);
        expect(Math.max(-1, ...segmentOf)).toBe(segments - 1);
      });
    }),
    { numRuns: 300, seed: 20260101 },
  );
});
