import { expect, it } from 'vitest';
import { lloyd } from '#kernels/clustering/lloyd.ts';
import { seededRandom } from '#kernels/random.ts';

const random = seededRandom(21);

function run(p: number, maxIterations: number, weights: Float64Array | null = null) {
  const points = Float64Array.from(seededValues(p, 600 * p));
  const centres = points.slice(0, 4 * p);
  return { points, result: lloyd({ points, p, centres, weights, maxIterations, minMove: 0 }) };
}
const seededValues = (seed: number, count: number) => {
  const stream = seededRandom(seed);
  return Array.from({ length: count }, () => stream.normal());
};

/** The same iterations written out plainly: every distance, every time. */
function plainLloyd(
  points: Float64Array,
  p: number,
  start: Float64Array,
  iterations: number,
): number {
  let centres = start.slice();
  const n = points.length / p;
  const k = start.length / p;
  const sq = (i: number, c: number) => {
    let sum = 0;
    for (let j = 0; j < p; j++) sum += (points[i * p + j]! - centres[c * p + j]!) ** 2;
    return sum;
  };
  const nearest = (i: number) =>
    [...Array(k).keys()].reduce((best, c) => (sq(i, c) < sq(i, best) ? c : best), 0);
  for (let step = 0; step < iterations; step++) {
    const labels = Array.from({ length: n }, (_, i) => nearest(i));
    centres = Float64Array.from(centres, (_, at) => {
      const own = labels.flatMap((label, i) =>
        label === Math.floor(at / p) ? [points[i * p + (at % p)]!] : [],
      );
      return own.reduce((a, b) => a + b, 0) / own.length;
    });
  }
  return Array.from({ length: n }, (_, i) => sq(i, nearest(i))).reduce((a, b) => a + b, 0);
}

it.each([1, 2, 4, 5, 8, 11])('skipping by bounds changes nothing in %i dimensions', (p) => {
  const { points, result } = run(p, 300);
  expect(result.converged).toBe(true);
  const plain = plainLloyd(points, p, points.slice(0, 4 * p), result.iterations + 2);
  expect(result.inertia).toBeCloseTo(plain, 8);
});

it('inertia never rises from one iteration to the next', () => {
  const inertias = [1, 2, 3, 4, 6, 9, 14, 20, 50].map((limit) => run(3, limit).result.inertia);
  for (let i = 1; i < inertias.length; i++)
    expect(inertias[i]).toBeLessThanOrEqual(inertias[i - 1]! + 1e-9);
});

it('within plus between is the total', () => {
  const weights = Float64Array.from({ length: 600 }, () => 0.5 + random.uniform());
  const { points, result } = run(4, 300, weights);
  const total = weights.reduce((a, b) => a + b, 0);
  const mean = [0, 1, 2, 3].map(
    (j) => weights.reduce((sum, w, i) => sum + w * points[4 * i + j]!, 0) / total,
  );
  const spread = (at: (i: number, j: number) => number) =>
    weights.reduce(
      (sum, w, i) => sum + w * mean.reduce((sq, m, j) => sq + (at(i, j) - m) ** 2, 0),
      0,
    );
  const between = spread((i, j) => result.centres[result.labels[i]! * 4 + j]!);
  expect(result.inertia + between).toBeCloseTo(
    spread((i, j) => points[4 * i + j]!),
    7,
  );
});

it('puts a centre without rows on the farthest row', () => {
  const points = Float64Array.of(0, 0.1, 0.2, 10, 10.1, 30);
  const { labels, inertia } = lloyd({
    points,
    p: 1,
    centres: Float64Array.of(0, 10, 1e6),
    weights: null,
    maxIterations: 50,
    minMove: 0,
  });
  expect([...labels]).toEqual([0, 0, 0, 1, 1, 2]);
  expect(inertia).toBeCloseTo(0.02 + 0.005, 12);
});
