import { normalQuantile } from '#kernels/normal.ts';
import type { MixtureData } from './mixture-data.ts';

/** Points of a log-probability plot. */
export interface ProbabilityPlot {
  /** Normal scores, ascending. */
  z: Float64Array;
  /** ln grade at each. */
  y: Float64Array;
  /** Distinct values the points were taken from. */
  drawnOf: number;
}

/**
 * Log-probability plot: ln grade against the normal score of its plotting position
 * p = (W_i - w_i / 2) / W (Hazen, weighted). Tied values share one point at the middle of their
 * stretch. The plot starts above the share of values below detection; values below a limit count
 * under every measured value.
 *
 * Thinned to `limit` points: a third of them are the outermost values of both tails, kept one by one,
 * the rest lie at equal steps of the normal score.
 */
export function probabilityPlot(data: MixtureData, limit = 400): ProbabilityPlot {
  const { y, weight, belowWeight } = data;
  const censored = belowWeight.reduce((sum, w) => sum + w, 0);
  const total = weight.reduce((sum, w) => sum + w, censored);
  const scores = new Float64Array(y.length);
  let running = censored;
  for (let i = 0; i < y.length; i++) {
    scores[i] = normalQuantile(Math.min(1, (running + weight[i]! / 2) / total));
    running += weight[i]!;
  }
  const kept = thinned(scores, limit);
  return {
    z: Float64Array.from(kept, (i) => scores[i]!),
    y: Float64Array.from(kept, (i) => y[i]!),
    drawnOf: y.length,
  };
}

/** Places to keep of ascending scores: both tails whole, equal steps of score between. */
function thinned(scores: Float64Array, limit: number): number[] {
  const n = scores.length;
  if (n <= limit) return [...scores.keys()];
  const tail = Math.floor(limit / 6);
  const kept = new Set<number>();
  for (let i = 0; i < tail; i++) kept.add(i).add(n - 1 - i);
  const inner = limit - 2 * tail;
  const [from, to] = [scores[tail]!, scores[n - 1 - tail]!];
  for (let step = 0, i = tail; step < inner; step++) {
    const target = from + ((to - from) * step) / (inner - 1);
    while (i < n - 1 - tail && scores[i]! < target) i += 1;
    kept.add(i);
  }
  return [...kept].sort((a, b) => a - b);
}
