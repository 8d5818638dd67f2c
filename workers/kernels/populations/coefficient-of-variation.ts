import { KernelError } from '#kernels/kernel-error.ts';

/** Reading of a coefficient of variation. */
export interface CvReading {
  level: 'low' | 'moderate' | 'high' | 'very-high';
  text: string;
}

/**
 * Rule of thumb for the coefficient of variation of composites, better declustered. Common practice,
 * from memory; it informs and does not decide.
 *
 * @throws {KernelError} `bad-parameter` unless it is finite and >= 0.
 */
export function readCv(cv: number): CvReading {
  requireCv(cv);
  if (cv < 0.5) return { level: 'low', text: 'below 0.5: low' };
  if (cv < 1) return { level: 'moderate', text: '0.5 to 1: moderate' };
  if (cv <= 1.5) return { level: 'high', text: '1 to 1.5: high, capping or sub-domains likely' };
  return { level: 'very-high', text: 'above 1.5: mixed populations or an extreme tail' };
}

/**
 * Mean of a lognormal: exp(μ + σ²/2), μ and σ of ln grade.
 *
 * @throws {KernelError} `not-finite` when an argument or the mean is not.
 */
export function lognormalMean(logMean: number, logSd: number): number {
  return finite(Math.exp(logMean + logSd ** 2 / 2), `mean ${logMean} and sd ${logSd}`);
}

/**
 * Coefficient of variation of a lognormal: sqrt(exp(σ²) - 1).
 *
 * @throws {KernelError} `not-finite` when the sd or the coefficient is not.
 */
export function lognormalCv(logSd: number): number {
  return finite(Math.sqrt(Math.expm1(logSd ** 2)), `sd ${logSd}`);
}

/**
 * σ of ln grade of a lognormal with this coefficient of variation.
 *
 * @throws {KernelError} `bad-parameter` unless it is finite and >= 0.
 */
export function logSdOfCv(cv: number): number {
  requireCv(cv);
  return Math.sqrt(Math.log1p(cv ** 2));
}

function requireCv(cv: number): void {
  if (cv >= 0 && cv < Infinity) return;
  throw new KernelError('bad-parameter', `expected a coefficient of variation >= 0, found ${cv}`);
}

function finite(answer: number, of: string): number {
  if (Number.isFinite(answer)) return answer;
  throw new KernelError('not-finite', `expected a finite lognormal, found ${of} of ln grade`);
}
