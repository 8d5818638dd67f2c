import { KernelError } from '#kernels/kernel-error.ts';
import type { Components } from './components.ts';

/**
 * `form` shows rows at their true distances; `covariance` shows parts so that a ray is as long as
 * the sd of its clr and a link as the sd of the log-ratio.
 */
export type BiplotScaling = 'form' | 'covariance';

/** What rows and parts are multiplied by to share a plot; rows times parts give centred clr back. */
export interface Biplot {
  /** Ends of the rays, row-major (nParts, k). */
  parts: Float64Array;
  /** Factor for the scores of each component. */
  rowFactors: Float64Array;
}

/**
 * Biplot of the first components: rows U D and parts W (`form`), or rows sqrt(n - 1) U and parts
 * W D / sqrt(n - 1) (`covariance`), from centred clr = U D W'.
 *
 * @param k Components to show, 1 up to those that exist.
 * @throws {KernelError} `bad-parameter` for k.
 * @see Aitchison & Greenacre (2002), Biplots of compositional data, Appl. Statist. 51.
 */
export function biplot(components: Components, scaling: BiplotScaling, k = 2): Biplot {
  const { eigenvalues, loadings, nParts } = components;
  if (!Number.isInteger(k) || k < 1 || k > eigenvalues.length) {
    const message = `expected 1 to ${eigenvalues.length} components, found ${k}`;
    throw new KernelError('bad-parameter', message);
  }
  const sds = eigenvalues.subarray(0, k).map(Math.sqrt);
  const parts = new Float64Array(nParts * k);
  for (let part = 0; part < nParts; part++) {
    for (let i = 0; i < k; i++) {
      const loading = loadings[part * eigenvalues.length + i]!;
      parts[part * k + i] = scaling === 'covariance' ? loading * sds[i]! : loading;
    }
  }
  const rowFactors =
    scaling === 'covariance' ? sds.map((sd) => 1 / sd) : new Float64Array(k).fill(1);
  return { parts, rowFactors };
}
