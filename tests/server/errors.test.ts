import { Router } from 'express';
import express from 'express';
import { MulterError } from 'multer';
import request from 'supertest';
import { describe, expect, test } from 'vitest';
import * as z from 'zod';
import { Problem } from '#contract/problem.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { AppError, notFound, staleVersion } from '#server/lib/errors.ts';
import { createLog } from '#server/lib/log.ts';
import { problemHandler } from '#server/lib/problems.ts';
import { testClient } from '#tests/support/test-client.ts';

/** What no answer may hold: stacks, SQL, paths, packages, versions. */
const INTERNALS =
  /at \/|at \w+ \(|SQLITE_|node_modules|select |insert into|\/work|\.ts:\d|better-sqlite3|express/i;

const sqlite = (code: string): Error =>
  Object.assign(new Error(`select * from users - ${code}: at /home/app/node_modules/x.ts:3`), {
    code,
  });

const FAILURES: readonly (readonly [string, number, string, unknown])[] = [
  [
    'an expected refusal',
    409,
    'last-lead',
    new AppError(409, 'last-lead', 'You are the only lead.'),
  ],
  ['something that is not there', 404, 'no-such-api-token', notFound('API token')],
  ['a stale version', 412, 'stale-version', staleVersion(4)],
  [
    'a kernel that refuses its input',
    422,
    'too-few-rows',
    new KernelError('too-few-rows', 'expected 10 rows, found 3'),
  ],
  ['a full disk', 507, 'disk-full', sqlite('SQLITE_FULL')],
  ['a busy database', 503, 'busy', sqlite('SQLITE_BUSY_SNAPSHOT')],
  ['a file too large', 413, 'upload-refused', new MulterError('LIMIT_FILE_SIZE')],
  [
    'a bug',
    500,
    'internal',
    new TypeError("Cannot read properties of undefined (reading 'x') at /srv/app.ts:3"),
  ],
  ['a broken constraint', 500, 'internal', sqlite('SQLITE_CONSTRAINT_UNIQUE')],
  ['something thrown that is no error', 500, 'internal', 'select secret from users'],
];

describe('OU-03 every failure is a problem document without internals', () => {
  test.each(FAILURES)('%s', async (_label, status, code, failure) => {
    const app = express();
    app.get('/', () => {
      throw failure;
    });
    app.use(problemHandler(createLog('silent')));
    const res = await request(app).get('/');
    expect([res.status, res.get('content-type')]).toEqual([
      status,
      'application/problem+json; charset=utf-8',
    ]);
    const problem = Problem.parse(res.body);
    expect([problem.status, problem.code, problem.type]).toEqual([
      status,
      code,
      `/problems/${code}`,
    ]);
    expect(res.text).not.toMatch(INTERNALS);
  });

  test.each([
    ['broken JSON', 400, 'bad-json', '{"name": '],
    ['JSON that is no object', 400, 'bad-json', '"text"'],
    ['a body over 1 MiB', 413, 'body-too-large', JSON.stringify({ name: 'x'.repeat(1024 * 1024) })],
    ['a body nested too deep', 400, 'too-deep', `${'{"a":'.repeat(25)}1${'}'.repeat(25)}`],
    ['unknown keys', 400, 'invalid', '{"name":"A","role":"lead"}'],
  ])('%s', async (_label, status, code, body) => {
    const client = await testClient();
    const res = await client
      .as('lead')
      .patch('/api/me')
      .set('Content-Type', 'application/json')
      .send(body);
    expect([res.status, (res.body as Problem).code]).toEqual([status, code]);
    expect((res.body as Problem).requestId).toBe(res.get('x-request-id'));
    expect(res.text).not.toMatch(INTERNALS);
    await client.close();
  });

  test('a broken escape in the address', async () => {
    const client = await testClient();
    const res = await client.as('lead').get('/api/invitations/%E0%A4%A');
    expect([res.status, res.get('content-type')]).toEqual([
      400,
      'application/problem+json; charset=utf-8',
    ]);
    expect(res.text).not.toMatch(INTERNALS);
  });

  test('field errors say where and what', async () => {
    const client = await testClient();
    const res = await client.as('lead').patch('/api/me').send({ name: '' });
    const { fields } = Problem.parse(res.body);
    expect(fields).toHaveLength(1);
    expect(fields?.[0]).toMatchObject({ path: 'body.name' });
  });

  test('an answer that breaks the contract is a bug, not an answer', async () => {
    const { mount, attachGate } = await import('#server/lib/mount.ts');
    const { endpoint } = await import('#contract/endpoint.ts');
    const { app: real } = await testClient();
    const app = express();
    const router = Router();
    const lying = endpoint({
      id: 'lying',
      method: 'get',
      path: '/lying',
      tag: 'T',
      summary: 'S',
      access: { kind: 'public' },
      response: z.object({ count: z.number().max(3) }),
    });
    mount(router, lying, () => ({ count: 4, secret: 'x' }));
    attachGate(app, { changed: () => undefined,
      guard: { admit: () => Promise.resolve({ actor: null, member: null }) },
      idempotency: { once: (_key, work) => work() },
      streams: real.streams,
    });
    app.use(router).use(problemHandler(createLog('silent')));
    expect((await request(app).get('/lying')).status).toBe(500);
  });
});
