/** Under this share of a variable's own variance, what the others leave of it is rounding noise. */
const NOISE = 1e-12;
/** Under this share of the largest variance, a variable is constant but for rounding. */
const CONSTANT = 1e-26;

/**
 * Lower triangle L with L L' = matrix, in place; the upper triangle is left as it was. Written here
 * and not taken from a matrix library because it stands in the innermost loop of searches that
 * decompose thousands of small matrices.
 *
 * @param matrix Row-major (size, size), symmetric.
 * @returns ln of the determinant of the matrix, or null when it is singular to rounding.
 */
export function cholesky(matrix: Float64Array, size: number): number | null {
  let logDeterminant = 0;
  let largest = 0;
  for (let j = 0; j < size; j++) largest = Math.max(largest, matrix[j * size + j]!);
  const least = Math.max(CONSTANT * largest, 1e-200);
  for (let j = 0; j < size; j++) {
    const variance = matrix[j * size + j]!;
    let pivot = variance;
    for (let k = 0; k < j; k++) pivot -= matrix[j * size + k]! ** 2;
    if (!(pivot > NOISE * variance) || !(pivot > least)) return null;
    const root = Math.sqrt(pivot);
    logDeterminant += Math.log(pivot);
    matrix[j * size + j] = root;
    for (let i = j + 1; i < size; i++) {
      let sum = matrix[i * size + j]!;
      for (let k = 0; k < j; k++) sum -= matrix[i * size + k]! * matrix[j * size + k]!;
      matrix[i * size + j] = sum / root;
    }
  }
  return logDeterminant;
}

/**
 * Squared distances (x - centre)' S^-1 (x - centre) of rows, S = L L'.
 *
 * @param points Row-major (n, size).
 * @param lower From {@link cholesky}.
 * @param out One distance per row.
 */
export function squaredDistances(
  points: Float64Array,
  size: number,
  centre: Float64Array,
  lower: Float64Array,
  out: Float64Array,
): void {
  const solved = new Float64Array(size);
  for (let row = 0, start = 0; row < out.length; row++, start += size) {
    let total = 0;
    for (let i = 0; i < size; i++) {
      let value = points[start + i]! - centre[i]!;
      for (let k = 0; k < i; k++) value -= lower[i * size + k]! * solved[k]!;
      value /= lower[i * size + i]!;
      solved[i] = value;
      total += value * value;
    }
    out[row] = total;
  }
}
