import { Matrix, SVD } from 'ml-matrix';
import { KernelError } from '#kernels/kernel-error.ts';
import { MINERALS, type Mineral } from './minerals.ts';
import { nonNegativeLeastSquares } from './non-negative-least-squares.ts';

/** Assays of one interval. */
export interface ElementAssay {
  element: string;
  /** Mass %. */
  percent: number;
  /** Detection limit, mass %, > 0: errors are never taken smaller. */
  limitPercent: number;
}

/** How well one element is explained. */
export interface ElementResidual {
  element: string;
  percent: number;
  fittedPercent: number;
  /** (percent - fitted) / max(percent, limit). */
  relative: number;
  isPoor: boolean;
}

/** Minerals of one interval, mass %. Screening only: see MINERAL_CAUTION. */
export interface NormativeMinerals {
  minerals: string[];
  percents: Float64Array;
  residuals: ElementResidual[];
  /** Weighted |A x - b|, in units of the assumed errors. */
  misfit: number;
  /** Condition number of the weighted matrix: how well minerals can be told apart. */
  condition: number;
  /** 100 - sum of the minerals: quartz and whatever else was not asked for; may be negative. */
  unexplainedPercent: number;
}

export interface NormativeRules {
  /** Error of a grade as a share of it, at least its detection limit. */
  relativeError?: number;
  mostCondition?: number;
  /** Relative residual from which an element is badly explained. */
  poorResidual?: number;
}

/**
 * Amounts of chosen minerals that explain the assays best, none negative: min |W (M x - b)| with W = 1
 * / max(error x b, detection limit). Choose minerals seen in the rock: the fit cannot know them.
 *
 * @param assays At least as many elements as minerals.
 * @param minerals Names of the table.
 * @throws {KernelError} `bad-parameter` at a grade, a limit or a mineral that is none; `too-few-parts`
 *   with more minerals than elements; `singular` where minerals cannot be told apart.
 * @see Lawson & Hanson (1974); stoichiometry.
 */
export function normativeMinerals(
  assays: readonly ElementAssay[],
  minerals: readonly string[],
  rules: NormativeRules = {},
): NormativeMinerals {
  const { relativeError = 0.05, mostCondition = 1e4, poorResidual = 0.1 } = rules;
  const { weights, weighted, rhs } = problemOf(assays, minerals, relativeError);
  const condition = conditionOf(weighted, minerals, mostCondition);
  const { x, residualNorm } = nonNegativeLeastSquares(weighted, rhs, minerals.length);
  const residuals = assays.map(({ element, percent, limitPercent }, i): ElementResidual => {
    let fitted = 0;
    for (let j = 0; j < minerals.length; j++) {
      fitted += (weighted[i * minerals.length + j]! * x[j]!) / weights[i]!;
    }
    const relative = (percent - fitted) / Math.max(percent, limitPercent);
    const isPoor = Math.abs(relative) > poorResidual;
    return { element, percent, fittedPercent: fitted, relative, isPoor };
  });
  return {
    minerals: [...minerals],
    percents: x,
    residuals,
    misfit: residualNorm,
    condition,
    unexplainedPercent: 100 - x.reduce((sum, value) => sum + value, 0),
  };
}

/** Weights, weighted mineral matrix (elements x minerals) and weighted grades. */
export function problemOf(
  assays: readonly ElementAssay[],
  minerals: readonly string[],
  relativeError: number,
): { weights: Float64Array; weighted: Float64Array; rhs: Float64Array } {
  if (!(relativeError > 0)) {
    throw new KernelError('bad-parameter', `expected a relative error > 0, found ${relativeError}`);
  }
  for (const { element, percent, limitPercent } of assays) {
    if (percent >= 0 && percent <= 100 && limitPercent > 0 && limitPercent <= 100) continue;
    const message = `expected ${element} in 0..100 % with a limit > 0, found ${percent}, ${limitPercent}`;
    throw new KernelError('bad-parameter', message);
  }
  const known = minerals.map((name) => mineralWith(name, assays));
  if (known.length === 0 || known.length > assays.length || new Set(minerals).size < known.length) {
    const found = `${known.length} minerals of ${assays.length} elements`;
    throw new KernelError(
      'too-few-parts',
      `expected different minerals, no more than elements, found ${found}`,
    );
  }
  const weights = Float64Array.from(
    assays,
    ({ percent, limitPercent }) => 1 / Math.max(relativeError * percent, limitPercent),
  );
  const weighted = Float64Array.from(
    assays.flatMap(({ element }, i) =>
      known.map(({ massFractions }) => weights[i]! * (massFractions.get(element) ?? 0)),
    ),
  );
  return { weights, weighted, rhs: weights.map((weight, i) => weight * assays[i]!.percent) };
}

function mineralWith(name: string, assays: readonly ElementAssay[]): Mineral {
  const mineral = MINERALS.get(name);
  if (mineral && assays.some(({ element }) => mineral.massFractions.has(element))) return mineral;
  const why = mineral ? 'which holds none of the elements' : 'which is not in the table';
  throw new KernelError(
    'bad-parameter',
    `expected a mineral of the elements, found ${name}, ${why}`,
  );
}

function conditionOf(
  weighted: Float64Array,
  minerals: readonly string[],
  mostCondition: number,
): number {
  const n = minerals.length;
  const rows = Array.from({ length: weighted.length / n }, (_, i) => [
    ...weighted.subarray(i * n, (i + 1) * n),
  ]);
  const svd = new SVD(new Matrix(rows));
  const values = svd.diagonal;
  const least = values.indexOf(Math.min(...values));
  const condition = Math.max(...values) / values[least]!;
  if (condition <= mostCondition) return condition;
  const mixed = svd.rightSingularVectors.getColumn(least);
  const names = minerals.filter((_, j) => Math.abs(mixed[j]!) > 0.3);
  const message = `expected minerals that the elements tell apart, found condition ${condition.toPrecision(3)}: leave out one of ${names.join(', ')}, or read them as a sum`;
  throw new KernelError('singular', message);
}
