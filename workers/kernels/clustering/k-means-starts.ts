import { kmeans } from 'ml-kmeans';
import { seededRandom, type Random } from '#kernels/random.ts';

/** What the restarts work on: a table of rows and how often to try. */
export interface StartsInput {
  /** Row-major, shape (n, p). */
  points: Float64Array;
  p: number;
  k: number;
  seed: number;
  restarts: number;
  /** A restart ends when every centre moved less than this squared distance. */
  minMoveSquared: number;
}

/** Rows one restart sees: enough to find the basins, cheap enough to try many times. */
export const ROWS_PER_START = 1000;
/** A restart that has not come to rest by then is taken as it is: it is polished afterwards. */
const START_ITERATIONS = 20;

/**
 * Starting centres by independent restarts: each draws its own rows (all when n <= 1,000), seeds k
 * centres by k-means++ and iterates with ml-kmeans. Restart r draws from sub-seed seed + r, so the
 * set of starts does not depend on the order they run in.
 *
 * @returns One (k, p) row-major table of centres per restart.
 * @see Arthur & Vassilvitskii (2007), k-means++, SODA (from memory).
 */
export function* kMeansStarts(input: StartsInput): Generator<Float64Array> {
  const { points, p, k, seed, restarts, minMoveSquared } = input;
  const n = points.length / p;
  for (let restart = 0; restart < restarts; restart++) {
    const random = seededRandom(seed + restart);
    const drawn = drawRows(n, Math.min(n, Math.max(ROWS_PER_START, 30 * k)), random);
    const rows = Array.from(drawn, (row) => Array.from(points.subarray(row * p, (row + 1) * p)));
    const seeds = seedCentres(rows, k, random);
    const { centroids } = kmeans(rows, k, {
      initialization: seeds,
      maxIterations: START_ITERATIONS,
      tolerance: minMoveSquared,
    });
    yield Float64Array.from(centroids.flat());
  }
}

/** `count` different rows of n in ascending order, one drawn from each of `count` equal stretches. */
export function drawRows(n: number, count: number, random: Random): Uint32Array {
  const rows = new Uint32Array(count);
  for (let i = 0; i < count; i++) {
    const from = Math.floor((i * n) / count);
    const to = Math.floor(((i + 1) * n) / count);
    rows[i] = from + (to - from > 1 ? random.below(to - from) : 0);
  }
  return rows;
}

/**
 * k-means++: each next centre drawn with probability proportional to squared distance, the best of a
 * few draws taken.
 */
function seedCentres(rows: number[][], k: number, random: Random): number[][] {
  const trials = 2 + Math.floor(Math.log(k));
  const first = rows[random.below(rows.length)] ?? [];
  const centres = [first];
  let nearestSq = Float64Array.from(rows, (row) => squared(row, first));
  while (centres.length < k) {
    const total = sumOf(nearestSq);
    let best = { row: first, nearestSq, total: Infinity };
    for (let trial = 0; trial < trials; trial++) {
      const drawn =
        total > 0 ? pick(nearestSq, random.uniform() * total) : random.below(rows.length);
      const row = rows[drawn] ?? first;
      const next = nearestSq.map((sq, i) => Math.min(sq, squared(rows[i]!, row)));
      const nextTotal = sumOf(next);
      if (nextTotal < best.total) best = { row, nearestSq: next, total: nextTotal };
    }
    centres.push(best.row);
    nearestSq = best.nearestSq;
  }
  return centres;
}

const sumOf = (values: Float64Array): number => values.reduce((sum, value) => sum + value, 0);

/** Index where the running sum of the shares first exceeds `target`. */
function pick(shares: Float64Array, target: number): number {
  let sum = 0;
  for (let i = 0; i < shares.length; i++) {
    sum += shares[i]!;
    if (sum > target) return i;
  }
  return shares.length - 1;
}

function squared(a: readonly number[], b: readonly number[]): number {
  let sq = 0;
  for (let j = 0; j < a.length; j++) sq += (a[j]! - b[j]!) ** 2;
  return sq;
}
