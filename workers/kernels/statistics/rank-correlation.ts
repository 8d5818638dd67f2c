import { KernelError } from '#kernels/kernel-error.ts';
import { midranks } from '#kernels/tables/ranks.ts';
import { requireFinite } from './require-finite.ts';

/**
 * Spearman's rank correlation: the product-moment correlation of midranks, so that ties count fairly
 * (the library at hand ranks ties by their order).
 *
 * @param x, y Finite values of the same rows, any unit.
 * @returns Null when either side does not vary.
 * @throws {KernelError} `shape`; `too-few-rows` under 3; `not-finite`.
 * @see Spearman (1904), American Journal of Psychology 15, 72-101 (from memory).
 */
export function rankCorrelation(x: Float64Array, y: Float64Array): number | null {
  if (x.length !== y.length)
    throw new KernelError('shape', `expected pairs, found ${x.length} and ${y.length} values`);
  requireFinite(x, 'values');
  requireFinite(y, 'values');
  const n = x.length;
  if (n < 3) throw new KernelError('too-few-rows', `expected at least 3 pairs, found ${n}`, { n });
  const [a, b] = [midranks(x).ranks, midranks(y).ranks];
  const middle = (n + 1) / 2;
  let [both, ofA, ofB] = [0, 0, 0];
  for (let i = 0; i < n; i++) {
    const [da, db] = [a[i]! - middle, b[i]! - middle];
    both += da * db;
    ofA += da * da;
    ofB += db * db;
  }
  return ofA > 0 && ofB > 0 ? both / Math.sqrt(ofA * ofB) : null;
}
