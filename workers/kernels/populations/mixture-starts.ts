import type { Random } from '#kernels/random.ts';
import type { NormalComponent } from './mixture-em.ts';
import { spreadOf, type MixtureData } from './mixture-data.ts';

/** Cumulative shares at which the sorted points are cut, per number of components. */
const CUTS: Readonly<Record<number, readonly (readonly number[])[]>> = {
  2: [[0.5], [0.25], [0.75], [0.1], [0.9], [0.05], [0.95]],
  3: [
    [1 / 3, 2 / 3],
    [0.1, 0.9],
    [0.5, 0.9],
    [0.1, 0.5],
    [0.2, 0.4],
    [0.6, 0.8],
  ],
  4: [
    [0.25, 0.5, 0.75],
    [0.1, 0.5, 0.9],
    [0.5, 0.75, 0.95],
    [0.05, 0.25, 0.5],
  ],
};

/**
 * Starts for k components: the points cut at several quantiles, each component of the best fit with
 * k - 1 split in two, and twice `restarts` with means drawn from the points.
 */
export function mixtureStarts(
  data: MixtureData,
  k: number,
  smaller: readonly NormalComponent[] | null,
  restarts: number,
  random: Random,
): NormalComponent[][] {
  const { mean, sd } = spreadOf(data);
  if (k === 1) return [[{ share: 1, mean, sd }]];
  const starts = (CUTS[k] ?? [Array.from({ length: k - 1 }, (_, i) => (i + 1) / k)]).map((cuts) =>
    cutAt(data, cuts, sd),
  );
  for (const at of smaller?.keys() ?? []) starts.push(...splits(smaller ?? [], at));
  for (let i = 0; i < restarts; i++) {
    starts.push(drawn(data, k, sd, random), narrowInWide(data, k, { share: 1, mean, sd }, random));
  }
  return starts;
}

/** Moments of the stretches between cumulative shares. */
function cutAt({ y, weight }: MixtureData, cuts: readonly number[], sd: number): NormalComponent[] {
  const total = weight.reduce((sum, w) => sum + w, 0);
  const parts = Array.from({ length: cuts.length + 1 }, () => ({ mass: 0, sum: 0, squares: 0 }));
  let running = 0;
  for (let i = 0; i < y.length; i++) {
    const middle = (running + weight[i]! / 2) / total;
    running += weight[i]!;
    const part = parts[cuts.filter((cut) => middle > cut).length]!;
    part.mass += weight[i]!;
    part.sum += weight[i]! * y[i]!;
    part.squares += weight[i]! * y[i]! ** 2;
  }
  return parts.map(({ mass, sum, squares }) => {
    if (!(mass > 0)) return { share: 0.01, mean: y[y.length >> 1]!, sd };
    const mean = sum / mass;
    return {
      share: mass / total,
      mean,
      sd: Math.max(0.1 * sd, Math.sqrt(Math.max(0, squares / mass - mean * mean))),
    };
  });
}

/** One component replaced by two: side by side, and narrow in wide. */
function splits(components: readonly NormalComponent[], at: number): NormalComponent[][] {
  const old = components[at]!;
  const others = components.filter((_, i) => i !== at);
  const half = { ...old, share: old.share / 2 };
  return [
    [
      ...others,
      { ...half, mean: old.mean - 0.7 * old.sd, sd: 0.7 * old.sd },
      { ...half, mean: old.mean + 0.7 * old.sd, sd: 0.7 * old.sd },
    ],
    [...others, { ...half, sd: 0.3 * old.sd }, { ...half, sd: 1.3 * old.sd }],
  ];
}

/** Means at points drawn by weight, equal shares, common spread. */
function drawn(data: MixtureData, k: number, sd: number, random: Random): NormalComponent[] {
  return Array.from({ length: k }, () => ({
    share: 1 / k,
    mean: drawPoint(data, random),
    sd: sd / k,
  }));
}

/** All points but for narrow components at points drawn by weight. */
function narrowInWide(
  data: MixtureData,
  k: number,
  whole: NormalComponent,
  random: Random,
): NormalComponent[] {
  const narrow = Array.from({ length: k - 1 }, () => ({
    share: 0.1,
    mean: drawPoint(data, random),
    sd: 0.15 * whole.sd,
  }));
  return [{ ...whole, share: 1 - 0.1 * (k - 1) }, ...narrow];
}

function drawPoint({ y, weight }: MixtureData, random: Random): number {
  let target = random.uniform() * weight.reduce((sum, w) => sum + w, 0);
  let i = 0;
  while (i < y.length - 1 && target >= weight[i]!) target -= weight[i++]!;
  return y[i]!;
}
