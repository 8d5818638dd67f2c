import type { Knex } from 'knex';

const refuse = (event: string): string => `
  CREATE TRIGGER audit_entries_refuse_${event} BEFORE ${event.toUpperCase()} ON audit_entries
  BEGIN SELECT RAISE(ABORT, 'the audit record is append-only'); END`;

/**
 * The audit record: one chain per deposit and one for the instance (deposit 0), each entry holding
 * the hash of the one before. No foreign keys: the record outlives what it speaks of. The heads tell
 * a cut tail from a short chain.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    CREATE TABLE audit_entries (
      id INTEGER PRIMARY KEY AUTOINCREMENT,
      chain INTEGER NOT NULL,
      number INTEGER NOT NULL,
      at TEXT NOT NULL,
      actor_id INTEGER,
      who TEXT NOT NULL,
      action TEXT NOT NULL,
      subject TEXT NOT NULL,
      sentence TEXT NOT NULL,
      previous_hash TEXT NOT NULL,
      hash TEXT NOT NULL,
      UNIQUE (chain, number)
    ) STRICT`);
  await knex.schema.raw(refuse('update'));
  await knex.schema.raw(refuse('delete'));
  // INSERT OR REPLACE removes the old row without asking the trigger on delete.
  await knex.schema.raw(`
    CREATE TRIGGER audit_entries_refuse_replace BEFORE INSERT ON audit_entries
    WHEN EXISTS (SELECT 1 FROM audit_entries WHERE id = NEW.id OR (chain = NEW.chain AND number = NEW.number))
    BEGIN SELECT RAISE(ABORT, 'the audit record is append-only'); END`);
  await knex.schema.raw(`
    CREATE TABLE audit_heads (
      chain INTEGER PRIMARY KEY,
      entries INTEGER NOT NULL,
      hash TEXT NOT NULL
    ) STRICT`);
}

export async function down(knex: Knex): Promise<void> {
  for (const table of ['audit_heads', 'audit_entries']) await knex.schema.dropTable(table);
}
