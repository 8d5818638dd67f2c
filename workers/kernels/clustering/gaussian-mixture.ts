import { KernelError } from '#kernels/kernel-error.ts';
import { mixtureEm, type EmRest } from './mixture-em-steps.ts';
import { membershipOfPacked, reorderMembership, reorderMixture, type MixtureMembership } from './mixture-membership.ts';
import {
  COVARIANCE_FAMILIES,
  mixtureParameterCount,
  type CovarianceFamily,
  type MixtureModel,
} from './mixture-model.ts';
import { scaledPoints, unscaleModel } from './mixture-scale.ts';
import { bestMixtureStart, mixtureRows } from './mixture-search.ts';
import { hasDistinctRows, packedWeights, packPoints, type PackedPoints } from './points.ts';
import type { OnProgress } from '#kernels/progress.ts';

/** Input of `gaussianMixture`. */
export interface GaussianMixtureInput {
  /** p columns of n rows in one space (scores or ilr coordinates); NaN = missing. */
  columns: readonly Float64Array[];
  /** Number of groups, 1 to 250. */
  k: number;
  family: CovarianceFamily;
  seed: number;
  /** Independent starts, the first from k-means; default 10. */
  starts?: number | undefined;
  /** EM steps at most, default 2,000. */
  maxSteps?: number | undefined;
  /** Gain in ln L, relative to 1 + |ln L|, that counts as none; default 1e-8. */
  tolerance?: number | undefined;
  /** Least complete rows per free parameter of the full family, default 5; the others need 1. */
  rowsPerParameter?: number | undefined;
  /** Rows on which the starts compete, default 10,000. */
  sampleSize?: number | undefined;
  /** Interval lengths (m), one per row, > 0; they count relative to their mean. */
  weights?: Float64Array | undefined;
  onProgress?: OnProgress | undefined;
}

/** A fitted mixture and the membership of the rows; groups by descending total weight. */
export interface GaussianMixture extends MixtureMembership {
  model: MixtureModel;
  /** Maximised log-likelihood, natural log. */
  logLik: number;
  /** Free parameters. */
  parameters: number;
  /** -2 ln L + parameters ln n, lower is better. */
  bic: number;
  /** BIC + 2 times the entropy of the responsibilities, lower is better. */
  icl: number;
  /** Rows and total weight (rows when unweighted) of each label. */
  sizes: number[];
  weightOf: number[];
  /** EM steps on all rows. */
  steps: number;
  converged: boolean;
  nUsed: number;
  nDropped: number;
  notes: string[];
}

/** Least eigenvalue of a covariance relative to the mean variance of the coordinates. */
const RIDGE = 1e-6;

/**
 * Gaussian mixture by EM: several seeded starts compete on a sample of rows, the likeliest is brought
 * to rest on all rows. Eigenvalues of a covariance are held at or above 1e-6 of the mean variance of
 * the coordinates (noted when it happens); a start in which a group collapsed to that floor, or to
 * fewer rows than p + 1, wins only when all did. Same input and seed, same result.
 *
 * @throws {KernelError} `shape`, `too-few-parts`, `not-finite`, `not-positive` (a weight),
 *   `bad-parameter`, `singular` when all rows are equal, `too-few-rows` with { n, needed } when there
 *   are fewer complete rows than the family needs or fewer different ones than k.
 * @see Schwarz (1978), Ann. Stat. 6; Fraley & Raftery (2002), JASA 97; Biernacki, Celeux & Govaert
 *   (2000), IEEE PAMI 22 (from memory).
 */
export function gaussianMixture(input: GaussianMixtureInput): GaussianMixture {
  const { columns, k, family, seed, starts = 10, maxSteps = 2000, tolerance = 1e-8 } = input;
  const { sampleSize = 10_000, onProgress = () => undefined } = input;
  requireSettings({ k, starts, maxSteps, sampleSize }, tolerance, input);
  const packed = packPoints(columns);
  const { n, p } = packed;
  const parameters = mixtureParameterCount(family, k, p);
  requireRows(packed, input, parameters);
  const weights = meanOne(packedWeights(input.weights, packed, columns[0]?.length ?? 0));
  const scaled = scaledPoints(packed, weights);
  const offset = -n * p * Math.log(scaled.scale);
  const rules = { floor: RIDGE * scaled.meanVariance, maxSteps, tolerance, logLikOffset: 0 };
  const start = bestMixtureStart({
    ...{ points: scaled.points, p, weights, family, k, seed, starts, sampleSize, rules },
    onProgress: (share) => onProgress(0.5 * share),
  });
  const rest = mixtureEm(start, mixtureRows(scaled.points, p, weights), {
    ...rules,
    logLikOffset: offset,
    onStep: (steps) => onProgress(1 - 0.5 * Math.exp(-steps / 50)),
  });
  const bic = -2 * rest.logLik + parameters * Math.log(n);
  const fitted = numbered(unscaleModel(rest.model, scaled), input, packed, weights);
  onProgress(1);
  return {
    ...fitted,
    logLik: rest.logLik,
    parameters,
    bic,
    icl: bic + 2 * fitted.entropy,
    steps: rest.steps,
    converged: rest.converged,
    nUsed: n,
    nDropped: packed.nDropped,
    notes: notesOf(rest, packed),
  };
}

