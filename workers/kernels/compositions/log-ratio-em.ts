import { KernelError } from '#kernels/kernel-error.ts';
import { inverseOfCovariance } from './covariance-inverse.ts';
import { prepareLogRatios, type CensoredLogRatios } from './censored-log-ratios.ts';
import { VALUE_STATE } from './replacement.ts';
import { lowerTailRatio, lowerTailVariance } from './truncated-normal.ts';

/** A table whose values below detection were replaced by what the other parts let expect. */
export interface LogRatioReplacement {
  /** One array per part, in order; NaN where missing, and below limits of rows missing a part. */
  columns: Float64Array[];
  /** 1 where a value was put in place of one below its limit. */
  isReplaced: Uint8Array[];
  nReplaced: number;
  /** The part, never below its limit, that the ratios were taken to. */
  denominator: number;
  /** Mean and covariance (divisor n) of ln(x_j / x_denominator), the other parts in order. */
  mean: Float64Array;
  covariance: Float64Array;
  iterations: number;
  notes: string[];
}

export interface LogRatioEmOptions {
  /** Largest change of mean and covariance at the end. */
  tolerance?: number;
  maxIterations?: number;
  /** Called with the share of iterations done; it may throw to cancel. */
  onProgress?: (share: number) => void;
}

/** A change under this at the last iteration is noted; a larger one is no answer. */
const GOOD_ENOUGH = 1e-4;

/**
 * Replaces values below detection by an expectation-maximisation of log-ratios: each becomes its
 * expected value, given the row's other parts and that it lies below its own limit. In a row with
 * several such values each is expected given the current others, which is an approximation.
 *
 * @param columns One array per part (ppm), at least three; the limit where `states` says below.
 *   Not modified.
 * @param states One array of VALUE_STATE per part.
 * @returns Observed values as they were; every replacement under its limit.
 * @throws {KernelError} `too-few-parts`, `shape`, `bad-parameter`; `not-positive` with { row, col };
 *   `too-few-rows` unless complete rows exceed parts by more than five; `no-denominator` when every
 *   part is somewhere below its limit; `singular`; `not-converged`.
 * @see Palarea-Albaladejo & Martin-Fernandez (2008), A modified EM alr-algorithm for replacing
 *   rounded zeros in compositional data sets, Comput. Geosci. 34.
 */
export function replaceByLogRatioEm(
  columns: readonly Float64Array[],
  states: readonly Uint8Array[],
  options: LogRatioEmOptions = {},
): LogRatioReplacement {
  const { tolerance = 1e-10, maxIterations = 500, onProgress } = options;
  if (!(tolerance > 0) || !(maxIterations >= 1)) {
    const message = `expected a tolerance > 0 and at least 1 iteration, found ${tolerance}, ${maxIterations}`;
    throw new KernelError('bad-parameter', message);
  }
  const table = prepareLogRatios(columns, states);
  let model = modelOf(table, new Float64Array(table.p));
  let [iterations, change, isRidged] = [0, table.cells.length === 0 ? 0 : Infinity, false];
  while (change > tolerance && iterations < maxIterations) {
    onProgress?.(iterations / maxIterations);
    const inverse = inverseOfCovariance(model.covariance, table.p);
    isRidged ||= inverse.isRidged;
    const next = modelOf(table, expectCells(table, model.mean, inverse.matrix));
    change = Math.max(
      largestChange(next.mean, model.mean),
      largestChange(next.covariance, model.covariance),
    );
    model = next;
    iterations++;
  }
  if (!(change <= Math.max(tolerance, GOOD_ENOUGH))) {
    const message = `no stable replacement after ${iterations} iterations, last change ${change}`;
    throw new KernelError('not-converged', message, { iterations });
  }
  const { denominator, nIncomplete } = table;
  const notes = [...(nIncomplete > 0 ? [incompleteNote(nIncomplete)] : [])];
  if (isRidged) notes.push('some ratios hardly vary on their own: their covariance was steadied');
  if (change > tolerance) {
    notes.push(
      `stopped after ${iterations} iterations with a last change of ${change.toPrecision(2)}`,
    );
  }
  return { ...writeBack(columns, states, table), denominator, ...model, iterations, notes };
}

const incompleteNote = (count: number): string =>
  `${count} rows miss a part: they were not used, and their values below detection were not replaced`;

const largestChange = (a: Float64Array, b: Float64Array): number =>
  a.reduce((most, value, i) => Math.max(most, Math.abs(value - b[i]!)), 0);

/** Mean and covariance of the current ratios, with the variance the replaced ones still have. */
function modelOf({ ratios, n, p }: CensoredLogRatios, added: Float64Array) {
  const mean = new Float64Array(p);
  for (let i = 0; i < ratios.length; i++) mean[i % p]! += ratios[i]! / n;
  const covariance = new Float64Array(p * p);
  for (let start = 0; start < ratios.length; start += p) {
    for (let i = 0; i < p; i++) {
      const deviation = (ratios[start + i]! - mean[i]!) / n;
      for (let j = 0; j <= i; j++) {
        covariance[i * p + j]! += deviation * (ratios[start + j]! - mean[j]!);
      }
    }
  }
  for (let i = 0; i < p; i++) {
    covariance[i * p + i]! += added[i]! / n;
    for (let j = 0; j < i; j++) covariance[j * p + i] = covariance[i * p + j]!;
  }
  return { mean, covariance };
}

/**
 * Moves each ratio below its limit to its expected value given the others: with Q the inverse
 * covariance, mean_j - sum_k Q_jk (y_k - mean_k) / Q_jj and variance 1 / Q_jj, cut at the limit.
 *
 * @returns Per part, the sum of the variances left.
 */
function expectCells(
  table: CensoredLogRatios,
  mean: Float64Array,
  inverse: Float64Array,
): Float64Array {
  const { ratios, p, cells } = table;
  const left = new Float64Array(p);
  for (const { at, limit } of cells) {
    const j = at % p;
    const start = at - j;
    const precision = inverse[j * p + j]!;
    let pull = 0;
    for (let k = 0; k < p; k++) {
      if (k !== j) pull += inverse[j * p + k]! * (ratios[start + k]! - mean[k]!);
    }
    const expected = mean[j]! - pull / precision;
    const sd = Math.sqrt(1 / precision);
    const z = (limit - expected) / sd;
    ratios[at] = expected - sd * lowerTailRatio(z);
    left[j]! += lowerTailVariance(z) / precision;
  }
  return left;
}

function writeBack(
  columns: readonly Float64Array[],
  states: readonly Uint8Array[],
  { rows, ratios, cells, p, denominator, partOf }: CensoredLogRatios,
) {
  const isValue = (state: number) => state === VALUE_STATE.measured || state === VALUE_STATE.above;
  const out = columns.map((column, part) =>
    column.map((value, row) => (isValue(states[part]![row]!) ? value : NaN)),
  );
  const isReplaced = columns.map((column) => new Uint8Array(column.length));
  for (const { at } of cells) {
    const row = rows[Math.floor(at / p)]!;
    const part = partOf[at % p]!;
    // Rounding must not lift a value that ends at its limit over it.
    const value = columns[denominator]![row]! * Math.exp(ratios[at]!);
    out[part]![row] = Math.min(value, columns[part]![row]! * (1 - 1e-15));
    isReplaced[part]![row] = 1;
  }
  return { columns: out, isReplaced, nReplaced: cells.length };
}
