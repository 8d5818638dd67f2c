import {
  createSortedRowModel,
  rowSortingFeature,
  tableFeatures,
  useTable,
  type ColumnDef,
  type SortingState,
} from '@tanstack/react-table';
import { useMemo, useState } from 'react';
import type { Cell } from '#src/lib/delimited.ts';
import { compareCells, isMissing, valueOf, type Column } from './column.ts';

const features = tableFeatures({ rowSortingFeature, sortedRowModel: createSortedRowModel() });

export interface SortBy {
  /** Header of a column. */
  header: string;
  isDescending?: boolean;
}

export interface TableModel<Row> {
  /** In the order shown. */
  rows: { key: string; row: Row }[];
  sortOf: (column: Column<Row>) => 'ascending' | 'descending' | 'none';
  toggleSort: (column: Column<Row>) => void;
}

const columnId = <Row>(column: Column<Row>): string => `${column.header}|${column.unit ?? ''}`;

function definition<Row extends object>(column: Column<Row>): ColumnDef<typeof features, Row> {
  return {
    id: columnId(column),
    // What is missing is undefined to the model, which keeps it last in either direction.
    accessorFn: (row) => {
      const value = valueOf(column, row);
      return isMissing(value) ? undefined : value;
    },
    enableSorting: column.isSortable !== false && !column.isControl,
    sortUndefined: 'last',
    sortFn: (a, b, id) => compareCells(a.getValue<Cell>(id), b.getValue<Cell>(id)),
  };
}

/** Sorting over TanStack Table; the third press of a header gives the order the rows came in. */
export function useTableModel<Row extends object>(
  columns: readonly Column<Row>[],
  rows: readonly Row[],
  rowKey: ((row: Row, index: number) => string | number) | undefined,
  firstSort: SortBy | undefined,
): TableModel<Row> {
  const [sorting, setSorting] = useState<SortingState>(() => {
    const column = columns.find(({ header }) => header === firstSort?.header);
    return column ? [{ id: columnId(column), desc: firstSort?.isDescending ?? false }] : [];
  });
  const definitions = useMemo(() => columns.map(definition), [columns]);
  const table = useTable({
    features,
    columns: definitions,
    data: rows,
    getRowId: (row, index) => String(rowKey ? rowKey(row, index) : index),
    state: { sorting },
    onSortingChange: setSorting,
    enableMultiSort: false,
  });
  const sorted = table.getRowModel().rows;
  return {
    rows: useMemo(() => sorted.map(({ id, original }) => ({ key: id, row: original })), [sorted]),
    sortOf: (column) => {
      const state = sorting.find(({ id }) => id === columnId(column));
      return state ? (state.desc ? 'descending' : 'ascending') : 'none';
    },
    toggleSort: (column) => table.getColumn(columnId(column))?.toggleSorting(),
  };
}
