import { KernelError } from '#kernels/kernel-error.ts';
import { requireParts } from './require-parts.ts';

/**
 * Closes every row to a total: C(x) = total x / sum(x). Log-ratios do not need it: they are the same
 * for closed and unclosed rows.
 *
 * @param parts Row-major (nRows, nCols), one unit, every value > 0. Not modified.
 * @param total Sum of each row of the result, > 0.
 * @throws {KernelError} `shape`, `not-positive`; `bad-parameter` for a total that is not > 0.
 */
export function close(parts: Float64Array, nCols: number, total = 1): Float64Array {
  requireParts(parts, nCols);
  if (!(total > 0 && total < Infinity)) {
    throw new KernelError('bad-parameter', `expected a total > 0, found ${total}`);
  }
  const out = new Float64Array(parts.length);
  for (let start = 0; start < parts.length; start += nCols) {
    let sum = 0;
    for (let col = 0; col < nCols; col++) sum += parts[start + col]!;
    for (let col = 0; col < nCols; col++) out[start + col] = (total * parts[start + col]!) / sum;
  }
  return out;
}
