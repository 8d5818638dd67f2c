import { linearRegression, median } from 'simple-statistics';
import { KernelError } from '#kernels/kernel-error.ts';
import { requirePairs } from './pairs.ts';

/** How far density is known in one domain. */
export interface DensityCoverage {
  metres: number;
  /** Metres with a density, and their share of all metres. */
  metresWithDensity: number;
  share: number;
  n: number;
  /** Length-weighted mean, t/m3; null without a density. */
  mean: number | null;
  /** Fewer values than a mean of the domain should rest on. */
  isProvisional: boolean;
  /** Rows further from the median than 3.5 robust sds. */
  outliers: number[];
}

const FEWEST_FOR_MEAN = 30;
const OUTLIER_SDS = 3.5;
const MAD_PER_SD = 0.6744897501960817;

/**
 * Coverage of density in one domain, by metres.
 *
 * @param lengths m, >= 0, not all 0. Not modified.
 * @param density t/m3 of the same rows, > 0, NaN where there is none. Not modified.
 * @throws {KernelError} `shape`; `too-few-rows` without rows; `bad-parameter` with { row } at a
 *   negative or missing length, or when all are 0; `not-positive` with { row } at a density.
 */
export function densityCoverage(lengths: Float64Array, density: Float64Array): DensityCoverage {
  const metres = requireLengths(lengths, density);
  const known = Array.from(density.keys()).filter((row) => !Number.isNaN(density[row]));
  const bad = known.find((row) => !(density[row]! > 0 && density[row]! < Infinity));
  if (bad !== undefined) {
    const message = `expected a density > 0, found ${density[bad]} at row ${bad}`;
    throw new KernelError('not-positive', message, { row: bad });
  }
  const metresWithDensity = known.reduce((sum, row) => sum + lengths[row]!, 0);
  const mass = known.reduce((sum, row) => sum + lengths[row]! * density[row]!, 0);
  return {
    metres,
    metresWithDensity,
    share: metresWithDensity / metres,
    n: known.length,
    mean: metresWithDensity > 0 ? mass / metresWithDensity : null,
    isProvisional: known.length < FEWEST_FOR_MEAN,
    outliers: outliersOf(known, density),
  };
}

function outliersOf(known: readonly number[], density: Float64Array): number[] {
  if (known.length < 3) return [];
  const values = known.map((row) => density[row]!);
  const middle = median(values);
  const sd = median(values.map((value) => Math.abs(value - middle))) / MAD_PER_SD;
  // Where more than half are equal there is no spread to measure by.
  if (!(sd > 0)) return [];
  return known.filter((row) => Math.abs(density[row]! - middle) > OUTLIER_SDS * sd);
}

function requireLengths(lengths: Float64Array, density: Float64Array): number {
  if (lengths.length !== density.length) {
    throw new KernelError('shape', `expected ${lengths.length} densities, found ${density.length}`);
  }
  if (lengths.length === 0) throw new KernelError('too-few-rows', 'expected rows, found none');
  const row = lengths.findIndex((length) => !(length >= 0 && length < Infinity));
  if (row >= 0) {
    const message = `expected a length >= 0, found ${lengths[row]} at row ${row}`;
    throw new KernelError('bad-parameter', message, { row });
  }
  const metres = lengths.reduce((sum, length) => sum + length, 0);
  if (!(metres > 0)) throw new KernelError('bad-parameter', 'expected a length > 0, found only 0');
  return metres;
}

/** Density by a line on grade, for intervals without one. */
export interface DensityLine {
  n: number;
  slope: number;
  intercept: number;
  /** Share of the variance of density the line explains. */
  rSquared: number;
  /** r2 of .5 or more: estimates may fill gaps, marked as estimated. */
  isUsable: boolean;
}

const LEAST_R_SQUARED = 0.5;

/**
 * Least-squares line of density on grade (for instance Fe + S).
 *
 * @param grade, density Rows with both, finite; at least five. Not modified.
 * @throws {KernelError} `shape`, `too-few-rows`, `not-finite`; `singular` when a side does not vary.
 */
export function densityLine(grade: Float64Array, density: Float64Array): DensityLine {
  const n = requirePairs(grade, density);
  const { m: slope, b: intercept } = linearRegression(
    Array.from(grade, (value, i) => [value, density[i]!]),
  );
  const mean = density.reduce((sum, value) => sum + value, 0) / n;
  const isConstant = (values: Float64Array) => values.every((value) => value === values[0]);
  if (isConstant(grade) || isConstant(density)) {
    throw new KernelError('singular', 'expected grades and densities that vary');
  }
  let [left, all] = [0, 0];
  density.forEach((value, i) => {
    left += (value - intercept - slope * grade[i]!) ** 2;
    all += (value - mean) ** 2;
  });
  const rSquared = Math.min(Math.max(1 - left / all, 0), 1);
  return { n, slope, intercept, rSquared, isUsable: rSquared >= LEAST_R_SQUARED };
}
