import type { Knex } from 'knex';

/** Uploaded files, the revisions loaded from them, and the snapshots put together from revisions. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('uploads', (table) => {
    table.increments('id');
    table.integer('deposit_id').notNullable().references('deposits.id').onDelete('CASCADE').index();
    table.text('file_name').notNullable();
    table.text('stored_name').notNullable();
    table.integer('size_bytes').notNullable();
    table.text('sha256').notNullable();
    table.integer('uploaded_by').notNullable().references('users.id');
    table.text('uploaded_at').notNullable();
    table.text('state').notNullable().checkIn(['mapped', 'checked', 'loaded', 'discarded']);
    table.text('encoding').notNullable();
    table.integer('row_count').notNullable();
    /** Guess per column (JSON), and the header line it was made from, to remember mappings by. */
    table.text('guess').notNullable();
    table.text('header_signature').notNullable();
    table.text('mapping').notNullable();
    table.boolean('mapping_remembered').notNullable().defaultTo(false);
    table.text('file_check');
    table.integer('revision_id');
  });
  await knex.schema.createTable('row_problems', (table) => {
    table.increments('id');
    table.integer('upload_id').notNullable().references('uploads.id').onDelete('CASCADE').index();
    table.integer('row').notNullable();
    table.text('column').notNullable();
    table.text('value').notNullable();
    table.text('code').notNullable();
    table.text('message').notNullable();
    table.text('severity').notNullable().checkIn(['aside', 'warning']);
    table.text('original').notNullable();
  });
  await knex.schema.createTable('revisions', (table) => {
    table.increments('id');
    table.integer('deposit_id').notNullable().references('deposits.id').onDelete('CASCADE').index();
    table.text('kind').notNullable();
    table.integer('number').notNullable();
    table.integer('upload_id').notNullable().references('uploads.id');
    table.text('mode').notNullable().checkIn(['replace', 'add']);
    table.boolean('is_current').notNullable().defaultTo(false);
    table.integer('rows').notNullable();
    table.integer('rows_added').notNullable();
    table.integer('rows_aside').notNullable();
    table.integer('table_id').notNullable();
    /** SHA-256 over what the revision holds: its file, mapping and the revision it added to. */
    table.text('content_sha256').notNullable();
    table.integer('loaded_by').notNullable().references('users.id');
    table.text('loaded_at').notNullable();
    table.unique(['deposit_id', 'number']);
  });
  await knex.raw('CREATE UNIQUE INDEX revisions_one_current ON revisions (deposit_id, kind) WHERE is_current = 1');
  await knex.schema.createTable('snapshots', (table) => {
    table.text('id').notNullable();
    table.integer('deposit_id').notNullable().references('deposits.id').onDelete('CASCADE');
    table.integer('number').notNullable();
    table.integer('frame_table_id').notNullable();
    table.integer('surface_rows').notNullable();
    table.integer('rows').notNullable();
    /** Everything the contract's Snapshot tells beyond these columns (JSON). */
    table.text('summary').notNullable();
    /** Current revisions it stands on: [{kind, revisionId}] (JSON). */
    table.text('revisions').notNullable();
    table.text('created_at').notNullable();
    table.primary(['deposit_id', 'id']);
    table.unique(['deposit_id', 'number']);
  });
  await knex.schema.createTable('holes', (table) => {
    table.increments('id');
    table.integer('deposit_id').notNullable().references('deposits.id').onDelete('CASCADE');
    table.text('snapshot_id').notNullable();
    table.text('hole').notNullable();
    table.double('x').notNullable();
    table.double('y').notNullable();
    table.double('z').notNullable();
    table.double('length_m').notNullable();
    table.double('assayed_m').notNullable();
    table.integer('first_row').notNullable();
    table.integer('intervals').notNullable();
    table.text('campaign');
    table.text('trace').notNullable();
    /** Stations, logs and structures of the hole (JSON), read whole by the hole page and the tray. */
    table.text('detail').notNullable();
    table.unique(['deposit_id', 'snapshot_id', 'hole']);
  });
}

export async function down(knex: Knex): Promise<void> {
  for (const name of ['holes', 'snapshots', 'revisions', 'row_problems', 'uploads']) {
    await knex.schema.dropTable(name);
  }
}
