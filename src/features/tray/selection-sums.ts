import type { TrayLayers } from './tray-data.ts';

/** Mean of the rows weighted by their metres; rows without a value are left out. Null when none has one. */
export function weightedMean(values: Float64Array, weight: Float64Array, rows: Iterable<number>): number | null {
  let [sum, total] = [0, 0];
  for (const row of rows) {
    const [value, metres] = [values[row] ?? NaN, weight[row] ?? NaN];
    if (Number.isNaN(value) || !(metres > 0)) continue;
    sum += value * metres;
    total += metres;
  }
  return total > 0 ? sum / total : null;
}

export interface GroupShare {
  name: string;
  /** Null: in no group. */
  slot: number | null;
  share: number;
}

/** How the metres of some rows divide among the groups, largest share first, rows of no group last. */
export function groupShares({ frame, grouping, columns }: TrayLayers, rows: Iterable<number>): GroupShare[] {
  if (grouping === null || columns === null) return [];
  const metresOf = new Map<number, number>();
  let total = 0;
  for (const row of rows) {
    const metres = frame.weight[row] ?? 0;
    const label = columns.label[row] ?? NaN;
    metresOf.set(label, (metresOf.get(label) ?? 0) + metres);
    total += metres;
  }
  if (total === 0) return [];
  const known = grouping.groups
    .map(({ label, name, slot }) => ({ name, slot, share: (metresOf.get(label) ?? 0) / total }))
    .filter(({ share }) => share > 0)
    .sort((a, b) => b.share - a.share);
  const rest = 1 - known.reduce((sum, { share }) => sum + share, 0);
  return rest > 1e-9 ? [...known, { name: 'in no group', slot: null, share: rest }] : known;
}
