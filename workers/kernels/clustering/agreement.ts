import { KernelError } from '#kernels/kernel-error.ts';
import { compactLabels, type Labels } from './group-moments.ts';

/** Two labelings of the same rows against each other. */
export interface LabelCrosstab {
  /** Labels of the first and second labeling, ascending. */
  rows: number[];
  cols: number[];
  /** Row-major, shape (rows, cols): rows (or total weight) with both labels. */
  counts: Float64Array;
  rowTotals: number[];
  colTotals: number[];
  total: number;
  /** Rows left out because either label is 0. */
  nUnassigned: number;
}

/**
 * Cross-tabulates two labelings.
 *
 * @param a Labels 1..K per row, 0 = unassigned; `b` likewise for the same rows.
 * @param weights Optional interval lengths (m); without them every row counts 1.
 * @throws {KernelError} `shape` when lengths differ; `bad-parameter` for a label out of range, with
 *   { row } at a weight that is negative or not finite.
 */
export function crosstabLabels(a: Labels, b: Labels, weights?: Float64Array): LabelCrosstab {
  if (a.length !== b.length)
    throw new KernelError('shape', `${a.length} labels against ${b.length}`);
  if (weights && weights.length !== a.length)
    throw new KernelError('shape', `${weights.length} weights for ${a.length} rows`);
  const bad = weights?.findIndex((weight) => !(weight >= 0 && weight < Infinity)) ?? -1;
  if (bad >= 0) {
    const message = `expected a weight >= 0, found ${weights?.[bad]} in row ${bad}`;
    throw new KernelError('bad-parameter', message, { row: bad });
  }
  const inA = compactLabels(a);
  const inB = compactLabels(b);
  const nCols = inB.labelOf.length;
  const counts = new Float64Array(inA.labelOf.length * nCols);
  let nUnassigned = 0;
  for (let i = 0; i < a.length; i++) {
    if (a[i] === 0 || b[i] === 0) nUnassigned += 1;
    else counts[inA.groupOf[a[i]!]! * nCols + inB.groupOf[b[i]!]!]! += weights ? weights[i]! : 1;
  }
  const rowTotals = new Array<number>(inA.labelOf.length).fill(0);
  const colTotals = new Array<number>(nCols).fill(0);
  for (let at = 0; at < counts.length; at++) {
    rowTotals[Math.floor(at / nCols)]! += counts[at]!;
    colTotals[at % nCols]! += counts[at]!;
  }
  const total = rowTotals.reduce((sum, count) => sum + count, 0);
  return { rows: inA.labelOf, cols: inB.labelOf, counts, rowTotals, colTotals, total, nUnassigned };
}

/**
 * Adjusted Rand index of two labelings: 1 for the same grouping under any numbering, about 0 for
 * unrelated ones, over the rows labelled in both. Two labelings that both put all rows in one group
 * (or each in its own) agree: 1.
 *
 * @returns The index, or null with fewer than two rows labelled in both.
 * @throws {KernelError} As `crosstabLabels`.
 * @see Hubert & Arabie (1985), J. Classif. 2, 193-218 (from memory).
 */
export function adjustedRandIndex(a: Labels, b: Labels): number | null {
  const { counts, rowTotals, colTotals, total } = crosstabLabels(a, b);
  if (total < 2) return null;
  const pairs = (sum: number, count: number) => sum + (count * (count - 1)) / 2;
  const together = counts.reduce(pairs, 0);
  const inA = rowTotals.reduce(pairs, 0);
  const inB = colTotals.reduce(pairs, 0);
  const expected = (inA * inB) / ((total * (total - 1)) / 2);
  const ceiling = (inA + inB) / 2;
  return ceiling === expected ? 1 : (together - expected) / (ceiling - expected);
}
