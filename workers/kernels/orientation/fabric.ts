import { KernelError } from '#kernels/kernel-error.ts';
import { chiSquareTail } from '#kernels/tables/special-functions.ts';
import type { Vector } from '#kernels/geometry/directions.ts';

/** Below this an eigenvalue, or the gap between two, counts as zero. */
const ZERO = 1e-12;

/** Shape and strength of a fabric from its eigenvalues. */
export interface Fabric {
  /** Woodcock's ln(S1/S2) / ln(S2/S3): above 1 a cluster, below 1 a girdle; null where undefined. */
  k: number | null;
  /** Woodcock's strength ln(S1/S3); null when S3 is 0. */
  c: number | null;
  /** Vollmer's shares of point, girdle and random fabric, sum 1. */
  point: number;
  girdle: number;
  random: number;
}

/** Sums and orders that differ by less differ by rounding. */
const ROUNDING = 1e-6;

/**
 * Fabric measures. With S3 = 0 the axes lie in one plane and K and C have no value; with S2 = S3 the
 * cluster is round and K has none.
 *
 * @param eigenvalues S1 >= S2 >= S3 >= 0, sum 1.
 * @throws {KernelError} `bad-parameter`.
 * @see Woodcock (1977), GSA Bulletin 88, 1231-1236; Vollmer (1990), GSA Bulletin 102, 786-791 (from
 *   memory).
 */
export function fabric(eigenvalues: Vector): Fabric {
  requireEigenvalues(eigenvalues);
  const [s1, s2, s3] = eigenvalues;
  const flat = s3 < ZERO;
  const round = s2 - s3 < ZERO;
  return {
    k: flat || round ? null : Math.log(s1 / s2) / Math.log(s2 / s3),
    c: flat ? null : Math.log(s1 / s3),
    point: s1 - s2,
    girdle: 2 * (s2 - s3),
    random: 3 * s3,
  };
}

export interface UniformityTest {
  statistic: number;
  df: number;
  p: number;
}

/**
 * Bingham's test that axes show no preferred direction: (15 n / 2) sum (S_i - 1/3)^2 against
 * chi-square with 5 degrees of freedom.
 *
 * @param eigenvalues Of the orientation tensor.
 * @param n Number of axes, > 0; the effective number when they are weighted.
 * @throws {KernelError} `bad-parameter`.
 * @see Bingham (1974), Annals of Statistics 2, 1201-1225; Mardia (1972) (from memory).
 */
export function axialUniformity(eigenvalues: Vector, n: number): UniformityTest {
  requireEigenvalues(eigenvalues);
  if (!(n > 0 && n < Infinity))
    throw new KernelError('bad-parameter', `expected a number of axes > 0, found ${n}`);
  const statistic = 7.5 * n * eigenvalues.reduce((sum, s) => sum + (s - 1 / 3) ** 2, 0);
  return { statistic, df: 5, p: chiSquareTail(statistic, 5) };
}

/**
 * Rayleigh's test that directions (not axes) are uniform on the sphere: 3 R^2 / n against chi-square
 * with 3 degrees of freedom.
 *
 * @param resultant Length of the vector sum of n unit vectors, 0 to n.
 * @throws {KernelError} `bad-parameter`.
 * @see Mardia & Jupp (2000), Directional Statistics, Wiley (from memory).
 */
export function directionalUniformity(resultant: number, n: number): UniformityTest {
  if (!(n > 0 && n < Infinity && resultant >= 0 && resultant <= n * (1 + ROUNDING))) {
    const message = `expected a resultant of n > 0 directions, 0 to n, found ${resultant} of ${n}`;
    throw new KernelError('bad-parameter', message);
  }
  const statistic = (3 * resultant * resultant) / n;
  return { statistic, df: 3, p: chiSquareTail(statistic, 3) };
}

function requireEigenvalues([s1, s2, s3]: Vector): void {
  const isOrdered = s1 + ROUNDING >= s2 && s2 + ROUNDING >= s3 && s3 >= -ROUNDING;
  if (isOrdered && Math.abs(s1 + s2 + s3 - 1) <= ROUNDING) return;
  const message = `expected eigenvalues S1 >= S2 >= S3 >= 0, sum 1, found ${s1}, ${s2}, ${s3}`;
  throw new KernelError('bad-parameter', message);
}
