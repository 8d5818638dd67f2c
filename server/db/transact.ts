import { setTimeout as pause } from 'node:timers/promises';
import type { Knex } from 'knex';

const TRIES = 8;
const FIRST_PAUSE_MS = 15;

const isBusy = (error: unknown): boolean =>
  error instanceof Error &&
  'code' in error &&
  typeof error.code === 'string' &&
  error.code.startsWith('SQLITE_BUSY');

/**
 * Runs one short transaction, again from its start while a worker holds the lock. `work` may
 * therefore run more than once: it touches the database only.
 */
export async function transact<Result>(
  db: Knex,
  work: (trx: Knex.Transaction) => Promise<Result>,
): Promise<Result> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await db.transaction(work);
    } catch (error) {
      if (attempt === TRIES || !isBusy(error)) throw error;
      await pause(FIRST_PAUSE_MS * 2 ** (attempt - 1) * (0.5 + attempt / TRIES));
    }
  }
}
