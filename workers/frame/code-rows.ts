import { UNASSIGNED } from '#contract/domains.ts';
import { FRAME } from '#contract/snapshots.ts';
import { assignDomains, type GroupRule } from '#kernels/recipe/assign-domains.ts';
import type { Category } from '#kernels/tables/category.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import type { CodeRow } from './code-lines.ts';
import { ofSupport, readFrameCategory, readLengths, supportRange, type SnapshotTables, type Support } from './snapshot-tables.ts';

export interface CodeRowsInput {
  snapshotId: string;
  tables: SnapshotTables;
  support: Support;
  groupingTableId: number;
  zoneTableId: number | null;
  zoneAnalytes: string[];
  rules: { code: string; name: string; groupLabels: number[] }[];
}

/** Frame column of a zone run that tells whether a row lies in a zone of an analyte. */
export const zoneColumn = (analyte: string): string => `zone of ${analyte}`;

/** One code for every row by its group, UNASSIGNED included. */
export function domainsOf(groups: Float64Array, rules: readonly GroupRule[], lengthsM: Float64Array): Category {
  return assignDomains(Int32Array.from(groups, (group) => (Number.isNaN(group) ? 0 : group)), rules, lengthsM).domains;
}

/** Every row of the support with its code, in stored order: by hole, then by depth. */
export function readCodeRows(store: ColumnStore, input: CodeRowsInput): CodeRow[] {
  const { tables, support, groupingTableId, zoneTableId, zoneAnalytes, rules } = input;
  const range = supportRange(tables, support);
  const groups = ofSupport(store, groupingTableId, 'group', tables, support);
  const memberships = ofSupport(store, groupingTableId, 'membership', tables, support);
  const lengths = readLengths(store, tables, support);
  const zones = zoneTableId === null ? [] : zoneAnalytes.map((analyte) => ofSupport(store, zoneTableId, zoneColumn(analyte), tables, support));
  const { levels, codes } = domainsOf(groups, rules, lengths);
  const names = support === 'drill' ? holeNames(store, tables) : store.readText(tables.frameTableId, FRAME.sample, range);
  const from = store.readNumbers(tables.frameTableId, FRAME.from, range);
  const to = store.readNumbers(tables.frameTableId, FRAME.to, range);
  return Array.from(groups, (group, i) => ({
    hole: names[i] ?? '', fromM: from[i] ?? Number.NaN, toM: to[i] ?? Number.NaN, lengthM: lengths[i] ?? 0, code: levels[codes[i] ?? -1] ?? UNASSIGNED, group, membership: memberships[i] ?? Number.NaN,
    deleterious: zoneAnalytes.filter((_, place) => zones[place]?.[i] === 1),
  }));
}

function holeNames(store: ColumnStore, tables: SnapshotTables): string[] {
  const { codes, dictionary } = readFrameCategory(store, tables, 'drill', FRAME.hole);
  return Array.from(codes, (code) => dictionary[code] ?? '');
}
