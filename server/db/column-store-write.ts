import type Database from 'better-sqlite3';
import type { ColumnKind, ColumnMeta } from '#contract/tables.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { CHUNK_ROWS, bytesOf, chunkCount } from './column-store-format.ts';
import type { ColumnStoreStatements, TableRow } from './column-store-statements.ts';

/** A write lock is held about this long: everybody else waits for it synchronously. */
const BATCH_MS = 15;

export interface NewColumn {
  name: string;
  kind: ColumnKind;
  unit?: string | undefined;
  dictionary?: readonly string[];
  meta?: ColumnMeta | undefined;
}

const asJson = (value: unknown): string | null => (value === undefined ? null : JSON.stringify(value));

/** Runs `step` until it answers false, in as many short transactions as that takes. */
export function inShortTransactions(db: Database.Database, step: () => boolean): void {
  let goesOn = true;
  const batch = db.transaction(() => {
    const startedAt = performance.now();
    do goesOn = step();
    while (goesOn && performance.now() - startedAt < BATCH_MS);
  });
  while (goesOn) batch.immediate();
}

/** @throws {KernelError} `live-table`, `duplicate-column`. */
export function addColumn(statements: ColumnStoreStatements, table: TableRow, column: NewColumn): number {
  if (table.state === 'live') {
    throw new KernelError('live-table', `table ${table.id} is published and cannot be changed`);
  }
  if (statements.column.get(table.id, column.name)) {
    throw new KernelError('duplicate-column', `table ${table.id} already has a column ${column.name}`);
  }
  const { name, kind, unit, dictionary, meta } = column;
  const added = statements.insertColumn.run(
    table.id, name, kind, unit ?? null, asJson(dictionary), asJson(meta),
  );
  return Number(added.lastInsertRowid);
}

/** Writes numbers, and qualifiers beside them, from the arrays' own memory. */
export function writeNumberChunks(
  db: Database.Database,
  statements: ColumnStoreStatements,
  columnId: number,
  values: Float64Array,
  qualifiers: Uint8Array | null,
): void {
  const count = chunkCount(values.length);
  let chunkNo = 0;
  inShortTransactions(db, () => {
    if (chunkNo >= count) return false;
    const start = chunkNo * CHUNK_ROWS;
    const end = start + CHUNK_ROWS;
    const flags = qualifiers?.subarray(start, end) ?? null;
    statements.insertChunk.run(columnId, chunkNo, flags, bytesOf(values.subarray(start, end)));
    chunkNo += 1;
    return chunkNo < count;
  });
}

/** Writes texts; each chunk is turned into JSON before the lock is taken. */
export function writeTextChunks(
  statements: ColumnStoreStatements,
  columnId: number,
  texts: readonly string[],
): void {
  for (let chunkNo = 0; chunkNo < chunkCount(texts.length); chunkNo++) {
    const start = chunkNo * CHUNK_ROWS;
    const json = Buffer.from(JSON.stringify(texts.slice(start, start + CHUNK_ROWS)));
    statements.insertChunk.run(columnId, chunkNo, null, json);
  }
}
