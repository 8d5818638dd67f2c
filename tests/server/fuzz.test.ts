import fc from 'fast-check';
import { expect, test } from 'vitest';
import { callEndpoint } from '#tests/support/calls.ts';
import { testClient } from '#tests/support/test-client.ts';

/** Sentences that break out of what they are put into, if anything lets them. */
const NASTY = [
  "' OR 1=1 --",
  '"; DROP TABLE users; --',
  '%',
  '\\',
  '\u0000',
  '../../etc/passwd',
  '<img src=x onerror=alert(1)>',
  '=cmd',
  '\ud800',
  '１２',
  '1e999',
];

const json = fc.oneof(
  fc.jsonValue({ maxDepth: 3 }),
  fc.dictionary(
    fc.constantFrom(
      'name',
      'email',
      'password',
      'role',
      'description',
      'grid',
      'payAnalytes',
      'deleteriousAnalytes',
      'days',
      'right',
      'isActive',
      'newPassword',
      'currentPassword',
    ),
    fc.oneof(
      fc.constantFrom(...NASTY),
      fc.jsonValue({ maxDepth: 1 }),
      fc.constantFrom('lead', 'read', 'a@test.example', 30, true),
    ),
  ),
);

test('IN-07 whatever is sent, an endpoint answers 2xx or 4xx, never 5xx', async () => {
  const client = await testClient();
  const sending = client.app.mounted
    .map(({ endpoint }) => endpoint)
    .filter(
      (endpoint) =>
        endpoint.body !== null && endpoint.consumes === 'json' && endpoint.id !== 'changePassword',
    );
  const cookies = ['lead', 'administrator', 'geologist'].map(
    (who) => client.of(who as 'lead').cookie,
  );
  expect(sending.length).toBeGreaterThan(8);
  for (const endpoint of sending) {
    await fc.assert(
      fc.asyncProperty(json, fc.constantFrom(...cookies), async (body, cookie) => {
        const headers = { 'Sec-Fetch-Site': 'same-origin', Cookie: `selvage=${cookie}` };
        const { status } = await callEndpoint(client.url, endpoint, {
          params: { depositId: client.depositId },
          headers,
          body: JSON.stringify(body),
        });
        expect(status, endpoint.id).toBeLessThan(500);
      }),
      { numRuns: 25 },
    );
  }
});

test('IN-07 query strings and path parameters are read by schema', async () => {
  const client = await testClient();
  const record = `/api/deposits/${client.depositId}/record`;
  for (const query of [
    'page=0',
    'page=x',
    'pageSize=501',
    'page=1&page=2',
    'unknown=1',
    'page[a]=1',
    `text=${'x'.repeat(121)}`,
    'page=1e400',
    'page=NaN',
  ]) {
    expect([query, (await client.as('lead').get(`${record}?${query}`)).status]).toEqual([
      query,
      400,
    ]);
  }
  for (const nasty of NASTY.filter((text) => text !== '\ud800')) {
    const encoded = encodeURIComponent(nasty);
    expect((await client.as('lead').get(`${record}?text=${encoded}`)).status).toBe(200);
    expect((await client.as('lead').get(`/api/deposits/${encoded}`)).status).toBeLessThan(500);
  }
  expect((await client.db('users').select('id')).length).toBe(9);
});
