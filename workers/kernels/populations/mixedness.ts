import { fitLognormalMixtures } from './lognormal-mixture.ts';
import { mixtureData } from './mixture-data.ts';

/**
 * How mixed ln grades are: BIC of one population less that of two, 0 when two are no better or do not
 * pass the guards on width and share.
 *
 * @param y Finite values. @returns >= 0; 0 with fewer than two different values.
 */
export function mixedness(y: Float64Array, seed: number): number {
  if (y.length === 0) return 0;
  const data = mixtureData(y);
  if (data.y.length < 2) return 0;
  const [one, two] = fitLognormalMixtures(data, 2, seed);
  if (!two?.accepted || two.bic === null || !one || one.bic === null) return 0;
  return Math.max(0, one.bic - two.bic);
}
