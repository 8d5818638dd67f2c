import { KernelError } from '#kernels/kernel-error.ts';
import { marginsOf } from '#kernels/tables/margins.ts';

/** Agreement of a square table, truth by row and answer by column. */
export interface Agreement {
  /** Share on the diagonal. */
  accuracy: number;
  /** Mean over rows of the share of a row on the diagonal; rows without anything are left out. */
  balancedAccuracy: number;
  /** Cohen's kappa, (po - pe) / (1 - pe); null when chance alone agrees fully. */
  kappa: number | null;
}

/**
 * Agreement of two codings of the same rows.
 *
 * @param table Row-major, shape (k, k), counts or metres >= 0.
 * @throws {KernelError} `shape`; `bad-parameter` at a negative cell; `too-few-rows` when empty.
 * @see Cohen (1960), Educational and Psychological Measurement 20, 37-46 (from memory).
 */
export function agreementOf(table: Float64Array, k: number): Agreement {
  if (table.length !== k * k)
    throw new KernelError('shape', `expected ${k} x ${k} cells, found ${table.length}`);
  const { rowTotals, colTotals, total } = marginsOf(table, k);
  if (!(total > 0)) throw new KernelError('too-few-rows', 'expected a table that holds something');
  const recalls = [...rowTotals.keys()]
    .filter((row) => rowTotals[row]! > 0)
    .map((row) => table[row * k + row]! / rowTotals[row]!);
  let [agreed, byChance] = [0, 0];
  for (let i = 0; i < k; i++) {
    agreed += table[i * k + i]! / total;
    byChance += (rowTotals[i]! / total) * (colTotals[i]! / total);
  }
  return {
    accuracy: agreed,
    balancedAccuracy: recalls.reduce((sum, recall) => sum + recall / recalls.length, 0),
    kappa: 1 - byChance > 1e-12 ? (agreed - byChance) / (1 - byChance) : null,
  };
}
