import { KernelError } from '#kernels/kernel-error.ts';
import { copyInto, withLab, type Lab } from '#kernels/dense/lab.ts';
import { seededRandom } from '#kernels/random.ts';
import { exchangeRows } from './exchange.ts';
import { drawRows, kMeansStarts, largerSamples } from './k-means-starts.ts';
import { groupBytes, lloyd, lloydOf, type LloydResult } from './lloyd.ts';
import { hasDistinctRows, packedWeights, packPoints, takeRows, type PackedPoints } from './points.ts';
import type { OnProgress } from '#kernels/progress.ts';
import { evenStride, rowTableBytes, unpadded } from './row-table.ts';

/** Input of `kMeans`. */
export interface KMeansInput {
  /** p columns of n rows in one space (scores or ilr coordinates); NaN = missing. */
  columns: readonly Float64Array[];
  /** Number of groups, 1 to 250. */
  k: number;
  seed: number;
  /** Independent starts, default 25. */
  restarts?: number | undefined;
  /** Rows on which the starts compete, default 10,000. */
  sampleSize?: number | undefined;
  /** Lloyd iterations at most, default 300. */
  maxIterations?: number | undefined;
  /** Largest squared move of a centre, relative to the mean column variance, that ends the iterations; default 1e-6. */
  tolerance?: number | undefined;
  /** Interval lengths (m), one per row, > 0: weighted means and inertia. */
  weights?: Float64Array | undefined;
  onProgress?: OnProgress | undefined;
}

/** A k-means partition. */
export interface KMeansResult {
  /** 1..K per input row by descending total weight (ties: first occurrence); 0 = a coordinate is missing. */
  labels: Uint8Array;
  /** Row-major, shape (K, p), in label order. */
  centroids: Float64Array;
  k: number;
  p: number;
  /** Total weighted squared distance to the own centroid. */
  inertia: number;
  iterations: number;
  converged: boolean;
  /** Rows of each label. */
  sizes: number[];
  /** Total weight of each label (rows when unweighted). */
  weightOf: number[];
  nUsed: number;
  nDropped: number;
  notes: string[];
}

/** Starts are compared after some iterations on this many rows of the sample ... */
const HEAT = { rows: 3000, iterations: 4 };
/** ... at least this many of them run on all of it, more when the sample is small ... */
const FINALISTS = 5;
const FINALIST_ROWS = 50_000;
const RUN_ITERATIONS = 12;
/** ... and the best share of those goes on to rest. */
const LAST_SHARE = 0.4;
/** Passes of single-row exchanges over the sample at most. */
const EXCHANGE_PASSES = 20;
/** How much coarser than the final tolerance a restart may stop (squared distances). */
const START_LOOSENESS = 100;

/** Most groups that can be asked for. */
const MOST_GROUPS = 250;

interface Plan extends Required<Omit<KMeansInput, 'columns' | 'weights' | 'onProgress'>> {
  /** Rows padded to an even number of coordinates. */
  packed: PackedPoints;
  weights: Float64Array | null;
  /** Move of a centre that counts as none. */
  minMove: number;
  onProgress: OnProgress;
}

/**
 * k-means: many starts compete on a seeded sample of rows, the best centres are polished by exact
 * Lloyd iterations over all rows (through samples ten times larger each). Same input and seed, same
 * result.
 *
 * @throws {KernelError} `shape`, `too-few-parts`, `not-finite`, `not-positive` (a weight), `too-few-rows`
 *   when fewer complete (or fewer different) rows than k, `bad-parameter`.
 * @see Lloyd (1982); Arthur & Vassilvitskii (2007) (from memory).
 */
export function kMeans(input: KMeansInput): KMeansResult {
  const nRows = input.columns[0]?.length ?? 0;
  const p = input.columns.length;
  return withLab(rowTableBytes(nRows, p) + groupBytes(nRows, Math.min(input.k, MOST_GROUPS), p), (lab) => {
    const plan = planOf(lab, input);
    const centres = bestSampleCentres(plan);
    return numbered(plan, polish(lab, plan, centres), nRows, p);
  });
}

