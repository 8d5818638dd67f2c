import { normalQuantile } from '#kernels/normal.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import { midranks } from '#kernels/tables/ranks.ts';

/**
 * Normal scores of values by rank, the quantile of (rank - .5) / n; ties share their mean rank. Missing
 * values stay missing.
 *
 * @param values Any unit; NaN where missing.
 * @returns A new column of the same length.
 * @throws {KernelError} `too-few-rows` when all are missing; `not-finite` at an infinity.
 */
export function normalScoreTransform(values: Float64Array): Float64Array {
  const rows = [...values.keys()].filter((row) => !Number.isNaN(values[row]));
  const present = Float64Array.from(rows, (row) => values[row]!);
  requireFinite(present, 'values');
  const { ranks } = midranks(present);
  const out = new Float64Array(values.length).fill(NaN);
  rows.forEach((row, i) => {
    out[row] = normalQuantile((ranks[i]! - 0.5) / rows.length);
  });
  return out;
}
