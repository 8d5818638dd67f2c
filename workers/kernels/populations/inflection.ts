import { KernelError } from '#kernels/kernel-error.ts';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';
import { evenOddsPoint } from './even-odds.ts';
import type { NormalComponent } from './mixture-em.ts';
import { spreadOf, type MixtureData } from './mixture-data.ts';

/** A place where the curve of a log-probability plot turns from one population to the next. */
export interface Inflection {
  /** Share of the whole above it: the proposed share of the upper population. */
  upperShare: number;
  /** ln grade there. */
  y: number;
  /** How sharply the curve turns: fall of its slope (ln grade per normal score) on either side, the lesser. */
  prominence: number;
}

const GRID = 161;
/** The curve is looked at between these scores, and inside the outermost three rows. */
const EDGE = 2.2;
const OUTER = 3;

/**
 * Inflections of the log-probability curve, sharpest first: places where its slope, smoothed over a
 * quarter of a normal score, has a peak (the curve steepens between two flatter straight parts).
 * A proposal for the eye, to be confirmed on the plot.
 *
 * @param data ln grades from `mixtureData`, at least 30 different ones.
 * @throws {KernelError} `too-few-rows`.
 * @see Sinclair (1976), Applications of Probability Graphs in Mineral Exploration (from memory).
 */
export function proposeInflections(data: MixtureData): Inflection[] {
  if (data.y.length < 30)
    throw new KernelError(
      'too-few-rows',
      `an inflection needs 30 different values, found ${data.y.length}`,
      { n: data.y.length },
    );
  const edge = Math.min(EDGE, -normalQuantile(OUTER / data.n));
  const step = (2 * edge) / (GRID - 1);
  const half = Math.round(0.25 / step);
  const scores = Array.from({ length: GRID }, (_, i) => -edge + i * step);
  const curve = smoothed(
    scores.map((z) => quantileAt(data, normalCdf(z))),
    half,
  );
  const slope = smoothed(
    curve.map((_, i) => slopeAt(curve, i) / step),
    half,
  );
  const found: Inflection[] = [];
  for (let i = 2; i < GRID - 2; i++) {
    if (!(slope[i]! > slope[i - 1]! && slope[i]! >= slope[i + 1]!)) continue;
    const prominence = Math.min(
      slope[i]! - lowestBeside(slope, i, -1),
      slope[i]! - lowestBeside(slope, i, 1),
    );
    if (prominence > 0)
      found.push({ upperShare: 1 - normalCdf(scores[i]!), y: curve[i]!, prominence });
  }
  return found.sort((a, b) => b.prominence - a.prominence);
}

/** Lowest value from place i outward until a value above that at i. */
function lowestBeside(values: readonly number[], i: number, direction: 1 | -1): number {
  let lowest = values[i]!;
  for (
    let j = i + direction;
    j >= 0 && j < values.length && !(values[j]! > values[i]!);
    j += direction
  ) {
    if (values[j]! < lowest) lowest = values[j]!;
  }
  return lowest;
}

/** Rise per place at place i, over both neighbours where there are two. */
function slopeAt(values: readonly number[], i: number): number {
  const [from, to] = [Math.max(0, i - 1), Math.min(values.length - 1, i + 1)];
  return (values[to]! - values[from]!) / (to - from);
}

/** Running means over 2 half + 1 places, fewer on both sides alike near the ends: straight lines stay. */
function smoothed(values: readonly number[], half: number): number[] {
  return values.map((_, i) => {
    const reach = Math.min(half, i, values.length - 1 - i);
    const near = values.slice(i - reach, i + reach + 1);
    return near.reduce((sum, value) => sum + value, 0) / near.length;
  });
}

/** ln grade at a cumulative share, linear between plotting positions. */
function quantileAt({ y, weight, belowWeight }: MixtureData, p: number): number {
  const censored = belowWeight.reduce((sum, w) => sum + w, 0);
  const target = p * weight.reduce((sum, w) => sum + w, censored);
  let running = censored;
  for (let i = 0, previous = NaN; i < y.length; i++) {
    const position = running + weight[i]! / 2;
    if (position >= target) {
      if (i === 0) return y[0]!;
      return y[i - 1]! + ((y[i]! - y[i - 1]!) * (target - previous)) / (position - previous);
    }
    previous = position;
    running += weight[i]!;
  }
  return y[y.length - 1]!;
}

