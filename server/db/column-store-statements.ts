import type Database from 'better-sqlite3';
import type { ColumnKind } from '#contract/tables.ts';

export interface TableRow {
  id: number;
  deposit_id: number;
  n_rows: number;
  purpose: string;
  job_id: number | null;
  state: 'pending' | 'live';
}

export interface ColumnRow {
  id: number;
  name: string;
  kind: ColumnKind;
  unit: string | null;
  dictionary: string | null;
  meta: string | null;
}

type NewTable = [depositId: number, nRows: number, purpose: string, jobId: number | null, at: string];
type NewColumn = [
  tableId: number, name: string, kind: ColumnKind, unit: string | null, dictionary: string | null, meta: string | null,
];
type NewChunk = [columnId: number, chunkNo: number, qualifiers: Uint8Array | null, values: Uint8Array];
type ChunkSpan = [columnId: number, firstChunk: number, lastChunk: number];

const COLUMN_FIELDS = 'id, name, kind, unit, dictionary, meta';
const CHUNKS = 'FROM column_chunks WHERE column_id = ? AND chunk_no BETWEEN ? AND ? ORDER BY chunk_no';
const INSERT_CHUNK = 'INSERT INTO column_chunks (column_id, chunk_no, qualifier_bytes, value_bytes)';
// A few rows at a time, so that no delete holds the lock for long.
const DELETE_CHUNKS = `DELETE FROM column_chunks WHERE rowid IN (
  SELECT ch.rowid FROM columns co JOIN column_chunks ch ON ch.column_id = co.id WHERE co.table_id = ? LIMIT 4)`;

const LEFTOVERS = `SELECT ct.id FROM column_tables ct LEFT JOIN jobs ON jobs.id = ct.job_id
  WHERE ct.state = 'pending' AND (jobs.state IN ('done', 'failed', 'cancelled') OR (jobs.id IS NULL AND ct.created_at < ?))`;

/** Every statement of the column store, prepared once per connection. */
export const prepareStatements = (db: Database.Database) => ({
  insertTable: db.prepare<NewTable>(
    `INSERT INTO column_tables (deposit_id, n_rows, purpose, job_id, created_at, state) VALUES (?, ?, ?, ?, ?, 'pending')`,
  ),
  table: db.prepare<[number], TableRow>('SELECT * FROM column_tables WHERE id = ?'),
  pendingOfJob: db.prepare<[number], { id: number }>(
    `SELECT id FROM column_tables WHERE job_id = ? AND state = 'pending'`,
  ),
  leftovers: db.prepare<[string], { id: number }>(LEFTOVERS),
  setState: db.prepare<['pending' | 'live', number]>('UPDATE column_tables SET state = ? WHERE id = ?'),
  deleteTable: db.prepare<[number]>('DELETE FROM column_tables WHERE id = ?'),
  insertColumn: db.prepare<NewColumn>(
    'INSERT INTO columns (table_id, name, kind, unit, dictionary, meta) VALUES (?, ?, ?, ?, ?, ?)',
  ),
  columns: db.prepare<[number], ColumnRow>(`SELECT ${COLUMN_FIELDS} FROM columns WHERE table_id = ? ORDER BY id`),
  column: db.prepare<[number, string], ColumnRow>(
    `SELECT ${COLUMN_FIELDS} FROM columns WHERE table_id = ? AND name = ?`,
  ),
  insertChunk: db.prepare<NewChunk>(`${INSERT_CHUNK} VALUES (?, ?, ?, ?)`),
  values: db.prepare<ChunkSpan, Buffer>(`SELECT value_bytes ${CHUNKS}`).pluck(),
  qualifiers: db.prepare<ChunkSpan, Buffer | null>(`SELECT qualifier_bytes ${CHUNKS}`).pluck(),
  deleteChunks: db.prepare<[number]>(DELETE_CHUNKS),
});

export type ColumnStoreStatements = ReturnType<typeof prepareStatements>;
