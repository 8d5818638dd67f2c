/** Reading of a coefficient of variation. */
export interface CvReading {
  level: 'low' | 'moderate' | 'high' | 'very-high';
  text: string;
}

/**
 * Rule of thumb for the coefficient of variation of composites, better declustered. Common practice,
 * from memory; it informs and does not decide.
 */
export function readCv(cv: number): CvReading {
  if (cv < 0.5) return { level: 'low', text: 'below 0.5: low' };
  if (cv < 1) return { level: 'moderate', text: '0.5 to 1: moderate' };
  if (cv <= 1.5) return { level: 'high', text: '1 to 1.5: high, capping or sub-domains likely' };
  return { level: 'very-high', text: 'above 1.5: mixed populations or an extreme tail' };
}

/** Mean of a lognormal: exp(μ + σ²/2), μ and σ of ln grade. */
export function lognormalMean(logMean: number, logSd: number): number {
  return Math.exp(logMean + logSd ** 2 / 2);
}

/** Coefficient of variation of a lognormal: sqrt(exp(σ²) - 1). */
export function lognormalCv(logSd: number): number {
  return Math.sqrt(Math.expm1(logSd ** 2));
}

/** σ of ln grade of a lognormal with this coefficient of variation. */
export function logSdOfCv(cv: number): number {
  return Math.sqrt(Math.log1p(cv ** 2));
}
