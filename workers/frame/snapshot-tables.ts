import { FRAME } from '#contract/snapshots.ts';
import type { ColumnStore, RowRange } from '#server/db/column-store.ts';

export type Support = 'drill' | 'surface';

/** Where the columns of a snapshot are kept. The frame holds drill rows first, then surface rows. */
export interface SnapshotTables {
  frameTableId: number;
  assayTableId: number | null;
  surfaceTableId: number | null;
  rows: number;
  surfaceRows: number;
}

/** Rows of the frame that belong to a support. */
export function supportRange({ rows, surfaceRows }: SnapshotTables, support: Support): RowRange {
  const drillRows = rows - surfaceRows;
  return support === 'drill' ? { start: 0, end: drillRows } : { start: drillRows, end: rows };
}

export interface AssayColumn {
  /** ppm; the limit where the qualifier says below or above; NaN where missing. */
  values: Float64Array;
  qualifiers: Uint8Array;
}

/** An analyte over the rows of a support. */
export function readAssay(store: ColumnStore, tables: SnapshotTables, support: Support, analyte: string): AssayColumn {
  const tableId = support === 'drill' ? tables.assayTableId : tables.surfaceTableId;
  if (tableId === null) return { values: new Float64Array(0), qualifiers: new Uint8Array(0) };
  return { values: store.readNumbers(tableId, analyte), qualifiers: store.readQualifiers(tableId, analyte) };
}

export interface CategoryColumn {
  /** Places in `dictionary`, NaN where not logged. */
  codes: Float64Array;
  dictionary: string[];
}

/** A category of the frame over the rows of a support; all NaN where the frame has no such column. */
export function readFrameCategory(store: ColumnStore, tables: SnapshotTables, support: Support, name: string): CategoryColumn {
  const range = supportRange(tables, support);
  const hasColumn = store.describe(tables.frameTableId).columns.some((column) => column.name === name);
  if (!hasColumn) return { codes: new Float64Array(range.end - range.start).fill(Number.NaN), dictionary: [] };
  return store.readCategory(tables.frameTableId, name, range);
}

/** Length of each row in metres; surface samples count one each. */
export function readLengths(store: ColumnStore, tables: SnapshotTables, support: Support): Float64Array {
  return store.readNumbers(tables.frameTableId, FRAME.length, supportRange(tables, support));
}

/** Values of a support's rows laid out over the whole frame, NaN elsewhere. */
export function overFrame(values: Float64Array, tables: SnapshotTables, support: Support): Float64Array {
  const { start } = supportRange(tables, support);
  const whole = new Float64Array(tables.rows).fill(Number.NaN);
  whole.set(values, start);
  return whole;
}

/** The rows of a support out of a column laid over the frame. */
export function ofSupport(store: ColumnStore, tableId: number, name: string, tables: SnapshotTables, support: Support): Float64Array {
  return store.readNumbers(tableId, name, supportRange(tables, support));
}
