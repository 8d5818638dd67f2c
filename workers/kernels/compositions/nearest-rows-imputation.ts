import { median } from 'simple-statistics';
import { KernelError } from '#kernels/kernel-error.ts';
import { notPositive, requireColumns } from './require-parts.ts';

/** A table whose missing cells were filled from the most similar rows. */
export interface NeighbourImputation {
  /** One array per part, in order; NaN where no value could be given. */
  columns: Float64Array[];
  /** 1 where a missing value was filled. */
  isImputed: Uint8Array[];
  nImputed: number;
  /** Missing cells with fewer than k rows to learn from: left missing. */
  nLeft: number;
  /** Filled cells raised to their detection limit. */
  nAtLimit: number;
  notes: string[];
}

export interface NeighbourOptions {
  /** Rows to learn from, per missing cell. */
  k?: number;
  /** Detection limit of each part (ppm): a filled value is not under it. 0 for none. */
  limits?: Float64Array;
  onProgress?: (share: number) => void;
}

/**
 * Fills missing cells from the k rows nearest by Aitchison distance over the parts the row has: the
 * median of their values, each row first scaled to the same geometric mean of those parts. Only rows
 * that have all of those parts are compared, so that distances rest on the same parts. For values
 * that are missing, not for values below detection.
 *
 * @param columns One array per part (ppm), NaN where missing, otherwise > 0. Not modified.
 * @throws {KernelError} `too-few-parts` under three, `shape`; `not-positive` with { row, col };
 *   `bad-parameter` for k or the limits.
 * @see Hron, Templ & Filzmoser (2010), Imputation of missing values for compositional data using
 *   classical and robust methods, Comput. Stat. Data Anal. 54.
 */
export function imputeByNeighbours(
  columns: readonly Float64Array[],
  options: NeighbourOptions = {},
): NeighbourImputation {
  const { k = 5, limits = new Float64Array(columns.length), onProgress } = options;
  const nRows = requireColumns(columns, 3);
  requireNeighbourOptions(k, limits, columns.length);
  const logs = columns.map((column, part) => logsOf(column, part));
  const result = {
    columns: columns.map((column) => column.slice()),
    isImputed: columns.map(() => new Uint8Array(nRows)),
    nImputed: 0,
    nLeft: 0,
    nAtLimit: 0,
  };
  for (let row = 0; row < nRows; row++) {
    const missing = Array.from(logs.keys()).filter((part) => Number.isNaN(logs[part]![row]));
    if (missing.length === 0) continue;
    onProgress?.(row / nRows);
    const shared = Array.from(logs.keys()).filter((part) => !missing.includes(part));
    const near = shared.length < 2 ? null : distancesTo(logs, shared, row, nRows);
    for (const part of missing) {
      const value = near && expectedFrom(near, logs[part]!, k);
      if (value === null) result.nLeft++;
      else {
        const limit = limits[part]!;
        if (value < limit) result.nAtLimit++;
        result.columns[part]![row] = Math.max(value, limit);
        result.isImputed[part]![row] = 1;
        result.nImputed++;
      }
    }
  }
  return { ...result, notes: imputationNotes(result, k) };
}

/** Logs, NaN where missing. */
function logsOf(column: Float64Array, part: number): Float64Array {
  return column.map((value, row) => {
    if (Number.isNaN(value)) return NaN;
    if (!(value > 0 && value < Infinity)) throw notPositive(value, row, part);
    return Math.log(value);
  });
}

interface Nearness {
  /** Squared Aitchison distance; NaN for rows that miss a shared part, and for the row itself. */
  squared: Float64Array;
  /** Mean of ln(target / row) over the shared parts. */
  shift: Float64Array;
}

/** One pass: with d = ln x - ln y, the squared distance is sum d^2 - (sum d)^2 / m. */
function distancesTo(
  logs: readonly Float64Array[],
  shared: readonly number[],
  target: number,
  nRows: number,
): Nearness {
  const squared = new Float64Array(nRows);
  const shift = new Float64Array(nRows);
  for (const part of shared) {
    const column = logs[part]!;
    const value = column[target]!;
    for (let row = 0; row < nRows; row++) shift[row]! += (value - column[row]!) / shared.length;
  }
  for (const part of shared) {
    const column = logs[part]!;
    const value = column[target]!;
    for (let row = 0; row < nRows; row++)
      squared[row]! += (value - column[row]! - shift[row]!) ** 2;
  }
  squared[target] = NaN;
  return { squared, shift };
}

/** Median of the k nearest rows that have the part, scaled; null when there are fewer. */
function expectedFrom({ squared, shift }: Nearness, logs: Float64Array, k: number): number | null {
  const rows: number[] = [];
  const isNearer = (a: number, b: number) => squared[a]! < squared[b]!;
  for (let row = 0; row < logs.length; row++) {
    if (Number.isNaN(squared[row]) || Number.isNaN(logs[row])) continue;
    if (rows.length === k && !isNearer(row, rows[k - 1]!)) continue;
    let at = rows.length === k ? k - 1 : rows.length;
    while (at > 0 && isNearer(row, rows[at - 1]!)) {
      rows[at] = rows[at - 1]!;
      at--;
    }
    rows[at] = row;
  }
  if (rows.length < k) return null;
  return median(rows.map((row) => Math.exp(logs[row]! + shift[row]!)));
}

function requireNeighbourOptions(k: number, limits: Float64Array, nParts: number): void {
  if (!Number.isInteger(k) || k < 1) {
    throw new KernelError('bad-parameter', `expected at least 1 neighbour, found ${k}`);
  }
  if (limits.length !== nParts || !limits.every((limit) => limit >= 0 && limit < Infinity)) {
    throw new KernelError('bad-parameter', `expected ${nParts} limits >= 0`);
  }
}

function imputationNotes(
  { nLeft, nAtLimit }: Pick<NeighbourImputation, 'nLeft' | 'nAtLimit'>,
  k: number,
): string[] {
  const notes: string[] = [];
  if (nLeft > 0)
    notes.push(`${nLeft} missing values had fewer than ${k} rows to learn from: left missing`);
  if (nAtLimit > 0) notes.push(`${nAtLimit} filled values were raised to their detection limit`);
  return notes;
}
