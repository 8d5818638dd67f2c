import { KernelError } from '#kernels/kernel-error.ts';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';
import type { Random } from '#kernels/random.ts';

/** Standard deviation of a re-measured assay: s0 + k x, both in the unit of x and >= 0. */
export interface AssayError {
  s0: number;
  k: number;
}

/** One part with what is known of its error. */
export interface PartUnderError {
  /** ppm, > 0 where measured or replaced; NaN = missing. */
  values: Float64Array;
  /** Detection limit (ppm) in rows below it, NaN elsewhere; left out = nothing is below. */
  limits?: Float64Array | undefined;
  /** From duplicates of one stated stage; null = none: the part stays as it is. */
  error: AssayError | null;
  /** Mean and sd of ln ppm of the part, from which values below the limit are drawn; null = as replaced. */
  lognormal: { mean: number; sd: number } | null;
}

/** Largest sd of ln ppm: a coefficient of variation of 1, √ln 2. */
const LARGEST_LOG_SD = Math.sqrt(Math.LN2);

/**
 * Standard deviation of ln x that gives x the standard deviation s0 + k x, and whether it was capped.
 *
 * @param x ppm, > 0.
 * @throws {KernelError} `not-positive`; `bad-parameter` unless s0 and k are finite and >= 0.
 */
export function logErrorSd(x: number, { s0, k }: AssayError): { sd: number; capped: boolean } {
  if (!(x > 0 && x < Infinity))
    throw new KernelError('not-positive', `expected ppm > 0, found ${x}`);
  if (!(s0 >= 0 && s0 < Infinity && k >= 0 && k < Infinity))
    throw new KernelError('bad-parameter', `expected s0 and k >= 0, found ${s0} and ${k}`);
  const sd = Math.sqrt(Math.log1p(((s0 + k * x) / x) ** 2));
  return sd > LARGEST_LOG_SD * (1 + 1e-12)
    ? { sd: LARGEST_LOG_SD, capped: true }
    : { sd, capped: false };
}

/** A part made ready: ln sd per row (0 = stays), or the share of the lognormal below the limit. */
export interface ErrorSource {
  values: Float64Array;
  logSd: Float64Array;
  /** Φ of the standardised limit in rows drawn below it; NaN elsewhere. */
  below: Float64Array;
  lognormal: { mean: number; sd: number } | null;
  nCapped: number;
  nKept: number;
}

/**
 * Checks a part and works out the spread of each row.
 *
 * @throws {KernelError} `shape`; `not-positive` with { row, part } for a value or limit; `bad-parameter`
 *   for an error or lognormal out of range.
 */
export function errorSource(part: PartUnderError, index: number, nRows: number): ErrorSource {
  const { values, limits, error, lognormal } = part;
  if (values.length !== nRows || (limits && limits.length !== nRows))
    throw new KernelError('shape', `part ${index}: expected ${nRows} values and limits`, {
      part: index,
    });
  if (error && !(error.s0 >= 0 && error.k >= 0 && error.s0 < Infinity && error.k < Infinity))
    throw new KernelError(
      'bad-parameter',
      `part ${index}: expected s0 and k >= 0, found ${error.s0} and ${error.k}`,
      { part: index },
    );
  if (
    lognormal &&
    !(Number.isFinite(lognormal.mean) && lognormal.sd > 0 && lognormal.sd < Infinity)
  )
    throw new KernelError(
      'bad-parameter',
      `part ${index}: expected a finite mean and sd > 0 of ln ppm, found ${lognormal.mean} and ${lognormal.sd}`,
      { part: index },
    );
  const source = {
    ...{ values, lognormal, logSd: new Float64Array(nRows), nCapped: 0, nKept: 0 },
    below: new Float64Array(nRows).fill(NaN),
  };
  for (let row = 0; row < nRows; row++) {
    const value = values[row]!;
    const limit = limits ? limits[row]! : NaN;
    if (Number.isNaN(value)) continue;
    if (!(value > 0 && value < Infinity) || limit <= 0) {
      const message = `part ${index}: expected ppm > 0, found ${value} (limit ${limit}) in row ${row}`;
      throw new KernelError('not-positive', message, { row, part: index });
    }
    if (!Number.isNaN(limit)) {
      if (lognormal)
        source.below[row] = normalCdf((Math.log(limit) - lognormal.mean) / lognormal.sd);
      else source.nKept += 1;
    } else if (error) {
      const { sd, capped } = logErrorSd(value, error);
      source.logSd[row] = sd;
      if (capped) source.nCapped += 1;
    }
  }
  return source;
}

/**
 * One re-measurement of every row into `out`: ln x* = ln x + σ ε - σ²/2, which keeps the mean; below the
 * limit a draw from the part's lognormal truncated there.
 */
export function redraw(source: ErrorSource, random: Random, out: Float64Array): void {
  const { values, logSd, below, lognormal } = source;
  for (let row = 0; row < values.length; row++) {
    const share = below[row]!;
    const sd = logSd[row]!;
    if (lognormal && !Number.isNaN(share)) {
      const u = Math.max(share * random.uniform(), Number.MIN_VALUE);
      out[row] = Math.exp(lognormal.mean + lognormal.sd * normalQuantile(u));
    } else
      out[row] =
        sd > 0 ? values[row]! * Math.exp(sd * random.normal() - (sd * sd) / 2) : values[row]!;
  }
}
