import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import { checkHoleStarts } from '#kernels/tables/hole-shift.ts';

/** The cap at which a period's expected metal is what four periods in five exceed. */
export interface MetalAtRisk {
  /** Null when no cap between the 90th percentile and the maximum does it. */
  cap: number | null;
  /** Expected sum of uncapped grades of a period. */
  expected: number;
  /** The low percentile of simulated sums. */
  low: number;
  /** 1 - low / expected: share of the expected metal at risk. */
  share: number;
  note: string | null;
}

export interface MetalAtRiskOptions {
  /** Composites that one period mines. */
  perPeriod: number;
  seed: number;
  /** Simulated periods, 1000 unless told. */
  draws?: number;
  /** Percentile of the sums to secure, .2 unless told: one period in five falls short. */
  shortfall?: number;
  onProgress?: (share: number) => void;
}

/**
 * Metal at risk: periods are simulated by drawing whole holes with replacement until they hold
 * `perPeriod` composites (the last hole is cut short), so that runs of high grade stay together. The
 * cap is the one whose expected capped sum equals the low percentile of the simulated sums.
 *
 * One period in five as the accepted shortfall is common practice (from memory); this form of it is
 * the project's own rule. The raw grades are never overwritten.
 *
 * @param values Grades > 0 of composites of equal length, hole after hole.
 * @param holeStarts First row of each hole, then n.
 * @throws {KernelError} `shape`; `too-few-rows` under 10 grades; `not-finite`; `not-positive` with
 *   { row }; `bad-parameter`.
 */
export function metalAtRisk(
  values: Float64Array,
  holeStarts: Int32Array,
  options: MetalAtRiskOptions,
): MetalAtRisk {
  const { perPeriod, seed, draws = 1000, shortfall = 0.2, onProgress } = options;
  requireGrades(values, holeStarts);
  if (!(
    Number.isInteger(perPeriod) &&
    perPeriod >= 1 &&
    draws >= 1 &&
    shortfall > 0 &&
    shortfall < 1
  ))
    throw new KernelError(
      'bad-parameter',
      `expected composites of a period >= 1, draws >= 1 and a shortfall in (0, 1), found ${perPeriod}, ${draws}, ${shortfall}`,
    );
  const random = seededRandom(seed);
  const sums = Float64Array.from({ length: draws }, (_, draw) => {
    onProgress?.(draw / draws);
    return periodSum(values, holeStarts, perPeriod, random);
  });
  const [low = NaN] = quantiles(sums, [shortfall]);
  const [from = NaN, to = NaN] = quantiles(values, [0.9, 1]);
  const expectedAt = (cap: number) =>
    (perPeriod * values.reduce((sum, value) => sum + Math.min(value, cap), 0)) / values.length;
  const expected = expectedAt(Infinity);
  const base = { expected, low, share: 1 - low / expected };
  if (low >= expected)
    return { ...base, cap: null, note: 'The simulated periods hold the expected metal: no cap.' };
  if (expectedAt(from) > low)
    return { ...base, cap: null, note: 'A cap at the 90th percentile is not low enough: no cap.' };
  return { ...base, cap: bisect(expectedAt, low, from, to), note: null };
}

function requireGrades(values: Float64Array, holeStarts: Int32Array): void {
  const n = checkHoleStarts(holeStarts);
  if (n !== values.length)
    throw new KernelError(
      'shape',
      `expected ${n} grades by the hole starts, found ${values.length}`,
    );
  requireFinite(values, 'grades');
  if (n < 10)
    throw new KernelError('too-few-rows', `expected at least 10 grades, found ${n}`, { n });
  const row = values.findIndex((value) => !(value > 0));
  if (row >= 0)
    throw new KernelError(
      'not-positive',
      `expected a grade > 0, found ${values[row]} at row ${row}`,
      { row },
    );
}

function periodSum(
  values: Float64Array,
  holeStarts: Int32Array,
  perPeriod: number,
  random: Random,
): number {
  let sum = 0;
  for (let left = perPeriod; left > 0;) {
    const hole = random.below(holeStarts.length - 1);
    const start = holeStarts[hole]!;
    const taken = Math.min(left, holeStarts[hole + 1]! - start);
    for (let row = start; row < start + taken; row++) sum += values[row]!;
    left -= taken;
  }
  return sum;
}

/** Place where a rising function reaches a target, to 1e-9 of it. */
function bisect(rising: (x: number) => number, target: number, from: number, to: number): number {
  let [low, high] = [from, to];
  for (let step = 0; step < 100 && high - low > 1e-9 * high; step++) {
    const middle = (low + high) / 2;
    if (rising(middle) < target) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
