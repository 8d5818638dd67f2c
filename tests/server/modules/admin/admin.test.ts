import { expect, test, vi } from 'vitest';
import { testClient } from '#tests/support/test-client.ts';

test('an administrator sees everybody and every deposit, without contents', async () => {
  const client = await testClient();
  await client.db('uploads').insert({
    deposit_id: client.depositId,
    file_name: 'a.csv',
    stored_name: 'x',
    size_bytes: 1234,
    sha256: 'y',
    uploaded_by: client.of('lead').id,
    uploaded_at: new Date().toISOString(),
    state: 'mapped',
    encoding: 'utf-8',
    row_count: 1,
    guess: '[]',
    header_signature: 's',
    mapping: '{}',
  });
  const users = (await client.as('administrator').get('/api/admin/users')).body as {
    email: string;
    deposits: number;
  }[];
  expect(users).toHaveLength(9);
  expect(users.find(({ email }) => email === 'viewer@test.example')).toMatchObject({
    deposits: 1,
    isActive: true,
    isAdministrator: false,
  });
  expect((await client.as('administrator').get('/api/admin/deposits')).body).toMatchObject([
    { name: 'Deposit A', members: 6, leads: ['Test lead'], bytesStored: 1234 },
    { name: 'Deposit B', members: 1, leads: ['Test lead of b'], bytesStored: 0 },
  ]);
});

test('the last administrator stays; a second one can take over, and a change ends sessions', async () => {
  const client = await testClient();
  const change = (who: 'administrator' | 'outsider', body: object) =>
    client
      .as('administrator')
      .patch(`/api/admin/users/${client.of(who).id}`)
      .send(body);
  for (const body of [{ isActive: false }, { isAdministrator: false }])
    expect((await change('administrator', body)).body).toMatchObject({
      status: 409,
      code: 'last-administrator',
    });
  expect((await change('outsider', {})).status).toBe(400);
  expect((await change('outsider', { isAdministrator: true })).body).toMatchObject({
    isAdministrator: true,
  });
  expect((await client.as('outsider').get('/api/me')).status).toBe(401);
  expect((await change('administrator', { isAdministrator: false })).status).toBe(200);
  expect((await client.as('administrator').get('/api/admin/users')).status).toBe(401);
  expect(
    (await client.as('administrator').patch('/api/admin/users/987654').send({ isActive: false }))
      .status,
  ).toBe(401);
});

test('inviting to the instance sends a link; an account there already is told', async () => {
  const client = await testClient();
  expect(
    (await client.as('administrator').post('/api/admin/users').send({ email: 'z@test.example' }))
      .status,
  ).toBe(201);
  expect(client.mailer.caught()?.[0]).toMatchObject({
    to: 'z@test.example',
    text: expect.stringContaining('http://localhost:4310/accept/') as string,
  });
  expect(
    (
      await client
        .as('administrator')
        .post('/api/admin/users')
        .send({ email: 'viewer@test.example' })
    ).status,
  ).toBe(409);
});

test('the demonstration is reset on a demonstration instance only', async () => {
  const reset = vi.fn(() => Promise.resolve());
  const signIns = [{ email: 'a@demo.example', password: 'shown to all', name: 'A', role: 'lead' }];
  const demo = {
    signIns,
    reset,
    seed: () => Promise.resolve(),
    files: () => Promise.resolve([]),
    file: () => Promise.resolve(''),
  };
  const client = await testClient({ deps: { demo } });
  expect((await client.as('administrator').post('/api/admin/demo-reset')).status).toBe(202);
  expect(reset).toHaveBeenCalledOnce();
  expect((await client.as(null).get('/api/instance')).body).toEqual({
    isDemoInstance: true,
    demoSignIns: signIns,
  });

  const without = await testClient();
  expect((await without.as('administrator').post('/api/admin/demo-reset')).status).toBe(404);
  expect((await without.as(null).get('/api/instance')).body).toMatchObject({ demoSignIns: [] });
});
