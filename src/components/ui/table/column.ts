import type { ReactNode } from 'react';
import type { Cell } from '#src/lib/delimited.ts';

/** One column of a table. */
export interface Column<Row> {
  header: string;
  /** In the header, after the name; never in the cells. */
  unit?: string;
  cell: (row: Row) => ReactNode;
  /** What sorting, copying and CSV use. Needed where `cell` gives more than text; null sorts last. */
  value?: (row: Row) => Cell;
  /** Numbers stand right. */
  align?: 'left' | 'right' | 'center';
  /** The column that names its row; once a table. */
  rowHeader?: boolean;
  /** Hole ids, codes, depths of single intervals, raw file values. */
  isMono?: boolean;
  /** Width in rem. Long tables keep their widths while rows go by, so give one to all but the last. */
  widthRem?: number;
  /** Stays on one line: dates, intervals. Numbers do anyway. */
  isWhole?: boolean;
  /** False: no sort button. */
  isSortable?: boolean;
  /** Not in CSV and TSV: buttons and other controls. */
  isControl?: boolean;
}

/** The value of a cell for sorting and files. */
export function valueOf<Row>(column: Column<Row>, row: Row): Cell {
  if (column.value) return column.value(row);
  const shown = column.cell(row);
  return typeof shown === 'string' || typeof shown === 'number' ? shown : null;
}

/** Numbers by size, texts as people order them (hole 9 before hole 10); what is missing comes last by the caller. */
export function compareCells(a: Cell, b: Cell): number {
  if (typeof a === 'number' && typeof b === 'number') return a - b;
  return collator.compare(String(a), String(b));
}

const collator = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });

export const isMissing = (cell: Cell): boolean =>
  cell === null ||
  cell === undefined ||
  cell === '' ||
  (typeof cell === 'number' && !Number.isFinite(cell));

const headerOf = <Row>({ header, unit }: Column<Row>): string =>
  unit ? `${header} (${unit})` : header;

/** Header and cells of the columns that hold data, for files and the clipboard. */
export function tableCells<Row>(
  columns: readonly Column<Row>[],
  rows: readonly Row[],
): { header: string[]; cells: Cell[][] } {
  const kept = columns.filter(({ isControl }) => !isControl);
  return {
    header: kept.map(headerOf),
    cells: rows.map((row) => kept.map((column) => valueOf(column, row))),
  };
}
