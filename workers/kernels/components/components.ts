import { KernelError } from '#kernels/kernel-error.ts';
import { requireColumns } from '#kernels/compositions/require-parts.ts';
import { eigenOfCovariance } from './eigen.ts';
import {
  clrCovariance,
  correlationOf,
  logCovariance,
  logMoments,
  type LogMoments,
  type MomentOptions,
} from './log-moments.ts';

/** What is decomposed: the covariance of clr, or the correlation of ln (for comparison only). */
export type ComponentBasis = 'clr-covariance' | 'log-correlation';

/** Principal components of log-ratios. Score k of a row is sum_j weights[j, k] (ln x_j - logMean[j]). */
export interface Components {
  basis: ComponentBasis;
  nRows: number;
  nParts: number;
  /** Mean of ln x per part. */
  logMean: Float64Array;
  /** Variances, largest first; as many as the matrix has rank. */
  eigenvalues: Float64Array;
  /** Share of the total variance of each. */
  shares: Float64Array;
  /** Row-major (nParts, eigenvalues.length). Of clr, columns sum to 0; the largest is positive. */
  loadings: Float64Array;
  /** Loadings, divided by the standard deviation of ln where the basis is a correlation. */
  weights: Float64Array;
  notes: string[];
}

export interface ComponentOptions extends MomentOptions {
  basis?: ComponentBasis;
}

/**
 * Log-ratio principal components of a table, from its columns in one pass. Equal to the components
 * of any isometric log-ratio; clr is not scaled, since that would undo the geometry.
 *
 * @param columns One array per part (ppm), > 0 in used rows, at least three. Not modified.
 * @param options.mask Rows to fit: those with a value other than 0.
 * @throws {KernelError} `too-few-parts`, `shape`, `not-positive`; `too-few-rows` under three used
 *   rows; `singular` when no ratio varies.
 * @see Aitchison (1986); Filzmoser, Hron & Reimann (2009), Environmetrics 20.
 */
export function fitComponents(
  columns: readonly Float64Array[],
  options: ComponentOptions = {},
): Components {
  requireColumns(columns, 3);
  return componentsOfMoments(logMoments(columns, options), options.basis);
}

/** {@link fitComponents} from moments already summed, for instance by several threads. */
export function componentsOfMoments(
  moments: LogMoments,
  basis: ComponentBasis = 'clr-covariance',
): Components {
  const { nRows, nParts, mean } = moments;
  if (nParts < 3) {
    const message = `expected at least 3 parts, found ${nParts}`;
    throw new KernelError('too-few-parts', message, { found: nParts });
  }
  if (nRows < 3) {
    const message = `expected at least 3 rows to fit, found ${nRows}`;
    throw new KernelError('too-few-rows', message, { found: nRows });
  }
  const covariance = logCovariance(moments);
  const matrix = matrixOf(covariance, nParts, basis);
  const { values, vectors } = eigenOfCovariance(matrix, nParts);
  if (basis === 'clr-covariance') centreColumns(vectors, nParts, values.length);
  const sdOf = (part: number) => Math.sqrt(covariance[part * nParts + part]!);
  const total = values.reduce((sum, value) => sum + value, 0);
  return {
    basis,
    nRows,
    nParts,
    logMean: mean,
    eigenvalues: values,
    shares: values.map((value) => value / total),
    loadings: vectors,
    weights:
      basis === 'clr-covariance'
        ? vectors
        : vectors.map((value, at) => value / sdOf(Math.floor(at / values.length))),
    notes: rankNotes(nRows, nParts, values.length, basis),
  };
}

/** The matrix to decompose. */
export function matrixOf(
  covariance: Float64Array,
  nParts: number,
  basis: ComponentBasis,
): Float64Array {
  if (basis === 'clr-covariance') return clrCovariance(covariance, nParts);
  const correlation = correlationOf(covariance, nParts);
  if (!correlation)
    throw new KernelError('singular', 'expected parts that vary, found a constant one');
  return correlation;
}

/** Takes rounding off columns that sum to zero by construction. */
function centreColumns(vectors: Float64Array, nParts: number, nColumns: number): void {
  for (let k = 0; k < nColumns; k++) {
    let sum = 0;
    for (let part = 0; part < nParts; part++) sum += vectors[part * nColumns + k]!;
    for (let part = 0; part < nParts; part++) vectors[part * nColumns + k]! -= sum / nParts;
  }
}

function rankNotes(nRows: number, nParts: number, rank: number, basis: ComponentBasis): string[] {
  const full = basis === 'clr-covariance' ? nParts - 1 : nParts;
  if (rank === full) return [];
  if (nRows <= full) return [`${nRows} rows for ${nParts} parts: only ${rank} components exist`];
  return [`${full - rank} components have no variance: some ratios are constant`];
}
