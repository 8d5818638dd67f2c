import { expOfNegative } from '#kernels/exp.ts';
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

/** ln of a density ratio too small to change a sum of doubles; kept, it would slow the sums by denormal numbers. */
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

/** Points taken at a time, so that what is known of them stays in cache. */
const BLOCK = 256;
/** Room for a block: densities, component after component; per point the largest, then the factor of responsibility. */
const room = { density: new Float64Array(BLOCK * 8), top: new Float64Array(BLOCK), factor: new Float64Array(BLOCK) };
const densityRoom = (k: number): Float64Array =>
  room.density.length >= BLOCK * k ? room.density : new Float64Array(BLOCK * k);

function measuredSums(data: MixtureData, components: readonly NormalComponent[]): Sums {
  const k = components.length;
  const { top, factor } = room;
  const density = densityRoom(k);
  const sums: Sums = {
    mass: new Float64Array(k),
    first: new Float64Array(k),
    second: new Float64Array(k),
    logLik: 0,
  };
  for (let start = 0; start < data.y.length; start += BLOCK) {
    const y = data.y.subarray(start, start + BLOCK);
    const weight = data.weight.subarray(start, start + BLOCK);
    const own = data.binVariance?.subarray(start, start + BLOCK) ?? null;
    top.fill(-Infinity);
    for (let c = 0; c < k; c++) logDensities(y, components[c]!, density.subarray(c * BLOCK), top);
    factor.fill(0);
    for (let c = 0; c < k; c++) addDensities(y.length, density.subarray(c * BLOCK), top, factor);
    sums.logLik += toFactors(weight, top, factor);
    for (let c = 0; c < k; c++)
      addMoments(y, own, components[c]!.mean, density.subarray(c * BLOCK), factor, c, sums);
  }
  return sums;
}

/** ln of share times density of one component, and the largest so far of each point. */
function logDensities(
  y: Float64Array,
  { share, mean, sd }: NormalComponent,
  density: Float64Array,
  top: Float64Array,
): void {
  const precision = 1 / sd;
  const scale = Math.log(share / sd) - LN_SQRT_2PI;
  for (let i = 0; i < y.length; i++) {
    const z = (y[i]! - mean) * precision;
    const value = scale - 0.5 * z * z;
    density[i] = value;
    if (value > top[i]!) top[i] = value;
  }
}

/** Densities of one component relative to the largest, added up in `factor`. */
function addDensities(
  count: number,
  density: Float64Array,
  top: Float64Array,
  factor: Float64Array,
): void {
  for (let i = 0; i < count; i++) {
    const less = density[i]! - top[i]!;
    const relative = less === 0 ? 1 : less < NEGLIGIBLE ? 0 : expOfNegative(less);
    density[i] = relative;
    factor[i]! += relative;
  }
}

/** Turns sums of densities into factors of responsibility; the log-likelihood of the points. */
function toFactors(weight: Float64Array, top: Float64Array, factor: Float64Array): number {
  let logLik = 0;
  for (let i = 0; i < weight.length; i++) {
    const w = weight[i]!;
    logLik += w * (top[i]! + Math.log(factor[i]!));
    factor[i] = w / factor[i]!;
  }
  return logLik;
}

/** Adds the mass and the moments about the old mean of one component. */
function addMoments(
  y: Float64Array,
  own: Float64Array | null,
  mean: number,
  density: Float64Array,
  factor: Float64Array,
  c: number,
  sums: Sums,
): void {
  let mass = 0;
  let first = 0;
  let second = 0;
  for (let i = 0; i < y.length; i++) {
    const share = density[i]! * factor[i]!;
    const d = y[i]! - mean;
    mass += share;
    first += share * d;
    second += share * d * d;
  }
  if (own) for (let i = 0; i < y.length; i++) second += density[i]! * factor[i]! * own[i]!;
  sums.mass[c]! += mass;
  sums.first[c]! += first;
  sums.second[c]! += second;
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
