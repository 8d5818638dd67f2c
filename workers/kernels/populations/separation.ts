import { normalDensity } from '#kernels/normal.ts';
import type { NormalComponent } from './mixture-em.ts';

/** How far two sides of a mixture stand apart. */
export interface Separation {
  /** Components on the lower side. */
  lowerCount: number;
  /** Shares of both sides. */
  lowerShare: number;
  upperShare: number;
  /** |μ_u - μ_l| / sqrt((σ_l² + σ_u²) / 2): above 2 two normals of like size stand clear of each other. */
  ashmanD: number;
  /** exp of the mean ln grade of each side. */
  lowerMedian: number;
  upperMedian: number;
  /** Lowest density (of ln grade) between two peaks over the lower peak's density: 1 without a valley, 0 with a gap. */
  valley: number;
}

const GRID = 401;

/** Sides smaller than this share of the whole are no population of their own. */
export const MIN_SIDE_SHARE = 0.05;

/**
 * The cut between ascending components that stands clearest: the largest Ashman D of the two sides,
 * each taken as one population, among cuts that leave both sides at least `minShare`.
 *
 * @param components Normal components (ln grade) by ascending mean.
 * @returns null for one component, or when every cut leaves a side too small.
 * @see Ashman, Bird & Zepf (1994), Detecting bimodality in astronomical datasets, Astron. J. 108
 *   (from memory).
 */
export function clearestCut(
  components: readonly NormalComponent[],
  minShare = MIN_SIDE_SHARE,
): Separation | null {
  let best: Separation | null = null;
  for (let lowerCount = 1; lowerCount < components.length; lowerCount++) {
    const lower = pooled(components.slice(0, lowerCount));
    const upper = pooled(components.slice(lowerCount));
    if (Math.min(lower.share, upper.share) < minShare) continue;
    const ashmanD =
      Math.abs(upper.mean - lower.mean) / Math.sqrt((lower.sd ** 2 + upper.sd ** 2) / 2);
    if (best && best.ashmanD >= ashmanD) continue;
    best = {
      lowerCount,
      lowerShare: lower.share,
      upperShare: upper.share,
      lowerMedian: Math.exp(lower.mean),
      upperMedian: Math.exp(upper.mean),
      ashmanD,
      valley: valleyOf(components),
    };
  }
  return best;
}

/** Several components as one: share, mean and sd of their sum. */
function pooled(components: readonly NormalComponent[]): NormalComponent {
  const share = components.reduce((sum, c) => sum + c.share, 0);
  const mean = components.reduce((sum, c) => sum + c.share * c.mean, 0) / share;
  const variance =
    components.reduce((sum, c) => sum + c.share * (c.sd ** 2 + (c.mean - mean) ** 2), 0) / share;
  return { share, mean, sd: Math.sqrt(variance) };
}

/** The deepest valley of the mixture density: least of density / lower of the highest peaks on both sides. */
export function valleyOf(components: readonly NormalComponent[]): number {
  const margin = Math.max(...components.map((c) => c.sd));
  const from = Math.min(...components.map((c) => c.mean)) - margin;
  const to = Math.max(...components.map((c) => c.mean)) + margin;
  const density = Float64Array.from({ length: GRID }, (_, i) => {
    const x = from + ((to - from) * i) / (GRID - 1);
    return components.reduce(
      (sum, c) => sum + (c.share / c.sd) * normalDensity((x - c.mean) / c.sd),
      0,
    );
  });
  const highestLeft = density.slice();
  for (let i = 1; i < GRID; i++) highestLeft[i] = Math.max(highestLeft[i]!, highestLeft[i - 1]!);
  let valley = 1;
  for (let i = GRID - 1, highestRight = 0; i >= 0; i--) {
    highestRight = Math.max(highestRight, density[i]!);
    valley = Math.min(valley, density[i]! / Math.min(highestLeft[i]!, highestRight));
  }
  return valley;
}