function requireSettings(
  wholeNumbers: Record<string, number>,
  tolerance: number,
  { family, rowsPerParameter = 5 }: GaussianMixtureInput,
): void {
  for (const [name, value] of Object.entries(wholeNumbers)) {
    const most = name === 'k' ? 250 : 1e9;
    if (value >= 1 && value <= most && Math.floor(value) === value) continue;
    const message = `expected ${name} a whole number from 1 to ${most}, found ${value}`;
    throw new KernelError('bad-parameter', message, { [name]: value });
  }
  if (!COVARIANCE_FAMILIES.includes(family)) {
    const message = `expected a family of ${COVARIANCE_FAMILIES.join(', ')}, found ${String(family)}`;
    throw new KernelError('bad-parameter', message);
  }
  if (!(tolerance >= 0 && rowsPerParameter >= 0)) {
    const message = `expected tolerance and rowsPerParameter >= 0, found ${tolerance} and ${rowsPerParameter}`;
    throw new KernelError('bad-parameter', message);
  }
}

function requireRows(
  packed: PackedPoints,
  { k, family, rowsPerParameter = 5 }: GaussianMixtureInput,
  parameters: number,
): void {
  const { n } = packed;
  const needed = Math.ceil((family === 'full' ? rowsPerParameter : 1) * parameters);
  if (n < needed) {
    const other = family === 'full' ? 'fewer groups or the diagonal family' : 'fewer groups';
    const message = `${k} groups of the ${family} family have ${parameters} free parameters and need ${needed} complete rows, found ${n}; try ${other}`;
    throw new KernelError('too-few-rows', message, { n, needed });
  }
  if (hasDistinctRows(packed, k)) return;
  const message = `${k} groups need ${k} different complete rows; ${n} complete rows hold fewer`;
  throw new KernelError('too-few-rows', message, { n, needed: k });
}

/** Weights relative to their mean, so that the log-likelihood counts rows. */
function meanOne(weights: Float64Array | null): Float64Array | null {
  if (!weights) return null;
  const largest = weights.reduce((most, weight) => Math.max(most, weight), 0);
  const mean = weights.reduce((sum, weight) => sum + weight / largest, 0) / weights.length;
  return weights.map((weight) => weight / largest / mean);
}

/** Memberships with the groups in order of descending weight, ties by first occurrence. */
function numbered(
  model: MixtureModel,
  { columns, weights: given }: GaussianMixtureInput,
  packed: PackedPoints,
  weights: Float64Array | null,
): MixtureMembership & Pick<GaussianMixture, 'model' | 'sizes' | 'weightOf'> {
  const membership = membershipOfPacked(model, packed, columns[0]?.length ?? 0, weights);
  const { labels } = membership;
  const { k } = model;
  const size = new Array<number>(k).fill(0);
  const weight = new Array<number>(k).fill(0);
  const first = new Array<number>(k).fill(Infinity);
  for (let i = 0; i < packed.n; i++) {
    const row = packed.rowOf ? packed.rowOf[i]! : i;
    const c = labels[row]! - 1;
    size[c]! += 1;
    weight[c]! += given ? given[row]! : 1;
    first[c] = Math.min(first[c]!, i);
  }
  const order = [...size.keys()].sort(
    (a, b) => weight[b]! - weight[a]! || first[a]! - first[b]! || a - b,
  );
  reorderMembership(membership, order);
  return {
    ...membership,
    model: reorderMixture(model, order),
    sizes: order.map((c) => size[c]!),
    weightOf: order.map((c) => weight[c]!),
  };
}

function notesOf(rest: EmRest, packed: PackedPoints): string[] {
  const notes: string[] = [];
  if (!rest.converged)
    notes.push(
      `stopped after ${rest.steps} steps before the likelihood came to rest; the last state is kept`,
    );
  if (rest.held.length > 0)
    notes.push(
      `${rest.held.length} of ${rest.model.k} groups are flat in some direction: their variance there was held at ${RIDGE} of the mean variance`,
    );
  const scanty = rest.mass.filter((rows) => rows < rest.model.p + 1).length;
  if (scanty > 0)
    notes.push(`${scanty} of ${rest.model.k} groups hold fewer than ${rest.model.p + 1} rows`);
  if (packed.nDropped > 0)
    notes.push(`${packed.nDropped} rows with a missing coordinate were left out (label 0)`);
  return notes;
}
