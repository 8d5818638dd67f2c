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
