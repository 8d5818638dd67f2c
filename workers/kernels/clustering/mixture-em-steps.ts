import {
  holdCovariances,
  isAxial,
  mixtureDensity,
  refreshDensity,
  type MixtureDensity,
  type MixtureModel,
} from './mixture-model.ts';
import {
  emptySums,
  sumResponsibilities,
  type MixtureRows,
  type MixtureSums,
} from './mixture-sums.ts';
import { isModel, leapOf, parametersOf, setParameters, type Parameters } from './mixture-leap.ts';
import { packedSize } from './packed-cholesky.ts';

/** When EM stops and what it may not do. */
export interface EmRules {
  /** Least eigenvalue of a covariance. */
  floor: number;
  maxSteps: number;
  /** Gain in log-likelihood, relative to 1 + |log-likelihood|, that counts as none, twice in a row. */
  tolerance: number;
  /** Added to the log-likelihood before it is compared (a change of unit). */
  logLikOffset: number;
  onStep?: ((steps: number) => void) | undefined;
}

/** Where EM came to rest; `model` is the one it was given, changed in place. */
export interface EmRest {
  model: MixtureModel;
  /** Log-likelihood of that model, offset included. */
  logLik: number;
  steps: number;
  converged: boolean;
  /** Groups whose covariance was held at the floor in the last step. */
  held: number[];
  /** Rows (total weight) of each group. */
  mass: Float64Array;
}

/** A group with less than this share of the rows has died out; it keeps its place without a share. */
const DEAD_SHARE = 1e-10;

/** Longest leap tried first, and how it grows when it led up or shrinks when it did not. */
const LEAP = { first: 4, growth: 4 };

/**
 * EM from a start: responsibilities of all rows, then the parameters they make likeliest, until the
 * log-likelihood stands still. Every other step leaps ahead along the last two (`leapOf`); a leap that
 * lowers the log-likelihood is taken back, so that it never falls. Eigenvalues under the floor are
 * raised to it, which is the likeliest covariance under that condition.
 *
 * @see Dempster, Laird & Rubin (1977), JRSS B 39 (from memory).
 */
export function mixtureEm(start: MixtureModel, rows: MixtureRows, rules: EmRules): EmRest {
  const work = new Float64Array(packedSize(start.p));
  let held = holdCovariances(start, rules.floor, work);
  const density = mixtureDensity(start);
  const sums = emptySums(start.k, start.p);
  const trail = [parametersOf(start)];
  let longest = LEAP.first;
  /** Where to go back to when the leap just made led down. */
  let origin: Parameters | null = null;
  let last = -Infinity;
  let quiet = 0;
  for (let steps = 0; ; steps++) {
    sumResponsibilities(density, rows, sums);
    const logLik = sums.logLik + rules.logLikOffset;
    if (origin && !(logLik >= last)) {
      setParameters(start, origin);
      refreshDensity(density);
      trail.splice(0, trail.length, origin);
      origin = null;
      longest = Math.max(1, longest / LEAP.growth);
      continue;
    }
    origin = null;
    quiet = logLik - last <= rules.tolerance * (1 + Math.abs(logLik)) ? quiet + 1 : 0;
    last = logLik;
    if (quiet >= 2 || steps >= rules.maxSteps) {
      return { model: start, logLik, steps, converged: quiet >= 2, held, mass: sums.mass };
    }
    held = maximise(density, sums, rules.floor, work);
    trail.push(parametersOf(start));
    const [a, b, c] = trail;
    if (a && b && c) {
      trail.length = 0;
      const leap = held.length > 0 ? null : leapOf([a, b, c], longest);
      if (leap && leapTo(density, leap.parameters, c, rules.floor, work)) {
        origin = c;
        if (leap.length === longest) longest *= LEAP.growth;
      } else trail.push(c);
    }
    rules.onStep?.(steps);
  }
}

/** Moves the density to other parameters; when they make no model it stays, and the answer is false. */
function leapTo(
  density: MixtureDensity,
  to: Parameters,
  from: Parameters,
  floor: number,
  work: Float64Array,
): boolean {
  setParameters(density.model, to);
  const isSound = isModel(density.model, from, floor, work);
  if (!isSound) setParameters(density.model, from);
  refreshDensity(density);
  return isSound;
}

/** The parameters the sums make likeliest, written over the density's model; groups held at the floor. */
export function maximise(
  density: MixtureDensity,
  sums: MixtureSums,
  floor: number,
  work: Float64Array,
): number[] {
  const { model } = density;
  const { k, p, shares, means } = model;
  const total = sums.mass.reduce((sum, mass) => sum + mass, 0);
  for (let c = 0; c < k; c++) {
    const mass = sums.mass[c]!;
    const alive = mass > DEAD_SHARE * total;
    shares[c] = alive ? mass / total : 0;
    if (!alive) continue;
    for (let a = c * p; a < (c + 1) * p; a++) {
      sums.first[a]! /= mass; // the move of the mean
      means[a]! += sums.first[a]!;
    }
  }
  if (model.family === 'tied') tieCovariances(model, sums, total);
  else for (let c = 0; c < k; c++) if (shares[c]! > 0) freeCovariance(model, sums, c);
  const held = holdCovariances(model, floor, work);
  refreshDensity(density);
  return held.filter((c) => shares[c]! > 0);
}

/** Covariance of one group about its new mean. */
function freeCovariance(
  { family, p, covariances }: MixtureModel,
  sums: MixtureSums,
  c: number,
): void {
  const mass = sums.mass[c]!;
  const axial = isAxial(family);
  const at = c * packedSize(p);
  let trace = 0;
  for (let a = 0, i = at; a < p; a++) {
    for (let b = 0; b <= a; b++, i++) {
      if (axial && b < a) continue;
      covariances[i] = sums.second[i]! / mass - sums.first[c * p + a]! * sums.first[c * p + b]!;
      if (a === b) trace += covariances[i]!;
    }
  }
  if (family !== 'spherical') return;
  for (let a = 0, i = at; a < p; a++, i += a + 1) covariances[i] = trace / p;
}

/** One covariance for all groups: the mean of theirs by responsibility, into the first place. */
function tieCovariances(
  { k, p, covariances }: MixtureModel,
  sums: MixtureSums,
  total: number,
): void {
  const size = packedSize(p);
  covariances.fill(0);
  for (let c = 0; c < k; c++) {
    const mass = sums.mass[c]!;
    if (!(mass > DEAD_SHARE * total)) continue;
    for (let a = 0, i = 0; a < p; a++) {
      for (let b = 0; b <= a; b++, i++) {
        const shift = sums.first[c * p + a]! * sums.first[c * p + b]!;
        covariances[i]! += (sums.second[c * size + i]! - mass * shift) / total;
      }
    }
  }
}
