import { KernelError } from '#kernels/kernel-error.ts';
import { f64Bytes, withLab } from '#kernels/dense/lab.ts';
import { notPositive, requireShape } from './require-parts.ts';

/** Values worked on at a time: they stay in the first-level cache. */
const BLOCK_VALUES = 4096;

/**
 * Centred log-ratio of a table of compositions: clr(x)_j = ln(x_j) - mean_k ln(x_k), row by row.
 * Output rows sum to zero, so their covariance matrix is singular (rank at most nCols - 1).
 *
 * @param parts Row-major, shape (nRows, nCols), all in one unit (ppm), every value > 0: replace
 *   values below detection first. Not modified unless it is `out` too.
 * @param nCols Parts per row, >= 2.
 * @param out Where to write, of the same length; `parts` itself will do. A new table unless given.
 * @returns `out`, dimensionless.
 * @throws {KernelError} `shape`; `not-positive` with { row, col } at the first value that is not a
 *   finite number > 0.
 * @see Aitchison (1986), The Statistical Analysis of Compositional Data, Chapman & Hall.
 */
export function centredLogRatio(
  parts: Float64Array,
  nCols: number,
  out: Float64Array = new Float64Array(parts.length),
): Float64Array {
  const nRows = requireShape(parts, nCols);
  if (out.length !== parts.length) {
    throw new KernelError('shape', `expected room for ${parts.length} values, found ${out.length}`);
  }
  const step = Math.max(1, Math.floor(BLOCK_VALUES / nCols));
  withLab(f64Bytes(step * nCols, 1), (lab) => {
    const [block, noShift] = [lab.f64(step * nCols), lab.f64(1)];
    for (let row = 0; row < nRows; row += step) {
      const [from, to] = [row * nCols, Math.min(row + step, nRows) * nCols];
      block.set(parts.subarray(from, to));
      const bad = lab.math.lnLess(block, 0, to - from, 1, noShift);
      if (bad >= 0) throw notPositive(parts[from + bad]!, row + Math.floor(bad / nCols), bad % nCols);
      lab.math.centreRows(block, (to - from) / nCols, nCols);
      out.set(block.subarray(0, to - from), from);
    }
  });
  return out;
}
