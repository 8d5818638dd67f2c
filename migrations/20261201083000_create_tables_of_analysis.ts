import type { Knex } from 'knex';

const stamped = (knex: Knex, table: Knex.CreateTableBuilder): void => {
  table.increments('id');
  table.integer('deposit_id').notNullable().references('deposits.id').onDelete('CASCADE').index();
  table.integer('created_by').notNullable().references('users.id');
  table.text('created_at').notNullable().defaultTo(knex.fn.now());
};

/** Suites, component runs, sweeps, groupings, screens, domains, zones and codes. Results too wide for columns are JSON. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('suites', (table) => {
    stamped(knex, table);
    table.text('name').notNullable();
    table.text('note').notNullable();
    table.text('support').notNullable().checkIn(['drill', 'surface']);
    table.text('analytes').notNullable();
    table.double('replacement_fraction').notNullable();
    table.integer('version').notNullable().defaultTo(1);
  });
  await knex.schema.createTable('component_runs', (table) => {
    stamped(knex, table);
    table.integer('suite_id').notNullable().references('suites.id').onDelete('NO ACTION');
    table.text('snapshot_id').notNullable();
    table.integer('table_id').notNullable();
    table.integer('seed').notNullable();
    table.text('result').notNullable();
  });
  await knex.schema.createTable('sweeps', (table) => {
    stamped(knex, table);
    table.integer('component_run_id').notNullable().references('component_runs.id').onDelete('CASCADE');
    table.integer('components').notNullable();
    table.integer('seed').notNullable();
    table.text('result').notNullable();
  });
  await knex.schema.createTable('groupings', (table) => {
    stamped(knex, table);
    table.text('name').notNullable();
    table.integer('component_run_id').notNullable().references('component_runs.id').onDelete('NO ACTION');
    table.integer('table_id').notNullable();
    table.integer('k').notNullable();
    table.integer('components').notNullable();
    table.integer('seed').notNullable();
    table.boolean('is_active').notNullable().defaultTo(false);
    table.text('result').notNullable();
  });
  await knex.raw('CREATE UNIQUE INDEX groupings_one_active ON groupings (deposit_id) WHERE is_active = 1');
  await knex.schema.createTable('groups', (table) => {
    table.integer('grouping_id').notNullable().references('groupings.id').onDelete('CASCADE');
    table.integer('label').notNullable();
    table.text('name').notNullable();
    table.integer('slot').notNullable();
    table.integer('intervals').notNullable();
    table.double('metres').notNullable();
    table.integer('version').notNullable().defaultTo(1);
    table.primary(['grouping_id', 'label']);
  });
  await knex.schema.createTable('screens', (table) => {
    stamped(knex, table);
    table.integer('grouping_id').references('groupings.id').onDelete('CASCADE');
    table.text('snapshot_id').notNullable();
    table.text('support').notNullable();
    table.text('result').notNullable();
  });
  await knex.schema.createTable('screen_cells', (table) => {
    table.integer('screen_id').notNullable().references('screens.id').onDelete('CASCADE');
    table.text('subset_key').notNullable();
    table.text('variable').notNullable();
    table.text('detail').notNullable();
    table.primary(['screen_id', 'subset_key', 'variable']);
  });
  await knex.schema.createTable('domains', (table) => {
    stamped(knex, table);
    table.text('updated_at').notNullable();
    /** Set while the domain is taken back; it can be restored. */
    table.text('deleted_at');
    table.integer('grouping_id').notNullable().references('groupings.id').onDelete('NO ACTION');
    table.text('code').notNullable().checkLength('<=', 12);
    table.text('name').notNullable();
    table.text('rationale').notNullable();
    table.integer('slot').notNullable();
    table.text('group_labels').notNullable();
    table.integer('version').notNullable().defaultTo(1);
  });
  await knex.raw('CREATE UNIQUE INDEX domains_one_code ON domains (deposit_id, code) WHERE deleted_at IS NULL');
  await knex.schema.createTable('domain_evidence', (table) => {
    table.integer('domain_id').primary().references('domains.id').onDelete('CASCADE');
    table.text('snapshot_id').notNullable();
    /** The domain's version the evidence was gathered on. */
    table.integer('domain_version').notNullable();
    table.text('result').notNullable();
    table.text('created_at').notNullable();
  });
  await knex.schema.createTable('zone_rules', (table) => {
    table.integer('deposit_id').primary().references('deposits.id').onDelete('CASCADE');
    table.text('rules').notNullable();
    table.integer('version').notNullable().defaultTo(1);
    table.text('updated_at').notNullable();
    table.integer('updated_by').notNullable().references('users.id');
  });
  await knex.schema.createTable('zone_runs', (table) => {
    stamped(knex, table);
    table.text('snapshot_id').notNullable();
    table.integer('table_id').notNullable();
    table.text('rules').notNullable();
    /** Domains the shares stand on, as of the run (JSON), to tell staleness. */
    table.text('recipe_sha256').notNullable();
    table.text('result').notNullable();
  });
  await knex.schema.createTable('zones', (table) => {
    table.increments('id');
    table.integer('zone_run_id').notNullable().references('zone_runs.id').onDelete('CASCADE').index();
    table.text('analyte').notNullable();
    table.text('hole').notNullable();
    table.double('from_m').notNullable();
    table.double('to_m').notNullable();
    table.text('zone').notNullable();
  });
  await knex.schema.createTable('code_sets', (table) => {
    stamped(knex, table);
    table.integer('number').notNullable();
    table.text('snapshot_id').notNullable();
    table.integer('grouping_id').notNullable().references('groupings.id').onDelete('NO ACTION');
    table.integer('zone_run_id').references('zone_runs.id').onDelete('NO ACTION');
    table.text('recipe').notNullable();
    table.text('recipe_sha256').notNullable();
    table.text('sha256').notNullable();
    table.integer('size_bytes').notNullable();
    table.text('file_name').notNullable();
    table.text('result').notNullable();
    table.unique(['deposit_id', 'number']);
  });
}

export async function down(knex: Knex): Promise<void> {
  const names = ['code_sets', 'zones', 'zone_runs', 'zone_rules', 'domain_evidence', 'domains', 'screen_cells', 'screens', 'groups', 'groupings', 'sweeps', 'component_runs', 'suites'];
  for (const name of names) await knex.schema.dropTable(name);
}
