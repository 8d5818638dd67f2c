import { kmeans } from 'ml-kmeans';
import { f64Bytes, withLab, type Lab } from '#kernels/dense/lab.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { takeRows } from './points.ts';
import { evenStride, rowTableBytes, rowTableOf } from './row-table.ts';

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
const START_ITERATIONS = 5;

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
    const drawn = takeRows(points, p, drawRows(n, Math.min(n, Math.max(ROWS_PER_START, 30 * k)), random));
    const rows = rowsOf(drawn, p);
    const seeds = seedRows(drawn, p, k, random).map((row) => rows[row] ?? []);
    const { centroids } = kmeans(rows, k, {
      initialization: seeds,
      maxIterations: START_ITERATIONS,
      tolerance: minMoveSquared,
    });
    yield Float64Array.from(centroids.flat());
  }
}

/** Growth from one sample to the next. */
const SAMPLE_GROWTH = 10;

/** Sizes of the samples on the way from a first one to all n rows, ten times larger each. */
export function* largerSamples(first: number, n: number): Generator<number> {
  for (let size = first * SAMPLE_GROWTH; size < n; size *= SAMPLE_GROWTH) yield size;
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

/** A row-major table as an array per row, for ml-kmeans. */
function rowsOf(points: Float64Array, p: number): number[][] {
  const rows: number[][] = [];
  for (let at = 0; at < points.length;) {
    const row: number[] = [];
    for (let j = 0; j < p; j++) row.push(points[at++]!);
    rows.push(row);
  }
  return rows;
}

/**
 * k-means++: each next centre drawn with probability proportional to squared distance, the best of a
 * few draws taken. Gives row numbers.
 */
function seedRows(points: Float64Array, p: number, k: number, random: Random): number[] {
  const n = points.length / p;
  const trials = 2 + Math.floor(Math.log(k));
  const room = rowTableBytes(n, p) + f64Bytes(evenStride(p), n, n, n);
  return withLab(room, (lab) => {
    const distances = distancesToRow(lab, points, p);
    const first = random.below(n);
    const chosen = [first];
    let nearestSq: Float64Array = distances(first).slice();
    let total = sumOf(nearestSq);
    while (chosen.length < k) {
      let best: { row: number; nearestSq: Float64Array; total: number } = { row: first, nearestSq, total: Infinity };
      for (let trial = 0; trial < trials; trial++) {
        const row = total > 0 ? pick(nearestSq, random.uniform() * total) : random.below(n);
        const next = lesser(nearestSq, distances(row));
        const nextTotal = sumOf(next);
        if (nextTotal < best.total) best = { row, nearestSq: next, total: nextTotal };
      }
      chosen.push(best.row);
      ({ nearestSq, total } = best);
    }
    return chosen;
  });
}

/** Squared distances of all rows to one of them, in an array that the next call writes over. */
function distancesToRow(lab: Lab, points: Float64Array, p: number): (row: number) => Float64Array {
  const rows = rowTableOf(lab, points, p, null);
  const { n, stride } = rows;
  const [centre, labels] = [lab.f64(stride), lab.u8(n)];
  const [sq, nextSq] = [lab.f64(n), lab.f64(n)];
  return (row) => {
    centre.set(rows.points.subarray(row * stride, (row + 1) * stride));
    lab.math.nearestTwo(rows, centre, 1, labels, sq, nextSq);
    return sq;
  };
}

function lesser(a: Float64Array, b: Float64Array): Float64Array {
  const out = new Float64Array(a.length);
  for (let i = 0; i < out.length; i++) out[i] = Math.min(a[i]!, b[i]!);
  return out;
}

function sumOf(values: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]!;
  return sum;
}

/** Index where the running sum of the shares first exceeds `target`. */
function pick(shares: Float64Array, target: number): number {
  let sum = 0;
  for (let i = 0; i < shares.length; i++) {
    sum += shares[i]!;
    if (sum > target) return i;
  }
  return shares.length - 1;
}
