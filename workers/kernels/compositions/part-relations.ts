import { KernelError } from '#kernels/kernel-error.ts';
import type { Variation } from './variation.ts';

/** How parts relate, read from a variation matrix. */
export interface PartRelations {
  /** Variance of each part's clr; their sum is the total variance. */
  clrVariances: Float64Array;
  /** rho_p = 1 - T_ij / (var clr_i + var clr_j), row-major, 1 on the diagonal; 1 is proportional. */
  proportionality: Float64Array;
  /** Pairs i < j that keep a nearly constant ratio: one says what the other says. */
  duplicates: { i: number; j: number; variance: number }[];
}

/** T_ij under which two parts count as duplicates unless said. */
export const DUPLICATE_VARIANCE = 0.01;

/**
 * Variances of clr, proportionality and nearly duplicate parts, all from the variation matrix.
 *
 * @param duplicateBelow T_ij under which two parts are named as duplicates.
 * @throws {KernelError} `too-few-parts` under two, `shape`, `bad-parameter`.
 * @see Lovell et al. (2015), Proportionality, PLoS Comput. Biol. 11; Quinn et al. (2017).
 */
export function partRelations(
  { matrix, totalVariance }: Variation,
  nParts: number,
  duplicateBelow = DUPLICATE_VARIANCE,
): PartRelations {
  requireSquare(matrix, nParts);
  if (!(duplicateBelow >= 0)) {
    throw new KernelError('bad-parameter', `expected a variance >= 0, found ${duplicateBelow}`);
  }
  // var clr_i = sum_j T_ij / D - total / D.
  const clrVariances = Float64Array.from({ length: nParts }, (_, i) => {
    const row = matrix.subarray(i * nParts, (i + 1) * nParts);
    return Math.max((row.reduce((sum, value) => sum + value, 0) - totalVariance) / nParts, 0);
  });
  const proportionality = new Float64Array(nParts * nParts).fill(1);
  const duplicates: PartRelations['duplicates'] = [];
  for (let i = 0; i < nParts; i++) {
    for (let j = 0; j < nParts; j++) {
      if (i === j) continue;
      const variance = matrix[i * nParts + j]!;
      const both = clrVariances[i]! + clrVariances[j]!;
      proportionality[i * nParts + j] = both > 0 ? 1 - variance / both : 1;
      if (i < j && variance < duplicateBelow) duplicates.push({ i, j, variance });
    }
  }
  duplicates.sort((a, b) => a.variance - b.variance);
  return { clrVariances, proportionality, duplicates };
}

/** Checks a symmetric table of parts by parts. */
export function requireSquare(matrix: Float64Array, nParts: number): void {
  if (!(nParts >= 2)) {
    throw new KernelError('too-few-parts', `expected at least 2 parts, found ${nParts}`, {
      found: nParts,
    });
  }
  if (matrix.length !== nParts * nParts || !matrix.every(Number.isFinite)) {
    throw new KernelError('shape', `expected ${nParts} by ${nParts} finite values`);
  }
}
