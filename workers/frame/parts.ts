import { replaceBelowLimit } from '#kernels/compositions/replacement.ts';
import { rowUse, type RowUse } from '#kernels/compositions/row-use.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { readAssay, type SnapshotTables, type Support } from './snapshot-tables.ts';

export interface PartsInput {
  tables: SnapshotTables;
  support: Support;
  /** The suite's analytes, in its order. */
  parts: string[];
  replacementFraction: number;
}

/** The parts of a composition, ready for logarithms. */
export interface PartColumns extends RowUse {
  /** One per part: ppm > 0, NaN where missing. */
  columns: Float64Array[];
  /** Values put in place of values below detection, over all values used. */
  replacedShare: number;
  notes: string[];
}

/** Reads a suite's analytes, replaces values below detection, and sorts out which rows can be used. */
export function readParts(store: ColumnStore, { tables, support, parts, replacementFraction }: PartsInput, onProgress: (share: number) => void): PartColumns {
  const states: Uint8Array[] = [];
  const notes: string[] = [];
  let replaced = 0;
  const columns = parts.map((part, place) => {
    const { values, qualifiers } = readAssay(store, tables, support, part);
    states.push(qualifiers);
    const column = replaceBelowLimit(values, qualifiers, { fraction: replacementFraction, out: values });
    replaced += column.nReplaced;
    notes.push(...column.notes.map((note) => `${part}: ${note}`));
    onProgress((place + 1) / parts.length);
    return column.values;
  });
  const use = rowUse(states);
  const nUsed = (use.nFit + use.nScoredOnly) * parts.length;
  return { columns, ...use, replacedShare: nUsed > 0 ? Math.min(1, replaced / nUsed) : 0, notes };
}

/** Centred log-ratios of the usable rows, in place of the parts; NaN elsewhere. */
export function toClr({ columns, use }: PartColumns): Float64Array[] {
  for (let row = 0; row < use.length; row++) {
    let sum = 0;
    for (const column of columns) sum += Math.log(column[row] ?? Number.NaN);
    const mean = use[row] === 0 ? Number.NaN : sum / columns.length;
    for (const column of columns) column[row] = Math.log(column[row] ?? Number.NaN) - mean;
  }
  return columns;
}
