import { expect, it } from 'vitest';
import { kMeans } from '#kernels/clustering/k-means.ts';
import { suggest, sweepGroups, type SweepRow } from '#kernels/clustering/sweep.ts';
import { seededRandom } from '#kernels/random.ts';

/** Three blobs, sd .5, centres (0,0) (4,0) (2,4), 50 rows each. */
function threeBlobs(): Float64Array[] {
  const random = seededRandom(17);
  const centres = [
    [0, 0],
    [4, 0],
    [2, 4],
  ] as const;
  return [0, 1].map((j) =>
    Float64Array.from({ length: 150 }, (_, i) => centres[i % 3]![j]! + 0.5 * random.normal()),
  );
}

it('proposes the number of blobs that were made', () => {
  const columns = threeBlobs();
  const seen: number[] = [];
  const sweep = sweepGroups({
    columns,
    kFrom: 2,
    kTo: 6,
    seed: 1,
    onProgress: (share) => void seen.push(share),
  });
  expect(sweep.suggestedK).toBe(3);
  expect(sweep.rows.map((row) => row.k)).toEqual([2, 3, 4, 5, 6]);
  expect(sweep.silhouetteRows).toBe(150);
  expect(sweep.suggestion).toMatch(
    /^3 groups have the highest mean silhouette \(0\.\d\d\) of 2 to 6 groups; Calinski–Harabasz agrees, Davies–Bouldin agrees\./,
  );
  expect(sweep.rows[2]?.inertia).toBe(kMeans({ columns, k: 4, seed: 1 }).inertia);
  for (let i = 1; i < 5; i++)
    expect(sweep.rows[i]!.inertia).toBeLessThan(sweep.rows[i - 1]!.inertia);
  expect(seen.at(-1)).toBeCloseTo(1, 12);
  expect(seen).toEqual([...seen].sort((a, b) => a - b));
});

const row = (
  k: number,
  silhouette: number | null,
  calinskiHarabasz: number | null,
  daviesBouldin: number | null,
): SweepRow => ({
  k,
  inertia: 1,
  silhouette,
  simplifiedSilhouette: null,
  calinskiHarabasz,
  daviesBouldin,
});

it('takes the fewest groups when silhouettes tie, and names who disagrees', () => {
  const found = suggest([row(2, 0.4, 10, 0.9), row(3, 0.555, 30, 0.8), row(4, 0.56, 40, 0.7)]);
  expect(found.suggestedK).toBe(3);
  expect(found.suggestion).toContain(
    'within 0.01 of the highest (0.56 at 4); Calinski–Harabasz prefers 4, Davies–Bouldin prefers 4.',
  );
});

it('says when the groups hardly stand apart', () => {
  expect(suggest([row(2, 0.1, 1, 3), row(3, 0.12, 2, 3)]).suggestion).toContain('Below 0.25');
});

it('has nothing to compare with one group alone', () => {
  expect(sweepGroups({ columns: threeBlobs(), kFrom: 1, kTo: 1, seed: 1 })).toMatchObject({
    suggestedK: 1,
    rows: [{ silhouette: null, daviesBouldin: null }],
  });
});

it.each([
  [0, 3],
  [4, 3],
  [2, 251],
  [2, 2.5],
])('refuses the range %d to %d', (kFrom, kTo) => {
  expect(() => sweepGroups({ columns: threeBlobs(), kFrom, kTo, seed: 1 })).toThrow(
    expect.objectContaining({ code: 'bad-parameter' }),
  );
});
