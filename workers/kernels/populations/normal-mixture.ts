import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { logLikelihood, type EmLimits, type NormalComponent } from './mixture-em.ts';
import { binned, spreadOf, type MixtureData } from './mixture-data.ts';
import { emToRest, type EmRest } from './mixture-fit.ts';
import { mixtureStarts } from './mixture-starts.ts';

/** Settings of a mixture fit. */
export interface MixtureOptions {
  /** Own standard deviation per component (default) or one for all. */
  variance?: 'own' | 'shared';
  /** Standard deviations are held at or above this; default 1e-3 of the spread of all points. */
  minSd?: number;
  /** A fit is admissible when every component has at least this share (default 0) ... */
  minShare?: number;
  /** The best fit with one component fewer, whose components are split for starts. */
  smaller?: readonly NormalComponent[] | null;
  /** An admissible fit with fewer components: one that does not better its likelihood is passed over. */
  toBetter?: readonly NormalComponent[] | null;
  seed?: number;
  /** Pairs of random starts besides the deterministic ones, default 5. */
  restarts?: number;
}

/** A fitted mixture of normal distributions. */
export interface NormalMixture {
  k: number;
  /** Ascending means. */
  components: NormalComponent[];
  logLik: number;
  /** Free parameters. */
  parameters: number;
  /** -2 logLik + parameters ln n: lower is better. */
  bic: number;
  converged: boolean;
  /** False when a component is as narrow as `minSd` or smaller than `minShare`. */
  admissible: boolean;
}

/** Distinct points from which the last steps stay on bins; the likelihood reported is always that of all points. */
const BINNED_FROM = 5000;
const FINE_BINS = 1500;
/** Every start is tried here ... */
const HEAT = { bins: 80, maxSteps: 15, tolerance: 1e-5 };
/** ... as many of the best as there are pairs of random starts go on ... */
const WARM = { bins: 200, maxSteps: 90, tolerance: 1e-7 };
/** ... and the best of them comes to rest. */
const REST = { bins: 400, maxSteps: 600, tolerance: 3e-9 };
const POLISH = { maxSteps: 30, tolerance: 1e-9 };

/**
 * Maximum-likelihood mixture of k normal distributions by EM from many starts: all are run briefly
 * on coarse bins, the best few for longer, the likeliest admissible one to rest and at last on all
 * points (fine bins beyond 5,000). When none is admissible the likeliest is taken
 * and marked. Deterministic in the seed.
 *
 * @param data From `mixtureData`; n of BIC is its effective number of rows.
 * @param k Components, 1 to 8.
 * @throws {KernelError} `bad-parameter`; `too-few-rows` when there are fewer different points than
 *   components or the points do not vary.
 * @see Dempster, Laird & Rubin (1977); Schwarz (1978); McLachlan & Peel (2000), Finite Mixture Models
 *   (from memory).
 */
export function fitNormalMixture(
  data: MixtureData,
  k: number,
  options: MixtureOptions = {},
): NormalMixture {
  const { variance = 'own', minShare = 0 } = options;
  if (!(k >= 1 && k <= 8 && Number.isInteger(k)))
    throw new KernelError('bad-parameter', `expected 1 to 8 components, found ${k}`, { k });
  const { sd } = spreadOf(data);
  if (data.y.length < Math.max(2, k) || !(sd > 0)) {
    throw new KernelError(
      'too-few-rows',
      `${k} components need ${Math.max(2, k)} different values, found ${data.y.length}`,
      { k },
    );
  }
  const limits: EmLimits = { minSd: options.minSd ?? 1e-3 * sd, shared: variance === 'shared' };
  const isAdmissible = (components: readonly NormalComponent[]) =>
    components.every((c) => c.share >= minShare && c.sd > limits.minSd * (1 + 1e-9));
  const fine = workingData(data);
  const warm = warmed(fine, k, options, limits);
  const floor = options.toBetter
    ? logLikelihood(binned(fine, WARM.bins), options.toBetter) + 0.01
    : -Infinity;
  const admissible = warm.filter((rest) => isAdmissible(rest.components) && rest.logLik > floor);
  const chosen = likeliest(admissible) ?? likeliest(warm);
  if (!chosen)
    throw new KernelError('not-converged', `no start of ${k} components came to rest`, { k });
  const rest = emToRest(binned(fine, REST.bins), chosen.components, limits, REST);
  const best = emToRest(fine, rest.components, limits, POLISH);
  const components = [...best.components].sort((a, b) => a.mean - b.mean);
  const logLik = fine === data ? best.logLik : logLikelihood(data, components);
  const parameters = k - 1 + k + (variance === 'shared' ? 1 : k);
  return {
    k,
    components,
    logLik,
    parameters,
    bic: -2 * logLik + parameters * Math.log(data.n),
    converged: rest.converged,
    admissible: isAdmissible(components),
  };
}

/** What fits run on: the points themselves up to 5,000 different ones, fine bins beyond. */
export function workingData(data: MixtureData): MixtureData {
  return data.y.length > BINNED_FROM ? binned(data, FINE_BINS) : data;
}

/** Starts run briefly, near copies left out, the likeliest few run on. */
function warmed(data: MixtureData, k: number, options: MixtureOptions, limits: EmLimits): EmRest[] {
  const { smaller = null, restarts = 5, seed = 1 } = options;
  const coarse = binned(data, HEAT.bins);
  const starts = mixtureStarts(coarse, k, smaller, restarts, seededRandom(seed + k));
  const heats = starts
    .map((start) => emToRest(coarse, start, limits, HEAT))
    .sort((a, b) => b.logLik - a.logLik);
  const kept: EmRest[] = [];
  for (const heat of heats) {
    if (kept.length >= restarts) break;
    if (!kept.some((other) => isCopy(other, heat))) kept.push(heat);
  }
  const middle = binned(data, WARM.bins);
  return kept.map((heat) => emToRest(middle, heat.components, limits, WARM));
}

/** Two heats on their way to the same place. */
function isCopy(a: EmRest, b: EmRest): boolean {
  if (Math.abs(a.logLik - b.logLik) > 0.01) return false;
  const sorted = (rest: EmRest) => [...rest.components].sort((x, y) => x.mean - y.mean);
  const [one, two] = [sorted(a), sorted(b)];
  return one.every(
    (c, i) =>
      Math.abs(c.mean - two[i]!.mean) < 0.05 * c.sd && Math.abs(c.share - two[i]!.share) < 0.02,
  );
}

function likeliest(rests: readonly EmRest[]): EmRest | null {
  return rests.reduce<EmRest | null>(
    (best, rest) => (best === null || rest.logLik > best.logLik ? rest : best),
    null,
  );
}
