import { readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { EnvError, readEnv } from '#server/lib/env.ts';
import { tempFolder } from '#tests/support/temp-instance.ts';

let folder: ReturnType<typeof tempFolder>;
beforeAll(() => {
  folder = tempFolder();
});
afterAll(() => folder.remove());

const SECRET = 'x'.repeat(32);
const production = (change: Record<string, string> = {}) => ({
  INSTANCE: 'production',
  DATA_DIR: join(folder.path, 'production'),
  SESSION_SECRET: SECRET,
  PUBLIC_URL: 'https://selvage.example',
  SMTP_URL: 'smtps://a:b@mail.example',
  ...change,
});

test('without a setting it is a demonstration on port 4310 with plain HTTP', () => {
  const env = readEnv({ DATA_DIR: folder.path });
  expect(env).toMatchObject({
    port: 4310,
    instance: 'demo',
    publicUrl: 'http://localhost:4310',
    isHttps: false,
    smtpUrl: null,
    trustProxy: false,
  });
});

test('AU-02 the demonstration makes its secret once, for its owner only, and keeps it', () => {
  const first = readEnv({ DATA_DIR: folder.path }).sessionSecret;
  expect(new TextEncoder().encode(first).length).toBeGreaterThanOrEqual(32);
  expect(readEnv({ DATA_DIR: folder.path }).sessionSecret).toBe(first);
  const path = join(folder.path, 'session-secret');
  expect(statSync(path).mode & 0o077).toBe(0);
  expect(readFileSync(path, 'utf8').trim()).toBe(first);
  writeFileSync(path, 'short\n');
  expect(() => readEnv({ DATA_DIR: folder.path })).toThrow(EnvError);
});

describe('what is wrong is said by name', () => {
  test.each([
    ['PORT', { PORT: 'eighty' }, /PORT/],
    ['PORT too large', { PORT: '70000' }, /PORT/],
    ['INSTANCE', { INSTANCE: 'staging' }, /INSTANCE/],
    ['PUBLIC_URL', { PUBLIC_URL: 'selvage.example' }, /PUBLIC_URL: expected an address/],
    [
      'TRUST_PROXY true (AU-05)',
      { TRUST_PROXY: 'true' },
      /TRUST_PROXY: expected a number of proxies/,
    ],
    ['LOG_LEVEL', { LOG_LEVEL: 'loud' }, /LOG_LEVEL/],
    ['SMTP_URL', { SMTP_URL: 'http://mail' }, /SMTP_URL/],
    [
      'SESSION_SECRET of 31 bytes (AU-02)',
      { SESSION_SECRET: 'x'.repeat(31) },
      /SESSION_SECRET: expected at least 32 bytes/,
    ],
  ])('%s', (_label, variables: Record<string, string>, message) => {
    expect(() => readEnv({ DATA_DIR: folder.path, ...variables })).toThrow(message);
  });

  test.each(['SESSION_SECRET', 'SMTP_URL', 'PUBLIC_URL'])(
    'a production instance needs %s',
    (name) => {
      expect(() => readEnv(production({ [name]: '' }))).toThrow(
        new RegExp(`${name}: a production instance needs`),
      );
    },
  );

  test('AU-01 a production instance over plain HTTP needs to be told so', () => {
    expect(() => readEnv(production({ PUBLIC_URL: 'http://selvage.example' }))).toThrow(
      /expected https/,
    );
    expect(
      readEnv(production({ PUBLIC_URL: 'http://selvage.example', ALLOW_PLAIN_HTTP: 'yes' }))
        .isHttps,
    ).toBe(false);
  });
});

test('proxies are a number of hops or addresses', () => {
  expect(readEnv(production({ TRUST_PROXY: '2' })).trustProxy).toBe(2);
  expect(readEnv(production({ TRUST_PROXY: 'loopback, 10.0.0.0/8' })).trustProxy).toEqual([
    'loopback',
    '10.0.0.0/8',
  ]);
});
