import { requireParts } from './require-parts.ts';

/**
 * Centred log-ratio of a table of compositions: clr(x)_j = ln(x_j) - mean_k ln(x_k), row by row.
 * Output rows sum to zero, so their covariance matrix is singular (rank at most nCols - 1).
 *
 * @param parts Row-major, shape (nRows, nCols), all in one unit (ppm), every value > 0: replace
 *   values below detection first. Not modified.
 * @param nCols Parts per row, >= 2.
 * @returns New table of the same shape, dimensionless.
 * @throws {KernelError} `shape`; `not-positive` with { row, col } at the first value that is not a
 *   finite number > 0.
 * @see Aitchison (1986), The Statistical Analysis of Compositional Data, Chapman & Hall.
 */
export function centredLogRatio(parts: Float64Array, nCols: number): Float64Array {
  requireParts(parts, nCols);
  const out = new Float64Array(parts.length);
  for (let start = 0; start < parts.length; start += nCols) {
    let sumOfLogs = 0;
    for (let col = 0; col < nCols; col++) {
      sumOfLogs += out[start + col] = Math.log(parts[start + col]!);
    }
    for (let col = 0; col < nCols; col++) out[start + col]! -= sumOfLogs / nCols;
  }
  return out;
}