function planOf(lab: Lab, input: KMeansInput): Plan {
  const {
    k,
    seed,
    restarts = 25,
    sampleSize = 10_000,
    maxIterations = 300,
    tolerance = 1e-6,
  } = input;
  wholeNumber('k', k, 1, MOST_GROUPS);
  wholeNumber('restarts', restarts, 1, 1000);
  wholeNumber('sampleSize', sampleSize, 1, Infinity);
  wholeNumber('maxIterations', maxIterations, 1, Infinity);
  if (!(tolerance >= 0))
    throw new KernelError('bad-parameter', `expected tolerance >= 0, found ${tolerance}`);
  const stride = evenStride(input.columns.length);
  const room = lab.f64((input.columns[0]?.length ?? 0) * stride);
  const packed = packPoints(input.columns, { stride, room });
  if (!hasDistinctRows(packed, k)) {
    throw new KernelError(
      'too-few-rows',
      `${k} groups need ${k} different complete rows; ${packed.n} complete rows hold fewer`,
      { k, n: packed.n },
    );
  }
  const weights = packedWeights(input.weights, packed, input.columns[0]?.length ?? 0);
  const spread = sampleOf({ packed, weights, seed }, sampleSize).points;
  const minMove = Math.sqrt((tolerance * totalVariance(spread, stride)) / input.columns.length);
  return {
    k,
    seed,
    restarts,
    sampleSize,
    maxIterations,
    tolerance,
    packed,
    weights,
    minMove,
    onProgress: input.onProgress ?? (() => undefined),
  };
}

function wholeNumber(name: string, value: number, from: number, to: number): void {
  if (!(value >= from && value <= to && Math.floor(value) === value)) {
    throw new KernelError(
      'bad-parameter',
      `expected ${name} a whole number from ${from} to ${to}, found ${value}`,
      { [name]: value },
    );
  }
}

/** Sum of the variances of the columns. */
function totalVariance(points: Float64Array, p: number): number {
  const n = points.length / p;
  let squares = 0;
  for (let j = 0; j < p; j++) {
    let mean = 0;
    for (let at = j; at < points.length; at += p) mean += points[at]! / n;
    for (let at = j; at < points.length; at += p) squares += (points[at]! - mean) ** 2;
  }
  return squares / n;
}

/** A seeded sample of rows with their weights; everything when it fits. */
function sampleOf(
  { packed, weights, seed }: Pick<Plan, 'packed' | 'weights' | 'seed'>,
  size: number,
): { points: Float64Array; weights: Float64Array | null } {
  if (size >= packed.n) return { points: packed.points, weights };
  const rows = drawRows(packed.n, size, seededRandom(seed));
  return {
    points: takeRows(packed.points, packed.p, rows),
    weights: weights && Float64Array.from(rows, (row) => weights[row] ?? 0),
  };
}

