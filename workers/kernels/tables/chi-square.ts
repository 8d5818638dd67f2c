import { KernelError } from '#kernels/kernel-error.ts';
import { normalCdf } from '#kernels/normal.ts';
import { marginsOf } from './margins.ts';
import { benjaminiHochberg } from './multiple-tests.ts';
import { chiSquareTail } from './special-functions.ts';

/** Pearson's test of independence of a table of counts. */
export interface ChiSquareTest {
  n: number;
  chiSquare: number;
  df: number;
  /** Asymptotic p; it assumes independent rows, so down-hole it is nominal. Null when withheld. */
  nominalP: number | null;
  /** Why the p is withheld, in words; null when it is given. */
  withheld: string | null;
  /** Row-major like the counts: E = row total x column total / n. */
  expected: Float64Array;
  /** (N - E) / sqrt(E). */
  pearsonResiduals: Float64Array;
  /** (N - E) / sqrt(E (1 - row share) (1 - column share)): standard normal when independent. */
  adjustedResiduals: Float64Array;
}

/**
 * Chi-square test of independence without continuity correction. The asymptotic p is withheld when
 * any expected count is below 1 or more than 20 % of them are below 5.
 *
 * @param counts Row-major, shape (nRows, nCols): numbers of equal-length intervals, never metres;
 *   no empty row or column (`crossTabulate` removes them).
 * @returns Null when the table has a single row or a single column: nothing to test.
 * @throws {KernelError} `shape`; `bad-parameter`; `empty-margin` with { row } or { col }.
 * @see Pearson (1900); Haberman (1973), Biometrics 29, for the adjusted residuals (from memory).
 */
export function chiSquareTest(counts: Float64Array, nCols: number): ChiSquareTest | null {
  const { nRows, rowTotals, colTotals, total } = marginsOf(counts, nCols);
  if (nRows < 2 || nCols < 2) return null;
  refuseEmpty(rowTotals, 'row');
  refuseEmpty(colTotals, 'col');
  const expected = counts.map(
    (_, i) => (rowTotals[Math.floor(i / nCols)]! * colTotals[i % nCols]!) / total,
  );
  const pearsonResiduals = counts.map(
    (count, i) => (count - expected[i]!) / Math.sqrt(expected[i]!),
  );
  const adjustedResiduals = pearsonResiduals.map((residual, i) => {
    const rowShare = rowTotals[Math.floor(i / nCols)]! / total;
    const colShare = colTotals[i % nCols]! / total;
    return residual / Math.sqrt((1 - rowShare) * (1 - colShare));
  });
  const chiSquare = pearsonResiduals.reduce((sum, residual) => sum + residual * residual, 0);
  const df = (nRows - 1) * (nCols - 1);
  const withheld = whyWithheld(expected);
  const nominalP = withheld === null ? chiSquareTail(chiSquare, df) : null;
  return {
    n: total,
    chiSquare,
    df,
    nominalP,
    withheld,
    expected,
    pearsonResiduals,
    adjustedResiduals,
  };
}

/**
 * Two-sided p of each cell's adjusted residual, Benjamini-Hochberg over all cells: which cells stand
 * out once it is allowed for that there are many.
 *
 * @param adjustedResiduals From `chiSquareTest`.
 */
export function residualSignificance(adjustedResiduals: Float64Array): Float64Array {
  return benjaminiHochberg(adjustedResiduals.map((residual) => 2 * normalCdf(-Math.abs(residual))));
}

function refuseEmpty(totals: Float64Array, name: 'row' | 'col'): void {
  const index = totals.indexOf(0);
  if (index < 0) return;
  const message = `expected no empty ${name === 'row' ? 'row' : 'column'}, found ${name} ${index} empty`;
  throw new KernelError('empty-margin', message, { [name]: index });
}

/** The usual small-count rule (Cochran 1954, from memory), in words, or null when it passes. */
function whyWithheld(expected: Float64Array): string | null {
  const below1 = expected.filter((value) => value < 1).length;
  if (below1 > 0) return `${below1} of ${expected.length} expected counts are below 1`;
  const below5 = expected.filter((value) => value < 5).length;
  if (below5 <= 0.2 * expected.length) return null;
  return `${below5} of ${expected.length} expected counts are below 5 (more than 20 %)`;
}
