import { expect, test } from 'vitest';
import { DAY_MS, HOUR_MS, MINUTE_MS } from '#server/lib/clock.ts';
import { PASSWORD } from '#tests/support/people.ts';
import { type TestClient, testClient } from '#tests/support/test-client.ts';

const NEW_PASSWORD = 'teapot under 7 ladders';

/** The token of the link in the newest message to an address. */
async function linkTo(
  client: TestClient,
  address: string,
  kind: 'reset' | 'accept',
): Promise<string> {
  for (let wait = 0; wait < 100; wait++) {
    const messages = (await client.as(null).get('/api/mailbox')).body as {
      to: string;
      text: string;
    }[];
    const found = messages
      .find((message) => message.to === address)
      ?.text.match(new RegExp(`http://localhost:4310/${kind}/(\\S+)`))?.[1];
    if (found !== undefined) return found;
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
  throw new Error(`no message to ${address}`);
}

/** Text of every row of every table, to look for secrets in. */
async function everything(client: TestClient): Promise<string> {
  const tables: { name: string }[] = await client
    .db('sqlite_master')
    .where({ type: 'table' })
    .select('name');
  return JSON.stringify(await Promise.all(tables.map(({ name }) => client.db(name))));
}

const invite = (client: TestClient, email: string, role = 'geologist') =>
  client.as('lead').post(`/api/deposits/${client.depositId}/invitations`).send({ email, role });
const accept = (client: TestClient, token: string, body: object) =>
  client.as(null).post(`/api/invitations/${token}`).send(body);

test('AU-07 a reset link works once, within an hour, ends all sessions, and is stored hashed', async () => {
  const client = await testClient();
  const email = client.of('lead').email;
  const ask = () => client.as(null).post('/api/password-resets').send({ email });
  const use = (token: string) =>
    client.as(null).post(`/api/password-resets/${token}`).send({ newPassword: NEW_PASSWORD });

  expect((await ask()).status).toBe(202);
  const token = await linkTo(client, email, 'reset');
  expect(Buffer.from(token, 'base64url').length * 8).toBeGreaterThanOrEqual(128);
  expect(await everything(client)).not.toContain(token);
  client.clock.advance(HOUR_MS - MINUTE_MS);
  expect((await use(token)).status).toBe(200);
  expect((await client.as('lead').get('/api/me')).status).toBe(401);
  expect((await use(token)).status).toBe(404);
  const signIn = (password: string) =>
    client.as(null).post('/api/session').send({ email, password });
  expect([(await signIn(PASSWORD)).status, (await signIn(NEW_PASSWORD)).status]).toEqual([
    401, 200,
  ]);
});

test('AU-07 a reset link is dead after an hour, and when a newer one was sent', async () => {
  const client = await testClient();
  const first = client.of('viewer').email;
  await client.as(null).post('/api/password-resets').send({ email: first });
  const old = await linkTo(client, first, 'reset');
  client.clock.advance(HOUR_MS + MINUTE_MS);
  expect(
    (await client.as(null).post(`/api/password-resets/${old}`).send({ newPassword: NEW_PASSWORD }))
      .status,
  ).toBe(404);

  const email = client.of('lead').email;
  await client.as(null).post('/api/password-resets').send({ email });
  const earlier = await linkTo(client, email, 'reset');
  await client.as(null).post('/api/password-resets').send({ email });
  let newest = earlier;
  while (newest === earlier) newest = await linkTo(client, email, 'reset');
  expect(
    (
      await client
        .as(null)
        .post(`/api/password-resets/${earlier}`)
        .send({ newPassword: NEW_PASSWORD })
    ).status,
  ).toBe(404);
  expect(
    (
      await client
        .as(null)
        .post(`/api/password-resets/${newest}`)
        .send({ newPassword: NEW_PASSWORD })
    ).status,
  ).toBe(200);
});

test('AU-07 an invitation makes an account and a membership once; its link is stored hashed', async () => {
  const client = await testClient();
  const made = await invite(client, 'New.Person@test.example');
  expect(made.status).toBe(201);
  expect(made.body).toMatchObject({
    email: 'new.person@test.example',
    role: 'geologist',
    invitedBy: 'Test lead',
  });
  const token = await linkTo(client, 'new.person@test.example', 'accept');
  expect(await everything(client)).not.toContain(token);

  const view = await client.as(null).get(`/api/invitations/${token}`);
  expect(view.body).toEqual({
    email: 'new.person@test.example',
    depositName: 'Deposit A',
    role: 'geologist',
    invitedBy: 'Test lead',
    hasAccount: false,
  });
  expect((await accept(client, token, { password: NEW_PASSWORD })).body).toMatchObject({
    status: 400,
    fields: [{ path: 'body.name' }],
  });
  expect(
    (await accept(client, token, { name: 'New Person', password: 'short' })).body,
  ).toMatchObject({ status: 400, code: 'weak-password' });

  const both = await Promise.all(
    [1, 2].map(() => accept(client, token, { name: 'New Person', password: NEW_PASSWORD })),
  );
  expect(both.map(({ status }) => status).sort()).toEqual([200, 404]);
  const good = both.find(({ status }) => status === 200);
  expect(good?.body).toMatchObject({
    me: { name: 'New Person', isAdministrator: false },
    depositId: client.depositId,
  });
  const cookie = good?.get('set-cookie')?.[0]?.split(';')[0] ?? '';
  expect(
    (await client.bare().get(`/api/deposits/${client.depositId}`).set('Cookie', cookie)).body,
  ).toMatchObject({ myRole: 'geologist' });
  expect((await accept(client, token, { name: 'Again', password: NEW_PASSWORD })).status).toBe(404);
});

test("an invitation to somebody with an account asks for that account's password", async () => {
  const client = await testClient();
  const { email, id } = client.of('outsider');
  await invite(client, email, 'estimator');
  const token = await linkTo(client, email, 'accept');
  expect((await client.as(null).get(`/api/invitations/${token}`)).body).toMatchObject({
    hasAccount: true,
  });
  expect((await accept(client, token, { password: 'not the password' })).body).toMatchObject({
    status: 403,
    code: 'wrong-password',
  });
  expect((await accept(client, token, { password: PASSWORD })).status).toBe(200);
  const { members } = (await client.as('lead').get(`/api/deposits/${client.depositId}/members`))
    .body as { members: { userId: number; role: string }[] };
  expect(members.find(({ userId }) => userId === id)?.role).toBe('estimator');
});

test('AU-07 an invitation is dead after 7 days or when withdrawn', async () => {
  const client = await testClient();
  const { id } = (await invite(client, 'a@test.example')).body as { id: number };
  const token = await linkTo(client, 'a@test.example', 'accept');
  expect((await invite(client, 'a@test.example')).body).toMatchObject({
    status: 409,
    code: 'already-invited',
  });
  expect(
    (await client.as('lead').delete(`/api/deposits/${client.depositId}/invitations/${id}`)).status,
  ).toBe(200);
  expect((await accept(client, token, { name: 'A', password: NEW_PASSWORD })).status).toBe(404);

  await invite(client, 'b@test.example');
  const late = await linkTo(client, 'b@test.example', 'accept');
  client.clock.advance(7 * DAY_MS + MINUTE_MS);
  expect((await accept(client, late, { name: 'B', password: NEW_PASSWORD })).status).toBe(404);
});

test('inviting a member, or with a mail server that refuses, changes nothing', async () => {
  const client = await testClient();
  expect((await invite(client, client.of('viewer').email)).body).toMatchObject({
    status: 409,
    code: 'already-member',
  });
  client.mailer.send = () => Promise.reject(new Error('550 no'));
  expect((await invite(client, 'c@test.example')).body).toMatchObject({
    status: 502,
    code: 'mail-not-sent',
  });
  const { invitations } = (await client.as('lead').get(`/api/deposits/${client.depositId}/members`))
    .body as { invitations: unknown[] };
  expect(invitations).toEqual([]);
});

test('AU-07 an API token is shown once, stored hashed, bound to its deposit and time, and can be revoked', async () => {
  const client = await testClient();
  const made = await client
    .as('geologist')
    .post(`/api/deposits/${client.depositId}/tokens`)
    .send({ name: 'Nightly script', right: 'read', days: 30 });
  expect(made.status).toBe(201);
  const { text, token } = made.body as { text: string; token: { id: number } };
  expect(await everything(client)).not.toContain(text);

  const read = (depositId = client.depositId) =>
    client.bare().get(`/api/deposits/${depositId}`).set('Authorization', `Bearer ${text}`);
  expect([(await read()).status, (await read(client.otherDepositId)).status]).toEqual([200, 404]);
  const list = async (who: 'geologist' | 'lead' | 'viewer') =>
    (await client.as(who).get(`/api/deposits/${client.depositId}/tokens`)).body as {
      id: number;
      lastUsedAt: string | null;
    }[];
  expect((await list('geologist'))[0]).toMatchObject({
    id: token.id,
    name: 'Nightly script',
    owner: { name: 'Test geologist' },
    lastUsedAt: expect.any(String) as string,
  });
  expect([await list('lead'), await list('viewer')].map((rows) => rows.length)).toEqual([1, 0]);

  expect(
    (await client.as('viewer').delete(`/api/deposits/${client.depositId}/tokens/${token.id}`))
      .status,
  ).toBe(404);
  expect(
    (await client.as('lead').delete(`/api/deposits/${client.depositId}/tokens/${token.id}`)).status,
  ).toBe(200);
  expect((await read()).status).toBe(401);

  const other = await client.token('read', 'geologist');
  const withOther = () =>
    client.bare().get(`/api/deposits/${client.depositId}`).set('Authorization', `Bearer ${other}`);
  expect((await withOther()).status).toBe(200);
  client.clock.advance(30 * DAY_MS + MINUTE_MS);
  expect((await withOther()).status).toBe(401);
});

test('AU-07 the mailbox is not there with a real mail server', async () => {
  const client = await testClient({ env: { SMTP_URL: 'smtp://127.0.0.1:1' } });
  expect((await client.as('administrator').get('/api/mailbox')).status).toBe(404);
});

test("AU-03 a token's rights follow its owner: no member, no token", async () => {
  const client = await testClient();
  const token = await client.token('work', 'geologist');
  const read = () =>
    client.bare().get(`/api/deposits/${client.depositId}`).set('Authorization', `Bearer ${token}`);
  expect((await read()).status).toBe(200);
  await client
    .as('lead')
    .delete(`/api/deposits/${client.depositId}/members/${client.of('geologist').id}`);
  expect((await read()).status).toBe(401);
});
