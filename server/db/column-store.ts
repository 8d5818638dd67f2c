import Database from 'better-sqlite3';
import * as z from 'zod';
import { ColumnMeta, type ColumnInfo, type ColumnKind } from '#contract/tables.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import {
  bytesOf, checkAssay, checkCodes, checkKind, checkLength, checkRange, type RowRange,
} from './column-store-format.ts';
import { readBytes, readInto, readTextJson, readTexts, type Slice } from './column-store-read.ts';
import {
  prepareStatements, type ColumnRow, type ColumnStoreStatements, type TableRow,
} from './column-store-statements.ts';
import {
  addColumn, inShortTransactions, writeNumberChunks, writeTextChunks, type NewColumn,
} from './column-store-write.ts';
import { SERVER_BUSY_TIMEOUT_MS, WORKER_BUSY_TIMEOUT_MS, applyPragmas, applyReadOnlyPragmas } from './pragmas.ts';

export { QUALIFIER } from '#contract/tables.ts';
export { CHUNK_ROWS, type RowRange } from './column-store-format.ts';

export interface NewTable {
  depositId: number;
  nRows: number;
  /** What the table is for, in words: `assays revision 3`, `scores`. */
  purpose: string;
  /** The job that writes it; its pending tables go when it fails. */
  jobId: number | null;
}

export interface NumberColumn {
  name: string;
  unit?: string;
  meta?: ColumnMeta;
}

export interface AssayColumn extends NumberColumn {
  unit: string;
}

export interface CategoryColumn {
  name: string;
  meta?: ColumnMeta;
}

export interface TableDescription {
  id: number;
  depositId: number;
  nRows: number;
  purpose: string;
  state: 'pending' | 'live';
  columns: ColumnInfo[];
}

export interface Category {
  /** Places in `dictionary`; NaN where there is none. */
  codes: Float64Array;
  dictionary: string[];
}

const NUMERIC: readonly ColumnKind[] = ['number', 'assay', 'category'];
const Dictionary = z.array(z.string());

const dictionaryOf = ({ dictionary }: ColumnRow): string[] | null =>
  dictionary === null ? null : Dictionary.parse(JSON.parse(dictionary));

const toColumnInfo = (row: ColumnRow): ColumnInfo => ({
  name: row.name,
  kind: row.kind,
  unit: row.unit,
  dictionary: dictionaryOf(row),
  meta: row.meta === null ? null : ColumnMeta.parse(JSON.parse(row.meta)),
});

/**
 * Tables of columns: a table is written while `pending`, seen by others once `live`, and never
 * changed after that. Faults of use throw KernelError: `no-table`, `no-column`, `bad-kind`, `shape`,
 * `range`, `bad-qualifier`, `bad-code`, `live-table`, `duplicate-column`, `incomplete`.
 */
export class ColumnStore {
  readonly db: Database.Database;
  readonly #statements: ColumnStoreStatements;

  constructor(db: Database.Database) {
    this.db = db;
    this.#statements = prepareStatements(db);
  }

  /** Makes an empty, pending table and answers its id. */
  createTable({ depositId, nRows, purpose, jobId }: NewTable): number {
    const at = new Date().toISOString();
    const made = this.#statements.insertTable.run(depositId, nRows, purpose, jobId, at);
    return Number(made.lastInsertRowid);
  }

  /** Plain numbers, NaN where there is none; coordinates, depths, scores. */
  writeNumbers(tableId: number, column: NumberColumn, values: Float64Array): void {
    this.#writeNumeric(tableId, { ...column, kind: 'number' }, values, null);
  }

  /** Assays with what each number means; a passed limit stays in the value's place. */
  writeAssay(tableId: number, column: AssayColumn, values: Float64Array, qualifiers: Uint8Array): void {
    checkLength(column.name, qualifiers.length, values.length);
    checkAssay(column.name, values, qualifiers);
    this.#writeNumeric(tableId, { ...column, kind: 'assay' }, values, qualifiers);
  }

  writeCategory(tableId: number, column: CategoryColumn, codes: Float64Array, dictionary: string[]): void {
    checkCodes(column.name, codes, dictionary.length);
    this.#writeNumeric(tableId, { ...column, kind: 'category', dictionary }, codes, null);
  }

