import { KernelError } from '#kernels/kernel-error.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';
import { bootstrapInterval, type Interval } from './bootstrap.ts';
import { usablePairs, type PairOptions, type UsedPairs } from './pairs.ts';

/** Where in the chain from core to assay a duplicate was split. */
export type DuplicateStage = 'field' | 'coarse' | 'pulp';

/** How well duplicates repeat. Percentages are of the pair's mean. */
export interface DuplicatePrecision {
  pairs: UsedPairs;
  /** Half absolute relative difference of each used pair, 100 |a - b| / (a + b), %. */
  hard: Float64Array;
  medianHard: number;
  /** 90th percentile of the half absolute relative differences, %. */
  hard90: number;
  /** Average coefficient of variation, 100 sqrt(2/N sum (a - b)^2 / (a + b)^2), %. */
  cvAverage: number;
  /** Bootstrap 95 % range of `cvAverage`, given under thirty pairs. */
  cvInterval: Interval | null;
  notes: string[];
}

/** Pairs under which the average is too uncertain to stand without a range. */
const FEW_PAIRS = 30;

/**
 * Median and 90th percentile of half absolute relative differences over the relative sd of normal
 * errors: quantiles .75 and .95 of the normal over sqrt(2).
 */
export const HARD_PER_RELATIVE_SD = {
  median: 0.4769362762044698,
  p90: 1.1630871536766736,
} as const;

/** Guide for `cvAverage`, % (common practice, from memory): not a verdict. Gold about twice. */
export const PRECISION_GUIDE: Readonly<Record<DuplicateStage, number>> = {
  pulp: 5,
  coarse: 10,
  field: 20,
};

/**
 * Precision of duplicates. The average coefficient of variation is the root mean square of the
 * pairs' own: the only one of the usual averages that is not biased.
 *
 * @param a, b Originals and duplicates in one unit, NaN where missing. Not modified.
 * @param options.seed Of the bootstrap.
 * @throws {KernelError} As {@link usablePairs}.
 * @see Stanley & Lawie (2007), Average relative error in geochemical determinations, Explor. Min.
 *   Geol. 16.
 */
export function duplicatePrecision(
  a: Float64Array,
  b: Float64Array,
  options: PairOptions & { seed: number },
): DuplicatePrecision {
  const pairs = usablePairs(a, b, options);
  const hard = pairs.a.map((value, i) => halfRelativeDifference(value, pairs.b[i]!));
  const [medianHard = NaN, hard90 = NaN] = quantiles(hard, [0.5, 0.9]);
  const averageOf = (rows: ArrayLike<number>) =>
    Math.sqrt((2 / rows.length) * Array.from(rows).reduce((sum, i) => sum + hard[i]! ** 2, 0));
  const isFew = pairs.n < FEW_PAIRS;
  return {
    pairs,
    hard,
    medianHard,
    hard90,
    cvAverage: averageOf(Uint32Array.from(hard.keys())),
    cvInterval: isFew ? bootstrapInterval(pairs.n, averageOf, { seed: options.seed }) : null,
    notes: isFew
      ? [`${pairs.n} pairs only: the average relative error is given with its range`]
      : [],
  };
}

/**
 * 100 |a - b| / (a + b), %.
 *
 * @throws {KernelError} `not-positive` unless a + b is finite and > 0.
 */
export function halfRelativeDifference(a: number, b: number): number {
  if (!(a + b > 0 && a + b < Infinity))
    throw new KernelError('not-positive', `expected a pair of sum > 0, found ${a} and ${b}`);
  return (100 * Math.abs(a - b)) / (a + b);
}

/** Guide for the average coefficient of variation of a stage, % (common practice, from memory). */
export function precisionGuide(stage: DuplicateStage, isGold: boolean): number {
  return PRECISION_GUIDE[stage] * (isGold ? 2 : 1);
}
