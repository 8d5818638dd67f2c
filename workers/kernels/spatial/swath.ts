import { KernelError } from '#kernels/kernel-error.ts';
import { rankCorrelation } from '#kernels/statistics/rank-correlation.ts';
import { requireFinite, requireWeights } from '#kernels/statistics/require-finite.ts';
import { theilSen } from '#kernels/statistics/theil-sen.ts';
import { effectiveCount, weightedMoments } from '#kernels/statistics/weighted-moments.ts';

/** One slice of ground. */
export interface SwathSlice {
  fromM: number;
  toM: number;
  n: number;
  /** Null when nothing lies in the slice. */
  mean: number | null;
  /** Standard deviation over the root of the effective number of rows; null below two rows. */
  standardError: number | null;
}

/** Mean grade along one direction. */
export interface Swath {
  slices: SwathSlice[];
  /** Theil-Sen slope of slice means, grade per 100 m; null with fewer than two filled slices. */
  trendPer100M: number | null;
  /** Spearman's correlation of grade with the coordinate; null where it is not defined. */
  rankCorrelation: number | null;
  /** Range of the means of well-filled slices over the standard deviation of all; null where not defined. */
  rangeInSd: number | null;
  isDrifting: boolean;
  /** What the flag rests on. */
  reasons: string[];
}

/** Limits of the drift flag (project rule). */
export const DRIFT_RULES = { rangeInSd: 0.5, rankCorrelation: 0.2, rowsPerSlice: 20 } as const;

export interface SwathOptions {
  /** Slice width, m: the nominal hole spacing, or 5 m down elevation. */
  widthM: number;
  /** A slice begins here; 0 unless told. */
  originM?: number;
  /** Interval lengths or declustering weights; equal when left out. */
  weights?: Float64Array;
  rules?: { rangeInSd: number; rankCorrelation: number; rowsPerSlice: number };
}

const MAX_SLICES = 2000;

/**
 * Swath profile: mean grade in slices along a direction, its trend, and whether grade drifts, that is,
 * whether one mean can stand for the domain. Drift is flagged when the means of slices of 20 rows or
 * more range over half a standard deviation, or when |Spearman| of grade and coordinate exceeds .2.
 *
 * @param alongM Coordinate of n composites along the direction, m (`coordinateAlong`).
 * @param values n grades, finite.
 * @throws {KernelError} `shape`; `too-few-rows`; `not-finite`; `bad-parameter` for a width that is not
 *   > 0 or gives more than 2,000 slices.
 */
export function swathProfile(
  alongM: Float64Array,
  values: Float64Array,
  options: SwathOptions,
): Swath {
  const { widthM, originM = 0, rules = DRIFT_RULES } = options;
  requireFinite(alongM, 'coordinates');
  requireFinite(values, 'grades');
  if (values.length !== alongM.length)
    throw new KernelError('shape', `expected ${alongM.length} grades, found ${values.length}`);
  if (!(widthM > 0 && widthM < Infinity && Number.isFinite(originM)))
    throw new KernelError(
      'bad-parameter',
      `expected a width > 0 m, found ${widthM} from ${originM}`,
    );
  const weights = options.weights ?? new Float64Array(values.length).fill(1);
  requireWeights(weights, values.length);
  const slices = slicesOf(alongM, values, weights, widthM, originM);
  const filled = slices.filter((slice) => slice.mean !== null);
  const slope =
    filled.length < 2
      ? null
      : theilSen(
          filled.map(({ fromM, toM }) => (fromM + toM) / 2),
          filled.map(({ mean }) => mean ?? 0),
        ).slope;
  const rho = values.length < 3 ? null : rankCorrelation(alongM, values);
  const rangeInSd = rangeOf(slices, rules.rowsPerSlice, weightedMoments(values, weights).variance);
  const reasons: string[] = [];
  if (rangeInSd !== null && rangeInSd > rules.rangeInSd)
    reasons.push(
      `Slice means range over ${rangeInSd.toFixed(2)} standard deviations, more than ${rules.rangeInSd}.`,
    );
  if (rho !== null && Math.abs(rho) > rules.rankCorrelation)
    reasons.push(
      `Rank correlation of grade and coordinate is ${rho.toFixed(2)}, beyond ${rules.rankCorrelation}.`,
    );
  return {
    slices,
    trendPer100M: slope === null ? null : 100 * slope,
    rankCorrelation: rho,
    rangeInSd,
    isDrifting: reasons.length > 0,
    reasons,
  };
}

function slicesOf(
  alongM: Float64Array,
  values: Float64Array,
  weights: Float64Array,
  widthM: number,
  originM: number,
): SwathSlice[] {
  const places = alongM.map((along) => Math.floor((along - originM) / widthM));
  const first = places.reduce((a, b) => Math.min(a, b), Infinity);
  const count = places.reduce((a, b) => Math.max(a, b), -Infinity) - first + 1;
  if (!(count <= MAX_SLICES))
    throw new KernelError('bad-parameter', `expected at most ${MAX_SLICES} slices, found ${count}`);
  const rows = Array.from({ length: count }, (): number[] => []);
  places.forEach((place, row) => {
    if (weights[row]! > 0) rows[place - first]?.push(row);
  });
  return rows.map((own, i) => {
    const [fromM, toM] = [originM + (first + i) * widthM, originM + (first + i + 1) * widthM];
    if (own.length === 0) return { fromM, toM, n: 0, mean: null, standardError: null };
    const ownWeights = Float64Array.from(own, (row) => weights[row]!);
    const { mean, variance } = weightedMoments(
      Float64Array.from(own, (row) => values[row]!),
      ownWeights,
    );
    const standardError =
      variance === null ? null : Math.sqrt(variance / effectiveCount(ownWeights));
    return { fromM, toM, n: own.length, mean, standardError };
  });
}

function rangeOf(
  slices: readonly SwathSlice[],
  rows: number,
  variance: number | null,
): number | null {
  const means = slices.flatMap(({ n, mean }) => (n >= rows && mean !== null ? [mean] : []));
  if (means.length < 2 || variance === null || !(variance > 0)) return null;
  return (Math.max(...means) - Math.min(...means)) / Math.sqrt(variance);
}
