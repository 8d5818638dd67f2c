import type { Vector } from '#kernels/geometry/directions.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { binghamMoments, type BinghamMoments } from './bingham-moments.ts';

/** Bingham distribution of axes, fitted by maximum likelihood. */
export interface BinghamFit {
  /** Concentrations k1 <= k2 <= 0 along the third and second axis of the tensor; the first has 0. */
  k1: number;
  k2: number;
  /** Log-likelihood of an axis over that of a uniform distribution, a mean; 0 or more. */
  logLikelihoodPerAxis: number;
  /** Half-angles (degrees) of the 95 % ellipse about the first axis, towards the second and third. */
  halfAnglesDeg: { towardsSecond: number | null; towardsThird: number | null };
}

export type BinghamResult = { fit: BinghamFit; refusal: null } | { fit: null; refusal: string };

/** Third eigenvalue under which the concentration runs away: the axes lie in a plane. */
const FLAT = 1e-5;
const MOST_STEPS = 200;
/** 95 % point of chi-square with 2 degrees of freedom: the axis moves two ways at once. */
const CHI_95 = -2 * Math.log(0.05);

/**
 * Fits the Bingham distribution exp(k1 x1^2 + k2 x2^2) / c to an orientation tensor: its axes are the
 * eigenvectors, its concentrations solve E x1^2 = S3 and E x2^2 = S2 by Newton's steps on the concave
 * likelihood. The half-angles of the 95 % ellipse are large-sample: sin^2 = chi-square(2) over
 * 2 n (S1 - Sj)(0 - kj).
 *
 * @param eigenvalues S1 >= S2 >= S3 >= 0, sum 1, of the tensor.
 * @param n Number of axes, >= 1; the effective number when they are weighted.
 * @returns No fit with a reason where S3 is nearly 0.
 * @throws {KernelError} `bad-parameter` at eigenvalues or n that are none; `not-converged`.
 * @see Bingham (1974), Annals of Statistics 2, 1201-1225 (from memory).
 */
export function binghamFit(eigenvalues: Vector, n: number): BinghamResult {
  const [s1, s2, s3] = eigenvalues;
  const isTensor = s1 >= s2 && s2 >= s3 && s3 >= 0 && Math.abs(s1 + s2 + s3 - 1) < 1e-9;
  if (!isTensor || !(n >= 1 && n < Infinity)) {
    const found = `${eigenvalues.join(', ')} of ${n}`;
    throw new KernelError(
      'bad-parameter',
      `expected S1 >= S2 >= S3, sum 1, of axes, found ${found}`,
    );
  }
  if (s3 < FLAT) {
    return { fit: null, refusal: 'No Bingham fit: the axes lie in one plane or on one line.' };
  }
  const { k1, k2, moments } = solve(s3, s2);
  const halfAngle = (k: number, s: number) => {
    const sine2 = CHI_95 / (2 * n * -k * (s1 - s));
    return sine2 < 1 && s1 > s ? (Math.asin(Math.sqrt(sine2)) * 180) / Math.PI : null;
  };
  return {
    fit: {
      k1,
      k2,
      logLikelihoodPerAxis: Math.max(0, k1 * s3 + k2 * s2 - moments.logConstant),
      halfAnglesDeg: { towardsSecond: halfAngle(k2, s2), towardsThird: halfAngle(k1, s3) },
    },
    refusal: null,
  };
}

interface Solution {
  k1: number;
  k2: number;
  moments: BinghamMoments;
}

function solve(s3: number, s2: number): Solution {
  const at = (k1: number, k2: number): Solution => ({ k1, k2, moments: binghamMoments(k1, k2) });
  const gain = ({ k1, k2, moments }: Solution) => k1 * s3 + k2 * s2 - moments.logConstant;
  let now = at(0, 0);
  for (let step = 0; step < MOST_STEPS; step++) {
    const [g1, g2] = [s3 - now.moments.means[0], s2 - now.moments.means[1]];
    if (Math.abs(g1) <= 1e-13 + 1e-10 * s3 && Math.abs(g2) <= 1e-13 + 1e-10 * s2) return now;
    const [v11, v22, v12] = now.moments.covariance;
    const determinant = v11 * v22 - v12 * v12;
    const d1 = (v22 * g1 - v12 * g2) / determinant;
    const d2 = (v11 * g2 - v12 * g1) / determinant;
    if (!(Number.isFinite(d1) && Number.isFinite(d2))) return now;
    let next = now;
    // halve until the likelihood rises; k1 <= k2 <= 0 holds at the solution, so keep to it
    for (let share = 1; share > 1e-10; share /= 2) {
      const k2 = Math.min(0, now.k2 + share * d2);
      const tried = at(Math.min(k2, now.k1 + share * d1), k2);
      if (gain(tried) > gain(now)) {
        next = tried;
        break;
      }
    }
    if (next === now) return now;
    now = next;
  }
  throw new KernelError('not-converged', `no Bingham fit after ${MOST_STEPS} steps`);
}
