import fc from 'fast-check';
import { expect, it } from 'vitest';
import { kMeans } from '#kernels/clustering/k-means.ts';
import { ownMembership, withinVariance } from '#kernels/clustering/membership.ts';
import { silhouette } from '#kernels/clustering/silhouette.ts';
import { groupValidity } from '#kernels/clustering/validity.ts';
import { KernelError } from '#kernels/kernel-error.ts';

/** Any double, with the awkward ones often. */
const value = fc.oneof(
  fc.double(),
  fc.constantFrom(0, -0, 1, 5e-324, 1e-300, 1e150, -1e150, 1e308, NaN, Infinity, -Infinity),
  fc.integer({ min: -3, max: 3 }),
);
const table = fc
  .tuple(fc.integer({ min: 1, max: 3 }), fc.integer({ min: 1, max: 12 }))
  .chain(([p, n]) =>
    fc.array(fc.array(value, { minLength: n, maxLength: n }).map((column) => Float64Array.from(column)), {
      minLength: p,
      maxLength: p,
    }),
  );

it('k-means and what follows it: a refusal with a reason, or finite answers', () => {
  fc.assert(
    fc.property(table, fc.integer({ min: 1, max: 4 }), (columns, k) => {
      try {
        const { labels, inertia, centroids, nUsed, p } = kMeans({
          columns,
          k,
          seed: 1,
          restarts: 2,
        });
        expect(Number.isFinite(inertia)).toBe(true);
        expect(centroids.every(Number.isFinite)).toBe(true);
        expect(labels.filter((label) => label > 0)).toHaveLength(nUsed);
        expect(silhouette(columns, labels).mean ?? 0).toSatisfy(Number.isFinite);
        expect(groupValidity(columns, labels).within).toSatisfy(Number.isFinite);
        if (nUsed > k) {
          const own = ownMembership({
            columns,
            centroids,
            variance: withinVariance(inertia, nUsed, k, p),
          });
          labels.forEach((label, row) => expect(Number.isFinite(own[row])).toBe(label > 0));
        }
      } catch (error) {
        expect(error).toBeInstanceOf(KernelError);
      }
    }),
    { numRuns: 400, seed: 20260101 },
  );
});
