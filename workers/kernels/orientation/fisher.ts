import type { Vector } from '#kernels/geometry/directions.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { checkUnitVectors, vectorAt } from './unit-vectors.ts';

/** Mean direction and concentration of directions. */
export interface FisherMean {
  n: number;
  /** Length of the vector sum, 0..n. */
  resultant: number;
  /** Unit mean direction; null when the sum vanishes. */
  mean: Vector | null;
  /** Fisher's precision (n - 1) / (n - R); null for one direction or all the same. */
  kappa: number | null;
  /** Maximum likelihood: coth k - 1/k = R / n; null when all are the same. */
  kappaMl: number | null;
  /** Half-angle in degrees of the 95 % cone about the mean; null where the data do not bound it. */
  alpha95Deg: number | null;
}

/**
 * Fisher statistics. Axes (poles of planes) must be turned to one hemisphere first: `flipToAxis`.
 *
 * @param vectors Unit vectors, row-major, shape (n, 3).
 * @throws {KernelError} `shape`; `too-few-rows`; `not-unit`.
 * @see Fisher (1953), Proceedings of the Royal Society A 217, 295-305.
 */
export function fisherMean(vectors: Float64Array): FisherMean {
  const n = checkUnitVectors(vectors);
  let [x, y, z] = [0, 0, 0];
  for (let row = 0; row < n; row++) {
    const v = vectorAt(vectors, row);
    x += v[0];
    y += v[1];
    z += v[2];
  }
  const resultant = Math.min(n, Math.hypot(x, y, z));
  const vanishes = resultant < 1e-9 * n;
  const same = n - resultant < 1e-12 * n;
  return {
    n,
    resultant,
    mean: vanishes ? null : [x / resultant, y / resultant, z / resultant],
    kappa: n < 2 || same ? null : (n - 1) / (n - resultant),
    kappaMl: same ? null : fisherKappa(resultant / n),
    alpha95Deg: n < 2 || vanishes ? null : alpha95(n, resultant),
  };
}

function alpha95(n: number, resultant: number): number | null {
  const cosine = 1 - ((n - resultant) / resultant) * (20 ** (1 / (n - 1)) - 1);
  return cosine < -1 ? null : (Math.acos(Math.min(1, cosine)) * 180) / Math.PI;
}

/**
 * Concentration k that solves coth k - 1/k = mean resultant length.
 *
 * @param meanResultant In [0, 1).
 * @throws {KernelError} `bad-parameter`.
 */
export function fisherKappa(meanResultant: number): number {
  if (!(meanResultant >= 0 && meanResultant < 1)) {
    throw new KernelError(
      'bad-parameter',
      `expected a mean resultant in [0, 1), found ${meanResultant}`,
    );
  }
  const r = meanResultant;
  let k = (r * (3 - r * r)) / (1 - r * r);
  for (let step = 0; step < 50 && k > 1e-3; step++) {
    const value = 1 / Math.tanh(k) - 1 / k;
    const slope = 1 / (k * k) - 1 / Math.sinh(Math.min(k, 300)) ** 2;
    const next = k - (value - r) / slope;
    if (Math.abs(next - k) <= 1e-14 * k) return next;
    k = next;
  }
  return k;
}
