import { KernelError } from '#kernels/kernel-error.ts';
import { leastSquares } from './least-squares.ts';

export interface NonNegativeSolution {
  /** n values >= 0. */
  x: Float64Array;
  /** |A x - b|. */
  residualNorm: number;
  /** Times a variable entered. */
  steps: number;
}

/**
 * Least squares under x >= 0 by the active set method: variables enter by the steepest gradient and
 * leave when the fit would turn them negative. Own code: no library of the project has it.
 *
 * @param matrix Row-major (m, n), finite. Not modified.
 * @param rhs m values, finite.
 * @throws {KernelError} `shape`; `not-finite`; `not-converged` after 10 n steps.
 * @see Lawson & Hanson (1974), Solving Least Squares Problems, Prentice-Hall, chapter 23.
 */
export function nonNegativeLeastSquares(
  matrix: Float64Array,
  rhs: Float64Array,
  nCols: number,
): NonNegativeSolution {
  const nRows = checkShape(matrix, rhs, nCols);
  const x = new Float64Array(nCols);
  const passive: number[] = [];
  const barred = new Set<number>();
  const tolerance = gradientTolerance(matrix, rhs, nRows, nCols);
  for (let steps = 0; ; steps++) {
    if (steps > 10 * nCols) {
      throw new KernelError('not-converged', `no non-negative fit after ${10 * nCols} steps`);
    }
    const residual = residualOf(matrix, rhs, x, nCols);
    const entering = steepest(
      matrix,
      residual,
      nCols,
      (j) => !passive.includes(j) && !barred.has(j),
    );
    if (entering === null || entering.gradient <= tolerance) {
      return { x, residualNorm: Math.hypot(...residual), steps };
    }
    passive.push(entering.column);
    const fit = leastSquares(matrix, rhs, nCols, passive);
    if (!(fit[passive.length - 1]! > 0)) {
      // rounding alone made the gradient positive: it would leave again at once
      passive.pop();
      barred.add(entering.column);
      continue;
    }
    barred.clear();
    moveTo(x, fit, passive, matrix, rhs);
  }
}

/** Walks from x towards the fit, dropping the variables that reach 0 on the way. */
function moveTo(
  x: Float64Array,
  firstFit: Float64Array,
  passive: number[],
  matrix: Float64Array,
  rhs: Float64Array,
): void {
  let fit = firstFit;
  while (fit.some((value) => value <= 0)) {
    let share = 1;
    passive.forEach((j, i) => {
      if (fit[i]! <= 0) share = Math.min(share, x[j]! / (x[j]! - fit[i]!));
    });
    passive.forEach((j, i) => {
      x[j] = x[j]! + share * (fit[i]! - x[j]!);
    });
    const isOut = passive.map((j, i) => fit[i]! <= 0 && x[j]! <= 1e-14 * Math.abs(fit[i]!));
    if (!isOut.includes(true)) isOut[fit.indexOf(Math.min(...fit))] = true;
    for (let i = passive.length - 1; i >= 0; i--) {
      if (!isOut[i]) continue;
      x[passive[i]!] = 0;
      passive.splice(i, 1);
    }
    fit = leastSquares(matrix, rhs, x.length, passive);
  }
  passive.forEach((j, i) => {
    x[j] = fit[i]!;
  });
}

function checkShape(matrix: Float64Array, rhs: Float64Array, nCols: number): number {
  const nRows = rhs.length;
  if (!(nCols >= 1 && nRows >= 1) || matrix.length !== nRows * nCols) {
    const message = `expected ${nRows} rows of ${nCols}, found ${matrix.length} numbers`;
    throw new KernelError('shape', message);
  }
  if (![...matrix, ...rhs].every(Number.isFinite)) {
    throw new KernelError('not-finite', 'expected finite numbers in the least-squares problem');
  }
  return nRows;
}

function residualOf(
  matrix: Float64Array,
  rhs: Float64Array,
  x: Float64Array,
  nCols: number,
): Float64Array {
  return rhs.map((value, i) => {
    let fitted = 0;
    for (let j = 0; j < nCols; j++) fitted += matrix[i * nCols + j]! * x[j]!;
    return value - fitted;
  });
}

function steepest(
  matrix: Float64Array,
  residual: Float64Array,
  nCols: number,
  mayEnter: (column: number) => boolean,
): { column: number; gradient: number } | null {
  let best: { column: number; gradient: number } | null = null;
  for (let column = 0; column < nCols; column++) {
    if (!mayEnter(column)) continue;
    let gradient = 0;
    residual.forEach((value, i) => (gradient += matrix[i * nCols + column]! * value));
    if (best === null || gradient > best.gradient) best = { column, gradient };
  }
  return best;
}

/** Gradients below this are rounding of the products they are summed from. */
function gradientTolerance(
  matrix: Float64Array,
  rhs: Float64Array,
  nRows: number,
  nCols: number,
): number {
  const largest = matrix.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  return 10 * Number.EPSILON * Math.max(nRows, nCols) * largest * Math.hypot(...rhs);
}
