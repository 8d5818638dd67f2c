import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Database from 'better-sqlite3';
import knex from 'knex';
import { openColumnStore, type ColumnStore } from '#server/db/column-store.ts';
import { WORKER_BUSY_TIMEOUT_MS, applyPragmas } from '#server/db/pragmas.ts';
import * as jobs from '../../../migrations/20261201081000_1_create_jobs.ts';
import * as columnStore from '../../../migrations/20261201081000_2_create_column_store.ts';

export interface ColumnDatabase {
  folder: string;
  file: string;
  store: ColumnStore;
  remove: () => void;
}

/** A new database file with the tables of jobs and columns, deposits 1 and 2, and an open store. */
export async function columnDatabase(): Promise<ColumnDatabase> {
  const folder = mkdtempSync(join(tmpdir(), 'selvage-columns-'));
  const file = join(folder, 'selvage.sqlite');
  const db = new Database(file);
  applyPragmas(db, WORKER_BUSY_TIMEOUT_MS);
  db.exec('CREATE TABLE users (id INTEGER PRIMARY KEY); INSERT INTO users VALUES (1)');
  db.exec('CREATE TABLE deposits (id INTEGER PRIMARY KEY); INSERT INTO deposits VALUES (1), (2)');
  db.close();
  const schema = knex({ client: 'better-sqlite3', connection: { filename: file }, useNullAsDefault: true });
  await jobs.up(schema);
  await columnStore.up(schema);
  await schema.destroy();
  const store = openColumnStore(file, { readonly: false });
  const remove = (): void => {
    store.close();
    rmSync(folder, { recursive: true });
  };
  return { folder, file, store, remove };
}
