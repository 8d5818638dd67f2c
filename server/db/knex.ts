import type { Database } from 'better-sqlite3';
import knex, { type Knex } from 'knex';
import { StemMigrationSource } from './migration-source.ts';
import { MIGRATIONS_DIR } from '../lib/paths.ts';
import { applyPragmas, SERVER_BUSY_TIMEOUT_MS } from './pragmas.ts';

/**
 * Knex settings for the database file. One connection: SQLite has one writer, and the driver is
 * synchronous, so more would only wait for one another.
 */
export const knexConfig = (
  filename: string,
  busyTimeoutMs = SERVER_BUSY_TIMEOUT_MS,
): Knex.Config => ({
  client: 'better-sqlite3',
  connection: { filename },
  useNullAsDefault: true,
  pool: {
    min: 1,
    max: 1,
    afterCreate: (
      connection: Database,
      done: (error: Error | null, connection: Database) => void,
    ) => {
      try {
        applyPragmas(connection, busyTimeoutMs);
        done(null, connection);
      } catch (error) {
        done(error instanceof Error ? error : new Error(String(error)), connection);
      }
    },
  },
  migrations: { migrationSource: new StemMigrationSource(MIGRATIONS_DIR) },
});

export const openDb = (filename: string, busyTimeoutMs?: number): Knex =>
  knex(knexConfig(filename, busyTimeoutMs));
