import { Matrix } from 'ml-matrix';
import { PCA } from 'ml-pca';
import { KernelError } from '#kernels/kernel-error.ts';

/** Eigenvalues, largest first, with their unit vectors. */
export interface Eigen {
  values: Float64Array;
  /** Row-major (size, values.length): one column per value, its largest entry positive. */
  vectors: Float64Array;
}

/** Eigenvalues under this share of the largest are rounding noise of a singular matrix. */
const NOISE = 1e-12;

/**
 * Eigenvalues and vectors of a covariance or correlation matrix; those that are only rounding noise
 * are dropped.
 *
 * @param matrix Row-major (size, size), symmetric. Not modified.
 * @throws {KernelError} `not-finite`; `singular` when nothing varies.
 */
export function eigenOfCovariance(matrix: Float64Array, size: number): Eigen {
  if (!matrix.every(Number.isFinite)) {
    throw new KernelError('not-finite', 'expected a finite covariance matrix');
  }
  const rows = Array.from({ length: size }, (_, i) => matrix.subarray(i * size, (i + 1) * size));
  const pca = new PCA(new Matrix(rows.map((row) => [...row])), {
    isCovarianceMatrix: true,
    center: false,
  });
  const all = pca.getEigenvalues();
  const largest = all[0] ?? 0;
  if (!(largest > Number.MIN_VALUE)) {
    throw new KernelError('singular', 'expected parts whose ratios vary, found constant ratios');
  }
  const kept = all.filter((value) => value > NOISE * size * largest);
  const eigenvectors = pca.getEigenvectors();
  const vectors = new Float64Array(size * kept.length);
  kept.forEach((_, k) => {
    const sign = signOf(Array.from({ length: size }, (__, i) => eigenvectors.get(i, k)));
    for (let i = 0; i < size; i++) vectors[i * kept.length + k] = sign * eigenvectors.get(i, k);
  });
  return { values: Float64Array.from(kept), vectors };
}

/** Makes the entry of largest size positive; of nearly equal ones the first counts. */
function signOf(vector: readonly number[]): 1 | -1 {
  const largest = vector.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  const leader = vector.find((value) => Math.abs(value) >= largest * (1 - 1e-9));
  return (leader ?? 1) < 0 ? -1 : 1;
}