/** Two lognormal populations read off a probability plot. */
export interface Partition {
  lower: NormalComponent;
  upper: NormalComponent;
  /** Largest distance of the recombined from the plotted distribution function; up to .02 is accepted. */
  misfit: number;
  accepted: boolean;
  /** ln grade: 99 % of the lower and 1 % of the upper population. */
  lower99: number;
  upper1: number;
  /** ln grade: the point of even odds when 1 % of the upper lies above 99 % of the lower, else null (an overlap zone). */
  threshold: number | null;
}

/** Largest misfit accepted. */
export const MAX_MISFIT = 0.02;

/**
 * Partition of a log-probability curve into two populations at a given share of the upper one: its own
 * plot is the exceedance over that share, the lower one's the cumulative share over the rest; a straight
 * line through each where the other is negligible gives its median and spread; recombined they must
 * give the curve back.
 *
 * @param data ln grades from `mixtureData`.
 * @param upperShare In (0, 1).
 * @throws {KernelError} `bad-parameter`; `too-few-rows` with fewer than 3 points for a line.
 * @see Sinclair (1974, 1976) (from memory).
 */
export function partitionAt(data: MixtureData, upperShare: number): Partition {
  if (!(upperShare > 0 && upperShare < 1))
    throw new KernelError('bad-parameter', `expected a share between 0 and 1, found ${upperShare}`);
  const cumulative = cumulativeShares(data);
  const upper = lineThrough(
    data,
    cumulative.map((p) => 1 - (1 - p) / upperShare),
    0.4,
    0.99,
    upperShare,
  );
  const lower = lineThrough(
    data,
    cumulative.map((p) => p / (1 - upperShare)),
    0.01,
    0.6,
    1 - upperShare,
  );
  const recombined = (y: number) =>
    [lower, upper].reduce((sum, c) => sum + c.share * normalCdf((y - c.mean) / c.sd), 0);
  const misfit = cumulative.reduce(
    (worst, p, i) => Math.max(worst, Math.abs(p - recombined(data.y[i]!))),
    0,
  );
  const z99 = normalQuantile(0.99);
  const lower99 = lower.mean + z99 * lower.sd;
  const upper1 = upper.mean - z99 * upper.sd;
  return {
    lower,
    upper,
    misfit,
    accepted: misfit <= MAX_MISFIT,
    lower99,
    upper1,
    threshold: upper1 > lower99 ? evenOddsPoint(lower, upper) : null,
  };
}

function cumulativeShares({ y, weight, belowWeight }: MixtureData): Float64Array {
  let running = belowWeight.reduce((sum, w) => sum + w, 0);
  const total = weight.reduce((sum, w) => sum + w, running);
  return Float64Array.from(y, (_, i) => {
    const position = (running + weight[i]! / 2) / total;
    running += weight[i]!;
    return position;
  });
}

/** Least squares of ln grade on normal score over points whose own share lies between two limits. */
function lineThrough(
  data: MixtureData,
  own: Float64Array,
  from: number,
  to: number,
  share: number,
): NormalComponent {
  let [weight, sumZ, sumY, sumZZ, sumZY, points] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < own.length; i++) {
    if (!(own[i]! >= from && own[i]! <= to)) continue;
    const z = normalQuantile(own[i]!);
    const w = data.weight[i]!;
    weight += w;
    sumZ += w * z;
    sumY += w * data.y[i]!;
    sumZZ += w * z * z;
    sumZY += w * z * data.y[i]!;
    points += 1;
  }
  if (points < 3)
    throw new KernelError(
      'too-few-rows',
      `a population of share ${share} leaves ${points} points for its line, 3 are needed`,
      { points },
    );
  const slope = (sumZY - (sumZ * sumY) / weight) / (sumZZ - (sumZ * sumZ) / weight);
  return {
    share,
    mean: (sumY - slope * sumZ) / weight,
    sd: Math.max(slope, 1e-9 * spreadOf(data).sd),
  };
}
