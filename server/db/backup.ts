import { open, rename, rm } from 'node:fs/promises';
import { dirname } from 'node:path';
import Database from 'better-sqlite3';
import type { Knex } from 'knex';

async function syncToDisk(path: string): Promise<void> {
  const handle = await open(path, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/** Opens a copy and walks it. @throws {Error} naming what is wrong with it. */
export function verifyCopy(file: string): void {
  const copy = new Database(file, { readonly: true, fileMustExist: true });
  try {
    const found = copy.pragma('integrity_check', { simple: true });
    if (found !== 'ok') throw new Error(`${file}: the copy is damaged: ${String(found)}`);
    const orphans: unknown = copy.pragma('foreign_key_check');
    if (!Array.isArray(orphans) || orphans.length > 0)
      throw new Error(`${file}: the copy has rows that refer to nothing`);
  } finally {
    copy.close();
  }
}

/**
 * Writes a whole, compact copy of the database while it is in use, verifies it, and only then gives
 * it its name. One statement, because a stepwise copy begins again after every write by others.
 */
export async function copyDatabase(db: Knex, file: string): Promise<void> {
  const unfinished = `${file}.unfinished`;
  await rm(unfinished, { force: true });
  await db.raw('VACUUM INTO ?', [unfinished]);
  verifyCopy(unfinished);
  await syncToDisk(unfinished);
  await rename(unfinished, file);
  await syncToDisk(dirname(file));
}
