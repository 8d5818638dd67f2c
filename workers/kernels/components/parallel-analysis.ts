import { KernelError } from '#kernels/kernel-error.ts';
import { requireColumns, notPositive } from '#kernels/compositions/require-parts.ts';
import { f64Bytes, withLab } from '#kernels/dense/lab.ts';
import { columnsByFour, type DenseMath } from '#kernels/dense/dense-math.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';
import { matrixOf, type ComponentBasis } from './components.ts';
import { countAbove } from './component-count.ts';
import { eigenOfCovariance } from './eigen.ts';
import { BLOCK_ROWS } from './log-block.ts';
import type { OnProgress } from '#kernels/progress.ts';

export interface ParallelOptions {
  seed: number;
  basis?: ComponentBasis;
  /** Rows to use: those with a value other than 0. */
  mask?: Uint8Array;
  /** Permutations, 200 unless said. */
  permutations?: number;
  /** A seeded sample of this many rows stands for a larger table, observed and permuted alike. */
  maxRows?: number;
  onProgress?: OnProgress;
}

export interface ParallelAnalysis {
  /** Components whose eigenvalue exceeds the 95th percentile of its null, up to the first that fails. */
  kept: number;
  /** Eigenvalues of the rows used. */
  eigenvalues: number[];
  /** Mean and 95th percentile of each null eigenvalue, scaled to the same total. */
  nullMean: number[];
  null95: number[];
  /** `null95` as a share of the total variance, to set beside shares of the whole table. */
  null95Shares: number[];
  rowsUsed: number;
}

/**
 * Parallel analysis: each column of ln x is permuted on its own, which keeps its spread and breaks
 * its ties to the others; then clr and eigenvalues. Permuting clr columns instead would leave the
 * constant sum out and keep too few components.
 *
 * @param columns One array per part (ppm), > 0 in used rows, at least three. Not modified.
 * @throws {KernelError} `too-few-parts`, `shape`, `not-positive`, `singular`; `too-few-rows` under
 *   three used rows; `bad-parameter` for fewer than 20 permutations or fewer than 20 rows to sample.
 * @see Horn (1965), A rationale and test for the number of factors, Psychometrika 30.
 */
export function parallelAnalysis(
  columns: readonly Float64Array[],
  options: ParallelOptions,
): ParallelAnalysis {
  const {
    seed,
    basis = 'clr-covariance',
    permutations = 200,
    maxRows = 2000,
    onProgress,
  } = options;
  const nRows = requireColumns(columns, 3);
  if (!(permutations >= 20) || !(maxRows >= 20)) {
    const message = `expected at least 20 permutations of 20 rows, found ${permutations} of ${maxRows}`;
    throw new KernelError('bad-parameter', message);
  }
  const random = seededRandom(seed);
  const rows = sampleRows(nRows, options.mask, maxRows, random);
  const padded = columnsByFour(columns.length);
  return withLab(f64Bytes(padded * rows.length, padded * padded), (lab) => {
    const table: LogTable = {
      math: lab.math,
      basis,
      n: rows.length,
      nParts: columns.length,
      logs: lab.f64(padded * rows.length),
      cross: lab.f64(padded * padded),
    };
    fillCentredLogs(table.logs, columns, rows);
    const observed = spectrum(table);
    const total = observed.reduce((sum, value) => sum + value, 0);
    const nulls = observed.map(() => new Float64Array(permutations));
    for (let b = 0; b < permutations; b++) {
      onProgress?.(b / permutations);
      for (let part = 0; part < columns.length; part++) {
        shuffle(table.logs.subarray(part * rows.length, (part + 1) * rows.length), random);
      }
      const values = spectrum(table);
      const scale = total / values.reduce((sum, value) => sum + value, 0);
      nulls.forEach((column, k) => (column[b] = scale * (values[k] ?? 0)));
    }
    const null95 = nulls.map((column) => quantiles(column, [0.95])[0]!);
    return {
      kept: countAbove(observed, null95),
      eigenvalues: observed,
      nullMean: nulls.map((column) => column.reduce((sum, value) => sum + value, 0) / permutations),
      null95,
      null95Shares: null95.map((value) => value / total),
      rowsUsed: rows.length,
    };
  });
}

/** All used rows, or a seeded sample of them in row order. */
function sampleRows(
  nRows: number,
  mask: Uint8Array | undefined,
  maxRows: number,
  random: Random,
): Uint32Array {
  if (mask && mask.length !== nRows) {
    throw new KernelError('shape', `expected a mask of ${nRows} rows, found ${mask.length}`);
  }
  const used = new Uint32Array(nRows);
  let count = 0;
  for (let row = 0; row < nRows; row++) if (!mask || mask[row] !== 0) used[count++] = row;
  if (count < 3) {
    throw new KernelError('too-few-rows', `expected at least 3 rows, found ${count}`, {
      found: count,
    });
  }
  if (count <= maxRows) return used.slice(0, count);
  for (let i = 0; i < maxRows; i++) {
    const other = i + random.below(count - i);
    [used[i], used[other]] = [used[other]!, used[i]!];
  }
  return used.slice(0, maxRows).sort();
}

/** ln x less its mean, one stretch per part, parts padded with zeros to a multiple of four. */
function fillCentredLogs(logs: Float64Array, columns: readonly Float64Array[], rows: Uint32Array): void {
  const n = rows.length;
  columns.forEach((column, part) => {
    const stretch = logs.subarray(part * n, (part + 1) * n);
    rows.forEach((row, i) => {
      const value = column[row]!;
      if (!(value > 0 && value < Infinity)) throw notPositive(value, row, part);
      stretch[i] = Math.log(value);
    });
    const mean = stretch.reduce((sum, log) => sum + log, 0) / n;
    for (let i = 0; i < n; i++) stretch[i]! -= mean;
  });
}

/** Centred logs in a lab, and what their eigenvalues are asked of. */
interface LogTable {
  math: DenseMath;
  basis: ComponentBasis;
  n: number;
  nParts: number;
  /** One stretch of n per part. */
  logs: Float64Array;
  cross: Float64Array;
}

function spectrum({ math, basis, n, nParts, logs, cross }: LogTable): number[] {
  const padded = columnsByFour(nParts);
  cross.fill(0);
  for (let from = 0; from < n; from += BLOCK_ROWS) {
    math.addCrossProducts(logs.subarray(from), n, Math.min(BLOCK_ROWS, n - from), padded, cross);
  }
  const covariance = new Float64Array(nParts * nParts);
  for (let i = 0; i < nParts; i++) {
    for (let j = i; j < nParts; j++) {
      const value = cross[i * padded + j]! / (n - 1);
      covariance[i * nParts + j] = value;
      covariance[j * nParts + i] = value;
    }
  }
  return [...eigenOfCovariance(matrixOf(covariance, nParts, basis), nParts).values];
}

function shuffle(values: Float64Array, random: Random): void {
  for (let i = values.length - 1; i > 0; i--) {
    const other = random.below(i + 1);
    const value = values[i]!;
    values[i] = values[other]!;
    values[other] = value;
  }
}
