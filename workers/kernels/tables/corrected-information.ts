import { entropy, millerMadow } from './association.ts';
import { marginsOf } from './margins.ts';

/** Entropies and mutual information of a table with their small-sample bias taken off; nats. */
export interface CorrectedInformation {
  entropyRows: number;
  entropyCols: number;
  entropyJoint: number;
  /** Not below 0: a small sample of unrelated labels no longer shows information. */
  mutualInformation: number;
}

/**
 * Miller-Madow corrected information: each entropy gains (filled cells - 1) / 2n, since few rows fill
 * few cells and look more orderly than they are.
 *
 * @param counts Row-major, shape (nRows, nCols): numbers of intervals, or lengths brought to their
 *   effective number.
 * @returns Null when the table is empty.
 * @throws {KernelError} `shape`; `bad-parameter` at a negative cell.
 * @see Miller (1955), Note on the bias of information estimates (from memory).
 */
export function correctedInformation(
  counts: Float64Array,
  nCols: number,
): CorrectedInformation | null {
  const { rowTotals, colTotals, total } = marginsOf(counts, nCols);
  if (!(total > 0)) return null;
  const corrected = (cells: Float64Array) =>
    entropy(cells) + millerMadow(cells.filter((cell) => cell > 0).length, total);
  const [entropyRows, entropyCols] = [corrected(rowTotals), corrected(colTotals)];
  const entropyJoint = corrected(counts);
  const mutualInformation = Math.max(0, entropyRows + entropyCols - entropyJoint);
  return { entropyRows, entropyCols, entropyJoint, mutualInformation };
}
