import type { Knex } from 'knex';

const ROLES = "('lead', 'geologist', 'geometallurgist', 'site-geologist', 'estimator', 'viewer')";

// A deposit that is itself being deleted takes its members with it.
const lastLead = (event: string, stays: string): string => `
  CREATE TRIGGER memberships_keep_a_lead_${event} BEFORE ${event.toUpperCase()} ON memberships
  WHEN OLD.role = 'lead' AND ${stays}
    AND EXISTS (SELECT 1 FROM deposits WHERE id = OLD.deposit_id)
    AND NOT EXISTS (SELECT 1 FROM memberships
      WHERE deposit_id = OLD.deposit_id AND role = 'lead' AND user_id <> OLD.user_id)
  BEGIN SELECT RAISE(ABORT, 'a deposit keeps at least one lead'); END`;

/** Deposits, who belongs to them with which role, open invitations and API tokens. Grid and analytes are JSON. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    CREATE TABLE deposits (
      id INTEGER PRIMARY KEY AUTOINCREMENT,
      name TEXT NOT NULL,
      description TEXT NOT NULL DEFAULT '',
      grid TEXT NOT NULL,
      pay_analytes TEXT NOT NULL,
      deleterious_analytes TEXT NOT NULL,
      is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1)),
      version INTEGER NOT NULL DEFAULT 1,
      created_at TEXT NOT NULL,
      created_by INTEGER REFERENCES users (id) ON DELETE RESTRICT
    ) STRICT`);
  await knex.schema.raw(`
    CREATE TABLE memberships (
      deposit_id INTEGER NOT NULL REFERENCES deposits (id) ON DELETE CASCADE,
      user_id INTEGER NOT NULL REFERENCES users (id) ON DELETE CASCADE,
      role TEXT NOT NULL CHECK (role IN ${ROLES}),
      since TEXT NOT NULL,
      PRIMARY KEY (deposit_id, user_id)
    ) STRICT, WITHOUT ROWID`);
  await knex.schema.raw('CREATE INDEX memberships_by_user ON memberships (user_id)');
  await knex.schema.raw(lastLead('delete', '1'));
  await knex.schema.raw(lastLead('update', "NEW.role <> 'lead'"));
  await knex.schema.raw(`
    CREATE TABLE invitations (
      id INTEGER PRIMARY KEY AUTOINCREMENT,
      deposit_id INTEGER REFERENCES deposits (id) ON DELETE CASCADE,
      role TEXT CHECK (role IN ${ROLES}),
      email TEXT NOT NULL CHECK (email = lower(email)),
      token_hash TEXT NOT NULL UNIQUE,
      invited_by INTEGER NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
      created_at TEXT NOT NULL,
      expires_at TEXT NOT NULL,
      accepted_at TEXT,
      withdrawn_at TEXT,
      CHECK ((deposit_id IS NULL) = (role IS NULL))
    ) STRICT`);
  await knex.schema.raw('CREATE INDEX invitations_by_deposit ON invitations (deposit_id)');
  await knex.schema.raw(`
    CREATE TABLE api_tokens (
      id INTEGER PRIMARY KEY AUTOINCREMENT,
      deposit_id INTEGER NOT NULL REFERENCES deposits (id) ON DELETE CASCADE,
      user_id INTEGER NOT NULL REFERENCES users (id) ON DELETE CASCADE,
      name TEXT NOT NULL,
      token_right TEXT NOT NULL CHECK (token_right IN ('read', 'codes', 'work')),
      token_hash TEXT NOT NULL UNIQUE,
      created_at TEXT NOT NULL,
      expires_at TEXT NOT NULL,
      last_used_at TEXT,
      revoked_at TEXT
    ) STRICT`);
  await knex.schema.raw('CREATE INDEX api_tokens_by_deposit ON api_tokens (deposit_id)');
}

export async function down(knex: Knex): Promise<void> {
  for (const table of ['api_tokens', 'invitations', 'memberships', 'deposits'])
    await knex.schema.dropTable(table);
}
