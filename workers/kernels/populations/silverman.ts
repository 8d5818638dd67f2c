import { sortedAscending } from '#kernels/statistics/sort-ascending.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { normalDensity } from '#kernels/normal.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';

/** Silverman's test for at most k modes. */
export interface SilvermanTest {
  modes: number;
  /** Smallest Gaussian bandwidth at which the density has at most that many modes. */
  criticalBandwidth: number;
  /** Share of smoothed bootstrap samples with more modes at that bandwidth. */
  p: number;
  /** Always said: the raw p of one mode is conservative. */
  note: string;
}

const GRID = 512;
const CALIBRATION_NOTE = 'calibration not applied: for one mode the p value is conservative';

/**
 * Smallest bandwidth of a Gaussian kernel density with at most `modes` modes, to 1e-6 of itself (the
 * number of modes never rises with the bandwidth).
 *
 * @param values Finite, at least two different. Not modified.
 * @param grid Places the density is looked at.
 * @throws {KernelError} `too-few-rows`, `not-finite`, `constant`, `bad-parameter`.
 */
export function criticalBandwidth(values: ArrayLike<number>, modes: number, grid = 4096): number {
  requireFinite(values, 'values');
  if (!(modes >= 1 && Number.isInteger(modes)))
    throw new KernelError('bad-parameter', `expected one mode or more, found ${modes}`);
  const sorted = sortedAscending(values);
  const range = sorted[sorted.length - 1]! - sorted[0]!;
  if (!(range > 0))
    throw new KernelError('constant', `expected values that vary, all are ${sorted[0]}`);
  let [low, high] = [0, range];
  while (countModes(sorted, high, grid) > modes) high *= 2;
  while (high - low > 1e-6 * high) {
    const middle = (low + high) / 2;
    if (countModes(sorted, middle, grid) > modes) low = middle;
    else high = middle;
  }
  return high;
}

/** Modes of the kernel density: rises followed by falls on a grid, flat steps skipped. */
export function countModes(sorted: Float64Array, bandwidth: number, grid: number): number {
  const first = sorted[0]! - 3 * bandwidth;
  const step = (sorted[sorted.length - 1]! + 3 * bandwidth - first) / (grid - 1);
  let modes = 0;
  let rising = true;
  let previous = 0;
  for (let i = 0, from = 0; i < grid; i++) {
    const x = first + i * step;
    while (from < sorted.length && sorted[from]! < x - 8.5 * bandwidth) from += 1;
    let density = 0;
    for (let j = from; j < sorted.length && sorted[j]! <= x + 8.5 * bandwidth; j++)
      density += normalDensity((x - sorted[j]!) / bandwidth);
    if (rising && density < previous) modes += 1;
    if (density !== previous) rising = density > previous;
    previous = density;
  }
  return modes + (rising && previous > 0 ? 1 : 0);
}

/**
 * Silverman's bootstrap test of "at most k modes". Each sample is drawn from the density at the
 * critical bandwidth, shrunk to the variance of the data.
 *
 * @param values ln grade, 10 to 5,000 values.
 * @param bootstrap Samples, default 500.
 * @throws {KernelError} As `criticalBandwidth`; `too-many-rows` beyond 5,000.
 * @see Silverman (1981), JRSS B 43, 97-99; Hall & York (2001) on its calibration (from memory).
 */
export function silvermanTest(
  values: ArrayLike<number>,
  modes: number,
  seed: number,
  bootstrap = 500,
  onProgress?: (share: number) => void,
): SilvermanTest {
  if (values.length < 10)
    throw new KernelError('too-few-rows', `expected at least 10 values, found ${values.length}`);
  if (values.length > 5000)
    throw new KernelError('too-many-rows', `expected at most 5000 values, found ${values.length}`);
  const bandwidth = criticalBandwidth(values, modes, GRID);
  const random = seededRandom(seed);
  let more = 0;
  for (let run = 0; run < bootstrap; run++) {
    if (countModes(smoothedSample(values, bandwidth, random), bandwidth, GRID) > modes) more += 1;
    onProgress?.((run + 1) / bootstrap);
  }
  return { modes, criticalBandwidth: bandwidth, p: more / bootstrap, note: CALIBRATION_NOTE };
}

function smoothedSample(
  values: ArrayLike<number>,
  bandwidth: number,
  random: Random,
): Float64Array {
  const n = values.length;
  let mean = 0;
  for (let i = 0; i < n; i++) mean += values[i]! / n;
  let variance = 0;
  for (let i = 0; i < n; i++) variance += (values[i]! - mean) ** 2 / (n - 1);
  const shrink = Math.sqrt(1 + bandwidth ** 2 / variance);
  return Float64Array.from(
    { length: n },
    () => mean + (values[random.below(n)]! - mean + bandwidth * random.normal()) / shrink,
  ).sort();
}
