import { mkdir } from 'node:fs/promises';
import { join } from 'node:path';
import type { Knex } from 'knex';
import { MIGRATIONS_DIR } from '../lib/paths.ts';
import { copyDatabase } from './backup.ts';
import { StemMigrationSource } from './migration-source.ts';

const TABLE = 'knex_migrations';

export interface Migrated {
  applied: string[];
  /** The copy made before an existing database was changed. */
  backup: string | null;
}

/** The database was made by a newer version, whose tables this one does not know. */
export class NewerSchemaError extends Error {
  constructor(unknown: readonly string[]) {
    super(
      `The database was made by a newer version of Selvage (${unknown.join(', ')}). Start that version, or restore a backup made before.`,
    );
    this.name = 'NewerSchemaError';
  }
}

async function appliedTo(db: Knex): Promise<string[]> {
  if (!(await db.schema.hasTable(TABLE))) return [];
  return (await db<{ id: number; name: string }>(TABLE).orderBy('id')).map((row) => row.name);
}

const stamp = (): string => new Date().toISOString().replaceAll(/[:.]/g, '-');

/**
 * Brings the database to this version's schema, in one transaction: all of it, or none. An existing
 * database is copied first.
 *
 * @throws {NewerSchemaError} when the database knows migrations this version does not.
 */
export async function migrate(
  db: Knex,
  backupsDir: string,
  migrationsDir = MIGRATIONS_DIR,
): Promise<Migrated> {
  const migrationSource = new StemMigrationSource(migrationsDir);
  const known = (await migrationSource.getMigrations()).map((file) =>
    migrationSource.getMigrationName(file),
  );
  const before = await appliedTo(db);
  const unknown = before.filter((name) => !known.includes(name));
  if (unknown.length > 0) throw new NewerSchemaError(unknown);
  const pending = known.filter((name) => !before.includes(name));
  if (pending.length === 0) return { applied: [], backup: null };

  let backup: string | null = null;
  if (before.length > 0) {
    await mkdir(backupsDir, { recursive: true });
    backup = join(backupsDir, `before-migration-${stamp()}.sqlite`);
    await copyDatabase(db, backup);
  }
  await db.migrate.latest({ migrationSource });
  const orphans: unknown = await db.raw('PRAGMA foreign_key_check');
  if (Array.isArray(orphans) && orphans.length > 0) {
    throw new Error(
      `after migrating, ${orphans.length} rows refer to nothing; the copy made before is ${backup ?? 'not needed: the database was new'}`,
    );
  }
  return { applied: pending, backup };
}
