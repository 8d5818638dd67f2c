import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';
import { nonNegativeLeastSquares } from './non-negative-least-squares.ts';
import { problemOf, type ElementAssay } from './normative-minerals.ts';

/** What assay error leaves open about one mineral, mass %. */
export interface MineralRange {
  mineral: string;
  low: number;
  median: number;
  high: number;
}

/**
 * Range of normative minerals under assay error: grades are drawn about their values, each with its
 * own relative error, and fitted again. Shows error of assays alone, not of a wrong choice of minerals.
 *
 * @param cvs Relative error of each element (fraction), such as that of its duplicates.
 * @param options.draws 200 unless told.  @param options.share Share of draws between low and high, .9.
 * @throws {KernelError} As `normativeMinerals`; `shape`; `bad-parameter` at an error < 0 or few draws.
 */
export function normativeRange(
  assays: readonly ElementAssay[],
  minerals: readonly string[],
  cvs: readonly number[],
  options: { seed: number; draws?: number; share?: number; relativeError?: number },
): MineralRange[] {
  const { seed, draws = 200, share = 0.9, relativeError = 0.05 } = options;
  if (cvs.length !== assays.length) {
    throw new KernelError('shape', `expected ${assays.length} errors, found ${cvs.length}`);
  }
  const areErrors = cvs.every((cv) => cv >= 0 && cv < Infinity);
  if (!areErrors || !(Number.isInteger(draws) && draws >= 20) || !(share > 0 && share < 1)) {
    const message = `expected errors >= 0, 20 or more draws and a share in (0, 1), found ${cvs.join(', ')}, ${draws}, ${share}`;
    throw new KernelError('bad-parameter', message);
  }
  const { weights, weighted } = problemOf(assays, minerals, relativeError);
  const random = seededRandom(seed);
  const drawn = minerals.map(() => new Float64Array(draws));
  for (let draw = 0; draw < draws; draw++) {
    const rhs = weights.map((weight, i) => {
      const grade = assays[i]!.percent * (1 + cvs[i]! * random.normal());
      return weight * Math.max(0, grade);
    });
    const { x } = nonNegativeLeastSquares(weighted, rhs, minerals.length);
    x.forEach((percent, j) => (drawn[j]![draw] = percent));
  }
  const tail = (1 - share) / 2;
  return minerals.map((mineral, j) => {
    const [low = NaN, median = NaN, high = NaN] = quantiles(drawn[j]!, [tail, 0.5, 1 - tail]);
    return { mineral, low, median, high };
  });
}
