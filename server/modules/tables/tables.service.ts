import type * as z from 'zod';
import type { ColumnInfo, readColumn } from '#contract/tables.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import type { ColumnStore, RowRange, TableDescription } from '#server/db/column-store.ts';
import { AppError, notFound, orNotFound } from '#server/lib/errors.ts';

type ReadQuery = z.output<typeof readColumn.query>;

export interface ColumnBytes {
  type: string;
  /** Of binary columns. */
  dtype: 'float64' | 'uint8' | null;
  /** Rows. */
  length: number;
  pieces: Iterable<Uint8Array>;
}

function rangeOf({ from = 0, to }: ReadQuery, nRows: number): RowRange {
  const range = { start: from, end: to ?? nRows };
  if (range.start <= range.end && range.end <= nRows) return range;
  throw new AppError(400, 'range', `Expected rows between 0 and ${nRows}, found ${range.start} to ${range.end}.`);
}

function refuseWithoutQualifiers({ name, kind }: ColumnInfo): void {
  if (kind === 'assay') return;
  throw new AppError(400, 'no-qualifiers', `Column ${name} is no assay and has no qualifiers.`);
}

/** Published tables of a deposit. A pending table, and one of another deposit, is as one that never was. */
export function createTables(store: ColumnStore) {
  function find(depositId: number, tableId: number): TableDescription {
    const table = describe(tableId);
    if (table.depositId !== depositId || table.state !== 'live') throw notFound('table');
    return table;
  }

  function describe(tableId: number): TableDescription {
    try {
      return store.describe(tableId);
    } catch (error) {
      if (error instanceof KernelError && error.code === 'no-table') throw notFound('table');
      throw error;
    }
  }

  return {
    find,
    read(depositId: number, tableId: number, name: string, query: ReadQuery): ColumnBytes {
      const table = find(depositId, tableId);
      const column = orNotFound(table.columns.find((candidate) => candidate.name === name), 'column');
      if (query.part === 'qualifiers') refuseWithoutQualifiers(column);
      const range = rangeOf(query, table.nRows);
      const length = range.end - range.start;
      if (column.kind === 'text') {
        const pieces = store.streamTextJson(tableId, name, range);
        return { type: 'application/json; charset=utf-8', dtype: null, length, pieces };
      }
      const pieces = store.streamBytes(tableId, name, query.part, range);
      const dtype = query.part === 'values' ? 'float64' : 'uint8';
      return { type: 'application/octet-stream', dtype, length, pieces };
    },
  };
}
