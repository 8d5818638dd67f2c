import fc from 'fast-check';
import jwt from 'jsonwebtoken';
import type { Response } from 'supertest';
import { beforeAll, describe, expect, test } from 'vitest';
import { DAY_MS, HOUR_MS, MINUTE_MS } from '#server/lib/clock.ts';
import { createSessionJwt } from '#server/modules/auth/session-jwt.ts';
import { PASSWORD } from '#tests/support/people.ts';
import { TEST_SECRET } from '#tests/support/temp-instance.ts';
import { type TestClient, testClient } from '#tests/support/test-client.ts';

let client: TestClient;
beforeAll(async () => {
  client = await testClient();
});

const signIn = (to: TestClient, who: Parameters<TestClient['of']>[0], password = PASSWORD) =>
  to
    .as(null)
    .post('/api/session')
    .send({ email: to.of(who).email, password });
const cookieOf = (res: Response): string => res.get('set-cookie')?.[0]?.split(';')[0] ?? '';
const me = (to: TestClient, cookie: string) => to.bare().get('/api/me').set('Cookie', cookie);

describe('AU-01 the session is one cookie', () => {
  test('over TLS with the host prefix and every attribute, and nowhere in the body', async () => {
    const tls = await testClient({ env: { PUBLIC_URL: 'https://selvage.example' } });
    const res = await signIn(tls, 'lead');
    expect(res.status).toBe(200);
    const [cookie = '', ...others] = res.get('set-cookie') ?? [];
    expect(others).toEqual([]);
    const [pair = '', ...attributes] = cookie.split('; ');
    expect(pair).toMatch(/^__Host-selvage=[\w-]+\.[\w-]+\.[\w-]+$/);
    expect(attributes.filter((attribute) => !attribute.startsWith('Expires')).sort()).toEqual([
      'HttpOnly',
      `Max-Age=${7 * 24 * 3600}`,
      'Path=/',
      'SameSite=Strict',
      'Secure',
    ]);
    expect(res.text).not.toContain(pair.split('=')[1]);
    expect((await me(tls, pair)).body).toMatchObject({ email: 'lead@test.example' });
  });

  test('over plain HTTP without prefix and Secure', async () => {
    const res = await signIn(client, 'lead');
    const cookie = res.get('set-cookie')?.[0] ?? '';
    expect(cookie).toMatch(/^selvage=/);
    expect(cookie).toContain('HttpOnly');
    expect(cookie).toContain('SameSite=Strict');
    expect(cookie).not.toContain('Secure');
  });
});

describe('AU-02 only our own tokens are sessions', () => {
  const claims = () => ({ purpose: 'session', sub: '1', jti: 'x'.repeat(43) });
  const options = {
    algorithm: 'HS256',
    issuer: 'selvage',
    audience: 'selvage',
    expiresIn: '1h',
  } as const;
  const without = <Given extends object>(given: Given, ...keys: string[]): object =>
    Object.fromEntries(Object.entries(given).filter(([key]) => !keys.includes(key)));
  const encode = (part: object): string => Buffer.from(JSON.stringify(part)).toString('base64url');

  /** A good token: what each forgery differs from. Its session exists. */
  const good = () => client.of('viewer').cookie;
  const realClaims = () => jwt.decode(good()) as jwt.JwtPayload;
  const real = (change: object = {}) => {
    return { ...without(realClaims(), 'iat', 'exp', 'iss', 'aud'), ...change };
  };

  const forgeries: readonly (readonly [string, () => string])[] = [
    ['no algorithm', () => `${encode({ alg: 'none', typ: 'JWT' })}.${encode(realClaims())}.`],
    [
      'no algorithm, old signature',
      () => `${encode({ alg: 'none', typ: 'JWT' })}.${good().split('.').slice(1).join('.')}`,
    ],
    ['HS512', () => jwt.sign(real(), TEST_SECRET, { ...options, algorithm: 'HS512' })],
    ['HS384', () => jwt.sign(real(), TEST_SECRET, { ...options, algorithm: 'HS384' })],
    ['another secret', () => jwt.sign(real(), 'another secret that is also long enough', options)],
    ['an empty signature', () => `${good().split('.').slice(0, 2).join('.')}.`],
    ['no expiry', () => jwt.sign(real(), TEST_SECRET, without(options, 'expiresIn'))],
    ['expired', () => jwt.sign(real(), TEST_SECRET, { ...options, expiresIn: -10 })],
    ['not yet valid', () => jwt.sign(real(), TEST_SECRET, { ...options, notBefore: 600 })],
    ['another issuer', () => jwt.sign(real(), TEST_SECRET, { ...options, issuer: 'elsewhere' })],
    ['no issuer', () => jwt.sign(real(), TEST_SECRET, without(options, 'issuer'))],
    [
      'another audience',
      () => jwt.sign(real(), TEST_SECRET, { ...options, audience: 'elsewhere' }),
    ],
    ['no audience', () => jwt.sign(real(), TEST_SECRET, without(options, 'audience'))],
    ['another purpose', () => jwt.sign(real({ purpose: 'reset' }), TEST_SECRET, options)],
    ['no purpose', () => jwt.sign(real({ purpose: undefined }), TEST_SECRET, options)],
    [
      'another person',
      () => jwt.sign(real({ sub: String(client.of('lead').id) }), TEST_SECRET, options),
    ],
    ['a person who is no number', () => jwt.sign(real({ sub: 'admin' }), TEST_SECRET, options)],
    ['a session that never was', () => jwt.sign(claims(), TEST_SECRET, options)],
    ['no session', () => jwt.sign(real({ jti: undefined }), TEST_SECRET, options)],
    ['plain text', () => 'lead'],
    ['nothing', () => ''],
    ['JSON', () => JSON.stringify(realClaims())],
  ];

  test.each(forgeries)('a token with %s is answered 401', async (_label, forge) => {
    expect((await me(client, `selvage=${good()}`)).status).toBe(200);
    expect((await me(client, `selvage=${forge()}`)).status).toBe(401);
  });

  test('a token signed as ours is, for the session that exists, is let in (the forgeries fail by their one change)', async () => {
    expect((await me(client, `selvage=${jwt.sign(real(), TEST_SECRET, options)}`)).status).toBe(
      200,
    );
  });

  test('no token with one character changed verifies', () => {
    const tokens = createSessionJwt(TEST_SECRET, () => new Date());
    const token = good();
    const letters = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_.';
    fc.assert(
      fc.property(fc.nat(token.length - 2), fc.constantFrom(...letters), (at, letter) => {
        // The last character is left alone: its low bits are padding and carry nothing.
        if (token[at] === letter) return;
        expect(tokens.verify(token.slice(0, at) + letter + token.slice(at + 1))).toBeNull();
      }),
      { numRuns: 1000 },
    );
  });
});

