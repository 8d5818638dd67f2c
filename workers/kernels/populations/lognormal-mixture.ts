import { KernelError } from '#kernels/kernel-error.ts';
import { fitNormalMixture, workingData, type NormalMixture } from './normal-mixture.ts';
import type { NormalComponent } from './mixture-em.ts';
import type { MixtureData } from './mixture-data.ts';

/** One lognormal population. */
export interface LognormalComponent {
  /** Share of the whole by weight. */
  share: number;
  /** Median, in the unit of the grades. */
  median: number;
  /** Standard deviation of ln grade. */
  logSd: number;
}

/** The fit of one number of populations. */
export interface LognormalMixture {
  k: number;
  /** Ascending medians; empty when the fit was not possible. */
  components: LognormalComponent[];
  /** The same on the ln scale. */
  normal: NormalComponent[];
  logLik: number | null;
  bic: number | null;
  /** BIC plus twice the entropy of the memberships: high when populations overlap. */
  icl: number | null;
  /** False when a population is narrower than .05 in ln, smaller than .03, or the fit failed. */
  accepted: boolean;
  note: string | null;
}

/** Guards: narrower or smaller populations are taken for artefacts of rounding or of a few values. */
export const MIN_LOG_SD = 0.05;
export const MIN_SHARE = 0.03;
/** One more population needs BIC lower by this much (Kass & Raftery 1995, "very strong", from memory). */
export const BIC_STEP = 10;

/**
 * Mixtures of 1 to `maxK` lognormal populations, that is, normal mixtures on ln grade.
 *
 * @param data ln grades from `mixtureData`, with limits of values below detection.
 * @throws {KernelError} `too-few-rows` when ln grades do not vary; `bad-parameter`.
 * @see Fraley & Raftery (2002), JASA 97 (BIC); Biernacki, Celeux & Govaert (2000), IEEE PAMI 22
 *   (ICL) (from memory).
 */
export function fitLognormalMixtures(
  data: MixtureData,
  maxK = 4,
  seed = 1,
  onProgress?: (share: number) => void,
): LognormalMixture[] {
  if (!(maxK >= 1 && maxK <= 4 && Number.isInteger(maxK)))
    throw new KernelError('bad-parameter', `expected 1 to 4 populations, found ${maxK}`);
  const fits: LognormalMixture[] = [];
  let smaller: NormalComponent[] | null = null;
  let accepted: NormalComponent[] | null = null;
  for (let k = 1; k <= maxK; k++) {
    if (data.y.length < Math.max(2, k)) {
      if (k === 1)
        throw new KernelError(
          'too-few-rows',
          `expected grades that vary, found ${data.y.length} different values`,
        );
      fits.push({
        k,
        components: [],
        normal: [],
        logLik: null,
        bic: null,
        icl: null,
        accepted: false,
        note: `only ${data.y.length} different values`,
      });
      continue;
    }
    const fit: NormalMixture = fitNormalMixture(data, k, {
      minSd: MIN_LOG_SD,
      minShare: MIN_SHARE,
      smaller,
      toBetter: accepted,
      seed,
    });
    smaller = fit.components;
    if (k === 1 || fit.admissible) accepted = fit.components;
    fits.push(described(fit, data));
    onProgress?.(k / maxK);
  }
  return fits;
}

function described(fit: NormalMixture, data: MixtureData): LognormalMixture {
  const { k, components, logLik, bic, converged } = fit;
  const accepted = k === 1 || fit.admissible;
  return {
    k,
    components: components.map(({ share, mean, sd }) => ({
      share,
      median: Math.exp(mean),
      logSd: sd,
    })),
    normal: components,
    logLik,
    bic,
    icl: bic + 2 * membershipEntropy(workingData(data), components),
    accepted,
    note: accepted
      ? converged
        ? null
        : 'the fit was still creeping when it was stopped'
      : rejection(components),
  };
}

function rejection(components: readonly NormalComponent[]): string {
  const smallest = Math.min(...components.map((c) => c.share));
  if (smallest < MIN_SHARE)
    return `a population of ${(100 * smallest).toFixed(1)} % is below the least share of ${100 * MIN_SHARE} %`;
  return `a population is narrower than ${MIN_LOG_SD} in ln grade (tied or rounded values)`;
}

/** Weighted entropy of the memberships of measured values: 0 when populations do not overlap. */
export function membershipEntropy(
  { y, weight }: MixtureData,
  components: readonly NormalComponent[],
): number {
  if (components.length === 1) return 0;
  let entropy = 0;
  const logDensity = new Float64Array(components.length);
  for (let i = 0; i < y.length; i++) {
    for (const [c, { share, mean, sd }] of components.entries())
      logDensity[c] = Math.log(share / sd) - 0.5 * ((y[i]! - mean) / sd) ** 2;
    const top = logDensity.reduce((most, value) => Math.max(most, value), -Infinity);
    let total = 0;
    let weighted = 0;
    for (let c = 0; c < logDensity.length; c++) {
      const above = logDensity[c]! - top;
      const likelihood = Math.exp(above);
      total += likelihood;
      weighted += likelihood * (likelihood > 0 ? above : 0);
    }
    entropy += weight[i]! * (Math.log(total) - weighted / total);
  }
  return entropy;
}

/**
 * Fewest populations such that no more of them lower BIC by 10; only accepted fits count.
 *
 * @throws {KernelError} `too-few-rows` without a fit.
 */
export function choosePopulations(fits: readonly LognormalMixture[]): LognormalMixture {
  const first = fits[0];
  if (!first) throw new KernelError('too-few-rows', 'expected at least the fit of one population');
  return fits.reduce((chosen, fit) => {
    const gain =
      fit.accepted && fit.bic !== null && chosen.bic !== null ? chosen.bic - fit.bic : -Infinity;
    return gain >= BIC_STEP ? fit : chosen;
  }, first);
}
