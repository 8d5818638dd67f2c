import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import request from 'supertest';
import { expect, test } from 'vitest';
import { createApp } from '#server/app.ts';
import { createBackground } from '#server/lib/background.ts';
import { createLog } from '#server/lib/log.ts';
import { cheapHasher } from '#tests/support/people.ts';
import { tempFolder } from '#tests/support/temp-instance.ts';
import { testClient } from '#tests/support/test-client.ts';

// The policy as the requirements word it, written here by hand.
const POLICY =
  "default-src 'none'; script-src 'self'; style-src 'self' 'unsafe-inline'; img-src 'self' blob: data:; font-src 'self'; connect-src 'self'; " +
  "worker-src 'self' blob:; form-action 'self'; base-uri 'none'; object-src 'none'; frame-ancestors 'none'";

const directives = (policy: string | undefined): string[] =>
  (policy ?? '').split(';').map((part) => part.trim());

const EXPECTED = {
  'x-content-type-options': 'nosniff',
  'referrer-policy': 'no-referrer',
  'cross-origin-opener-policy': 'same-origin',
  'cross-origin-resource-policy': 'same-origin',
};

test.each(['/api/health', '/api/nothing-here', '/api/me', '/api/openapi.json', '/some/page'])(
  'OU-02 headers of %s',
  async (path) => {
    const client = await testClient();
    const res = await client.bare().get(path);
    expect(directives(res.get('content-security-policy'))).toEqual(directives(POLICY));
    expect(res.headers).toMatchObject(EXPECTED);
    expect(res.headers).not.toHaveProperty('x-powered-by');
    expect(res.headers).not.toHaveProperty('strict-transport-security');
    expect(res.headers['x-request-id']).toMatch(/^[\da-f-]{36}$/);
    await client.close();
  },
);

test('OU-02 behind TLS, strict transport for a year', async () => {
  const client = await testClient({ env: { PUBLIC_URL: 'https://selvage.example' } });
  const res = await client.bare().get('/api/health');
  expect(res.get('strict-transport-security')).toBe('max-age=31536000');
});

test('OU-05 answers of the API are not stored by caches', async () => {
  const client = await testClient();
  for (const path of [
    '/api/me',
    '/api/deposits',
    `/api/deposits/${client.depositId}`,
    '/api/nothing-here',
  ]) {
    expect((await client.as('lead').get(path)).get('cache-control')).toBe('no-store');
  }
});

/** The app with its client in a folder, whatever has been built. */
async function appOn(clientDir: string) {
  const { env, db, mailer, compute } = await testClient();
  const log = createLog('silent');
  const deps = {
    env,
    db,
    log,
    clock: () => new Date(),
    mailer,
    compute,
    background: createBackground(log),
    hasher: cheapHasher,
    demo: null,
    checks: [],
  };
  return createApp(deps, clientDir).express;
}

test('the built client: hashed assets for a year, any page address gives the one page', async () => {
  const folder = tempFolder();
  mkdirSync(join(folder.path, 'assets'));
  writeFileSync(join(folder.path, 'index.html'), '<!doctype html><title>Selvage</title>');
  writeFileSync(join(folder.path, 'assets', 'index-4f2a.js'), 'export {};');
  const app = await appOn(folder.path);

  const page = await request(app).get('/deposits/3/groups');
  expect([page.status, page.get('content-type'), page.get('cache-control')]).toEqual([
    200,
    'text/html; charset=utf-8',
    'no-cache',
  ]);
  const asset = await request(app).get('/assets/index-4f2a.js');
  expect([asset.status, asset.get('cache-control')]).toEqual([
    200,
    'public, max-age=31536000, immutable',
  ]);
  expect((await request(app).get('/assets/gone.js')).status).toBe(404);
  expect((await request(app).get('/api/gone')).status).toBe(404);
  folder.remove();
});

test('without a built client the server says so', async () => {
  const folder = tempFolder();
  const res = await request(await appOn(folder.path)).get('/');
  expect([res.status, res.text]).toEqual([503, expect.stringContaining('npm run build')]);
  folder.remove();
});
