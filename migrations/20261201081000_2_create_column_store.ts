import type { Knex } from 'knex';

/**
 * Columns of numbers, categories and text by chunks of 65,536 rows. `qualifier_bytes` stands before
 * `value_bytes`: SQLite reaches a later column of a long row only through the pages of the earlier
 * ones, and qualifiers are an eighth of the values.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    CREATE TABLE column_tables (
      id INTEGER PRIMARY KEY AUTOINCREMENT,
      deposit_id INTEGER NOT NULL REFERENCES deposits (id) ON DELETE CASCADE,
      n_rows INTEGER NOT NULL CHECK (n_rows >= 0),
      purpose TEXT NOT NULL,
      job_id INTEGER REFERENCES jobs (id) ON DELETE SET NULL,
      state TEXT NOT NULL CHECK (state IN ('pending', 'live')),
      created_at TEXT NOT NULL
    ) STRICT`);
  await knex.schema.raw('CREATE INDEX column_tables_by_deposit ON column_tables (deposit_id)');
  await knex.schema.raw('CREATE INDEX column_tables_by_job ON column_tables (job_id)');
  await knex.schema.raw(`
    CREATE TABLE columns (
      id INTEGER PRIMARY KEY,
      table_id INTEGER NOT NULL REFERENCES column_tables (id) ON DELETE CASCADE,
      name TEXT NOT NULL,
      kind TEXT NOT NULL CHECK (kind IN ('number', 'assay', 'category', 'text')),
      unit TEXT,
      dictionary TEXT,
      meta TEXT,
      UNIQUE (table_id, name)
    ) STRICT`);
  await knex.schema.raw(`
    CREATE TABLE column_chunks (
      column_id INTEGER NOT NULL REFERENCES columns (id) ON DELETE CASCADE,
      chunk_no INTEGER NOT NULL,
      qualifier_bytes BLOB,
      value_bytes BLOB NOT NULL,
      PRIMARY KEY (column_id, chunk_no)
    ) STRICT`);
}
export async function down(knex: Knex): Promise<void> {
  for (const table of ['column_chunks', 'columns', 'column_tables']) {
    await knex.schema.dropTable(table);
  }
}
