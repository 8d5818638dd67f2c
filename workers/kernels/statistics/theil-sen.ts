import { median } from 'simple-statistics';
import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite } from './require-finite.ts';

/** A robust straight line. */
export interface TheilSenLine {
  /** Median of the slopes of all pairs, unit of y per unit of x. */
  slope: number;
  /** Median of y less slope times median of x. */
  intercept: number;
}

/** Pairs grow with the square of the points; profiles stay far below. */
const MAX_POINTS = 2000;

/**
 * Theil-Sen line: median slope over pairs of points with different x.
 *
 * @param x, y Finite, 2 to 2,000 points.
 * @throws {KernelError} `shape`; `too-few-rows`; `too-many-rows`; `not-finite`; `constant` when x does
 *   not vary.
 * @see Theil (1950); Sen (1968), Journal of the American Statistical Association 63, 1379-1389 (from
 *   memory).
 */
export function theilSen(x: ArrayLike<number>, y: ArrayLike<number>): TheilSenLine {
  if (x.length !== y.length)
    throw new KernelError('shape', `expected pairs, found ${x.length} and ${y.length} values`);
  requireFinite(x, 'values');
  requireFinite(y, 'values');
  const n = x.length;
  if (n < 2) throw new KernelError('too-few-rows', `expected at least 2 points, found ${n}`, { n });
  if (n > MAX_POINTS)
    throw new KernelError('too-many-rows', `expected at most ${MAX_POINTS} points, found ${n}`, {
      n,
    });
  const slopes: number[] = [];
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < i; j++) {
      if (x[i] !== x[j]) slopes.push((y[i]! - y[j]!) / (x[i]! - x[j]!));
    }
  }
  if (slopes.length === 0)
    throw new KernelError('constant', `expected x values that vary, all are ${x[0]}`);
  const slope = median(slopes);
  return { slope, intercept: median(Array.from(y)) - slope * median(Array.from(x)) };
}
