import { KernelError } from '#kernels/kernel-error.ts';
import { weightedQuantiles } from '#kernels/statistics/quantile.ts';
import { compactLabels, type Labels } from './group-moments.ts';

/** Profiles of groups over the parts. */
export interface Fingerprints {
  /** Labels in row order of `values`, ascending. */
  labels: number[];
  /** Row-major, shape (groups, parts): clr median of the group minus that of all labelled rows; NaN where a group has no value. */
  values: Float64Array;
  /** Per part: clr median of all labelled rows. */
  overall: Float64Array;
}

/**
 * Fingerprint of each group: for every part the group's median clr less the median of all labelled
 * rows. Positive = enriched against the whole, in ln units (0.69 is twice).
 *
 * @param clrColumns One column per part, n rows; NaN = missing, left out part by part.
 * @param labels 1..K per row, 0 = unassigned (left out).
 * @param weights Optional interval lengths (m) for weighted medians.
 * @throws {KernelError} `shape`; `not-finite` for an infinite value; `too-few-rows` when nothing is
 *   labelled; those of the weighted quantile.
 */
export function fingerprints(
  clrColumns: readonly Float64Array[],
  labels: Labels,
  weights?: Float64Array,
): Fingerprints {
  const { labelOf, groupOf } = compactLabels(labels);
  if (labelOf.length === 0) throw new KernelError('too-few-rows', 'no row has a label');
  const nParts = clrColumns.length;
  const values = new Float64Array(labelOf.length * nParts).fill(NaN);
  const overall = new Float64Array(nParts).fill(NaN);
  for (const [part, column] of clrColumns.entries()) {
    if (column.length !== labels.length)
      throw new KernelError(
        'shape',
        `${column.length} rows of part ${part}, ${labels.length} labels`,
        { col: part },
      );
    const rowsOf: number[][] = labelOf.map(() => []);
    for (let row = 0; row < column.length; row++) {
      if (labels[row] === 0 || Number.isNaN(column[row])) continue;
      if (!Number.isFinite(column[row]))
        throw new KernelError(
          'not-finite',
          `expected a finite clr value, found ${column[row]} in row ${row}, part ${part}`,
          { row, col: part },
        );
      rowsOf[groupOf[labels[row]!]!]!.push(row);
    }
    const whole = medianOf(column, rowsOf.flat(), weights);
    overall[part] = whole;
    for (const [g, rows] of rowsOf.entries())
      values[g * nParts + part] = medianOf(column, rows, weights) - whole;
  }
  return { labels: labelOf, values, overall };
}

function medianOf(column: Float64Array, rows: number[], weights: Float64Array | undefined): number {
  if (rows.length === 0) return NaN;
  const picked = Float64Array.from(rows, (row) => column[row]!);
  if (weights)
    return (
      weightedQuantiles(
        picked,
        Float64Array.from(rows, (row) => weights[row]!),
        [0.5],
      )[0] ?? NaN
    );
  return middle(picked);
}

/** Median by partial ordering around the middle; reorders `values`. */
function middle(values: Float64Array): number {
  const upper = values.length >> 1;
  select(values, upper);
  const high = values[upper]!;
  if (values.length % 2 === 1) return high;
  let low = -Infinity;
  for (let i = 0; i < upper; i++) low = Math.max(low, values[i]!);
  return (low + high) / 2;
}

/** Reorders so that place `k` holds what sorting would put there, smaller before, larger after. */
function select(values: Float64Array, k: number): void {
  let from = 0;
  let to = values.length - 1;
  while (from < to) {
    const pivot = values[(from + to) >> 1]!;
    let i = from;
    let j = to;
    while (i <= j) {
      while (values[i]! < pivot) i += 1;
      while (values[j]! > pivot) j -= 1;
      if (i > j) break;
      const swapped = values[i]!;
      values[i++] = values[j]!;
      values[j--] = swapped;
    }
    if (k <= j) to = j;
    else if (k >= i) from = i;
    else return;
  }
}
