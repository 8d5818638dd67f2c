import type { Knex } from 'knex';

/** Accounts, their open sessions and their reset links. An account without a password waits for its first link. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    CREATE TABLE users (
      id INTEGER PRIMARY KEY AUTOINCREMENT,
      email TEXT NOT NULL UNIQUE CHECK (email = lower(email) AND length(email) <= 254),
      name TEXT NOT NULL CHECK (length(name) BETWEEN 1 AND 120),
      password_hash TEXT,
      is_administrator INTEGER NOT NULL DEFAULT 0 CHECK (is_administrator IN (0, 1)),
      is_active INTEGER NOT NULL DEFAULT 1 CHECK (is_active IN (0, 1)),
      created_at TEXT NOT NULL,
      last_seen_at TEXT
    ) STRICT`);
  await knex.schema.raw(`
    CREATE TABLE sessions (
      id TEXT PRIMARY KEY,
      user_id INTEGER NOT NULL REFERENCES users (id) ON DELETE CASCADE,
      created_at TEXT NOT NULL,
      last_seen_at TEXT NOT NULL,
      expires_at TEXT NOT NULL,
      address TEXT NOT NULL,
      user_agent TEXT NOT NULL
    ) STRICT`);
  await knex.schema.raw('CREATE INDEX sessions_by_user ON sessions (user_id)');
  await knex.schema.raw(`
    CREATE TABLE password_resets (
      token_hash TEXT PRIMARY KEY,
      user_id INTEGER NOT NULL REFERENCES users (id) ON DELETE CASCADE,
      created_at TEXT NOT NULL,
      expires_at TEXT NOT NULL,
      used_at TEXT
    ) STRICT`);
  await knex.schema.raw('CREATE INDEX password_resets_by_user ON password_resets (user_id)');
}

export async function down(knex: Knex): Promise<void> {
  for (const table of ['password_resets', 'sessions', 'users']) await knex.schema.dropTable(table);
}
