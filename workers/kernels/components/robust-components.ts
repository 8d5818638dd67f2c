import {
  inverseIsometricLogRatio,
  isometricLogRatio,
} from '#kernels/compositions/isometric-log-ratio.ts';
import { pivotBasis, type IlrBasis } from '#kernels/compositions/ilr-basis.ts';
import { notPositive, requireColumns } from '#kernels/compositions/require-parts.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import type { Components } from './components.ts';
import { eigenOfCovariance } from './eigen.ts';
import { fastMcd, type McdOptions, type RobustScatter } from './mcd.ts';

/** Components of log-ratios that a minority of unusual rows cannot turn. */
export interface RobustComponents extends Components {
  /** Robust centre as a closed composition, sum 1. */
  centre: Float64Array;
  /** Squared robust distance per row of the table; NaN in rows that were not fitted. */
  distances: Float64Array;
  /** 1 where the distance passes the cut-off. Never a reason to delete a row. */
  isOutlier: Uint8Array;
  nOutliers: number;
  /** Squared distance above which a row counts as an outlier. */
  cutoff: number;
  /** Rows of the inner subset. */
  subsetSize: number;
}

export interface RobustComponentOptions extends McdOptions {
  /** Rows to fit: those with a value other than 0. */
  mask?: Uint8Array;
  /** Coordinates to work in; any basis gives the same components. */
  basis?: IlrBasis;
}

/** Rows per coordinate below which a robust fit rests on too little. */
const ROWS_PER_COORDINATE = 5;
/** Share of outliers above which they may be a population of their own. */
const MANY_OUTLIERS = 0.1;

/**
 * Robust log-ratio principal components: the minimum covariance determinant of isometric log-ratios,
 * its eigenvectors taken back to clr. The result scores and plots as classical components do.
 *
 * Outliers are rows unlike the majority; they may be the mineralised part, so that they are marked
 * and never removed.
 *
 * @param columns One array per part (ppm), > 0 in fitted rows, at least three. Not modified.
 * @throws {KernelError} `too-few-parts`, `shape`; `not-positive` with { row, col }; `too-few-rows`
 *   under five rows per coordinate; `singular` when a ratio is constant in most rows;
 *   `bad-parameter`.
 * @see Filzmoser, Hron & Reimann (2009), Environmetrics 20.
 */
export function fitRobustComponents(
  columns: readonly Float64Array[],
  options: RobustComponentOptions,
): RobustComponents {
  const nTable = requireColumns(columns, 3);
  const nParts = columns.length;
  const basis = options.basis ?? pivotBasis(nParts);
  if (basis.nParts !== nParts) {
    throw new KernelError('shape', `expected a basis of ${nParts} parts, found ${basis.nParts}`);
  }
  const rows = fittedRows(nTable, options.mask);
  const fewest = ROWS_PER_COORDINATE * (nParts - 1);
  if (rows.length < fewest) {
    const message = `expected at least ${fewest} rows for ${nParts} parts, found ${rows.length}`;
    throw new KernelError('too-few-rows', message, { found: rows.length });
  }
  const coordinates = isometricLogRatio(packRows(columns, rows), basis);
  const scatter = fastMcd(coordinates, nParts - 1, options);
  const { values, vectors } = eigenOfCovariance(toClrCovariance(scatter, basis), nParts);
  const total = values.reduce((sum, value) => sum + value, 0);
  const distances = new Float64Array(nTable).fill(NaN);
  rows.forEach((row, i) => (distances[row] = scatter.distances[i]!));
  return {
    basis: 'clr-covariance',
    nRows: rows.length,
    nParts,
    logMean: toClr(scatter.centre, basis),
    eigenvalues: values,
    shares: values.map((value) => value / total),
    loadings: vectors,
    weights: vectors,
    notes: notesOf(scatter),
    centre: inverseIsometricLogRatio(scatter.centre, basis),
    distances,
    isOutlier: Uint8Array.from(distances, (distance) => (distance > scatter.cutoff ? 1 : 0)),
    nOutliers: scatter.nOutliers,
    cutoff: scatter.cutoff,
    subsetSize: scatter.subset.length,
  };
}

function fittedRows(nRows: number, mask: Uint8Array | undefined): Uint32Array {
  if (mask && mask.length !== nRows) {
    throw new KernelError('shape', `expected a mask of ${nRows} rows, found ${mask.length}`);
  }
  const all = Uint32Array.from({ length: nRows }, (_, row) => row);
  return mask ? all.filter((row) => mask[row] !== 0) : all;
}

function packRows(columns: readonly Float64Array[], rows: Uint32Array): Float64Array {
  const packed = new Float64Array(rows.length * columns.length);
  columns.forEach((column, part) => {
    rows.forEach((row, i) => {
      const value = column[row]!;
      if (!(value > 0 && value < Infinity)) throw notPositive(value, row, part);
      packed[i * columns.length + part] = value;
    });
  });
  return packed;
}

/** V z: a point in coordinates as clr. */
function toClr(coordinates: Float64Array, { nParts, vectors }: IlrBasis): Float64Array {
  const p = nParts - 1;
  return Float64Array.from({ length: nParts }, (_, part) =>
    coordinates.reduce((sum, value, i) => sum + value * vectors[part * p + i]!, 0),
  );
}

/** V S V': a covariance of coordinates as one of clr. */
function toClrCovariance({ covariance, nCols: p }: RobustScatter, basis: IlrBasis): Float64Array {
  const { nParts } = basis;
  const out = new Float64Array(nParts * nParts);
  for (let i = 0; i < p; i++) {
    const row = toClr(covariance.subarray(i * p, (i + 1) * p), basis);
    for (let a = 0; a < nParts; a++) {
      const weight = basis.vectors[a * p + i]!;
      for (let b = 0; b < nParts; b++) out[a * nParts + b]! += weight * row[b]!;
    }
  }
  return out;
}

function notesOf({ nOutliers, nRows }: RobustScatter): string[] {
  if (nOutliers <= MANY_OUTLIERS * nRows) return [];
  const share = Number(((100 * nOutliers) / nRows).toPrecision(2));
  return [
    `${nOutliers} of ${nRows} rows (${share} %) are unlike the majority: they may be a unit of their own, such as the mineralised part`,
  ];
}
