import { KernelError } from '#kernels/kernel-error.ts';
import { marginsOf, type Margins } from './margins.ts';

/** How strongly two label columns go together; entropies and information in nats. */
export interface Association {
  /** 0 none to 1 one decides the other. */
  cramersV: number;
  /** The same with its small-sample bias removed; null when n < 2 leaves it undefined. */
  cramersVCorrected: number | null;
  entropyRows: number;
  entropyCols: number;
  mutualInformation: number;
  /** Share of the row label's entropy told by the column label; null when the rows have none. */
  rowsToldByCols: number | null;
  /** Share of the column label's entropy told by the row label; null when the columns have none. */
  colsToldByRows: number | null;
  /** Share of intervals in the commonest row of their column. */
  purity: number;
}

/**
 * Entropy -sum p ln p in nats of weights >= 0 (any total); 0 for an empty list.
 *
 * @throws {KernelError} `bad-parameter` with { row } at a weight that is negative or not finite.
 */
export function entropy(weights: Float64Array): number {
  const row = weights.findIndex((weight) => !(weight >= 0 && weight < Infinity));
  if (row >= 0)
    throw new KernelError('bad-parameter', `expected a weight >= 0, found ${weights[row]}`, {
      row,
    });
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  let sum = 0;
  for (const weight of weights) if (weight > 0) sum -= (weight / total) * Math.log(weight / total);
  return Math.max(0, sum);
}

/** Miller-Madow term: add to an entropy estimated from n counts over `filled` non-empty cells. */
export function millerMadow(filled: number, n: number): number {
  return (filled - 1) / (2 * n);
}

/**
 * Strength of association of a table of counts.
 *
 * @param counts Row-major, shape (nRows, nCols): intervals of equal support, not metres.
 * @returns Null when only one row or one column holds anything: no association to speak of.
 * @throws {KernelError} `shape`; `bad-parameter` at a negative cell.
 * @see Cramer (1946); Bergsma (2013), Journal of the Korean Statistical Society 42, 323-328; Theil
 *   (1970) for the uncertainty coefficient (from memory).
 */
export function association(counts: Float64Array, nCols: number): Association | null {
  const margins = marginsOf(counts, nCols);
  const rowsFilled = margins.rowTotals.filter((total) => total > 0).length;
  const colsFilled = margins.colTotals.filter((total) => total > 0).length;
  if (rowsFilled < 2 || colsFilled < 2) return null;
  const phi2 = meanSquareContingency(counts, margins);
  const entropyRows = entropy(margins.rowTotals);
  const entropyCols = entropy(margins.colTotals);
  const mutualInformation = Math.max(0, entropyRows + entropyCols - entropy(counts));
  return {
    cramersV: Math.min(1, Math.sqrt(phi2 / (Math.min(rowsFilled, colsFilled) - 1))),
    cramersVCorrected: correctedV(phi2, rowsFilled, colsFilled, margins.total),
    entropyRows,
    entropyCols,
    mutualInformation,
    rowsToldByCols: entropyRows > 0 ? mutualInformation / entropyRows : null,
    colsToldByRows: entropyCols > 0 ? mutualInformation / entropyCols : null,
    purity: purityOf(counts, margins),
  };
}

/**
 * V in a word: none below .1, weak to .3, moderate to .5, strong above (common practice, from memory;
 * a reading aid, not a test).
 */
export function strengthInWords(v: number): 'none' | 'weak' | 'moderate' | 'strong' {
  if (v < 0.1) return 'none';
  if (v < 0.3) return 'weak';
  return v < 0.5 ? 'moderate' : 'strong';
}

/** phi^2 = chi-square / n. */
function meanSquareContingency(
  counts: Float64Array,
  { nCols, rowTotals, colTotals, total }: Margins,
): number {
  let sum = 0;
  counts.forEach((count, i) => {
    const expected = (rowTotals[Math.floor(i / nCols)]! * colTotals[i % nCols]!) / total;
    if (expected > 0) sum += (count - expected) ** 2 / expected;
  });
  return sum / total;
}

function correctedV(phi2: number, rows: number, cols: number, n: number): number | null {
  if (n <= 1) return null;
  const phi2Corrected = Math.max(0, phi2 - ((rows - 1) * (cols - 1)) / (n - 1));
  const rowsCorrected = rows - (rows - 1) ** 2 / (n - 1);
  const colsCorrected = cols - (cols - 1) ** 2 / (n - 1);
  const least = Math.min(rowsCorrected, colsCorrected) - 1;
  return least > 0 ? Math.sqrt(phi2Corrected / least) : null;
}

function purityOf(counts: Float64Array, { nRows, nCols, total }: Margins): number {
  let commonest = 0;
  for (let col = 0; col < nCols; col++) {
    let most = 0;
    for (let row = 0; row < nRows; row++) most = Math.max(most, counts[row * nCols + col]!);
    commonest += most;
  }
  return commonest / total;
}
