import { cholesky } from '#kernels/components/cholesky.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { inverse, Matrix } from 'ml-matrix';

/** Added to the diagonal, as a share of its mean, of a covariance that cannot be inverted. */
const RIDGE = 1e-8;

/**
 * Inverse of a covariance matrix; one that is singular to rounding is steadied by a small ridge.
 *
 * @param covariance Row-major (size, size), symmetric. Not modified.
 * @returns Row-major inverse, and whether the ridge was needed.
 * @throws {KernelError} `singular` when nothing varies or the ridge does not help.
 */
export function inverseOfCovariance(
  covariance: Float64Array,
  size: number,
): { matrix: Float64Array; isRidged: boolean } {
  let trace = 0;
  for (let i = 0; i < size; i++) trace += covariance[i * size + i]!;
  const ridge = (RIDGE * trace) / size;
  for (const added of Number.isFinite(trace) ? [0, ridge] : []) {
    const steadied = covariance.slice();
    for (let i = 0; i < size; i++) steadied[i * size + i]! += added;
    if (cholesky(steadied.slice(), size) === null) continue;
    const matrix = inverse(Matrix.from1DArray(size, size, Array.from(steadied))).to1DArray();
    return { matrix: Float64Array.from(matrix), isRidged: added > 0 };
  }
  throw new KernelError('singular', 'expected log-ratios that vary on their own');
}
