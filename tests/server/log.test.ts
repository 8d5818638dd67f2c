import { expect, test } from 'vitest';
import { PASSWORD } from '#tests/support/people.ts';
import { testClient } from '#tests/support/test-client.ts';

interface Line {
  time: string;
  level: string;
  msg: string;
  requestId?: string;
  route?: string;
  status?: number;
  userId?: number | null;
  depositId?: number | null;
  ms?: number;
  event?: string;
}

const CANARY = 'canary-b1rd-in-the-shaft';

test('OB-01 one line per request, and none holds a secret', async () => {
  const client = await testClient();
  const token = await client.token('read');
  const res = await client.as('viewer').get(`/api/deposits/${client.depositId}`);
  await client
    .as(null)
    .post('/api/session')
    .send({ email: `${CANARY}@test.example`, password: CANARY });
  await client
    .as(null)
    .post('/api/session')
    .send({ email: client.of('lead').email, password: PASSWORD });
  await client
    .as('lead')
    .post('/api/me/password')
    .send({ currentPassword: CANARY, newPassword: `${CANARY} and more` });
  await client.as(null).get(`/api/invitations/${CANARY}`);
  await client
    .as(null)
    .post(`/api/password-resets/${CANARY}`)
    .send({ newPassword: 'gravel pigeon lantern' });
  await client.as(null).get(`/accept/${CANARY}?q=${CANARY}`);
  await client.bare().get('/api/me').set('Authorization', `Bearer ${CANARY}`);
  await client
    .bare()
    .get(`/api/deposits/${client.depositId}/record?text=${CANARY}`)
    .set('Authorization', `Bearer ${token}`);
  await client
    .as('lead')
    .post('/api/deposits')
    .set('Content-Type', 'application/json')
    .send(`{"broken": "${CANARY}`);

  const text = client.logLines.join('\n');
  for (const secret of [
    CANARY,
    PASSWORD,
    token,
    client.of('viewer').cookie,
    client.of('lead').cookie,
    'set-cookie',
  ])
    expect(text).not.toContain(secret);

  const lines = client.logLines.map((line) => JSON.parse(line) as Line);
  const requests = lines.filter(({ msg }) => msg === 'request');
  expect(requests).toHaveLength(10);
  expect(requests.find(({ requestId }) => requestId === res.get('x-request-id'))).toMatchObject({
    level: 'info',
    route: '/deposits/:depositId',
    status: 200,
    userId: client.of('viewer').id,
    depositId: client.depositId,
    time: expect.stringMatching(/^\d{4}-\d\d-\d\dT[\d:.]+Z$/) as string,
    ms: expect.any(Number) as number,
  });
});

test('OB-02 security events are told, one line each', async () => {
  const client = await testClient();
  const { email } = client.of('lead');
  await client.as(null).post('/api/session').send({ email, password: 'not the password' });
  await client.as(null).post('/api/session').send({ email, password: PASSWORD });
  await client
    .as('viewer')
    .put(`/api/deposits/${client.depositId}`)
    .set('If-Match', '"1"')
    .send({});
  await client
    .as('lead')
    .patch(`/api/deposits/${client.depositId}/members/${client.of('viewer').id}`)
    .send({ role: 'estimator' });
  await client
    .as('lead')
    .post(`/api/deposits/${client.depositId}/tokens`)
    .send({ name: 'T', right: 'read', days: 1 });
  const events = client.logLines
    .map((line) => (JSON.parse(line) as Line).event)
    .filter((event) => event !== undefined);
  expect(events).toEqual([
    'sign-in.failed',
    'sign-in.ok',
    'access.refused',
    'role.changed',
    'token.created',
  ]);
});
