import type { Database } from 'better-sqlite3';

/**
 * Settings of every connection to the database. The driver opens an existing WAL file with
 * `synchronous=NORMAL`, which may lose acknowledged commits at power loss, so FULL is set each time.
 */
export const PRAGMAS = {
  journal_mode: 'wal',
  synchronous: 2, // FULL
  foreign_keys: 1,
  trusted_schema: 0,
} as const;

/** A lock is waited for inside the driver, which blocks the thread: short on the server's own thread. */
export const SERVER_BUSY_TIMEOUT_MS = 250;
/** Workers and scripts block nobody but themselves. */
export const WORKER_BUSY_TIMEOUT_MS = 5_000;

/**
 * Sets the pragmas on a connection and reads them back.
 *
 * @throws {Error} when the database does not take one of them.
 */
export function applyPragmas(connection: Database, busyTimeoutMs: number): void {
  connection.pragma(`busy_timeout = ${busyTimeoutMs}`);
  for (const [name, expected] of Object.entries(PRAGMAS)) {
    connection.pragma(`${name} = ${expected}`);
    const found = connection.pragma(name, { simple: true });
    if (found !== expected) {
      throw new Error(`database setting ${name}: expected ${expected}, found ${String(found)}`);
    }
  }
}

/** A connection only read from cannot change the journal mode; the rest is set and checked alike. */
export function applyReadOnlyPragmas(connection: Database, busyTimeoutMs: number): void {
  connection.pragma(`busy_timeout = ${busyTimeoutMs}`);
  connection.pragma(`trusted_schema = ${PRAGMAS.trusted_schema}`);
  connection.pragma(`foreign_keys = ${PRAGMAS.foreign_keys}`);
  connection.pragma(`synchronous = ${PRAGMAS.synchronous}`);
}
