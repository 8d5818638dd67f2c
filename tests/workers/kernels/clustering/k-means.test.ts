import { expect, it } from 'vitest';
import { kMeans, type KMeansInput } from '#kernels/clustering/k-means.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';

/** (0,0) (0,1) (1,0) (5,5) (5,6) (6,5): optima computed over all partitions. */
const X = Float64Array.from([0, 0, 1, 5, 5, 6]);
const Y = Float64Array.from([0, 1, 0, 5, 6, 5]);
const six = [X, Y];

/** Blobs of unit spread around given centres, `each` rows per centre in turn. */
function blobs(centres: number[][], each: number, seed: number): Float64Array[] {
  const random = seededRandom(seed);
  const p = centres[0]?.length ?? 0;
  const columns = Array.from({ length: p }, () => new Float64Array(each * centres.length));
  for (let row = 0; row < each * centres.length; row++) {
    for (let j = 0; j < p; j++) {
      columns[j]![row] = centres[row % centres.length]![j]! + random.normal();
    }
  }
  return columns;
}

const codeOf = (input: KMeansInput): string => {
  try {
    kMeans(input);
  } catch (error) {
    if (error instanceof KernelError) return error.code;
    throw error;
  }
  return 'accepted';
};

it.each([
  [1, 77.666667],
  [2, 2.666667],
  [3, 1.833333],
])('reaches the optimum of six points in %i groups', (k, inertia) => {
  expect(kMeans({ columns: six, k, seed: 1 }).inertia).toBeCloseTo(inertia, 5);
});

it('numbers groups by size, ties by first occurrence, and gives their means', () => {
  const result = kMeans({ columns: six.map((c) => c.slice().reverse()), k: 2, seed: 3 });
  expect([...result.labels]).toEqual([1, 1, 1, 2, 2, 2]);
  expect(result.sizes).toEqual([3, 3]);
  const means = [16 / 3, 16 / 3, 1 / 3, 1 / 3];
  result.centroids.forEach((value, i) => expect(value).toBeCloseTo(means[i] ?? NaN, 12));
});

it('gives the same result bit for bit for the same seed', () => {
  const columns = blobs(
    [
      [0, 0, 0],
      [2, 0, 1],
      [0, 3, 0],
    ],
    5000,
    11,
  );
  const [a, b] = [1, 2].map(() => kMeans({ columns, k: 3, seed: 5 }));
  expect(a).toEqual(b);
});

it('ends at a partition that further exact steps do not improve', () => {
  const columns = blobs(
    [
      [0, 0],
      [4, 0],
      [0, 4],
      [4, 4],
    ],
    6000,
    2,
  ); // beyond the sample size
  const { labels, centroids, inertia, converged } = kMeans({
    columns,
    k: 4,
    seed: 1,
    tolerance: 0,
  });
  let direct = 0;
  for (let row = 0; row < 24000; row++) {
    const sq = [0, 1, 2, 3].map(
      (c) =>
        (columns[0]![row]! - centroids[2 * c]!) ** 2 +
        (columns[1]![row]! - centroids[2 * c + 1]!) ** 2,
    );
    expect(labels[row]! - 1).toBe(sq.indexOf(Math.min(...sq)));
    direct += Math.min(...sq);
  }
  expect(converged).toBe(true);
  expect(inertia).toBeCloseTo(direct, 6);
});

it('finds the blobs it was given, whatever the order of the rows', () => {
  const columns = blobs(
    [
      [0, 0, 0, 0, 0],
      [9, 0, 0, 0, 0],
      [0, 9, 0, 0, 0],
      [0, 0, 9, 0, 0],
      [0, 0, 0, 9, 9],
    ],
    3000,
    4,
  );
  const { labels, sizes } = kMeans({ columns, k: 5, seed: 2 });
  for (let g = 0; g < 5; g++) {
    const own = labels.filter((_, row) => row % 5 === g);
    expect(own.filter((label) => label === own[0]).length).toBeGreaterThan(2995);
  }
  expect(sizes.reduce((a, b) => a + b)).toBe(15000);
});

it('treats an integer weight as that many equal rows', () => {
  const weights = Float64Array.from([1, 2, 3, 1, 1, 2]);
  const weighted = kMeans({ columns: six, k: 2, seed: 1, weights });
  const repeat = (c: Float64Array) =>
    Float64Array.from([...c].flatMap((x, i) => new Array<number>(weights[i]!).fill(x)));
  const repeated = kMeans({ columns: six.map(repeat), k: 2, seed: 1 });
  expect(weighted.inertia).toBeCloseTo(repeated.inertia, 10);
  expect(weighted.weightOf).toEqual(repeated.sizes);
  [...weighted.centroids].forEach((c, i) => expect(c).toBeCloseTo(repeated.centroids[i]!, 10));
});

it('leaves rows with a missing coordinate out and says so', () => {
  const columns = [Float64Array.from([0, NaN, 1, 5, 5, 6]), Y];
  const result = kMeans({ columns, k: 2, seed: 1 });
  expect([...result.labels]).toEqual([2, 0, 2, 1, 1, 1]);
  expect([result.nUsed, result.nDropped]).toEqual([5, 1]);
  expect(result.notes.join()).toContain('1 rows with a missing coordinate');
});

it('notes when the iterations run out', () => {
  const columns = blobs(
    [
      [0, 0],
      [1, 0],
    ],
    3000,
    9,
  );
  const result = kMeans({
    columns,
    k: 5,
    seed: 1,
    sampleSize: 100,
    maxIterations: 2,
    tolerance: 0,
  });
  expect(result.converged).toBe(false);
  expect(result.notes.join()).toContain('stopped after 2 iterations');
});

it('takes a single row, and equal rows, as one group', () => {
  expect(kMeans({ columns: [Float64Array.of(3)], k: 1, seed: 1 })).toMatchObject({
    inertia: 0,
    sizes: [1],
  });
  expect(kMeans({ columns: [new Float64Array(9).fill(2)], k: 1, seed: 1 })).toMatchObject({
    inertia: 0,
    sizes: [9],
  });
});

it('reports progress upwards to 1 and lets the listener cancel', () => {
  const seen: number[] = [];
  kMeans({ columns: six, k: 2, seed: 1, onProgress: (share) => void seen.push(share) });
  expect(seen).toEqual([...seen].sort((a, b) => a - b));
  const stop = () => {
    throw new Error('cancelled');
  };
  expect(() => kMeans({ columns: six, k: 2, seed: 1, onProgress: stop })).toThrow('cancelled');
});

it.each<[string, Partial<KMeansInput>]>([
  ['bad-parameter', { k: 0 }],
  ['bad-parameter', { k: 1.5 }],
  ['bad-parameter', { k: 251 }],
  ['bad-parameter', { restarts: 0 }],
  ['bad-parameter', { tolerance: NaN }],
  ['too-few-rows', { k: 7 }],
  ['too-few-rows', { k: 2, columns: [new Float64Array(8).fill(1)] }],
  ['too-few-rows', { columns: [Float64Array.of(NaN, NaN)] }],
  ['too-few-parts', { columns: [] }],
  ['shape', { columns: [X, Y.slice(1)] }],
  ['shape', { weights: new Float64Array(5) }],
  ['not-finite', { columns: [X, Y.map((y) => (y === 6 ? Infinity : y))] }],
  ['not-positive', { weights: Float64Array.of(1, 1, 1, 0, 1, 1) }],
])('refuses %s for %j', (code, change) => {
  expect(codeOf({ columns: six, k: 2, seed: 1, ...change })).toBe(code);
});
