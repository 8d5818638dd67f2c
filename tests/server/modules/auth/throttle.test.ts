import { describe, expect, test, vi } from 'vitest';
import { openDb } from '#server/db/knex.ts';
import { createLog } from '#server/lib/log.ts';
import { createThrottle } from '#server/modules/auth/throttle.ts';
import { PASSWORD } from '#tests/support/people.ts';
import { tempInstance } from '#tests/support/temp-instance.ts';
import { type TestClient, testClient } from '#tests/support/test-client.ts';

const TRUSTED = { env: { TRUST_PROXY: '1' } };

const signIn = (
  client: TestClient,
  password: string,
  address: string,
  email = 'lead@test.example',
) => client.as(null).post('/api/session').set('X-Forwarded-For', address).send({ email, password });

describe('AU-05 failed tries are throttled', () => {
  test('the sixth try in a row answers 429 with a wait; the owner elsewhere signs in', async () => {
    const client = await testClient(TRUSTED);
    for (let attempt = 1; attempt <= 5; attempt++)
      expect((await signIn(client, `wrong ${attempt}`, '203.0.113.9')).status).toBe(401);
    const sixth = await signIn(client, PASSWORD, '203.0.113.9');
    expect([sixth.status, sixth.get('retry-after')]).toEqual([429, '900']);
    expect((await signIn(client, PASSWORD, '198.51.100.7')).status).toBe(200);
    expect(client.logLines.filter((line) => line.includes('"event":"throttled"'))).toHaveLength(1); // OB-02
  });

  test('a right password takes the failures back', async () => {
    const client = await testClient(TRUSTED);
    for (let round = 0; round < 3; round++) {
      for (let attempt = 1; attempt <= 4; attempt++)
        expect((await signIn(client, 'wrong', '203.0.113.9')).status).toBe(401);
      expect((await signIn(client, PASSWORD, '203.0.113.9')).status).toBe(200);
    }
  });

  test('tries sent at once get no further than tries in a row', async () => {
    const client = await testClient(TRUSTED);
    const answers = await Promise.all(
      Array.from({ length: 20 }, (_none, at) => signIn(client, `wrong ${at}`, '203.0.113.9')),
    );
    expect(answers.filter(({ status }) => status === 401)).toHaveLength(5);
    expect(answers.filter(({ status }) => status === 429)).toHaveLength(15);
  });

  test('50 failures of one address, over many accounts, stop it', async () => {
    const { env, remove } = await tempInstance();
    const db = openDb(env.paths.database);
    const throttle = createThrottle(db, createLog('silent'));
    for (let attempt = 0; attempt < 50; attempt++)
      await throttle.beginTry(`person${attempt}@test.example`, '203.0.113.9');
    await expect(throttle.beginTry('another@test.example', '203.0.113.9')).rejects.toMatchObject({
      status: 429,
    });
    await expect(throttle.beginTry('another@test.example', '198.51.100.7')).resolves.toBeDefined();
    await db.destroy();
    remove();
  });

  test('without a trusted proxy the forwarded address is not believed', async () => {
    const client = await testClient();
    const statuses: number[] = [];
    for (let attempt = 1; attempt <= 6; attempt++)
      statuses.push((await signIn(client, 'wrong', `203.0.113.${attempt}`)).status);
    expect(statuses).toEqual([401, 401, 401, 401, 401, 429]);
  });

  test('the count survives a restart, and the wait doubles', async () => {
    const { env, remove } = await tempInstance();
    vi.useFakeTimers({ toFake: ['Date'] });
    const inNewProcess = async (
      work: (throttle: ReturnType<typeof createThrottle>) => Promise<void>,
    ) => {
      const db = openDb(env.paths.database);
      await work(createThrottle(db, createLog('silent')));
      await db.destroy();
    };
    const failTimes = (times: number) =>
      inNewProcess(async (throttle) => {
        for (let attempt = 0; attempt < times; attempt++)
          await throttle.beginTry('a@test.example', '203.0.113.9');
      });
    const refusedFor = (seconds: number) =>
      inNewProcess(async (throttle) => {
        await expect(throttle.beginTry('a@test.example', '203.0.113.9')).rejects.toMatchObject({
          status: 429,
          extras: { retryAfterS: seconds },
        });
      });
    try {
      await failTimes(5);
      await refusedFor(900);
      vi.setSystemTime(Date.now() + 901_000);
      await failTimes(5);
      await refusedFor(1800);
      vi.setSystemTime(Date.now() + 1_000_000);
      await refusedFor(800);
    } finally {
      vi.useRealTimers();
      remove();
    }
  });
});
