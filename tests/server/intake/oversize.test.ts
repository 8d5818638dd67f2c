import { readdirSync } from 'node:fs';
import express from 'express';
import request from 'supertest';
import { afterAll, describe, expect, test } from 'vitest';
import { Problem } from '#contract/problem.ts';
import { createLog } from '#server/lib/log.ts';
import { problemHandler } from '#server/lib/problems.ts';
import { receiveFiles, TABLE_BYTES } from '#server/modules/intake/receive-files.ts';
import { tempFolder } from '#tests/support/temp-instance.ts';

const LIMIT = 2 * 1_048_576;
const folder = tempFolder();
afterAll(() => folder.remove());

/** The receiving part of the server with a smaller limit, so that a test need not send 512 MiB. */
const app = express()
  .post('/uploads', receiveFiles(folder.path, LIMIT), (req, res) => {
    res.json(Array.isArray(req.files) ? req.files.map(({ size }) => size) : []);
  })
  .use(problemHandler(createLog('silent')));

const send = (...sizes: number[]) =>
  sizes.reduce((sent, size, i) => sent.attach('files', Buffer.alloc(size, 'a,b\n'), `table-${i}.csv`), request(app).post('/uploads'));

describe('IN-01 a file over the limit', () => {
  test('the limit of a table is 512 MiB', () => {
    expect(TABLE_BYTES).toBe(512 * 1_048_576);
  });

  test('exactly at the limit is taken', async () => {
    const res = await send(LIMIT);
    expect([res.status, res.body]).toEqual([200, [LIMIT]]);
  });

  test('one byte over: 413 with the limit, and neither it nor the file before it is left behind', async () => {
    const before = readdirSync(folder.path);
    const res = await send(10, LIMIT + 1);
    expect(res.status).toBe(413);
    expect(Problem.parse(res.body)).toMatchObject({ code: 'upload-refused', detail: 'Expected files of at most 2 MiB each, found a larger one; nothing was kept.' });
    expect(readdirSync(folder.path)).toEqual(before);
    expect((await send(10)).status).toBe(200);
  });
});
