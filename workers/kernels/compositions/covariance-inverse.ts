import { KernelError } from '#kernels/kernel-error.ts';
import { CholeskyDecomposition, Matrix } from 'ml-matrix';

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
  const rows = Array.from({ length: size }, (_, i) => [
    ...covariance.subarray(i * size, (i + 1) * size),
  ]);
  const trace = rows.reduce((sum, row, i) => sum + row[i]!, 0);
  const ridge = (RIDGE * trace) / size;
  for (const added of Number.isFinite(trace) ? [0, ridge] : []) {
    const matrix = new Matrix(rows.map((row, i) => row.map((x, j) => (i === j ? x + added : x))));
    const cholesky = new CholeskyDecomposition(matrix);
    if (!cholesky.isPositiveDefinite()) continue;
    const inverse = Float64Array.from(cholesky.solve(Matrix.eye(size)).to1DArray());
    if (inverse.every(Number.isFinite)) return { matrix: inverse, isRidged: added > 0 };
  }
  throw new KernelError('singular', 'expected log-ratios that vary on their own');
}
