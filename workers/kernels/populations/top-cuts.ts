import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite, requireWeights } from '#kernels/statistics/require-finite.ts';
import { weightedMoments } from '#kernels/statistics/weighted-moments.ts';

/** What a cap does to one grade distribution. */
export interface TopCut {
  cap: number;
  /** Mean and coefficient of variation after capping; cv null with a single row. */
  mean: number;
  cv: number | null;
  /** Share of the metal (weight times grade) that the cap takes, %. */
  metalLostPercent: number;
  /** Rows above the cap. */
  rowsCut: number;
}

/**
 * Table of caps: grades above a cap are set to it. The raw grades are never overwritten.
 *
 * @param values Grades > 0, finite. Not modified.
 * @param caps Each > 0, in the unit of the grades.
 * @param weights Interval lengths (m); equal when left out.
 * @throws {KernelError} `too-few-rows`, `not-finite`, `shape`, `bad-parameter`; `not-positive` with
 *   { row } for a grade <= 0.
 */
export function topCutTable(
  values: ArrayLike<number>,
  caps: readonly number[],
  weights?: ArrayLike<number>,
): TopCut[] {
  const used = checkedWeights(values, weights);
  const bad = caps.find((cap) => !(cap > 0));
  if (bad !== undefined) throw new KernelError('bad-parameter', `expected a cap > 0, found ${bad}`);
  const metal = sumOf(values, used);
  return caps.map((cap) => {
    const capped = Float64Array.from(values, (value) => Math.min(value, cap));
    const { mean, variance } = weightedMoments(capped, used);
    let rowsCut = 0;
    for (let row = 0; row < values.length; row++) if (values[row]! > cap) rowsCut += 1;
    const cv = variance === null ? null : Math.sqrt(variance) / mean;
    return { cap, mean, cv, metalLostPercent: 100 * (1 - sumOf(capped, used) / metal), rowsCut };
  });
}

/** One class of the sorted grades. */
export interface MetalClass {
  rows: number;
  mean: number;
  min: number;
  max: number;
  /** Share of all metal, %. */
  metalPercent: number;
}

/** Deciles and the percentiles of the top decile, lowest first. */
export interface DecileAnalysis {
  deciles: MetalClass[];
  /** Null with fewer than 100 rows. */
  topPercentiles: MetalClass[] | null;
  /** Rules that indicate capping, with the figures. */
  indications: string[];
}

/** Thresholds of the decile analysis (from memory). */
export const DECILE_RULES = {
  topDecilePercent: 40,
  timesNinth: 2.3,
  topPercentilePercent: 10,
} as const;

/**
 * Decile analysis: the sorted grades in ten classes of equal count (class i holds ranks
 * floor((i-1) n / 10) + 1 to floor(i n / 10)), the top one in ten percentiles the same way. Capping is
 * indicated when the top decile holds more than 40 % of the metal, or more than 2.3 times the ninth, or
 * a top percentile holds more than 10 %. A plain lognormal trips all three from a CV of about 1.4: the
 * rules point to skewness, not to error.
 *
 * @param values Grades > 0, at least 10.
 * @param weights Interval lengths (m) that metal is weighted by; equal when left out.
 * @throws {KernelError} As `topCutTable`.
 * @see Parrish (1997), Geologist's Gordian knot: to cut or not to cut, Mining Eng. 49 (from memory).
 */
export function decileAnalysis(
  values: ArrayLike<number>,
  weights?: ArrayLike<number>,
): DecileAnalysis {
  const used = checkedWeights(values, weights);
  const n = values.length;
  if (n < 10) throw new KernelError('too-few-rows', `deciles need 10 grades, found ${n}`, { n });
  const order = Uint32Array.from({ length: n }, (_, row) => row).sort(
    (a, b) => values[a]! - values[b]! || a - b,
  );
  const metal = sumOf(values, used);
  const classes = (from: number, to: number) =>
    Array.from({ length: 10 }, (_, i) => {
      const place = (share: number) => from + Math.floor((share * (to - from)) / 10);
      return metalClass(order.subarray(place(i), place(i + 1)), values, used, metal);
    });
  const deciles = classes(0, n);
  const topPercentiles = n < 100 ? null : classes(Math.floor(0.9 * n), n);
  return { deciles, topPercentiles, indications: indicationsOf(deciles, topPercentiles) };
}

function metalClass(
  rows: Uint32Array,
  values: ArrayLike<number>,
  weights: ArrayLike<number>,
  metal: number,
): MetalClass {
  let content = 0;
  let weight = 0;
  for (const row of rows) {
    content += weights[row]! * values[row]!;
    weight += weights[row]!;
  }
  const [first, last] = [rows[0]!, rows[rows.length - 1]!];
  return {
    rows: rows.length,
    mean: weight > 0 ? content / weight : NaN,
    min: values[first]!,
    max: values[last]!,
    metalPercent: (100 * content) / metal,
  };
}

function indicationsOf(deciles: MetalClass[], topPercentiles: MetalClass[] | null): string[] {
  const rules = DECILE_RULES;
  const top = deciles[9]?.metalPercent ?? 0;
  const ninth = deciles[8]?.metalPercent ?? 0;
  const percentile = Math.max(0, ...(topPercentiles ?? []).map((c) => c.metalPercent));
  const found: string[] = [];
  if (top > rules.topDecilePercent)
    found.push(
      `The top decile holds ${top.toFixed(1)} % of the metal, more than ${rules.topDecilePercent} %.`,
    );
  if (top > rules.timesNinth * ninth)
    found.push(
      `The top decile holds ${(top / ninth).toFixed(2)} times the metal of the ninth, more than ${rules.timesNinth}.`,
    );
  if (percentile > rules.topPercentilePercent)
    found.push(
      `A top percentile holds ${percentile.toFixed(1)} % of the metal, more than ${rules.topPercentilePercent} %.`,
    );
  return found;
}

function checkedWeights(
  values: ArrayLike<number>,
  weights: ArrayLike<number> | undefined,
): ArrayLike<number> {
  requireFinite(values, 'grades');
  for (let row = 0; row < values.length; row++) {
    if (!(values[row]! > 0))
      throw new KernelError(
        'not-positive',
        `expected a grade > 0, found ${values[row]} at row ${row}`,
        { row },
      );
  }
  const used = weights ?? new Float64Array(values.length).fill(1);
  requireWeights(used, values.length);
  return used;
}

function sumOf(values: ArrayLike<number>, weights: ArrayLike<number>): number {
  let sum = 0;
  for (let row = 0; row < values.length; row++) sum += weights[row]! * values[row]!;
  return sum;
}
