import { KernelError } from '#kernels/kernel-error.ts';
import type { IlrBasis } from './ilr-basis.ts';
import { requireParts } from './require-parts.ts';

/**
 * Isometric log-ratio coordinates z = ln(x) V. Distances between rows are Aitchison distances, and
 * the covariance matrix has full rank.
 *
 * @param parts Row-major (nRows, basis.nParts), one unit, every value > 0. Not modified.
 * @returns Row-major (nRows, nParts - 1), dimensionless.
 * @throws {KernelError} `shape`, `not-positive`.
 * @see Egozcue et al. (2003), Isometric logratio transformations, Math. Geol. 35.
 */
export function isometricLogRatio(parts: Float64Array, basis: IlrBasis): Float64Array {
  const { nParts, vectors } = basis;
  const nRows = requireParts(parts, nParts);
  const nCoordinates = nParts - 1;
  const out = new Float64Array(nRows * nCoordinates);
  for (let row = 0; row < nRows; row++) {
    for (let part = 0; part < nParts; part++) {
      const log = Math.log(parts[row * nParts + part]!);
      for (let i = 0; i < nCoordinates; i++) {
        out[row * nCoordinates + i]! += log * vectors[part * nCoordinates + i]!;
      }
    }
  }
  return out;
}

/**
 * Compositions from coordinates: x = C(exp(z V')), closed to 1.
 *
 * @param coordinates Row-major (nRows, basis.nParts - 1), finite. Not modified.
 * @throws {KernelError} `shape`; `not-finite` with { row, col }.
 */
export function inverseIsometricLogRatio(coordinates: Float64Array, basis: IlrBasis): Float64Array {
  const { nParts, vectors } = basis;
  const nCoordinates = nParts - 1;
  if (coordinates.length % nCoordinates !== 0) {
    const message = `${coordinates.length} values do not fill rows of ${nCoordinates} coordinates`;
    throw new KernelError('shape', message);
  }
  requireFiniteCoordinates(coordinates, nCoordinates);
  const nRows = coordinates.length / nCoordinates;
  const out = new Float64Array(nRows * nParts);
  for (let row = 0; row < nRows; row++) {
    const logs = out.subarray(row * nParts, (row + 1) * nParts);
    for (let part = 0; part < nParts; part++) {
      for (let i = 0; i < nCoordinates; i++) {
        logs[part]! += coordinates[row * nCoordinates + i]! * vectors[part * nCoordinates + i]!;
      }
    }
    // The largest is taken off first, so that no exponential overflows.
    const largest = logs.reduce((a, b) => Math.max(a, b), -Infinity);
    let sum = 0;
    for (let part = 0; part < nParts; part++) sum += logs[part] = Math.exp(logs[part]! - largest);
    for (let part = 0; part < nParts; part++) logs[part]! /= sum;
  }
  return out;
}

function requireFiniteCoordinates(coordinates: Float64Array, nCoordinates: number): void {
  const bad = coordinates.findIndex((value) => !Number.isFinite(value));
  if (bad < 0) return;
  const where = { row: Math.floor(bad / nCoordinates), col: bad % nCoordinates };
  const message = `expected finite coordinates, found ${coordinates[bad]} at row ${where.row}`;
  throw new KernelError('not-finite', message, where);
}
