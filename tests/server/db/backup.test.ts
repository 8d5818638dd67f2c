import { createHash } from 'node:crypto';
import { copyFileSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { backupAll } from '#server/db/backup-all.ts';
import { openDb } from '#server/db/knex.ts';
import { transact } from '#server/db/transact.ts';
import { dataPaths } from '#server/lib/paths.ts';
import { verifyChain } from '#server/modules/record/audit-chain.ts';
import { tempFolder } from '#tests/support/temp-instance.ts';
import { type TestClient, testClient } from '#tests/support/test-client.ts';

const sha256 = (bytes: Buffer | string): string => createHash('sha256').update(bytes).digest('hex');

/** An upload as the database knows it, and its file; `sha` is what the database says of it. */
async function addUpload(
  client: TestClient,
  name: string,
  text: string,
  sha = sha256(text),
): Promise<void> {
  const { db, env, depositId } = client;
  mkdirSync(env.paths.uploads, { recursive: true });
  writeFileSync(join(env.paths.uploads, name), text);
  await db('uploads').insert({
    deposit_id: depositId,
    file_name: `${name}.csv`,
    stored_name: name,
    size_bytes: text.length,
    sha256: sha,
    uploaded_by: client.of('lead').id,
    uploaded_at: new Date().toISOString(),
    state: 'loaded',
    encoding: 'utf-8',
    row_count: 1,
    guess: '[]',
    header_signature: 's',
    mapping: '{}',
  });
}

test('DU-05 a backup made during writes opens in an empty folder, whole', async () => {
  const client = await testClient();
  await addUpload(client, 'stored-1', 'hole,from,to\nA,0,1\n');
  mkdirSync(client.env.paths.codes);
  writeFileSync(join(client.env.paths.codes, 'set-1.csv'), 'codes');
  const { record } = client.app.services;
  const write = () =>
    transact(client.db, (trx) =>
      record.add(trx, {
        actor: null,
        depositId: client.depositId,
        action: 'a',
        subject: 's',
        sentence: 't',
      }),
    );
  for (let entry = 0; entry < 5; entry++) await write();

  let isWriting = true;
  let written = 5;
  const writing = (async () => {
    while (isWriting) {
      await write();
      written += 1;
      await new Promise((resolve) => setTimeout(resolve, 2));
    }
  })();
  const folder = join(client.env.paths.backups, 'one');
  const manifest = await backupAll(client.env.paths, folder, new Date());
  isWriting = false;
  await writing;
  expect(written).toBeGreaterThan(5);

  expect(sha256(readFileSync(join(folder, 'selvage.sqlite')))).toBe(manifest.database.sha256);
  expect(manifest.files).toEqual([
    { name: 'uploads/stored-1', bytes: 19, sha256: sha256('hole,from,to\nA,0,1\n') },
    { name: 'codes/set-1.csv', bytes: 5, sha256: sha256('codes') },
  ]);

  const restored = tempFolder();
  copyFileSync(join(folder, 'selvage.sqlite'), dataPaths(restored.path).database);
  const db = openDb(dataPaths(restored.path).database);
  const chain = await verifyChain(db, client.depositId);
  expect(chain.holds).toBe(true);
  expect(manifest.auditHeads).toContainEqual({
    chain: client.depositId,
    entries: chain.entries,
    hash: chain.head,
  }); // DU-09
  expect(await db('users').select('email')).toHaveLength(9);
  await db.destroy();
  restored.remove();
});

test('DU-05 a stored file that is missing or altered fails the backup', async () => {
  const client = await testClient();
  await addUpload(client, 'stored-2', 'altered text', sha256('the text that was accepted'));
  await expect(
    backupAll(client.env.paths, join(client.env.paths.backups, 'two'), new Date()),
  ).rejects.toThrow('1 stored files are missing, the first is stored-2.csv');
});

test('a backup never writes over another', async () => {
  const client = await testClient();
  mkdirSync(client.env.paths.uploads, { recursive: true });
  const folder = join(client.env.paths.backups, 'three');
  await backupAll(client.env.paths, folder, new Date());
  await expect(backupAll(client.env.paths, folder, new Date())).rejects.toThrow('EEXIST');
});
