import { KernelError } from '#kernels/kernel-error.ts';

/**
 * Least squares on some columns of a matrix by Householder reflections; a column that hangs on those
 * before it gets 0. Own code, since it runs many times for every interval on tiny matrices, where the
 * objects of a library cost more than the sums.
 *
 * @param matrix Row-major (m, nCols), m = rhs.length. Not modified.
 * @param columns Columns to use, in this order.
 * @returns One value per column used.
 * @throws {KernelError} `not-finite` where a column used or the right side is not.
 * @see Golub & Van Loan (2013), Matrix Computations, Johns Hopkins, section 5.3.
 */
export function leastSquares(
  matrix: Float64Array,
  rhs: Float64Array,
  nCols: number,
  columns: readonly number[],
): Float64Array {
  const [m, n] = [rhs.length, columns.length];
  const r = columns.map((j) => Float64Array.from({ length: m }, (_, i) => matrix[i * nCols + j]!));
  const scale = r.map((column) => Math.hypot(...column));
  if (!(scale.every(Number.isFinite) && Number.isFinite(Math.hypot(...rhs))))
    throw new KernelError('not-finite', 'expected finite columns and right side, found some not');
  const right = rhs.slice();
  const isFree = new Uint8Array(n);
  for (let k = 0; k < Math.min(m, n); k++) {
    const column = r[k]!;
    const length = Math.hypot(...column.subarray(k));
    if (length <= 1e-12 * scale[k]!) continue;
    isFree[k] = 1;
    const v = column.slice(k);
    v[0] = v[0]! + (column[k]! < 0 ? -length : length);
    const half = v.reduce((sum, value) => sum + value * value, 0) / 2;
    for (const target of [...r.slice(k), right]) reflect(target, v, half, k);
  }
  return solveTriangle(r, right, isFree);
}

function reflect(target: Float64Array, v: Float64Array, half: number, k: number): void {
  let product = 0;
  for (let i = 0; i < v.length; i++) product += v[i]! * target[k + i]!;
  for (let i = 0; i < v.length; i++) target[k + i]! -= (product / half) * v[i]!;
}

function solveTriangle(
  r: readonly Float64Array[],
  right: Float64Array,
  isFree: Uint8Array,
): Float64Array {
  const x = new Float64Array(r.length);
  for (let k = r.length - 1; k >= 0; k--) {
    if (isFree[k] === 0) continue;
    let value = right[k]!;
    for (let j = k + 1; j < r.length; j++) value -= r[j]![k]! * x[j]!;
    x[k] = value / r[k]![k]!;
  }
  return x;
}
