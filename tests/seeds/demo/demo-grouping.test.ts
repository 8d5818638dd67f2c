import { kmeans } from 'ml-kmeans';
import { PCA } from 'ml-pca';
import { describe, expect, it } from 'vitest';
import { makeDemoDeposit } from '#seeds/demo/demo-deposit.ts';
import { adjustedRand } from '#tests/reference/adjusted-rand.ts';
import { readAssays } from './read-demo.ts';

/** Best of several k-means runs on every fourth interval, on six components of the clr suite. */
function groupDemo(k: number): { domains: string[]; clusters: number[] } {
  const deposit = makeDemoDeposit();
  const rows = new Map(readAssays(deposit).map((row) => [`${row.hole} ${row.fromM}`, row.ppm]));
  const truth = deposit.truth.filter((_, i) => i % 4 === 0);
  const clr = truth.map(({ hole, fromM }) => {
    const logs = deposit.suiteAnalytes.map((analyte) =>
      Math.log(rows.get(`${hole} ${fromM}`)?.get(analyte) ?? NaN),
    );
    const mean = logs.reduce((sum, value) => sum + value, 0) / logs.length;
    return logs.map((value) => value - mean);
  });
  const scores = new PCA(clr, { scale: false }).predict(clr, { nComponents: 6 }).to2DArray();
  let best = { error: Infinity, clusters: [] as number[] };
  for (let seed = 1; seed <= 10; seed++) {
    const run = kmeans(scores, k, { seed, initialization: 'kmeans++', maxIterations: 100 });
    const error = scores.reduce((sum, score, i) => {
      const centre = run.centroids[run.clusters[i] ?? 0] ?? [];
      return sum + score.reduce((part, value, j) => part + (value - (centre[j] ?? 0)) ** 2, 0);
    }, 0);
    if (error < best.error) best = { error, clusters: run.clusters };
  }
  return { domains: truth.map(({ domain }) => domain), clusters: best.clusters };
}

/** Each cluster named after the domain that most of its members belong to. */
function codesByMajority(clusters: readonly number[], domains: readonly string[]): string[] {
  const names = [...new Set(domains)];
  const nameOf = new Map(
    [...new Set(clusters)].map((cluster) => {
      const count = (name: string): number =>
        clusters.filter((one, i) => one === cluster && domains[i] === name).length;
      return [cluster, names.reduce((best, name) => (count(name) > count(best) ? name : best))];
    }),
  );
  return clusters.map((cluster) => nameOf.get(cluster) ?? '');
}

describe('what log-ratios and k-means recover', () => {
  it('measures agreement as scikit-learn documents it: 0.57 for 0011 against 0012', () => {
    expect(adjustedRand([0, 0, 1, 1], [0, 0, 1, 2])).toBeCloseTo(0.571, 3);
  });

  it.each([6, 7])('finds the domains with k = %d: ARI at least 0.85, every domain named', (k) => {
    const { domains, clusters } = groupDemo(k);
    const codes = codesByMajority(clusters, domains);
    expect(adjustedRand(codes, domains)).toBeGreaterThanOrEqual(0.85);
    expect(new Set(codes)).toEqual(new Set(domains));
  });
});
