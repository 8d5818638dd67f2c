import { EVD, Matrix } from 'ml-matrix';

/**
 * Symmetric matrices here are packed by rows of the lower triangle: (a, b) with b <= a stands at
 * a (a + 1) / 2 + b. Own loops rather than ml-matrix, because they run once per group and step and
 * must not allocate.
 */
export const packedSize = (p: number): number => (p * (p + 1)) / 2;

/**
 * Lower Cholesky factor of a packed matrix.
 *
 * @param matrix Packed, p (p + 1) / 2 values from `at`. Not modified.
 * @param shift Subtracted from the diagonal first: the factor exists only when every eigenvalue
 *   exceeds it.
 * @param out Packed factor, from 0.
 * @returns Σ ln of the diagonal (half the log-determinant); NaN when the matrix is not positive definite.
 */
export function choleskyPacked(
  matrix: Float64Array,
  at: number,
  p: number,
  out: Float64Array,
  shift = 0,
): number {
  let halfLogDeterminant = 0;
  for (let a = 0, rowA = 0; a < p; rowA += ++a) {
    for (let b = 0, rowB = 0; b <= a; rowB += ++b) {
      let sum = matrix[at + rowA + b]!;
      for (let j = 0; j < b; j++) sum -= out[rowA + j]! * out[rowB + j]!;
      if (b < a) {
        out[rowA + b] = sum / out[rowB + b]!;
        continue;
      }
      sum -= shift;
      if (!(sum > 0)) return NaN;
      out[rowA + a] = Math.sqrt(sum);
      halfLogDeterminant += 0.5 * Math.log(sum);
    }
  }
  return halfLogDeterminant;
}

/** Replaces a packed lower triangle, from `at`, by its inverse (packed lower triangle too). */
export function invertTriangle(factor: Float64Array, at: number, p: number): void {
  for (let a = 0, rowA = at; a < p; rowA += ++a) {
    const pivot = 1 / factor[rowA + a]!;
    // Row a of the inverse: -pivot times row a of the factor times the rows inverted so far.
    for (let b = 0; b < a; b++) {
      let sum = 0;
      for (let j = b, rowJ = at + packedSize(b); j < a; rowJ += ++j) {
        sum += factor[rowA + j]! * factor[rowJ + b]!;
      }
      factor[rowA + b] = -pivot * sum;
    }
    factor[rowA + a] = pivot;
  }
}

/** Raises every eigenvalue of a packed symmetric matrix, from `at`, to at least `floor`, in place. */
export function raiseEigenvalues(matrix: Float64Array, at: number, p: number, floor: number): void {
  const full = Matrix.zeros(p, p);
  for (let a = 0, i = at; a < p; a++) {
    for (let b = 0; b <= a; b++, i++) {
      full.set(a, b, matrix[i]!);
      full.set(b, a, matrix[i]!);
    }
  }
  const { realEigenvalues, eigenvectorMatrix } = new EVD(full, { assumeSymmetric: true });
  const raised = realEigenvalues.map((value) => Math.max(value, floor));
  for (let a = 0, i = at; a < p; a++) {
    for (let b = 0; b <= a; b++, i++) {
      let sum = 0;
      for (let j = 0; j < p; j++) {
        sum += raised[j]! * eigenvectorMatrix.get(a, j) * eigenvectorMatrix.get(b, j);
      }
      matrix[i] = sum;
    }
  }
}
