import { expect, test } from 'vitest';
import { testClient } from '#tests/support/test-client.ts';

const setUp = async () => {
  const client = await testClient();
  const memberPath = (who: Parameters<typeof client.of>[0]) =>
    `/api/deposits/${client.depositId}/members/${client.of(who).id}`;
  return { client, memberPath };
};

test('AZ-04 the last lead can neither step down nor be removed, through the API or by SQL', async () => {
  const { client, memberPath } = await setUp();
  expect(
    (await client.as('lead').patch(memberPath('lead')).send({ role: 'viewer' })).body,
  ).toMatchObject({ status: 409, code: 'last-lead' });
  expect((await client.as('lead').delete(memberPath('lead'))).body).toMatchObject({
    status: 409,
    code: 'last-lead',
  });
  const row = { deposit_id: client.depositId, user_id: client.of('lead').id };
  await expect(client.db('memberships').where(row).delete()).rejects.toThrow(
    'keeps at least one lead',
  );
  await expect(client.db('memberships').where(row).update({ role: 'viewer' })).rejects.toThrow(
    'keeps at least one lead',
  );
});

test('a second lead lets the first step down; a deactivated one does not', async () => {
  const { client, memberPath } = await setUp();
  expect(
    (await client.as('lead').patch(memberPath('geologist')).send({ role: 'lead' })).body,
  ).toMatchObject({ role: 'lead', name: 'Test geologist' });
  await client
    .as('administrator')
    .patch(`/api/admin/users/${client.of('geologist').id}`)
    .send({ isActive: false });
  expect((await client.as('lead').patch(memberPath('lead')).send({ role: 'viewer' })).status).toBe(
    409,
  );
  await client
    .as('administrator')
    .patch(`/api/admin/users/${client.of('geologist').id}`)
    .send({ isActive: true });
  expect((await client.as('lead').patch(memberPath('lead')).send({ role: 'viewer' })).status).toBe(
    200,
  );
});

test('AU-03 losing the role is felt at the next request', async () => {
  const { client, memberPath } = await setUp();
  const read = () => client.as('viewer').get(`/api/deposits/${client.depositId}`);
  expect((await read()).status).toBe(200);
  expect((await client.as('lead').delete(memberPath('viewer'))).status).toBe(200);
  expect((await read()).body).toMatchObject({ status: 404, code: 'no-such-deposit' });
});

test('deleting a deposit takes its members with it, last lead and all', async () => {
  const { client } = await setUp();
  await client.db('deposits').where({ id: client.depositId }).delete();
  expect(await client.db('memberships').where({ deposit_id: client.depositId })).toEqual([]);
});

test('the list has members and open invitations', async () => {
  const { client } = await setUp();
  await client
    .as('lead')
    .post(`/api/deposits/${client.depositId}/invitations`)
    .send({ email: 'a@test.example', role: 'viewer' });
  const { body } = await client.as('viewer').get(`/api/deposits/${client.depositId}/members`);
  expect((body as { members: { role: string }[] }).members.map(({ role }) => role).sort()).toEqual([
    'estimator',
    'geologist',
    'geometallurgist',
    'lead',
    'site-geologist',
    'viewer',
  ]);
  expect(body).toMatchObject({
    invitations: [{ email: 'a@test.example', role: 'viewer', invitedBy: 'Test lead' }],
  });
});
