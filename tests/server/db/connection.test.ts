import Database from 'better-sqlite3';
import { expect, test } from 'vitest';
import { openDb } from '#server/db/knex.ts';
import {
  applyPragmas,
  PRAGMAS,
  SERVER_BUSY_TIMEOUT_MS,
  WORKER_BUSY_TIMEOUT_MS,
} from '#server/db/pragmas.ts';
import { transact } from '#server/db/transact.ts';
import { tempInstance } from '#tests/support/temp-instance.ts';

// SQLite's own numbers: synchronous 2 is FULL.
const EXPECTED = { journal_mode: 'wal', synchronous: 2, foreign_keys: 1, trusted_schema: 0 };

test('DU-01 every connection of the pool is set, also to a database that was in WAL mode before', async () => {
  const { env, remove } = await tempInstance();
  for (let opening = 0; opening < 2; opening++) {
    const db = openDb(env.paths.database);
    for (const [name, value] of Object.entries({
      ...EXPECTED,
      busy_timeout: SERVER_BUSY_TIMEOUT_MS,
    })) {
      const rows: Record<string, unknown>[] = await db.raw(`PRAGMA ${name}`);
      expect([name, Object.values(rows[0] ?? {})]).toEqual([name, [value]]);
    }
    await db.destroy();
  }
  expect(SERVER_BUSY_TIMEOUT_MS).toBeLessThanOrEqual(250); // JO-05
  remove();
});

test('DU-01 a plain connection is set alike, and a database that refuses is told', () => {
  expect(PRAGMAS).toEqual(EXPECTED);
  const memory = new Database(':memory:'); // has no WAL
  expect(() => applyPragmas(memory, WORKER_BUSY_TIMEOUT_MS)).toThrow(
    'journal_mode: expected wal, found memory',
  );
  memory.close();
});

test('JO-05 a transaction waits outside the driver for a lock that another connection holds', async () => {
  const { env, remove } = await tempInstance();
  const db = openDb(env.paths.database, 1);
  const other = new Database(env.paths.database);
  other.exec('BEGIN IMMEDIATE');
  setTimeout(() => other.exec('COMMIT'), 120);
  let tries = 0;
  const id = await transact(db, async (trx) => {
    tries += 1;
    await trx('instance_facts').insert({ key: 'a', value: 'b' });
    return 'written';
  });
  expect(id).toBe('written');
  expect(tries).toBeGreaterThan(1);
  expect(await db('instance_facts')).toHaveLength(1);
  other.close();
  await db.destroy();
  remove();
});

test('a failure other than a lock is not tried again', async () => {
  const { env, remove } = await tempInstance();
  const db = openDb(env.paths.database);
  let tries = 0;
  const failing = transact(db, () => {
    tries += 1;
    return Promise.reject(new Error('no'));
  });
  await expect(failing).rejects.toThrow('no');
  expect(tries).toBe(1);
  await db.destroy();
  remove();
});
