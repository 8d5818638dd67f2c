import { changePoints } from '#kernels/clustering/change-points.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import { theilSen } from '#kernels/statistics/theil-sen.ts';

/** A stretch of results about one level. */
export interface Level {
  /** First and last result, by their place in the input. */
  from: number;
  to: number;
  n: number;
  mean: number;
}

/** How control results move over time, in sds. */
export interface Drift {
  n: number;
  /** Median slope of z over the order of dates: sds per result, and from the first to the last. */
  slope: number;
  change: number;
  /** Running sum of z, in order of date. */
  cusum: Float64Array;
  /** Stretches about one level, in order; one when no change of mean is worth its cost. */
  levels: Level[];
  /** Where the mean of z changes most: the last result before; null when no change is likely. */
  changeAfter: number | null;
  /** Share of random orders in which some place divides the results as sharply. */
  changeP: number;
  notes: string[];
}

const FEWEST = 8;
/** Points the slope is taken over; a longer series is thinned evenly. */
const MOST_FOR_SLOPE = 2000;
const DRAWS = 999;
const ACCEPTED_P = 0.05;

/**
 * Drift of control results: a robust slope over the order of dates, the running sum, the levels between
 * change points, and the place where the mean changes most, with a permutation p. Results of several materials may be joined, since
 * z has no unit.
 *
 * @param z (x - certified value) / sd in order of date, NaN where missing; at least eight. Not
 *   modified.
 * @param options.seed Of the permutations.
 * @throws {KernelError} `too-few-rows`; `not-finite` with { row }; `bad-parameter` for draws.
 * @see Sen (1968), JASA 63; Page (1954), Biometrika 41 (running sums); Killick,
 *   Fearnhead & Eckley (2012), JASA 107 (levels); Pettitt (1979), Appl. Statist.
 *   28 (one change at an unknown place, from memory).
 */
export function drift(
  z: Float64Array,
  { seed, draws = DRAWS }: { seed: number; draws?: number },
): Drift {
  const rows = Uint32Array.from(z.keys()).filter((row) => !Number.isNaN(z[row]));
  const values = Float64Array.from(rows, (row) => z[row]!);
  const n = values.length;
  if (n < FEWEST) {
    const message = `expected at least ${FEWEST} results, found ${n}`;
    throw new KernelError('too-few-rows', message, { found: n });
  }
  requireFinite(values, 'z');
  if (!(draws >= 19)) throw new KernelError('bad-parameter', `expected 19 draws, found ${draws}`);
  const step = Math.ceil(n / MOST_FOR_SLOPE);
  const order = Array.from(values.keys()).filter((i) => i % step === 0);
  const { slope } = theilSen(
    order,
    order.map((i) => values[i]!),
  );
  let sum = 0;
  const cusum = values.map((value) => (sum += value));
  const { at, p } = sharpestChange(values, seed, draws);
  return {
    n,
    slope,
    change: slope * (n - 1),
    cusum,
    levels: levelsOf(values, rows),
    changeAfter: p <= ACCEPTED_P ? rows[at]! : null,
    changeP: p,
    notes: step > 1 ? [`the slope rests on one in ${step} of ${n} results`] : [],
  };
}

/** Change points of the mean, scaled by the noise from one result to the next. */
function levelsOf(values: Float64Array, rows: Uint32Array): Level[] {
  const { segmentOf, segments } = changePoints({
    columns: [values],
    sequence: new Int32Array(values.length),
  });
  return Array.from({ length: segments }, (_, segment) => {
    const [from, last] = [segmentOf.indexOf(segment), segmentOf.lastIndexOf(segment)];
    const part = values.subarray(from, last + 1);
    const mean = part.reduce((sum, value) => sum + value, 0) / part.length;
    return { from: rows[from]!, to: rows[last]!, n: part.length, mean };
  });
}

/** Place that divides best: the largest |sum of deviations| scaled by its sd under random order. */
function sharpestChange(values: Float64Array, seed: number, draws: number) {
  const mean = values.reduce((total, value) => total + value, 0) / values.length;
  const deviations = values.map((value) => value - mean);
  const observed = sharpness(deviations);
  const random = seededRandom(seed);
  let reached = 0;
  for (let draw = 0; draw < draws; draw++) {
    for (let i = deviations.length - 1; i > 0; i--) {
      const other = random.below(i + 1);
      [deviations[i], deviations[other]] = [deviations[other]!, deviations[i]!];
    }
    // Orders of equal sharpness count, rounding aside.
    if (sharpness(deviations).size >= observed.size * (1 - 1e-9)) reached++;
  }
  return { at: observed.at, p: (1 + reached) / (draws + 1) };
}

/** At least two results on each side, so that one far result is not taken for a change. */
function sharpness(deviations: Float64Array): { at: number; size: number } {
  const n = deviations.length;
  let [sum, at, size] = [0, 1, -1];
  for (let i = 0; i < n - 2; i++) {
    sum += deviations[i]!;
    const scaled = Math.abs(sum) / Math.sqrt((i + 1) * (n - i - 1));
    if (i >= 1 && scaled > size) [at, size] = [i, scaled];
  }
  return { at, size };
}
