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
  const { rows, ends } = rowsByGroup(labels, groupOf, labelOf.length);
  const values = new Float64Array(labelOf.length * nParts);
  const overall = new Float64Array(nParts);
  for (const [part, column] of clrColumns.entries()) {
    checkPart(column, labels, part);
    overall[part] = medianOf(column, rows, weights);
    for (let g = 0; g < labelOf.length; g++) {
      const own = rows.subarray(g === 0 ? 0 : ends[g - 1], ends[g]);
      values[g * nParts + part] = medianOf(column, own, weights) - overall[part];
    }
  }
  return { labels: labelOf, values, overall };
}

/** Labelled rows, group after group, and where each group ends. */
function rowsByGroup(
  labels: Labels,
  groupOf: Uint16Array,
  k: number,
): { rows: Uint32Array; ends: Uint32Array } {
  const ends = new Uint32Array(k);
  for (let row = 0; row < labels.length; row++)
    if (labels[row] !== 0) ends[groupOf[labels[row]!]!]! += 1;
  const next = new Uint32Array(k);
  for (let g = 1; g < k; g++) {
    ends[g]! += ends[g - 1]!;
    next[g] = ends[g - 1]!;
  }
  const rows = new Uint32Array(ends[k - 1]!);
  for (let row = 0; row < labels.length; row++)
    if (labels[row] !== 0) rows[next[groupOf[labels[row]!]!]!++] = row;
  return { rows, ends };
}

function checkPart(column: Float64Array, labels: Labels, part: number): void {
  if (column.length !== labels.length)
    throw new KernelError(
      'shape',
      `${column.length} rows of part ${part}, ${labels.length} labels`,
      { col: part },
    );
  for (let row = 0; row < column.length; row++) {
    if (Math.abs(column[row]!) === Infinity && labels[row] !== 0) {
      throw new KernelError(
        'not-finite',
        `expected a finite clr value, found ${column[row]} in row ${row}, part ${part}`,
        { row, col: part },
      );
    }
  }
}

/** Median of a column over some rows, NaN left out; NaN when nothing is left. */
function medianOf(
  column: Float64Array,
  rows: Uint32Array,
  weights: Float64Array | undefined,
): number {
  const picked = new Float64Array(rows.length);
  const lengths = weights ? new Float64Array(rows.length) : null;
  let count = 0;
  for (let i = 0; i < rows.length; i++) {
    const value = column[rows[i]!]!;
    if (value !== value) continue;
    if (lengths && weights) lengths[count] = weights[rows[i]!]!;
    picked[count++] = value;
  }
  if (count === 0) return NaN;
  if (lengths)
    return (
      weightedQuantiles(picked.subarray(0, count), lengths.subarray(0, count), [0.5])[0] ?? NaN
    );
  return middle(picked.subarray(0, count));
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
