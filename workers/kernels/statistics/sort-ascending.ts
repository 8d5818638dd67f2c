import { SORT_COUNTS } from '#kernels/dense/dense-math.ts';
import { f64Bytes, withLab } from '#kernels/dense/lab.ts';

/** Below this the language's own sort is as fast. */
const FEW = 256;

/**
 * A sorted copy of values in any unit, ascending as the language sorts doubles; by digits, so that a
 * million values take some tens of milliseconds.
 *
 * @param values Not modified; NaN, if any, come last.
 */
export function sortedAscending(values: ArrayLike<number>): Float64Array {
  const copy = Float64Array.from(values);
  if (copy.length < FEW || hasNaN(copy)) return copy.sort();
  const n = copy.length;
  return withLab(f64Bytes(n, n, SORT_COUNTS / 2), (lab) => {
    const [x, spare] = [lab.f64(n), lab.f64(n)];
    x.set(copy);
    lab.math.sort(x, n, spare, lab.u32(SORT_COUNTS));
    copy.set(x);
    return copy;
  });
}

function hasNaN(values: Float64Array): boolean {
  for (let i = 0; i < values.length; i++) if (Number.isNaN(values[i]!)) return true;
  return false;
}
