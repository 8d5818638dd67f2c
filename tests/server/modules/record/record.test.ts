import { createHash } from 'node:crypto';
import { parse } from 'csv-parse/sync';
import { describe, expect, test } from 'vitest';
import { transact } from '#server/db/transact.ts';
import { verifyChain } from '#server/modules/record/audit-chain.ts';
import { type TestClient, testClient } from '#tests/support/test-client.ts';

async function withEntries(count: number): Promise<TestClient> {
  const client = await testClient();
  for (let at = 1; at <= count; at++) {
    await transact(client.db, (trx) =>
      client.app.services.record.add(trx, {
        actor: client.of('lead'),
        depositId: client.depositId,
        action: 'domain.created',
        subject: `domain ${at}`,
        sentence: `Sentence ${at}, =1+1.`,
      }),
    );
  }
  return client;
}

/** Tampering goes round the triggers, as somebody with the file in hand would. */
async function tamper(client: TestClient, ...statements: string[]): Promise<void> {
  for (const trigger of ['update', 'delete', 'replace'])
    await client.db.raw(`DROP TRIGGER audit_entries_refuse_${trigger}`);
  for (const statement of statements) await client.db.raw(statement);
}

describe('DU-09 the record is append-only and chained', () => {
  test('an entry is refused every change, by SQL too', async () => {
    const client = await withEntries(2);
    await expect(client.db('audit_entries').update({ sentence: 'x' })).rejects.toThrow(
      'append-only',
    );
    await expect(client.db('audit_entries').delete()).rejects.toThrow('append-only');
    await expect(
      client.db.raw('INSERT OR REPLACE INTO audit_entries SELECT * FROM audit_entries'),
    ).rejects.toThrow('append-only');
  });

  test('each entry holds the SHA-256 of the one before, as written down here', async () => {
    const client = await withEntries(3);
    const rows: Record<string, string | number | null>[] = await client
      .db('audit_entries')
      .where({ chain: client.depositId })
      .orderBy('number');
    let previous = '0'.repeat(64);
    for (const row of rows) {
      const fields = [
        previous,
        row['chain'],
        row['number'],
        row['at'],
        row['actor_id'],
        row['who'],
        row['action'],
        row['subject'],
        row['sentence'],
      ];
      expect(row['previous_hash']).toBe(previous);
      expect(row['hash']).toBe(createHash('sha256').update(JSON.stringify(fields)).digest('hex'));
      previous = String(row['hash']);
    }
    expect(await verifyChain(client.db, client.depositId)).toEqual({
      holds: true,
      entries: 3,
      head: previous,
      firstBadEntry: null,
    });
  });

  const ENTRY = (number: number) => `WHERE number = ${number} AND chain > 0`;
  test.each([
    [
      'an edited sentence',
      4,
      [`UPDATE audit_entries SET sentence = 'nothing happened' ${ENTRY(4)}`],
    ],
    ['an edited name', 1, [`UPDATE audit_entries SET who = 'Somebody else' ${ENTRY(1)}`]],
    ['a deleted entry', 3, [`DELETE FROM audit_entries ${ENTRY(3)}`]],
    [
      'a deleted entry, the rest renumbered',
      3,
      [
        `DELETE FROM audit_entries ${ENTRY(3)}`,
        `UPDATE audit_entries SET number = number - 1 WHERE number > 3 AND chain > 0`,
      ],
    ],
    [
      'two swapped entries',
      2,
      [
        `UPDATE audit_entries SET number = 99 ${ENTRY(2)}`,
        `UPDATE audit_entries SET number = 2 ${ENTRY(5)}`,
        `UPDATE audit_entries SET number = 5 ${ENTRY(99)}`,
      ],
    ],
    ['a cut tail', 5, [`DELETE FROM audit_entries WHERE number >= 5 AND chain > 0`]],
    [
      'an entry put in at the end',
      7,
      [
        `INSERT INTO audit_entries (chain, number, at, who, action, subject, sentence, previous_hash, hash) SELECT chain, 7, at, who, action, subject, sentence, hash, hash FROM audit_entries ${ENTRY(6)}`,
      ],
    ],
    ['the whole chain gone', 1, [`DELETE FROM audit_entries WHERE chain > 0`]],
  ] as const)('%s is found', async (_label, firstBadEntry, statements) => {
    const client = await withEntries(6);
    await tamper(client, ...statements);
    expect(await verifyChain(client.db, client.depositId)).toMatchObject({
      holds: false,
      entries: 6,
      firstBadEntry,
    });
  });

  test('an entry is written with what it tells, or neither is', async () => {
    const client = await withEntries(1);
    const failing = transact(client.db, async (trx) => {
      await client.app.services.record.add(trx, {
        actor: null,
        depositId: client.depositId,
        action: 'a',
        subject: 's',
        sentence: 't',
      });
      throw new Error('the change itself failed');
    });
    await expect(failing).rejects.toThrow('the change itself failed');
    expect(await verifyChain(client.db, client.depositId)).toMatchObject({
      holds: true,
      entries: 1,
    });
  });

  test('entries written at once make one chain', async () => {
    const client = await withEntries(0);
    const { record } = client.app.services;
    const entry = {
      actor: null,
      depositId: client.depositId,
      action: 'a',
      subject: 's',
      sentence: 't',
    };
    await Promise.all(
      Array.from({ length: 30 }, () => transact(client.db, (trx) => record.add(trx, entry))),
    );
    expect(await verifyChain(client.db, client.depositId)).toMatchObject({
      holds: true,
      entries: 30,
    });
  });
});

test('the record is read newest first, in pages, by text, with the state of its chain', async () => {
  const client = await withEntries(7);
  const get = async (query: string) =>
    (await client.as('viewer').get(`/api/deposits/${client.depositId}/record${query}`)).body as {
      rows: { sentence: string }[];
      total: number;
      chain: unknown;
    };
  const page = await get('?page=2&pageSize=3');
  expect(page.rows.map(({ sentence }) => sentence)).toEqual([
    'Sentence 4, =1+1.',
    'Sentence 3, =1+1.',
    'Sentence 2, =1+1.',
  ]);
  expect(page).toMatchObject({
    total: 7,
    page: 2,
    pageSize: 3,
    chain: { holds: true, entries: 7, firstBadEntry: null },
  });
  expect((await get('?text=sentence%206')).rows).toHaveLength(1);
  expect((await get('?text=%25')).rows).toHaveLength(0); // a sign, not a wildcard
});

test('OU-01 the record downloads as CSV', async () => {
  const client = await withEntries(2);
  await transact(client.db, (trx) =>
    client.app.services.record.add(trx, {
      actor: client.of('lead'),
      depositId: client.depositId,
      action: 'x.y',
      subject: '=cmd',
      sentence: 'Line one\nline "two"',
    }),
  );
  const res = await client.as('viewer').get(`/api/deposits/${client.depositId}/record.csv`);
  expect([res.status, res.get('content-type'), res.get('content-disposition')]).toEqual([
    200,
    'text/csv; charset=utf-8',
    `attachment; filename="record-of-deposit-${client.depositId}.csv"; filename*=UTF-8''record-of-deposit-${client.depositId}.csv`,
  ]);
  const [header, ...rows]: string[][] = parse(res.text, { bom: true });
  expect(header).toEqual([
    'number',
    'at',
    'who',
    'action',
    'subject',
    'sentence',
    'previous_hash',
    'hash',
  ]);
  expect(rows).toHaveLength(3);
  expect(rows[2]?.slice(2, 6)).toEqual(['Test lead', 'x.y', "'=cmd", 'Line one\nline "two"']);
});
