import type { Knex } from 'knex';

/** What the service keeps for itself: failed tries, answers to repeated requests, facts of the instance. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(
    'CREATE TABLE throttles (key TEXT PRIMARY KEY, points INTEGER NOT NULL DEFAULT 0, expire INTEGER) STRICT',
  );
  await knex.schema.raw(`
    CREATE TABLE idempotency_keys (
      user_id INTEGER NOT NULL REFERENCES users (id) ON DELETE CASCADE,
      endpoint TEXT NOT NULL,
      key TEXT NOT NULL,
      request_hash TEXT NOT NULL,
      status INTEGER,
      body TEXT,
      expires_at TEXT NOT NULL,
      PRIMARY KEY (user_id, endpoint, key)
    ) STRICT`);
  await knex.schema.raw('CREATE INDEX idempotency_keys_by_expiry ON idempotency_keys (expires_at)');
  await knex.schema.raw(
    'CREATE TABLE instance_facts (key TEXT PRIMARY KEY, value TEXT NOT NULL) STRICT',
  );
}

export async function down(knex: Knex): Promise<void> {
  for (const table of ['instance_facts', 'idempotency_keys', 'throttles'])
    await knex.schema.dropTable(table);
}
