import type { Knex } from 'knex';
import type { Log } from '../lib/log.ts';
import type { DataPaths } from '../lib/paths.ts';
import { claimInstanceKind } from './instance-kind.ts';
import { openDb } from './knex.ts';
import { migrate } from './migrate.ts';

/**
 * Opens the database of a data folder ready for use: checked, of this version's schema, of this
 * kind of instance.
 *
 * @throws {Error} when it is damaged, newer than this version, or of the other kind.
 */
export async function openChecked(
  paths: DataPaths,
  instance: 'demo' | 'production',
  log: Log,
): Promise<Knex> {
  const db = openDb(paths.database);
  try {
    const found: unknown = await db.raw('PRAGMA quick_check(1)');
    if (JSON.stringify(found) !== JSON.stringify([{ quick_check: 'ok' }])) {
      throw new Error(
        `The database ${paths.database} is damaged (${JSON.stringify(found)}). Restore the newest backup from ${paths.backups}.`,
      );
    }
    const { applied, backup } = await migrate(db, paths.backups);
    if (applied.length > 0) log.info({ event: 'migrated', applied, backup }, 'database migrated');
    await claimInstanceKind(db, instance);
    return db;
  } catch (error) {
    await db.destroy();
    throw error;
  }
}
