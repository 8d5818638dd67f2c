import type { MixtureModel } from './mixture-model.ts';
import { choleskyPacked, packedSize } from './packed-cholesky.ts';

/** Shares, means and covariances of a model, one after the other. */
export type Parameters = Float64Array;

export function parametersOf({ shares, means, covariances }: MixtureModel): Parameters {
  const out = new Float64Array(shares.length + means.length + covariances.length);
  out.set(shares);
  out.set(means, shares.length);
  out.set(covariances, shares.length + means.length);
  return out;
}

export function setParameters({ shares, means, covariances }: MixtureModel, from: Parameters): void {
  shares.set(from.subarray(0, shares.length));
  means.set(from.subarray(shares.length, shares.length + means.length));
  covariances.set(from.subarray(shares.length + means.length));
}

/**
 * Where three successive EM estimates lead: with r = b - a and v = (c - b) - r, the point
 * a + 2 s r + s² v at s = |r| / |v|, which a slow, straight approach reaches only after many steps.
 * s = 1 is c itself.
 *
 * @param longest Most that s may be.
 * @returns s, with the parameters there; null when they are no better guess than c.
 * @see Varadhan & Roland (2008), Scand. J. Stat. 35, scheme S3 (from memory).
 */
export function leapOf(
  [a, b, c]: readonly [Parameters, Parameters, Parameters],
  longest: number,
): { parameters: Parameters; length: number } | null {
  let [rr, vv] = [0, 0];
  for (let i = 0; i < a.length; i++) {
    const r = b[i]! - a[i]!;
    const v = c[i]! - b[i]! - r;
    rr += r * r;
    vv += v * v;
  }
  const length = Math.min(Math.sqrt(rr / vv), longest);
  if (!(length > 1)) return null;
  const parameters = a.map((value, i) => {
    const r = b[i]! - value;
    return value + 2 * length * r + length * length * (c[i]! - b[i]! - r);
  });
  return { parameters, length };
}

/** False when a group lost its share or has an eigenvalue under the floor; `work` has room for a triangle. */
export function isModel(
  { k, p, shares, covariances }: MixtureModel,
  before: Parameters,
  floor: number,
  work: Float64Array,
): boolean {
  for (let c = 0; c < k; c++) {
    if (!(shares[c]! > 0) && before[c]! > 0) return false;
    if (Number.isNaN(choleskyPacked(covariances, c * packedSize(p), p, work, floor))) return false;
  }
  return true;
}
