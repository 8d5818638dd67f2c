import { existsSync, mkdirSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import Database from 'better-sqlite3';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { claimInstanceKind } from '#server/db/instance-kind.ts';
import { openDb } from '#server/db/knex.ts';
import { migrate, NewerSchemaError } from '#server/db/migrate.ts';
import { openChecked } from '#server/db/open-checked.ts';
import { createLog } from '#server/lib/log.ts';
import { dataPaths, MIGRATIONS_DIR } from '#server/lib/paths.ts';
import { tempFolder } from '#tests/support/temp-instance.ts';

let folder: ReturnType<typeof tempFolder>;
beforeEach(() => {
  folder = tempFolder();
});
afterEach(() => folder.remove());

const file = () => join(folder.path, 'selvage.sqlite');
const backups = () => join(folder.path, 'backups');

/** A folder of migrations written for the test; a name made of `fails` throws half-way. */
function migrationsNamed(...names: string[]): string {
  const path = join(folder.path, `migrations-${names.join('-')}`);
  mkdirSync(path);
  for (const name of names) {
    const table = name.replaceAll(/\W/g, '_');
    const rest = name.includes('fails') ? "throw new Error('half-way');" : '';
    writeFileSync(
      join(path, `${name}.js`),
      `export async function up(knex) { await knex.schema.createTable('${table}', (t) => { t.increments('id'); t.text('note'); }); ${rest} }\nexport const down = () => Promise.resolve();\n`,
    );
  }
  writeFileSync(join(path, 'package.json'), '{"type":"module"}');
  return path;
}

test('DU-06 a new database takes every migration, in order, without a backup', async () => {
  const db = openDb(file());
  const { applied, backup } = await migrate(db, backups());
  const files = readdirSync(MIGRATIONS_DIR)
    .filter((name) => name.endsWith('.ts'))
    .map((name) => name.replace('.ts', ''))
    .sort();
  expect(applied).toEqual(files);
  expect(backup).toBeNull();
  expect(await migrate(db, backups())).toEqual({ applied: [], backup: null });
  expect(await db.raw('PRAGMA foreign_key_check')).toEqual([]);
  await db.destroy();
});

test('DU-06 an existing database is copied before it is changed', async () => {
  const db = openDb(file());
  await migrate(db, backups(), migrationsNamed('1-first'));
  await db('1_first').insert({ note: 'kept' });
  const { applied, backup } = await migrate(db, backups(), migrationsNamed('1-first', '2-second'));
  expect(applied).toEqual(['2-second']);
  const copy = new Database(backup ?? '', { readonly: true });
  expect(copy.prepare('SELECT note FROM "1_first"').all()).toEqual([{ note: 'kept' }]);
  expect(
    copy.prepare("SELECT count(*) AS n FROM sqlite_master WHERE name = '2_second'").get(),
  ).toEqual({ n: 0 });
  copy.close();
  await db.destroy();
});

test('DU-06 a migration that fails leaves the database as it was', async () => {
  const db = openDb(file());
  await migrate(db, backups(), migrationsNamed('1-first'));
  await db('1_first').insert({ note: 'kept' });
  await expect(
    migrate(db, backups(), migrationsNamed('1-first', '2-second', '3-fails')),
  ).rejects.toThrow('half-way');
  const tables = await Promise.all(
    ['1_first', '2_second', '3_fails'].map((table) => db.schema.hasTable(table)),
  );
  expect(tables).toEqual([true, false, false]);
  expect(await db('1_first').select('note')).toEqual([{ note: 'kept' }]);
  await db.destroy();
});

test('DU-06 a database of a newer version is refused, unchanged', async () => {
  const db = openDb(file());
  await migrate(db, backups(), migrationsNamed('1-first', '2-second'));
  const older = migrationsNamed('1-first');
  await expect(migrate(db, backups(), older)).rejects.toThrow(NewerSchemaError);
  await expect(migrate(db, backups(), older)).rejects.toThrow('2-second');
  expect(existsSync(backups())).toBe(false);
  await db.destroy();
});

test('DU-07 a damaged database is refused with the way out', async () => {
  const paths = dataPaths(folder.path);
  const db = await openChecked(paths, 'demo', createLog('silent'));
  await db.raw('PRAGMA journal_mode = DELETE');
  await db.destroy();
  writeFileSync(paths.database, Buffer.alloc(4096, 7), { flag: 'r+' });
  await expect(openChecked(paths, 'demo', createLog('silent'))).rejects.toThrow(
    /damaged|not a database/,
  );
});

test("AU-07 a demonstration's database never serves a production instance", async () => {
  const db = openDb(file());
  await migrate(db, backups());
  await claimInstanceKind(db, 'demo');
  await expect(claimInstanceKind(db, 'demo')).resolves.toBeUndefined();
  await expect(claimInstanceKind(db, 'production')).rejects.toThrow('belongs to a demo instance');
  await db.destroy();
});