/** Restarts compared on a few rows of the sample, then fewer and fewer on all of it, the last to rest. */
function bestSampleCentres(plan: Plan): Float64Array {
  const { packed, k, seed, restarts, maxIterations, minMove, onProgress } = plan;
  const p = packed.p;
  const sample = sampleOf(plan, Math.max(plan.sampleSize, k));
  const heatRows = sampleOf(plan, Math.min(plan.sampleSize, Math.max(HEAT.rows, 30 * k)));
  const run = (rows: typeof sample, centres: Float64Array, most: number): LloydResult =>
    lloyd({ ...rows, p, centres, maxIterations: Math.min(maxIterations, most), minMove });
  const tried: LloydResult[] = [];
  const minMoveSquared = START_LOOSENESS * minMove * minMove;
  for (const start of kMeansStarts({ points: sample.points, p, k, seed, restarts, minMoveSquared })) {
    tried.push(run(heatRows, start, HEAT.iterations));
    onProgress((0.4 * tried.length) / restarts);
  }
  const nFinalists = Math.max(FINALISTS, Math.floor(FINALIST_ROWS / (sample.points.length / p)));
  const finalists = tried.sort(byInertia).slice(0, nFinalists);
  const runs = finalists.map(({ centres }, done) => {
    onProgress(0.4 + (0.05 * done) / finalists.length);
    return run(sample, centres, RUN_ITERATIONS);
  });
  const last = distinct(runs.sort(byInertia)).slice(0, Math.ceil(nFinalists * LAST_SHARE));
  const rested = last.map((finalist, done) => {
    onProgress(0.45 + (0.05 * done) / last.length);
    const result = run(sample, finalist.centres, maxIterations);
    const gained = exchangeRows({ ...sample, ...result, p, maxPasses: EXCHANGE_PASSES });
    return { centres: result.centres, inertia: result.inertia - gained };
  });
  return rested.sort(byInertia)[0]!.centres;
}

const byInertia = (a: { inertia: number }, b: { inertia: number }): number => a.inertia - b.inertia;

/** Without those that came to rest where the one before them did. */
const distinct = (sorted: readonly LloydResult[]): LloydResult[] =>
  sorted.filter(({ inertia }, i) => i === 0 || inertia > sorted[i - 1]!.inertia * (1 + 1e-9));

/** Lloyd on samples of growing size, at last on all rows. */
function polish(lab: Lab, plan: Plan, start: Float64Array): LloydResult {
  const { packed, weights, maxIterations, minMove, onProgress } = plan;
  const { points, n, p } = packed;
  let centres = start;
  for (const size of largerSamples(plan.sampleSize, n)) {
    centres = lloyd({ ...sampleOf(plan, size), p, centres, maxIterations, minMove }).centres;
  }
  const rows = { points, n, stride: p, weights: weights && copyInto(lab, weights) };
  const report = (share: number) => onProgress(0.5 + 0.5 * share);
  return lloydOf(lab, rows, { centres, maxIterations, minMove, onProgress: report });
}

/** Labels 1..K by descending weight, ties by first occurrence; spread over all input rows. */
function numbered(
  plan: Plan,
  { labels, centres: padded, inertia, iterations, converged }: LloydResult,
  nRows: number,
  p: number,
): KMeansResult {
  const { packed, weights, k } = plan;
  const centres = unpadded(padded, p);
  const size = new Array<number>(k).fill(0);
  const weight = new Array<number>(k).fill(0);
  const first = new Array<number>(k).fill(Infinity);
  for (let i = 0; i < packed.n; i++) {
    const label = labels[i]!;
    if (first[label] === Infinity) first[label] = i;
    size[label]! += 1;
    weight[label]! += weights ? weights[i]! : 1;
  }
  const order = [...size.keys()].sort((a, b) => weight[b]! - weight[a]! || first[a]! - first[b]!);
  const rank = Uint8Array.from({ length: k }, (_, label) => order.indexOf(label) + 1);
  const out = new Uint8Array(nRows);
  for (let i = 0; i < packed.n; i++) out[packed.rowOf ? packed.rowOf[i]! : i] = rank[labels[i]!]!;
  const notes = converged
    ? []
    : [`stopped after ${iterations} iterations before the centres came to rest`];
  if (packed.nDropped > 0)
    notes.push(`${packed.nDropped} rows with a missing coordinate were left out (label 0)`);
  return {
    labels: out,
    centroids: Float64Array.from(
      order.flatMap((label) => Array.from(centres.subarray(label * p, (label + 1) * p))),
    ),
    k,
    p,
    inertia,
    iterations,
    converged,
    sizes: order.map((label) => size[label]!),
    weightOf: order.map((label) => weight[label]!),
    nUsed: packed.n,
    nDropped: packed.nDropped,
    notes,
  };
}
