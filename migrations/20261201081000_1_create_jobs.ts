import type { Knex } from 'knex';

/**
 * Long work of a deposit. `params` and `result` are JSON; `tries` counts starts, so that a job that
 * keeps ending its process is stopped; `runs_alone` marks one that was running when the compute host
 * ended and may be the cause; `follow_up_due` one that is done but whose follow-up has yet to be asked for.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    CREATE TABLE jobs (
      id INTEGER PRIMARY KEY AUTOINCREMENT,
      deposit_id INTEGER NOT NULL REFERENCES deposits (id) ON DELETE CASCADE,
      kind TEXT NOT NULL,
      title TEXT NOT NULL,
      params TEXT NOT NULL,
      state TEXT NOT NULL CHECK (state IN ('queued', 'running', 'done', 'failed', 'cancelled', 'interrupted')),
      progress REAL NOT NULL DEFAULT 0 CHECK (progress BETWEEN 0 AND 1),
      phase TEXT NOT NULL DEFAULT '',
      error_code TEXT,
      error_message TEXT,
      result TEXT,
      tries INTEGER NOT NULL DEFAULT 0,
      runs_alone INTEGER NOT NULL DEFAULT 0 CHECK (runs_alone IN (0, 1)),
      follow_up_due INTEGER NOT NULL DEFAULT 0 CHECK (follow_up_due IN (0, 1)),
      started_by INTEGER NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
      created_at TEXT NOT NULL,
      started_at TEXT,
      ended_at TEXT
    ) STRICT`);
  await knex.schema.raw('CREATE INDEX jobs_by_deposit ON jobs (deposit_id, id)');
  // The scheduler reads only what waits or runs: a handful of rows however long the history.
  await knex.schema.raw(
    `CREATE INDEX jobs_waiting ON jobs (deposit_id, id) WHERE state IN ('queued', 'interrupted', 'running')`,
  );
}
export const down = (knex: Knex): Promise<void> => knex.schema.dropTable('jobs');
