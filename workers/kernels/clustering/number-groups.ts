import { KernelError } from '#kernels/kernel-error.ts';

/** Where the packed rows came from. */
export interface RowPlaces {
  /** Input row of each packed row; null when all rows were packed. */
  rowOf: Uint32Array | null;
  nRows: number;
}

/**
 * Labels in the fixed order of all groupings: 1..K by descending rows or weight, ties by first
 * occurrence.
 *
 * @param groupOf Any number >= 0 per packed row; below 0 = in no group.
 * @param weights Optional weight per input row.
 * @returns Label per input row; 0 = in no group or not packed.
 * @throws {KernelError} `shape`; `bad-parameter` beyond 65,534 groups.
 */
export function numberGroups(
  groupOf: ArrayLike<number>,
  { rowOf, nRows }: RowPlaces,
  weights?: ArrayLike<number>,
): Uint16Array {
  if (weights && weights.length !== nRows)
    throw new KernelError('shape', `${weights.length} weights for ${nRows} rows`);
  const inputRow = (i: number) => (rowOf ? rowOf[i]! : i);
  const weightOf = new Map<number, number>();
  for (let i = 0; i < groupOf.length; i++) {
    const group = groupOf[i]!;
    if (group < 0) continue;
    weightOf.set(group, (weightOf.get(group) ?? 0) + (weights ? weights[inputRow(i)]! : 1));
  }
  if (weightOf.size > 65_534)
    throw new KernelError('bad-parameter', `expected at most 65534 groups, found ${weightOf.size}`);
  // A Map keeps the order of first occurrence and the sort is stable.
  const order = [...weightOf].sort(([, a], [, b]) => b - a);
  const label = new Map(order.map(([group], at) => [group, at + 1]));
  const out = new Uint16Array(nRows);
  for (let i = 0; i < groupOf.length; i++) out[inputRow(i)] = label.get(groupOf[i]!) ?? 0;
  return out;
}
