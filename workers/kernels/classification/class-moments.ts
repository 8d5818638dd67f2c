import { choleskyPacked, invertTriangle, packedSize } from '#kernels/clustering/packed-cholesky.ts';
import { KernelError } from '#kernels/kernel-error.ts';

/** Class means and the spread they share. */
export interface ClassMoments {
  nClasses: number;
  p: number;
  /** Complete training rows of each class. */
  sizes: Float64Array;
  /** Row-major, shape (nClasses, p). */
  means: Float64Array;
  /** Packed lower triangle W with W S Wᵀ = I, S the pooled covariance within classes. */
  whitener: Float64Array;
}

/** Training rows and what they are. */
export interface TrainingRows {
  /** p coordinates (isometric log-ratios or scores); rows with NaN are left out. */
  columns: readonly Float64Array[];
  rows: Int32Array;
  /** Class of each training row, 0..nClasses-1. */
  classOf: Int32Array;
  nClasses: number;
}

/** Added to the diagonal of the pooled covariance, as a share of its mean, so that it inverts. */
const RIDGE = 1e-6;

/** True when no coordinate of the row is missing. */
export const isComplete = (columns: readonly Float64Array[], row: number): boolean =>
  columns.every((column) => !Number.isNaN(column[row]!));

/**
 * Means and pooled within-class covariance, denominator n - K, with a ridge of 1e-6 of its mean
 * variance.
 *
 * @throws {KernelError} `too-few-parts`; `shape`; `not-finite` with { row, col }; `bad-parameter` for a
 *   class out of range; `too-few-rows` when a class has no complete row or there are no more rows than
 *   classes; `singular` when nothing varies within the classes.
 */
export function classMoments(training: TrainingRows): ClassMoments {
  const { columns, rows, classOf, nClasses } = training;
  requireTraining(training);
  const p = columns.length;
  const sizes = new Float64Array(nClasses);
  const means = new Float64Array(nClasses * p);
  const used = [...rows.keys()].filter((i) => isComplete(columns, rows[i]!));
  for (const i of used) {
    const c = classOf[i]!;
    sizes[c]! += 1;
    for (let j = 0; j < p; j++)
      means[c * p + j]! += (columns[j]![rows[i]!]! - means[c * p + j]!) / sizes[c]!;
  }
  const empty = sizes.indexOf(0);
  if (empty >= 0 || used.length <= nClasses) {
    const message = `expected a complete row of every class and more rows than ${nClasses} classes, found ${used.length} rows${empty >= 0 ? `, none of class ${empty}` : ''}`;
    throw new KernelError('too-few-rows', message, { n: used.length });
  }
  const covariance = new Float64Array(packedSize(p));
  for (const i of used) {
    const at = classOf[i]! * p;
    for (let a = 0, to = 0; a < p; a++) {
      const d = columns[a]![rows[i]!]! - means[at + a]!;
      for (let b = 0; b <= a; b++, to++)
        covariance[to]! +=
          (d * (columns[b]![rows[i]!]! - means[at + b]!)) / (used.length - nClasses);
    }
  }
  return { nClasses, p, sizes, means, whitener: whitenerOf(covariance, p) };
}

function whitenerOf(covariance: Float64Array, p: number): Float64Array {
  let trace = 0;
  for (let a = 0, at = 0; a < p; a++, at += a + 1) trace += covariance[at]!;
  if (!(trace > 0)) throw new KernelError('singular', 'expected classes with some spread inside');
  const whitener = new Float64Array(packedSize(p));
  if (Number.isNaN(choleskyPacked(covariance, 0, p, whitener, (-RIDGE * trace) / p)))
    throw new KernelError('singular', 'the covariance within classes does not invert');
  invertTriangle(whitener, 0, p);
  return whitener;
}

function requireTraining({ columns, rows, classOf, nClasses }: TrainingRows): void {
  const n = columns[0]?.length;
  if (n === undefined) throw new KernelError('too-few-parts', 'expected at least one coordinate');
  if (columns.some((column) => column.length !== n) || rows.length !== classOf.length)
    throw new KernelError('shape', `expected columns of ${n} rows and ${rows.length} classes`);
  for (const [i, row] of rows.entries()) {
    const own = classOf[i]!;
    if (!(row >= 0 && row < n && own >= 0 && own < nClasses))
      throw new KernelError(
        'bad-parameter',
        `expected a row under ${n} and a class under ${nClasses}, found ${row} and ${own}`,
      );
    const col = columns.findIndex((column) => Math.abs(column[row]!) > 1e100);
    if (col >= 0)
      throw new KernelError(
        'not-finite',
        `expected a coordinate up to 1e100, found ${columns[col]![row]} in row ${row}, column ${col}`,
        { row, col },
      );
  }
}

/** A row in coordinates in which the classes have unit spread, into `out`. */
export function whiten(
  { whitener, p }: ClassMoments,
  columns: readonly Float64Array[],
  row: number,
  out: Float64Array,
  at = 0,
): void {
  for (let a = 0, w = 0; a < p; a++) {
    let sum = 0;
    for (let b = 0; b <= a; b++) sum += whitener[w++]! * columns[b]![row]!;
    out[at + a] = sum;
  }
}

/**
 * Answers for rows: `score` turns a whitened row into its shares, one per class.
 *
 * @returns Row-major (asked, classes); a row of NaN where a coordinate is missing.
 */
export function answerRows(
  moments: ClassMoments,
  columns: readonly Float64Array[],
  asked: Int32Array,
  score: (z: Float64Array, shares: Float64Array) => void,
): Float64Array {
  const { nClasses, p } = moments;
  const out = new Float64Array(asked.length * nClasses).fill(NaN);
  const z = new Float64Array(p);
  asked.forEach((row, i) => {
    if (!isComplete(columns, row)) return;
    whiten(moments, columns, row, z);
    score(z, out.subarray(i * nClasses, (i + 1) * nClasses));
  });
  return out;
}