describe('AU-03 sessions are rows and end at once', () => {
  test('signing out ends the session and clears what the browser kept', async () => {
    const cookie = cookieOf(await signIn(client, 'geologist'));
    const out = await client.as(null).delete('/api/session').set('Cookie', cookie);
    expect(out.get('clear-site-data')).toBe('"cache", "cookies", "storage"'); // OU-05
    expect((await me(client, cookie)).status).toBe(401);
  });

  test('changing the password ends the other sessions and keeps this one', async () => {
    const [here, there] = [
      cookieOf(await signIn(client, 'estimator')),
      cookieOf(await signIn(client, 'estimator')),
    ];
    const change = (currentPassword: string) =>
      client
        .as(null)
        .post('/api/me/password')
        .set('Cookie', here)
        .send({ currentPassword, newPassword: 'teapot under 7 ladders' });
    expect((await change('not the password')).status).toBe(403);
    expect((await me(client, there)).status).toBe(200);
    expect((await change(PASSWORD)).status).toBe(200);
    expect([(await me(client, here)).status, (await me(client, there)).status]).toEqual([200, 401]);
    expect((await signIn(client, 'estimator')).status).toBe(401);
    expect((await signIn(client, 'estimator', 'teapot under 7 ladders')).status).toBe(200);
  });

  test("a person sees and ends their own sessions, and nobody else's", async () => {
    const cookie = cookieOf(await signIn(client, 'site-geologist'));
    const list = (await client.as('site-geologist').get('/api/me/sessions')).body as {
      id: string;
      isThisOne: boolean;
    }[];
    expect(list.map((row) => row.isThisOne).sort()).toEqual([false, true]);
    const other = list.find((row) => !row.isThisOne)?.id ?? '';
    expect((await client.as('viewer').delete(`/api/me/sessions/${other}`)).status).toBe(404);
    expect((await client.as('site-geologist').delete(`/api/me/sessions/${other}`)).status).toBe(
      200,
    );
    expect((await me(client, cookie)).status).toBe(401);
  });

  test('12 idle hours or 7 days end a session', async () => {
    const own = await testClient();
    const cookie = `selvage=${own.of('lead').cookie}`;
    own.clock.advance(11 * HOUR_MS);
    expect((await me(own, cookie)).status).toBe(200);
    own.clock.advance(11 * HOUR_MS);
    expect((await me(own, cookie)).status).toBe(200); // used in between: not idle
    own.clock.advance(12 * HOUR_MS + MINUTE_MS);
    expect((await me(own, cookie)).status).toBe(401);

    const busy = await testClient();
    const used = `selvage=${busy.of('lead').cookie}`;
    for (let hours = 0; hours < 7 * 24; hours += 8) {
      expect((await me(busy, used)).status).toBe(200);
      busy.clock.advance((8 * DAY_MS) / 24);
    }
    expect((await me(busy, used)).status).toBe(401);
  });

  test('deactivation ends every session and every token at once', async () => {
    const own = await testClient();
    const token = await own.token('read', 'geologist');
    const { id } = own.of('geologist');
    const read = () =>
      own.bare().get(`/api/deposits/${own.depositId}`).set('Authorization', `Bearer ${token}`);
    expect((await read()).status).toBe(200);
    expect(
      (await own.as('administrator').patch(`/api/admin/users/${id}`).send({ isActive: false }))
        .status,
    ).toBe(200);
    expect((await own.as('geologist').get('/api/me')).status).toBe(401);
    expect((await read()).status).toBe(401);
    expect((await signIn(own, 'geologist')).status).toBe(401);
  });
});
