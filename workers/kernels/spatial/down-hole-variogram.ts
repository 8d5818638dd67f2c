import { KernelError } from '#kernels/kernel-error.ts';
import type { Category } from '#kernels/tables/category.ts';
import { codeRuns } from '#kernels/tables/code-runs.ts';
import type { IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';
import {
  addPair,
  emptyLagSums,
  variogramOf,
  type ExperimentalVariogram,
} from './variogram-lags.ts';

export interface DownHoleOptions {
  /** Composite length, m. */
  lagM: number;
  /** Lag classes, 20 unless told. */
  lags?: number;
  onProgress?: (share: number) => void;
}

/**
 * Down-hole variograms, one per domain: pairs of one hole and one run of the domain, without gap, break
 * or other domain between. A pair's class is its distance over the lag, rounded.
 *
 * @param intervals Composites in order down each hole; `isBreakBefore` marks faults.
 * @param domains A domain of each composite, or NOT_LOGGED (left out).
 * @param values n values, usually ln grade or normal scores; NaN where missing.
 * @returns In the order of the levels; domains without values have none.
 * @throws {KernelError} `shape`; `bad-interval`; `overlap`; `bad-parameter`; `not-finite` with { row }
 *   at an infinity.
 * @see Matheron (1963), Economic Geology 58, 1246-1266; Journel & Huijbregts (1978) (from memory).
 */
export function downHoleVariograms(
  intervals: IntervalsByHole,
  domains: Category,
  values: Float64Array,
  { lagM, lags = 20, onProgress }: DownHoleOptions,
): ExperimentalVariogram[] {
  const runs = codeRuns(intervals, domains);
  const { fromM, toM } = intervals;
  requireValues(values, fromM.length);
  const sums = domains.levels.map(() => emptyLagSums(lagM, lags));
  const used = domains.levels.map((): number[] => []);
  const reachM = (lags + 0.5) * lagM;
  runs.forEach(({ first, last, code }, at) => {
    for (let i = first; i <= last; i++) {
      if (Number.isNaN(values[i])) continue;
      used[code]!.push(values[i]!);
      const centreM = (fromM[i]! + toM[i]!) / 2;
      for (let j = i + 1; j <= last; j++) {
        const distanceM = (fromM[j]! + toM[j]!) / 2 - centreM;
        if (distanceM > reachM) break;
        if (!Number.isNaN(values[j]))
          addPair(sums[code]!, distanceM, values[j]! - values[i]!, lagM);
      }
    }
    onProgress?.((at + 1) / runs.length);
  });
  return sums.map((own, code) => variogramOf(own, used[code]!));
}

/** @throws {KernelError} `shape`; `not-finite` with { row } at an infinity. */
export function requireValues(values: Float64Array, n: number): void {
  if (values.length !== n)
    throw new KernelError('shape', `expected ${n} values, found ${values.length}`);
  const row = values.findIndex((value) => Math.abs(value) === Infinity);
  if (row >= 0)
    throw new KernelError(
      'not-finite',
      `expected finite values, found ${values[row]} in row ${row}`,
      {
        row,
      },
    );
}
