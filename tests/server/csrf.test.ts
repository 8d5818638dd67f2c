import { createHash } from 'node:crypto';
import { beforeAll, expect, test } from 'vitest';
import { callEndpoint } from '#tests/support/calls.ts';
import { type TestClient, testClient } from '#tests/support/test-client.ts';

let client: TestClient;
beforeAll(async () => {
  client = await testClient();
});

/** One checksum over every row of every table. */
async function fingerprint(): Promise<string> {
  const tables: { name: string }[] = await client
    .db('sqlite_master')
    .where({ type: 'table' })
    .orderBy('name')
    .select('name');
  const hash = createHash('sha256');
  for (const { name } of tables) hash.update(JSON.stringify([name, await client.db(name)]));
  return hash.digest('hex');
}

const FOREIGN: readonly (readonly [string, Record<string, string>])[] = [
  ['cross-site', { 'Sec-Fetch-Site': 'cross-site' }],
  ['same-site', { 'Sec-Fetch-Site': 'same-site' }],
  ['typed by the user', { 'Sec-Fetch-Site': 'none' }],
  ['a foreign origin', { Origin: 'https://elsewhere.example' }],
  ['an origin that only begins alike', { Origin: 'http://localhost:4310.elsewhere.example' }],
  [
    'cross-site with our origin',
    { 'Sec-Fetch-Site': 'cross-site', Origin: 'http://localhost:4310' },
  ],
  ['neither header', {}],
  ['neither header, text/plain', { 'Content-Type': 'text/plain' }],
];

test.each(FOREIGN)(
  'AU-08 every changing route refuses %s, and nothing changes',
  async (_label, site) => {
    const cookie = { Cookie: `selvage=${client.of('lead').cookie}` };
    const changing = client.app.mounted
      .map(({ endpoint }) => endpoint)
      .filter(({ method }) => method !== 'get');
    const before = await fingerprint();
    expect(changing.length).toBeGreaterThan(10);
    for (const endpoint of changing) {
      const { status, code } = await callEndpoint(client.url, endpoint, {
        params: { depositId: client.depositId },
        headers: { ...cookie, ...site },
      });
      expect([endpoint.id, status, code]).toEqual([endpoint.id, 403, 'foreign-site']);
    }
    expect(await fingerprint()).toBe(before);
  },
);

test('AU-08 our own pages are let in, by either header', async () => {
  const cookie = `selvage=${client.of('lead').cookie}`;
  const rename = () =>
    client.bare().patch('/api/me').set('Cookie', cookie).send({ name: 'New Name' });
  expect((await rename().set('Sec-Fetch-Site', 'same-origin')).status).toBe(200);
  expect((await rename().set('Origin', 'http://localhost:4310')).status).toBe(200);
});

test('AU-08 a body that a form could send is not read', async () => {
  const res = await client
    .as('lead')
    .patch('/api/me')
    .set('Content-Type', 'text/plain')
    .send('{"name":"Formed"}');
  expect(res.status).toBe(415);
});

test('AU-08 no cross-origin headers are given', async () => {
  const res = await client
    .bare()
    .options('/api/me')
    .set('Origin', 'https://elsewhere.example')
    .set('Access-Control-Request-Method', 'PATCH');
  expect(Object.keys(res.headers).filter((name) => name.startsWith('access-control'))).toEqual([]);
});
