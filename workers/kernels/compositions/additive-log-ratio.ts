import { KernelError } from '#kernels/kernel-error.ts';
import { requireParts } from './require-parts.ts';

/**
 * Additive log-ratio, alr(x)_j = ln(x_j / x_D) for every part but the denominator D. Not isometric:
 * use it for models, not for distances.
 *
 * @param parts Row-major (nRows, nCols), one unit, every value > 0. Not modified.
 * @param denominator Index of the part to divide by; the last one unless said.
 * @returns Row-major (nRows, nCols - 1), parts in order without the denominator.
 * @throws {KernelError} `shape`, `not-positive`; `bad-parameter` for an index outside the parts.
 * @see Aitchison (1986), The Statistical Analysis of Compositional Data, Chapman & Hall.
 */
export function additiveLogRatio(
  parts: Float64Array,
  nCols: number,
  denominator = nCols - 1,
): Float64Array {
  const nRows = requireParts(parts, nCols);
  if (!Number.isInteger(denominator) || denominator < 0 || denominator >= nCols) {
    const message = `expected a denominator among ${nCols} parts, found ${denominator}`;
    throw new KernelError('bad-parameter', message);
  }
  const out = new Float64Array(nRows * (nCols - 1));
  let at = 0;
  for (let start = 0; start < parts.length; start += nCols) {
    const below = Math.log(parts[start + denominator]!);
    for (let col = 0; col < nCols; col++) {
      if (col !== denominator) out[at++] = Math.log(parts[start + col]!) - below;
    }
  }
  return out;
}
