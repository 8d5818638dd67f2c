import { copyFileSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { openDb } from '#server/db/knex.ts';
import { migrate } from '#server/db/migrate.ts';
import { type Env, readEnv } from '#server/lib/env.ts';
import { dataPaths } from '#server/lib/paths.ts';

export const TEST_SECRET = 'a secret that only the tests use, long enough';

/** A folder of its own below the system's temporary one. */
export function tempFolder(): { path: string; remove: () => void } {
  const path = mkdtempSync(join(tmpdir(), 'selvage-test-'));
  return { path, remove: () => rmSync(path, { recursive: true, force: true }) };
}

let template: Promise<{ file: string; remove: () => void }> | null = null;

async function makeTemplate() {
  const folder = tempFolder();
  const file = dataPaths(folder.path).database;
  const db = openDb(file);
  await migrate(db, folder.path);
  await db.raw('PRAGMA wal_checkpoint(TRUNCATE)');
  await db.destroy();
  return { file, remove: folder.remove };
}

/** Settings of an instance on a temporary folder, as `npm start` would read them. */
export const testEnv = (dataDir: string, variables: Record<string, string> = {}): Env =>
  readEnv({
    DATA_DIR: dataDir,
    SESSION_SECRET: TEST_SECRET,
    PUBLIC_URL: 'http://localhost:4310',
    LOG_LEVEL: 'info',
    ...variables,
  });

/** A data folder with a copy of a freshly migrated database; the migrations run once per test file. */
export async function tempInstance(
  variables: Record<string, string> = {},
): Promise<{ env: Env; remove: () => void }> {
  template ??= makeTemplate();
  const { file } = await template;
  const folder = tempFolder();
  const env = testEnv(folder.path, variables);
  copyFileSync(file, env.paths.database);
  return { env, remove: folder.remove };
}

/** Removes the template. */
export async function removeTemplate(): Promise<void> {
  (await template)?.remove();
  template = null;
}
