import { expect, it } from 'vitest';
import { sweepMixtures, type MixtureSweepInput } from '#kernels/clustering/mixture-sweep.ts';
import { seededRandom } from '#kernels/random.ts';

/** Three groups of rows in turn, long along the diagonal, 9 apart. */
function threeGroups(n: number): Float64Array[] {
  const random = seededRandom(8);
  const [x, y] = [new Float64Array(n), new Float64Array(n)];
  for (let i = 0; i < n; i++) {
    const along = 2 * random.normal();
    x[i] = along + 0.3 * random.normal() + 9 * (i % 3);
    y[i] = along + 0.3 * random.normal() - 9 * (i % 3);
  }
  return [x, y];
}
const columns = threeGroups(240);
const sweep = (change: Partial<MixtureSweepInput> = {}) =>
  sweepMixtures({ columns, kFrom: 1, kTo: 4, seed: 1, starts: 2, ...change });

it('the least BIC has the number and the shape of the groups that made the rows', () => {
  const { rows, best, leastIcl } = sweep();
  expect(rows).toHaveLength(16);
  expect([best.model.family, best.model.k]).toEqual(['tied', 3]);
  expect([leastIcl.family, leastIcl.k]).toEqual(['tied', 3]);
  for (const { logLik, bic, icl, parameters, refused } of rows) {
    if (refused !== null) continue;
    expect(bic).toBeCloseTo(-2 * logLik! + parameters * Math.log(240), 8);
    expect(icl).toBeGreaterThanOrEqual(bic!);
  }
});

it('lists a model the rows do not suffice for, and goes on with the others', () => {
  const few = columns.map((column) => column.slice(0, 60)); // full with 3 groups needs 85
  const { rows, best } = sweep({ columns: few, kFrom: 3, kTo: 3 });
  const full = rows.find((row) => row.family === 'full');
  expect(full).toMatchObject({ parameters: 17, logLik: null, bic: null, icl: null });
  expect(full?.refused).toContain('need 85 complete rows, found 60');
  expect(best.model.family).toBe('tied');
});

it('reports progress upwards to 1', () => {
  const seen: number[] = [];
  sweep({
    families: ['diagonal', 'spherical'],
    kTo: 2,
    onProgress: (share) => void seen.push(share),
  });
  expect(seen).toEqual([...seen].sort((a, b) => a - b));
  expect(seen.at(-1)).toBe(1);
});

it.each<[string, Partial<MixtureSweepInput>]>([
  ['bad-parameter', { kFrom: 3, kTo: 2 }],
  ['bad-parameter', { kTo: 2.5 }],
  ['bad-parameter', { families: [] }],
  ['too-few-rows', { columns: [Float64Array.of(1)] }],
  ['not-finite', { columns: [Float64Array.of(1, Infinity)] }],
])('refuses %s for %j', (code, change) => {
  expect(() => sweep(change)).toThrow(expect.objectContaining({ code }));
});
