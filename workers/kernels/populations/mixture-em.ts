import { logNormalCdf, normalCdf, normalDensity } from '#kernels/normal.ts';
import type { MixtureData } from './mixture-data.ts';

/** One normal population of a mixture. */
export interface NormalComponent {
  /** Share of the whole, 0 to 1. */
  share: number;
  mean: number;
  sd: number;
}

/** Limits of the M step. */
export interface EmLimits {
  /** Standard deviations are held at or above this. */
  minSd: number;
  /** One standard deviation for all components. */
  shared: boolean;
}

/** ln of a density ratio too small to change a sum of doubles. */
const NEGLIGIBLE = -37;
const LN_SQRT_2PI = 0.5 * Math.log(2 * Math.PI);

/** Sums of one E step. */
interface Sums {
  mass: Float64Array;
  first: Float64Array;
  second: Float64Array;
  logLik: number;
}

/**
 * One EM step: responsibilities at the given components, then their new shares, means and spreads. A
 * row below a limit enters by Φ((limit - μ)/σ) and the moments of the normal truncated there.
 *
 * @returns The new components and the log-likelihood at the old ones.
 */
export function emStep(
  data: MixtureData,
  components: readonly NormalComponent[],
  limits: EmLimits,
): { components: NormalComponent[]; logLik: number } {
  const sums = measuredSums(data, components);
  addBelow(data, components, sums);
  return { components: maximised(components, sums, limits), logLik: sums.logLik };
}

/** Log-likelihood of the data under the components. */
export function logLikelihood(data: MixtureData, components: readonly NormalComponent[]): number {
  const sums = measuredSums(data, components);
  addBelow(data, components, sums);
  return sums.logLik;
}

function measuredSums(
  { y, weight, binVariance }: MixtureData,
  components: readonly NormalComponent[],
): Sums {
  const k = components.length;
  const mean = Float64Array.from(components, (c) => c.mean);
  const precision = Float64Array.from(components, (c) => 1 / c.sd);
  const logScale = Float64Array.from(components, (c) => Math.log(c.share / c.sd) - LN_SQRT_2PI);
  const sums: Sums = {
    mass: new Float64Array(k),
    first: new Float64Array(k),
    second: new Float64Array(k),
    logLik: 0,
  };
  const logDensity = new Float64Array(k);
  const density = new Float64Array(k);
  for (let i = 0; i < y.length; i++) {
    let nearest = 0;
    let top = -Infinity;
    for (let c = 0; c < k; c++) {
      const z = (y[i]! - mean[c]!) * precision[c]!;
      logDensity[c] = logScale[c]! - 0.5 * z * z;
      if (logDensity[c]! > top) {
        top = logDensity[c]!;
        nearest = c;
      }
    }
    let total = 0;
    for (let c = 0; c < k; c++) {
      const less = logDensity[c]! - top;
      total += density[c] = c === nearest ? 1 : less < NEGLIGIBLE ? 0 : Math.exp(less);
    }
    const w = weight[i]!;
    sums.logLik += w * (top + Math.log(total));
    const own = binVariance ? binVariance[i]! : 0;
    for (let c = 0; c < k; c++) {
      const share = (w * density[c]!) / total;
      const d = y[i]! - mean[c]!;
      sums.mass[c]! += share;
      sums.first[c]! += share * d;
      sums.second[c]! += share * (d * d + own);
    }
  }
  return sums;
}

/** Adds the rows below their limits: moments about each old mean. */
function addBelow(
  { below, belowWeight }: MixtureData,
  components: readonly NormalComponent[],
  sums: Sums,
): void {
  const logShare = new Float64Array(components.length);
  for (let i = 0; i < below.length; i++) {
    const limit = below[i]!;
    for (const [c, { share, mean, sd }] of components.entries()) {
      logShare[c] = Math.log(share) + logNormalCdf((limit - mean) / sd);
    }
    const top = logShare.reduce((most, value) => Math.max(most, value), -Infinity);
    const total = logShare.reduce((sum, value) => sum + Math.exp(value - top), 0);
    sums.logLik += belowWeight[i]! * (top + Math.log(total));
    for (const [c, { mean, sd }] of components.entries()) {
      const part = (belowWeight[i]! * Math.exp(logShare[c]! - top)) / total;
      const z = (limit - mean) / sd;
      const hazard = lowerHazard(z);
      sums.mass[c]! += part;
      sums.first[c]! -= part * sd * hazard;
      sums.second[c]! += part * sd * sd * (1 - z * hazard);
    }
  }
}

/** φ(z) / Φ(z), about -z far below. */
function lowerHazard(z: number): number {
  return z > -30 ? normalDensity(z) / normalCdf(z) : -z + 1 / -z;
}

function maximised(
  old: readonly NormalComponent[],
  { mass, first, second }: Sums,
  { minSd, shared }: EmLimits,
): NormalComponent[] {
  const total = mass.reduce((sum, value) => sum + value, 0);
  const next = old.map((component, c) => {
    const m = mass[c]!;
    if (!(m > 1e-12 * total)) return { ...component, share: 1e-12 }; // died out: keep its place, weightless
    const move = first[c]! / m;
    const variance = Math.max(0, second[c]! / m - move * move);
    return {
      share: m / total,
      mean: component.mean + move,
      sd: Math.max(minSd, Math.sqrt(variance)),
    };
  });
  if (!shared) return next;
  const pooled = next.reduce((sum, { share, sd }) => sum + share * sd * sd, 0);
  return next.map((component) => ({ ...component, sd: Math.max(minSd, Math.sqrt(pooled)) }));
}
