import type { CellDetail, Screen, Subset } from '#contract/screens.ts';
import { FRAME } from '#contract/snapshots.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { populationCell } from '#workers/frame/population-cell.ts';
import { ofSupport, readAssay, readFrameCategory, readLengths, type SnapshotTables, type Support } from '#workers/frame/snapshot-tables.ts';
import { defineTask } from '#workers/task.ts';

export interface ScreenInput {
  tables: SnapshotTables;
  support: Support;
  variables: string[];
  subsets: ('group' | 'lithology' | 'weathering')[];
  groupingTableId: number | null;
  groups: { label: number; name: string; slot: number }[];
}

export interface ScreenOutput extends Pick<Screen, 'variables' | 'subsets'> {
  cells: CellDetail[];
}

interface MaskedSubset extends Subset {
  mask: Uint8Array;
}

const SURFACE = 'surface samples';

/** Every row, then each group, each logged rock and each weathering class as a subset, largest first within a kind. */
function subsetsOf(store: ColumnStore, { tables, support, subsets, groupingTableId, groups }: ScreenInput, lengths: Float64Array): MaskedSubset[] {
  const describe = (kind: Subset['kind'], key: string, label: string, slot: number | null, mask: Uint8Array): MaskedSubset => ({
    key, kind, label, slot, mask, n: mask.reduce((sum, isIn) => sum + isIn, 0), metres: lengths.reduce((sum, length, row) => sum + (mask[row] === 1 ? length : 0), 0),
  });
  const all = describe('all', 'all', support === 'drill' ? 'All intervals' : `All ${SURFACE}`, null, new Uint8Array(lengths.length).fill(1));
  const found = [all];
  if (subsets.includes('group') && groupingTableId !== null) {
    const labels = ofSupport(store, groupingTableId, 'group', tables, support);
    found.push(...groups.map(({ label, name, slot }) => describe('group', `group:${label}`, name, slot, Uint8Array.from(labels, (own) => (own === label ? 1 : 0)))));
  }
  for (const kind of ['lithology', 'weathering'] as const) {
    if (!subsets.includes(kind)) continue;
    const { codes, dictionary } = readFrameCategory(store, tables, support, kind === 'lithology' ? FRAME.lithology : FRAME.weathering);
    const levels = dictionary.map((level, code) => describe(kind, `${kind}:${level}`, level, null, Uint8Array.from(codes, (own) => (own === code ? 1 : 0))));
    found.push(...levels.filter(({ n }) => n > 0).sort((a, b) => b.metres - a.metres));
  }
  return found;
}

/** Screens each variable in each subset: the matrix of mixing verdicts with what each stands on. */
export default defineTask<ScreenInput, ScreenOutput>((input, { report, store }) => {
  const { tables, support, variables } = input;
  report('read columns', 0);
  const lengthsM = readLengths(store(), tables, support);
  const weightsM = support === 'drill' ? lengthsM : null;
  const subsets = subsetsOf(store(), input, lengthsM);
  const cells: CellDetail[] = [];
  variables.forEach((variable, place) => {
    const assay = readAssay(store(), tables, support, variable);
    subsets.forEach(({ key, label, mask }, subset) => {
      report(`screen ${variable} in ${label}`, 0.05 + (0.9 * (place + subset / subsets.length)) / variables.length);
      cells.push(populationCell({ subsetKey: key, subsetLabel: label, variable, assay, weightsM, mask }));
    });
  });
  return { variables, subsets: subsets.map(({ key, kind, label, slot, n, metres }) => ({ key, kind, label, slot, n, metres })), cells };
});
