import { emStep, type EmLimits, type NormalComponent } from './mixture-em.ts';
import type { MixtureData } from './mixture-data.ts';

/** Where EM came to rest. */
export interface EmRest {
  components: NormalComponent[];
  logLik: number;
  /** EM steps taken. */
  steps: number;
  converged: boolean;
}

/** When EM stops. */
export interface EmStop {
  maxSteps: number;
  /** Relative gain in log-likelihood that counts as none, twice in a row. */
  tolerance: number;
}

/**
 * EM with squared extrapolation: after every two steps the path is extended and the extended point
 * kept when its likelihood is not lower, so that slow mixtures come to rest in tens of steps. The
 * likelihood never falls.
 *
 * @see Dempster, Laird & Rubin (1977), JRSS B 39; Varadhan & Roland (2008), Scand. J. Stat. 35 (from
 *   memory).
 */
export function emToRest(
  data: MixtureData,
  start: readonly NormalComponent[],
  limits: EmLimits,
  stop: EmStop,
): EmRest {
  let components: readonly NormalComponent[] = start;
  let last = -Infinity;
  let quiet = 0;
  for (let steps = 0; ;) {
    const first = emStep(data, components, limits);
    const second = emStep(data, first.components, limits);
    steps += 2;
    const logLik = second.logLik;
    const gain = logLik - last;
    quiet = gain <= stop.tolerance * (1 + Math.abs(logLik)) ? quiet + 1 : 0;
    last = logLik;
    if (quiet >= 2 || steps >= stop.maxSteps) {
      return { components: [...first.components], logLik, steps, converged: quiet >= 2 };
    }
    const extended = extrapolated(components, first.components, second.components, limits.minSd);
    if (!extended) {
      components = second.components;
      continue;
    }
    const third = emStep(data, extended, limits);
    steps += 1;
    components = third.logLik >= logLik ? third.components : second.components;
  }
}

/** The extended point of three on the path; null when the path does not bend or leaves the space. */
function extrapolated(
  a: readonly NormalComponent[],
  b: readonly NormalComponent[],
  c: readonly NormalComponent[],
  minSd: number,
): NormalComponent[] | null {
  const [p, q, r] = [coordinates(a), coordinates(b), coordinates(c)];
  let step = 0;
  let bend = 0;
  for (let i = 0; i < p.length; i++) {
    step += (q[i]! - p[i]!) ** 2;
    bend += (r[i]! - 2 * q[i]! + p[i]!) ** 2;
  }
  if (!(bend > 0)) return null;
  const length = Math.max(1, Math.sqrt(step / bend));
  const point = p.map(
    (value, i) =>
      value + 2 * length * (q[i]! - value) + length * length * (r[i]! - 2 * q[i]! + value),
  );
  const k = a.length;
  const weights = point.slice(0, k).map(Math.exp);
  const total = weights.reduce((sum, value) => sum + value, 0);
  const out = weights.map((weight, i) => ({
    share: weight / total,
    mean: point[k + i]!,
    sd: Math.max(minSd, Math.exp(point[2 * k + i]!)),
  }));
  const valid = out.every(
    ({ share, mean, sd }) => share > 0 && Number.isFinite(mean) && sd > 0 && Number.isFinite(sd),
  );
  return valid ? out : null;
}

/** ln share, mean, ln sd of every component: free coordinates. */
const coordinates = (components: readonly NormalComponent[]): number[] => [
  ...components.map(({ share }) => Math.log(share)),
  ...components.map(({ mean }) => mean),
  ...components.map(({ sd }) => Math.log(sd)),
];