  writeText(tableId: number, column: CategoryColumn, texts: readonly string[]): void {
    const table = this.#table(tableId);
    checkLength(column.name, texts.length, table.n_rows);
    writeTextChunks(this.#statements, addColumn(this.#statements, table, { ...column, kind: 'text' }), texts);
  }

  /** @throws {KernelError} `no-table`. */
  describe(tableId: number): TableDescription {
    const { id, deposit_id, n_rows, purpose, state } = this.#table(tableId);
    const columns = this.#statements.columns.all(tableId).map(toColumnInfo);
    return { id, depositId: deposit_id, nRows: n_rows, purpose, state, columns };
  }

  /**
   * A number, assay or category column as float64. A whole column comes in shared memory, so that it
   * passes between threads without a copy.
   */
  readNumbers(tableId: number, name: string, range?: RowRange): Float64Array {
    const { slice } = this.#slice(tableId, name, NUMERIC, 'values', range);
    const values = this.#hold(slice, range === undefined);
    readInto(this.#statements, slice, bytesOf(values));
    return values;
  }

  readQualifiers(tableId: number, name: string, range?: RowRange): Uint8Array {
    const { slice } = this.#slice(tableId, name, ['assay'], 'qualifiers', range);
    const nRows = slice.range.end - slice.range.start;
    const flags = new Uint8Array(range === undefined ? new SharedArrayBuffer(nRows) : new ArrayBuffer(nRows));
    readInto(this.#statements, slice, flags);
    return flags;
  }

  readCategory(tableId: number, name: string, range?: RowRange): Category {
    const { column, slice } = this.#slice(tableId, name, ['category'], 'values', range);
    const codes = this.#hold(slice, range === undefined);
    readInto(this.#statements, slice, bytesOf(codes));
    return { codes, dictionary: dictionaryOf(column) ?? [] };
  }

  readText(tableId: number, name: string, range?: RowRange): string[] {
    return readTexts(this.#statements, this.#slice(tableId, name, ['text'], 'values', range).slice);
  }

  /** Whole columns in the order of `names`. */
  readMany(tableId: number, names: readonly string[]): Float64Array[] {
    return names.map((name) => this.readNumbers(tableId, name));
  }

  /** Stored bytes of a numeric column, piece by piece, to send on as they are. */
  streamBytes(tableId: number, name: string, part: Slice['part'], range?: RowRange): Iterable<Uint8Array> {
    const kinds: readonly ColumnKind[] = part === 'values' ? NUMERIC : ['assay'];
    return readBytes(this.#statements, this.#slice(tableId, name, kinds, part, range).slice);
  }

  /** A text column as the pieces of one JSON array. */
  streamTextJson(tableId: number, name: string, range?: RowRange): Iterable<Uint8Array> {
    return readTextJson(this.#statements, this.#slice(tableId, name, ['text'], 'values', range).slice);
  }

  publish(tableId: number): void {
    this.#table(tableId);
    this.#statements.setState.run('live', tableId);
  }

  /** Hides the table at once, then removes it bit by bit; an interrupted removal leaves it hidden. */
  dropTable(tableId: number): void {
    this.#statements.setState.run('pending', tableId);
    inShortTransactions(this.db, () => this.#statements.deleteChunks.run(tableId).changes > 0);
    this.#statements.deleteTable.run(tableId);
  }

  /** Drops what a job began and did not publish. */
  dropPending(jobId: number): void {
    for (const { id } of this.#statements.pendingOfJob.all(jobId)) this.dropTable(id);
  }

  /** Drops what no job will publish any more: the job has ended, or a day has passed without one. */
  dropLeftovers(): void {
    const aDayAgo = new Date(Date.now() - 86_400_000).toISOString();
    for (const { id } of this.#statements.leftovers.all(aDayAgo)) this.dropTable(id);
  }

  close(): void {
    this.db.close();
  }

  #writeNumeric(tableId: number, column: NewColumn, values: Float64Array, qualifiers: Uint8Array | null): void {
    const table = this.#table(tableId);
    checkLength(column.name, values.length, table.n_rows);
    const columnId = addColumn(this.#statements, table, column);
    writeNumberChunks(this.db, this.#statements, columnId, values, qualifiers);
  }

  #hold({ range }: Slice, isShared: boolean): Float64Array {
    const nBytes = (range.end - range.start) * Float64Array.BYTES_PER_ELEMENT;
    return new Float64Array(isShared ? new SharedArrayBuffer(nBytes) : new ArrayBuffer(nBytes));
  }

  #table(tableId: number): TableRow {
    const table = this.#statements.table.get(tableId);
    if (!table) throw new KernelError('no-table', `there is no table ${tableId}`);
    return table;
  }

  #slice(tableId: number, name: string, kinds: readonly ColumnKind[], part: Slice['part'], range?: RowRange) {
    const table = this.#table(tableId);
    const column = this.#statements.column.get(tableId, name);
    if (!column) throw new KernelError('no-column', `table ${tableId} has no column ${name}`);
    checkKind(name, column.kind, kinds);
    const rows = range ?? { start: 0, end: table.n_rows };
    checkRange(rows, table.n_rows);
    const slice: Slice = { columnId: column.id, nRows: table.n_rows, range: rows, part };
    return { column, slice };
  }
}

/** Opens a connection of its own with the project's pragmas; the caller closes it. */
export function openColumnStore(databaseFile: string, { readonly }: { readonly: boolean }): ColumnStore {
  const db = new Database(databaseFile, { readonly, fileMustExist: true });
  // The server reads on its own thread and must not wait there; a worker may.
  if (readonly) applyReadOnlyPragmas(db, SERVER_BUSY_TIMEOUT_MS);
  else applyPragmas(db, WORKER_BUSY_TIMEOUT_MS);
  return new ColumnStore(db);
}
