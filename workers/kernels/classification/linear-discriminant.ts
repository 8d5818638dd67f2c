import { KernelError } from '#kernels/kernel-error.ts';
import type { FitClassifier } from '#kernels/logging/cross-validate.ts';
import { answerRows, classMoments, whiten } from './class-moments.ts';

/**
 * Coordinates of all rows: fixed, or fitted anew on each set of training rows (components, replaced
 * values), so that no held-out row has a say in them.
 */
export type Coordinates =
  readonly Float64Array[] | ((trainingRows: Int32Array) => readonly Float64Array[]);

/** The coordinates for one set of training rows. */
export const coordinatesFor = (
  coordinates: Coordinates,
  rows: Int32Array,
): readonly Float64Array[] => (typeof coordinates === 'function' ? coordinates(rows) : coordinates);

/**
 * Linear discriminant analysis: P_k ∝ π_k exp(-δ_k² / 2), δ_k the Mahalanobis distance to the class
 * mean in the pooled covariance within classes (denominator n - K, ridge 1e-6 of its mean variance).
 *
 * @param priors π: `equal` (default) or `frequency`, the share of the training rows.
 * @returns A classifier; rows with a missing coordinate answer NaN.
 * @throws {KernelError} When fitted: those of `classMoments`.
 * @see Fisher (1936), Annals of Eugenics 7 (from memory).
 */
export function linearDiscriminant(
  coordinates: Coordinates,
  priors: 'equal' | 'frequency' = 'equal',
): FitClassifier {
  return (rows, classOf, nClasses) => {
    const columns = coordinatesFor(coordinates, rows);
    const moments = classMoments({ columns, rows, classOf, nClasses });
    const { p, means, sizes } = moments;
    const centres = new Float64Array(means.length);
    const meanColumns = columns.map((_, j) =>
      Float64Array.from(sizes, (__, c) => means[c * p + j]!),
    );
    for (let c = 0; c < nClasses; c++) whiten(moments, meanColumns, c, centres, c * p);
    const logPrior = sizes.map((size) => (priors === 'equal' ? 0 : Math.log(size)));
    return (asked) =>
      answerRows(moments, columns, asked, (z, scores) => {
        for (let c = 0; c < nClasses; c++) scores[c] = logPrior[c]! - squared(z, centres, c, p) / 2;
        toProbabilities(scores);
      });
  };
}

/** Squared distance of a whitened row to the centre of class c. */
function squared(z: Float64Array, centres: Float64Array, c: number, p: number): number {
  let sum = 0;
  for (let j = 0; j < p; j++) sum += (z[j]! - centres[c * p + j]!) ** 2;
  return sum;
}

/** Log weights into shares of 1, in place. */
function toProbabilities(scores: Float64Array): void {
  const top = scores.reduce((most, value) => Math.max(most, value), -Infinity);
  if (top === -Infinity)
    throw new KernelError('not-finite', 'a row lies too far from every class to be compared');
  let total = 0;
  for (let c = 0; c < scores.length; c++) total += scores[c] = Math.exp(scores[c]! - top);
  for (let c = 0; c < scores.length; c++) scores[c]! /= total;
}
