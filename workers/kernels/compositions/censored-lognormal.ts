import { KernelError } from '#kernels/kernel-error.ts';
import { lowerTailRatio, lowerTailVariance } from './truncated-normal.ts';

/** A lognormal distribution fitted to values of which some are only known to be below a limit. */
export interface CensoredLognormal {
  /** Mean and sd of ln x. */
  logMean: number;
  logSd: number;
  nMeasured: number;
  nBelow: number;
  iterations: number;
}

const MOST_ITERATIONS = 100_000;
const TOLERANCE = 1e-13;

/**
 * Maximum likelihood of a lognormal from measured values and limits, by expectation-maximisation:
 * each value below its limit stands for the mean and variance of the tail it lies in.
 *
 * @param measured Values > 0 (ppm), at least two that differ. Not modified.
 * @param limits One detection limit per value below it, > 0. Not modified.
 * @throws {KernelError} `too-few-rows`; `not-positive` with { row }; `singular` when the measured
 *   values do not vary; `not-converged`.
 * @see Cohen (1959), Simplified estimators for the normal distribution when samples are singly
 *   censored, Technometrics 1.
 */
export function fitCensoredLognormal(
  measured: Float64Array,
  limits: Float64Array,
): CensoredLognormal {
  const logs = logsOf(measured, 'measured value');
  const tails = countTails(logsOf(limits, 'limit'));
  const nMeasured = logs.length;
  if (nMeasured < 2) {
    const message = `expected at least 2 measured values, found ${nMeasured}`;
    throw new KernelError('too-few-rows', message, { found: nMeasured });
  }
  const centre = logs.reduce((sum, log) => sum + log, 0) / nMeasured;
  const squares = logs.reduce((sum, log) => sum + (log - centre) ** 2, 0);
  if (!(squares > 1e-20 * nMeasured)) {
    throw new KernelError('singular', 'expected measured values that vary, found one value');
  }
  const n = nMeasured + limits.length;
  let [mean, sd] = [centre, Math.sqrt(squares / nMeasured)];
  for (let iteration = 1; iteration <= MOST_ITERATIONS; iteration++) {
    const next = step({ centre, squares, nMeasured, n }, tails, mean, sd);
    const change = Math.abs(next.mean - mean) + Math.abs(next.sd - sd);
    [mean, sd] = [next.mean, next.sd];
    if (change <= TOLERANCE * (1 + sd)) {
      const nBelow = limits.length;
      return { logMean: mean, logSd: sd, nMeasured, nBelow, iterations: iteration };
    }
  }
  throw new KernelError('not-converged', `no fit after ${MOST_ITERATIONS} iterations`);
}

/**
 * Geometric mean of a lognormal below a limit, exp(mu - sigma phi(z) / Phi(z)),
 * z = (ln limit - mu) / sigma: always under the limit.
 *
 * @throws {KernelError} `bad-parameter` unless limit and logSd are finite and > 0, logMean finite.
 */
export function meanBelowLimit(
  { logMean, logSd }: Pick<CensoredLognormal, 'logMean' | 'logSd'>,
  limit: number,
): number {
  const isLognormal = Number.isFinite(logMean) && logSd > 0 && logSd < Infinity;
  if (!isLognormal || !(limit > 0 && limit < Infinity)) {
    const message = `expected a limit > 0 of a lognormal, found ${limit}, mean ${logMean}, sd ${logSd} of logs`;
    throw new KernelError('bad-parameter', message);
  }
  const z = (Math.log(limit) - logMean) / logSd;
  return Math.exp(logMean - logSd * lowerTailRatio(z));
}

interface Tail {
  log: number;
  count: number;
}

/** Distinct limits with their counts: the work of a step does not grow with the rows. */
function countTails(logs: Float64Array): Tail[] {
  const counts = new Map<number, number>();
  for (const log of logs) counts.set(log, (counts.get(log) ?? 0) + 1);
  return Array.from(counts, ([log, count]) => ({ log, count })).sort((a, b) => a.log - b.log);
}

function step(
  { centre, squares, nMeasured, n }: Record<'centre' | 'squares' | 'nMeasured' | 'n', number>,
  tails: readonly Tail[],
  mean: number,
  sd: number,
): { mean: number; sd: number } {
  const expected = tails.map(({ log, count }) => {
    const z = (log - mean) / sd;
    const value = mean - sd * lowerTailRatio(z);
    return { value, count, variance: sd * sd * lowerTailVariance(z) };
  });
  const sum = expected.reduce((total, { value, count }) => total + count * value, 0);
  const next = (nMeasured * centre + sum) / n;
  const spread = expected.reduce(
    (total, { value, count, variance }) => total + count * (variance + (value - next) ** 2),
    squares + nMeasured * (centre - next) ** 2,
  );
  return { mean: next, sd: Math.sqrt(spread / n) };
}

function logsOf(values: Float64Array, what: string): Float64Array {
  return values.map((value, row) => {
    if (!(value > 0 && value < Infinity)) {
      const message = `expected a ${what} > 0, found ${value} at row ${row}`;
      throw new KernelError('not-positive', message, { row });
    }
    return Math.log(value);
  });
}
