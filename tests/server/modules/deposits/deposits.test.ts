import fc from 'fast-check';
import { expect, test } from 'vitest';
import { DEPOSIT_BODY } from '#tests/support/people.ts';
import { type TestClient, testClient } from '#tests/support/test-client.ts';

const countDeposits = async ({ db }: TestClient): Promise<number> =>
  (await db('deposits').select('id')).length;

test('a person who creates a deposit leads it, and finds it in the list', async () => {
  const client = await testClient();
  const made = await client.as('outsider').post('/api/deposits').send(DEPOSIT_BODY);
  expect([made.status, made.get('etag')]).toEqual([201, '"1"']);
  expect(made.body).toMatchObject({
    ...DEPOSIT_BODY,
    myRole: 'lead',
    version: 1,
    isDemo: false,
    leads: [{ name: 'Test outsider' }],
  });
  const list = await client.as('outsider').get('/api/deposits');
  expect(list.body).toEqual([
    {
      id: (made.body as { id: number }).id,
      name: 'Larkspur Hill',
      description: 'Invented for the tests',
      isDemo: false,
      myRole: 'lead',
      payAnalytes: [{ analyte: 'Cu', unit: '%' }],
      holes: 0,
      metres: 0,
      finding: 'No drill holes are loaded yet.',
    },
  ]);
});

test('the list takes its counts from the summaries given', async () => {
  const depositSummaries = (ids: readonly number[]) =>
    Promise.resolve(
      new Map(ids.map((id) => [id, { holes: 12, metres: 3400, finding: 'Four domains hold.' }])),
    );
  const client = await testClient({ deps: { depositSummaries } });
  expect((await client.as('viewer').get('/api/deposits')).body).toMatchObject([
    { id: client.depositId, holes: 12, metres: 3400, finding: 'Four domains hold.' },
  ]);
});

test('CO-01 a change needs the version last read; a stale one is told the version now current', async () => {
  const client = await testClient();
  const put = (ifMatch: string | null, name: string) => {
    const call = client
      .as('lead')
      .put(`/api/deposits/${client.depositId}`)
      .send({ ...DEPOSIT_BODY, name });
    return ifMatch === null ? call : call.set('If-Match', ifMatch);
  };
  expect((await client.as('viewer').get(`/api/deposits/${client.depositId}`)).get('etag')).toBe(
    '"1"',
  );
  expect((await put(null, 'None')).body).toMatchObject({ status: 428, code: 'version-needed' });
  for (const bad of ['*', 'W/"1"', '1', '"one"']) expect((await put(bad, 'Bad')).status).toBe(400);
  const first = await put('"1"', 'First');
  expect([first.status, first.get('etag')]).toEqual([200, '"2"']);
  expect((await put('"1"', 'Second')).body).toMatchObject({
    status: 412,
    code: 'stale-version',
    currentVersion: 2,
  });
  expect((await client.as('lead').get(`/api/deposits/${client.depositId}`)).body).toMatchObject({
    name: 'First',
    version: 2,
  });
});

test('CO-01 of many changes sent at once with one version, one wins', async () => {
  const client = await testClient();
  const puts = Array.from({ length: 8 }, (_none, at) =>
    client
      .as('lead')
      .put(`/api/deposits/${client.depositId}`)
      .set('If-Match', '"1"')
      .send({ ...DEPOSIT_BODY, name: `Name ${at}` }),
  );
  const statuses = (await Promise.all(puts)).map(({ status }) => status).sort();
  expect(statuses).toEqual([200, ...Array.from({ length: 7 }, () => 412)]);
});

test('CO-02 one key has one effect: repeats get the first answer, another body is refused', async () => {
  const client = await testClient();
  const before = await countDeposits(client);
  const post = (body: object, key = 'a-key-of-the-test', who: 'outsider' | 'lead' = 'outsider') =>
    client.as(who).post('/api/deposits').set('Idempotency-Key', key).send(body);
  const answers = await Promise.all(Array.from({ length: 20 }, () => post(DEPOSIT_BODY)));
  expect(new Set(answers.map(({ status }) => status))).toEqual(new Set([201]));
  expect(new Set(answers.map(({ text }) => text)).size).toBe(1);
  expect(new Set(answers.map((answer) => answer.get('etag')))).toEqual(new Set(['"1"']));
  expect(await countDeposits(client)).toBe(before + 1);

  expect((await post({ ...DEPOSIT_BODY, name: 'Another' })).body).toMatchObject({
    status: 422,
    code: 'idempotency-key-reused',
  });
  expect((await post(DEPOSIT_BODY, 'a-key-of-the-test', 'lead')).status).toBe(201); // another person's key
  expect(await countDeposits(client)).toBe(before + 2);
  client.clock.advance(25 * 3_600_000);
  const again = await client
    .as(null)
    .post('/api/session')
    .send({ email: client.of('outsider').email, password: 'plum wagon 41 otters' });
  const cookie = again.get('set-cookie')?.[0]?.split(';')[0] ?? '';
  const late = await client
    .as(null)
    .post('/api/deposits')
    .set('Cookie', cookie)
    .set('Idempotency-Key', 'a-key-of-the-test')
    .send(DEPOSIT_BODY);
  expect(late.status).toBe(201);
  expect(await countDeposits(client)).toBe(before + 3);
});

test('CO-02 a refused request leaves its key free; a request cut short says so', async () => {
  const client = await testClient();
  const invite = (email: string) =>
    client
      .as('lead')
      .post(`/api/deposits/${client.depositId}/invitations`)
      .set('Idempotency-Key', 'invite-key-1')
      .send({ email, role: 'viewer' });
  expect((await invite(client.of('viewer').email)).status).toBe(409);
  expect((await invite('somebody.new@test.example')).status).toBe(201);

  await client.db('idempotency_keys').update({ status: null, body: null }); // as after a crash between effect and answer
  expect((await invite('somebody.new@test.example')).body).toMatchObject({
    status: 409,
    code: 'outcome-unknown',
  });
  expect(
    (
      await client
        .as('lead')
        .post('/api/deposits')
        .set('Idempotency-Key', 'short')
        .send(DEPOSIT_BODY)
    ).status,
  ).toBe(400);
});

test('AZ-03 keys beyond the contract are refused and nothing is stored', async () => {
  const client = await testClient();
  const before = JSON.stringify(await client.db('deposits'));
  const key = fc.oneof(
    fc.constantFrom(
      'role',
      'myRole',
      'owner',
      'isDemo',
      'is_demo',
      'id',
      'version',
      'createdBy',
      'leads',
      '__proto__',
      'constructor',
      'toString',
    ),
    fc.string({ minLength: 1, maxLength: 20 }),
  );
  await fc.assert(
    fc.asyncProperty(key, fc.jsonValue({ maxDepth: 2 }), async (name, value) => {
      fc.pre(!Object.hasOwn(DEPOSIT_BODY, name));
      const body = JSON.stringify(DEPOSIT_BODY).replace(
        /\}$/,
        `,${JSON.stringify(name)}:${JSON.stringify(value)}}`,
      );
      const put = await client
        .as('lead')
        .put(`/api/deposits/${client.depositId}`)
        .set('If-Match', '"999"')
        .set('Content-Type', 'application/json')
        .send(body);
      expect([400, 412]).toContain(put.status);
      if (name !== '__proto__') expect(put.status).toBe(400);
    }),
    { numRuns: 60 },
  );
  expect(JSON.stringify(await client.db('deposits'))).toBe(before);
});
