import { KernelError } from '#kernels/kernel-error.ts';
import { chiSquareTail } from '#kernels/tables/special-functions.ts';
import { chiSquareQuantile } from './chi-square-quantile.ts';

/** Which estimate a small-sample factor is for. */
export type McdStage = 'raw' | 'reweighted';

/**
 * Makes the covariance of the inner share of a normal sample that of the whole:
 * share / F_{p+2}(chi2_{p, share}). 1 when every row is used.
 *
 * @param share Rows used over all rows, in (0, 1].
 * @param p Number of variables, >= 1.
 * @throws {KernelError} `bad-parameter`.
 * @see Croux & Haesbroeck (1999), Influence function and efficiency of the MCD, J. Multivar. Anal. 71.
 */
export function consistencyFactor(share: number, p: number): number {
  if (!(share > 0 && share <= 1) || !(p >= 1)) {
    const message = `expected a share in (0, 1] and at least 1 variable, found ${share}, ${p}`;
    throw new KernelError('bad-parameter', message);
  }
  if (share === 1) return 1;
  return share / (1 - chiSquareTail(chiSquareQuantile(share, p), p + 2));
}

/** A shortfall exp(a) / n^b as [a, b], at an inner share of .5 and of .875. */
interface Shortfalls {
  half: readonly [number, number];
  most: readonly [number, number];
}

/** Simulated shortfalls for one and two variables (Pison et al. 2002). */
const FEW_VARIABLES: Record<McdStage, readonly [Shortfalls, Shortfalls]> = {
  raw: [
    {
      half: [0.262024211897096, 0.604756680630497],
      most: [-0.351584646688712, 1.01646567502486],
    },
    { half: [0.673292623522027, 0.691365864961895], most: [0.446537815635445, 1.06690782995919] },
  ],
  reweighted: [
    { half: [1.11098143415027, 1.5182890270453], most: [-0.66046776772861, 0.88939595831888] },
    { half: [3.11101712909049, 1.91401056721863], most: [0.79473550581058, 1.10081930350091] },
  ],
};

/**
 * For more variables: the shortfall c / p^d at n = 2 p^2 and at n = 3 p^2, as [c2, d2, c3, d3]
 * (Pison et al. 2002).
 */
const MORE_VARIABLES: Record<McdStage, { half: readonly number[]; most: readonly number[] }> = {
  raw: {
    half: [1.42764571687802, 1.26263336932151, 1.06141115981725, 1.28907991440387],
    most: [0.455179464070565, 1.11192541278794, 0.294241208320834, 1.09649329149811],
  },
  reweighted: {
    half: [1.02842572724793, 1.67659883081926, 0.26800273450853, 1.35968562893582],
    most: [0.544482443573914, 1.25994483222292, 0.343791072183285, 1.25159004257133],
  },
};

/**
 * Small-sample factor of the minimum covariance determinant: what its scatter falls short by for
 * normal samples of n rows, fitted to simulations.
 *
 * @param share Inner share asked for, in [.5, 1]; between .5, .875 and 1 it is interpolated.
 * @throws {KernelError} `bad-parameter` when share or p is out of range; `too-few-rows` when n is so
 *   small that the fitted curve leaves its range.
 * @see Pison, Van Aelst & Willems (2002), Small sample corrections for LTS and MCD, Metrika 55.
 */
export function smallSampleFactor(share: number, n: number, p: number, stage: McdStage): number {
  if (!(share >= 0.5 && share <= 1) || !Number.isInteger(p) || p < 1) {
    const message = `expected a share in [.5, 1] and at least 1 variable, found ${share}, ${p}`;
    throw new KernelError('bad-parameter', message);
  }
  const { half, most } = shortfalls(p, stage);
  const atHalf = Math.exp(half[0]) / n ** half[1];
  const atMost = Math.exp(most[0]) / n ** most[1];
  const shortfall =
    share <= 0.875
      ? atHalf + ((atMost - atHalf) * (share - 0.5)) / 0.375
      : (atMost * (1 - share)) / 0.125;
  if (!(shortfall < 0.9)) {
    const message = `expected more rows to correct for, found ${n} rows of ${p} variables`;
    throw new KernelError('too-few-rows', message, { found: n });
  }
  return 1 / (1 - shortfall);
}

function shortfalls(p: number, stage: McdStage): Shortfalls {
  const known = FEW_VARIABLES[stage][p - 1];
  if (known) return known;
  const { half, most } = MORE_VARIABLES[stage];
  return { half: curveThrough(half, p), most: curveThrough(most, p) };
}

/** The curve exp(a) / n^b through its values at n = 2 p^2 and n = 3 p^2. */
function curveThrough([c2 = 0, d2 = 0, c3 = 0, d3 = 0]: readonly number[], p: number) {
  const atTwo = Math.log(c2 / p ** d2);
  const atThree = Math.log(c3 / p ** d3);
  const b = (atTwo - atThree) / Math.log(1.5);
  return [atTwo + b * Math.log(2 * p * p), b] as const;
}
