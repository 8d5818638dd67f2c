import { seededRandom } from '#kernels/random.ts';
import { gaussianMixtureStarts } from './gaussian-mixture-starts.ts';
import { drawRows, largerSamples } from './k-means-starts.ts';
import { kMeans } from './k-means.ts';
import { mixtureEm, type EmRest, type EmRules } from './mixture-em-steps.ts';
import type { CovarianceFamily, MixtureModel } from './mixture-model.ts';
import type { MixtureRows } from './mixture-sums.ts';
import { hasDistinctRows, takeRows } from './points.ts';
import type { OnProgress } from '#kernels/progress.ts';

/** What the search works on. */
export interface MixtureSearchInput {
  /** Row-major, shape (n, p), scaled. */
  points: Float64Array;
  p: number;
  weights: Float64Array | null;
  family: CovarianceFamily;
  k: number;
  seed: number;
  starts: number;
  sampleSize: number;
  rules: EmRules;
  onProgress: OnProgress;
}

/** A first look at a start: this many rows, steps and this tolerance ... */
const HEAT = { rows: 3000, maxSteps: 100, tolerance: 1e-5 };
/** ... after which this share of the starts goes on, at least three. */
const FINALIST_SHARE = 0.5;

/** Rows with their weights for EM. */
export const mixtureRows = (
  points: Float64Array,
  p: number,
  weights: Float64Array | null,
): MixtureRows => ({
  points,
  n: points.length / p,
  weights,
});

/** The best model of all starts after they came to rest on a sample of the rows, then on larger ones. */
export function bestMixtureStart(input: MixtureSearchInput): MixtureModel {
  const { p, k, seed, starts, rules, onProgress } = input;
  const heat = sampled(input, Math.min(HEAT.rows, input.sampleSize));
  const columns = Array.from({ length: p }, (_, j) =>
    Float64Array.from({ length: heat.n }, (__, i) => heat.points[i * p + j]!),
  );
  const { centroids } = kMeans({ columns, k, seed, weights: heat.weights ?? undefined });
  const heatRules = { ...rules, ...HEAT, onStep: undefined };
  const tried: EmRest[] = [];
  const count = k === 1 ? 1 : starts;
  for (const start of gaussianMixtureStarts({
    ...input,
    ...heat,
    centres: centroids,
    count,
    floor: rules.floor,
  })) {
    tried.push(mixtureEm(start, heat, heatRules));
    onProgress((0.5 * tried.length) / count);
  }
  const finalists = tried.sort(sounder).slice(0, Math.max(3, Math.round(FINALIST_SHARE * count)));
  const sample = sampled(input, input.sampleSize);
  const rested: EmRest[] = [];
  for (const { model } of finalists) {
    rested.push(mixtureEm(model, sample, rules));
    onProgress(0.5 + (0.5 * rested.length) / finalists.length);
  }
  return throughLargerSamples(input, rested.sort(sounder)[0]!.model);
}

/** EM on samples of growing size: few steps are then left to take on all rows. */
function throughLargerSamples(input: MixtureSearchInput, start: MixtureModel): MixtureModel {
  let model = start;
  for (const size of largerSamples(input.sampleSize, input.points.length / input.p)) {
    ({ model } = mixtureEm(model, sampled(input, size), input.rules));
  }
  return model;
}

/** A seeded sample of rows; all of them when it fits or the sample holds fewer different rows than k. */
function sampled({ points, p, k, weights, seed }: MixtureSearchInput, size: number): MixtureRows {
  const n = points.length / p;
  if (size >= n) return mixtureRows(points, p, weights);
  const rows = drawRows(n, size, seededRandom(seed));
  const drawn = takeRows(points, p, rows);
  if (!hasDistinctRows({ points: drawn, n: size, p, rowOf: null, nDropped: 0 }, k))
    return mixtureRows(points, p, weights);
  return mixtureRows(drawn, p, weights && Float64Array.from(rows, (row) => weights[row]!));
}

/** True when a group lies on the floor or holds too few rows to have a spread of its own. */
export function hasCollapsed({ model, held, mass }: EmRest): boolean {
  return held.length > 0 || mass.some((rows) => rows < model.p + 1);
}

/** Sound models before collapsed ones, then the likelier first. */
function sounder(a: EmRest, b: EmRest): number {
  return Number(hasCollapsed(a)) - Number(hasCollapsed(b)) || b.logLik - a.logLik;
}
