import { seededRandom } from '#kernels/random.ts';
import { drawRows, kMeansStarts } from './k-means-starts.ts';
import { squaredDistance } from '#kernels/dense/squared-distance.ts';
import {
  emptyMixture,
  mixtureDensity,
  type CovarianceFamily,
  type MixtureModel,
} from './mixture-model.ts';
import { emptySums } from './mixture-sums.ts';
import { maximise } from './mixture-em-steps.ts';
import { packedSize } from './packed-cholesky.ts';

/** What the starts are made from. */
export interface MixtureStartsInput {
  /** Row-major, shape (n, p). */
  points: Float64Array;
  weights: Float64Array | null;
  family: CovarianceFamily;
  k: number;
  p: number;
  /** Row-major, shape (k, p): the centres of a k-means of these rows, the first start. */
  centres: Float64Array;
  seed: number;
  count: number;
  /** Least eigenvalue of a covariance. */
  floor: number;
}

/**
 * Starting models: the given k-means; then in turn a k-means restart of its own and groups of equal
 * share and common spread around rows drawn at random. Start s draws from sub-seed seed + s.
 *
 * @see Biernacki, Celeux & Govaert (2003), Choosing starting values for the EM algorithm, Comput.
 *   Stat. Data Anal. 41 (from memory).
 */
export function* gaussianMixtureStarts(input: MixtureStartsInput): Generator<MixtureModel> {
  const { points, p, k, seed, count, centres } = input;
  const whole = modelOfCentres({ ...input, k: 1, centres: new Float64Array(p) });
  yield modelOfCentres(input);
  for (let s = 1; s < count; s++) {
    if (s % 2 === 0) {
      const [own = centres] = kMeansStarts({
        points,
        p,
        k,
        seed: seed + s,
        restarts: 1,
        minMoveSquared: 0,
      });
      yield modelOfCentres({ ...input, centres: own });
    } else yield modelAroundRows(input, seed + s, whole);
  }
}

/** Each row wholly in the group of its nearest centre. */
function modelOfCentres({
  points,
  weights,
  family,
  k,
  p,
  centres,
  floor,
}: MixtureStartsInput): MixtureModel {
  const model = emptyMixture(family, k, p);
  const size = packedSize(p);
  const sums = emptySums(k, p);
  for (let i = 0; i < points.length / p; i++) {
    const c = nearest(points, i, centres, k, p);
    const w = weights ? weights[i]! : 1;
    sums.mass[c]! += w;
    for (let a = 0, at = c * size; a < p; a++) {
      const wd = w * points[i * p + a]!;
      sums.first[c * p + a]! += wd;
      for (let b = 0; b <= a; b++) sums.second[at++]! += wd * points[i * p + b]!;
    }
  }
  const unit = mixtureDensity(unitSpread(model));
  maximise(unit, sums, floor, new Float64Array(size));
  return unit.model;
}

/** Unit covariances about the origin: a density to which the first sums are relative. */
function unitSpread(model: MixtureModel): MixtureModel {
  const size = packedSize(model.p);
  for (let c = 0; c < model.k; c++)
    for (let a = 0, i = c * size; a < model.p; a++, i += a + 1) model.covariances[i] = 1;
  return model;
}

function nearest(
  points: Float64Array,
  row: number,
  centres: Float64Array,
  k: number,
  p: number,
): number {
  let best = 0;
  let bestSq = Infinity;
  for (let c = 0; c < k; c++) {
    const sq = squaredDistance(points, row, centres, c, p);
    if (sq >= bestSq) continue;
    best = c;
    bestSq = sq;
  }
  return best;
}

/** Equal shares around rows drawn at random, each with the spread of the whole shrunk to its part. */
function modelAroundRows(
  { points, family, k, p }: MixtureStartsInput,
  seed: number,
  whole: MixtureModel,
): MixtureModel {
  const random = seededRandom(seed);
  const n = points.length / p;
  const model = emptyMixture(family, k, p);
  model.shares.fill(1 / k);
  const order = drawRows(n, n, random);
  for (let c = 0; c < k; c++) {
    const pick = c + random.below(n - c);
    [order[c], order[pick]] = [order[pick]!, order[c]!];
    for (let j = 0; j < p; j++) model.means[c * p + j] = points[order[c]! * p + j]!;
  }
  const shrink = k ** (-2 / p);
  const size = packedSize(p);
  for (let i = 0; i < model.covariances.length; i++)
    model.covariances[i] = shrink * whole.covariances[i % size]!;
  return model;
}
