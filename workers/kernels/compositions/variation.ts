import { KernelError } from '#kernels/kernel-error.ts';
import { centredLogRatio } from './centred-log-ratio.ts';
import { requireParts } from './require-parts.ts';

/** How the log-ratios of a table vary. */
export interface Variation {
  /** T_ij = var(ln(x_i / x_j)), n - 1, row-major (nCols, nCols); zero diagonal, symmetric. */
  matrix: Float64Array;
  /** sum(T) / (2 nCols), the trace of the clr covariance. */
  totalVariance: number;
}

/**
 * Variation matrix and total variance of a table of compositions. A low T_ij marks two parts that
 * keep a nearly constant ratio.
 *
 * @param parts Row-major (nRows, nCols), one unit, every value > 0. Not modified.
 * @throws {KernelError} `shape`, `not-positive`; `too-few-rows` under three.
 * @see Aitchison (1986), The Statistical Analysis of Compositional Data, Chapman & Hall.
 */
export function variation(parts: Float64Array, nCols: number): Variation {
  const nRows = requireParts(parts, nCols);
  if (nRows < 3) {
    throw new KernelError('too-few-rows', `expected at least 3 rows, found ${nRows}`);
  }
  return variationOfCovariance(clrCovariance(parts, nCols), nCols);
}

/**
 * Variation matrix from any covariance of logs (ln or clr give the same):
 * T_ij = S_ii + S_jj - 2 S_ij.
 *
 * @param covariance Row-major (nCols, nCols), symmetric.
 * @throws {KernelError} `shape`; `not-finite` with { row, col }.
 */
export function variationOfCovariance(covariance: Float64Array, nCols: number): Variation {
  if (!(nCols >= 1) || covariance.length !== nCols * nCols) {
    const message = `expected ${nCols} x ${nCols} covariances, found ${covariance.length}`;
    throw new KernelError('shape', message);
  }
  const bad = covariance.findIndex((value) => !Number.isFinite(value));
  if (bad >= 0) {
    const [row, col] = [Math.floor(bad / nCols), bad % nCols];
    const message = `expected finite covariances, found ${covariance[bad]} in row ${row}, column ${col}`;
    throw new KernelError('not-finite', message, { row, col });
  }
  const matrix = new Float64Array(nCols * nCols);
  let sum = 0;
  for (let i = 0; i < nCols; i++) {
    for (let j = 0; j < nCols; j++) {
      if (i === j) continue;
      const shared = covariance[i * nCols + j]! + covariance[j * nCols + i]!;
      const value = covariance[i * nCols + i]! + covariance[j * nCols + j]! - shared;
      sum += matrix[i * nCols + j] = Math.max(value, 0);
    }
  }
  return { matrix, totalVariance: sum / (2 * nCols) };
}

/** Covariance (n - 1) of clr columns, row-major (nCols, nCols), in two passes. */
function clrCovariance(parts: Float64Array, nCols: number): Float64Array {
  const clr = centredLogRatio(parts, nCols);
  const nRows = clr.length / nCols;
  const mean = new Float64Array(nCols);
  for (let i = 0; i < clr.length; i++) mean[i % nCols]! += clr[i]! / nRows;
  const covariance = new Float64Array(nCols * nCols);
  for (let start = 0; start < clr.length; start += nCols) {
    for (let i = 0; i < nCols; i++) {
      const deviation = clr[start + i]! - mean[i]!;
      for (let j = 0; j < nCols; j++) {
        covariance[i * nCols + j]! += (deviation * (clr[start + j]! - mean[j]!)) / (nRows - 1);
      }
    }
  }
  return covariance;
}

/**
 * Centre of a table of compositions: the closed geometric mean.
 *
 * @param parts Row-major (nRows, nCols), one unit, every value > 0. Not modified.
 * @returns One closed composition, sum 1.
 * @throws {KernelError} `shape`, `not-positive`; `too-few-rows` without rows.
 */
export function compositionalCentre(parts: Float64Array, nCols: number): Float64Array {
  const nRows = requireParts(parts, nCols);
  if (nRows === 0) throw new KernelError('too-few-rows', 'expected at least 1 row, found none');
  const logs = new Float64Array(nCols);
  for (let i = 0; i < parts.length; i++) logs[i % nCols]! += Math.log(parts[i]!) / nRows;
  const largest = logs.reduce((a, b) => Math.max(a, b), -Infinity);
  const means = logs.map((log) => Math.exp(log - largest));
  const sum = means.reduce((a, b) => a + b, 0);
  return means.map((value) => value / sum);
}
