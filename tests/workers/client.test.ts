import { tmpdir } from 'node:os';
import { afterAll, beforeAll, describe, expect, it, test } from 'vitest';
import { KernelError } from '#kernels/kernel-error.ts';
import { Cancelled, ComputeError, createCompute, type Compute } from '#workers/client.ts';
import type { HashPasswordInput, HashPasswordOutput } from '#workers/tasks/hash-password.ts';
import type { VerifyPasswordInput, VerifyPasswordOutput } from '#workers/tasks/verify-password.ts';
import { columnDatabase, type ColumnDatabase } from '../server/db/column-database.ts';
import { testCompute } from './test-compute.ts';

let database: ColumnDatabase;
let compute: Compute;

beforeAll(async () => {
  database = await columnDatabase();
  compute = testCompute(database.folder, database.file);
  await compute.ready();
});
afterAll(async () => {
  await compute.close();
  database.remove();
});

describe('run', () => {
  it('carries typed arrays and nested values there and back', async () => {
    const input = { values: Float64Array.of(1, NaN, -0), names: ['Cu', 'As'], none: null };
    expect(await compute.run('echo', input)).toStrictEqual(input);
  });

  it('throws what a kernel refused as the KernelError it was', async () => {
    const refused = compute.run('refuse', { row: 7 });
    await expect(refused).rejects.toBeInstanceOf(KernelError);
    await expect(refused).rejects.toMatchObject({
      code: 'not-positive', message: 'expected a part > 0, found -1', detail: { row: 7 },
    });
  });

  it('tells people of a fault without its inside, and keeps that for the log', async () => {
    const failed = compute.run('fault', null);
    await expect(failed).rejects.toBeInstanceOf(ComputeError);
    await expect(failed).rejects.toMatchObject({ code: 'unexpected', cause: expect.stringContaining('is broken') });
    await expect(failed).rejects.toHaveProperty('message', expect.not.stringContaining('broken'));
  });

  it.each(['no-such', '../client', 'Echo', ''])('knows no task %j', async (name) => {
    await expect(compute.run(name, null)).rejects.toMatchObject({ code: 'no-such-task' });
  });

  it('reports phases in order with growing shares', async () => {
    const seen: [string, number][] = [];
    const onProgress = (phase: string, share: number): void => void seen.push([phase, share]);
    const { steps } = await compute.run<{ ms: number }, { steps: number }>('count-slowly', { ms: 700 }, { onProgress });
    expect(steps).toBeGreaterThan(seen.length);
    expect([...new Set(seen.map(([phase]) => phase))]).toEqual(['count up', 'count on']);
    const shares = seen.map(([, share]) => share);
    expect(shares).toEqual([...shares].sort((a, b) => a - b));
    expect(seen.length).toBeGreaterThanOrEqual(4);
  });

  test('DU-01 a task’s own connection has the pragmas', async () => {
    expect(await compute.run('pragmas', null)).toEqual(['wal', 2, 1, 0, 5_000]);
  });
});

describe('JO-02 cancel', () => {
  const cancelAfter = async (taskName: string, input: unknown, ms: number) => {
    const controller = new AbortController();
    const run = compute.run(taskName, input, { signal: controller.signal });
    const outcome = run.then(() => 'an answer', (error: unknown) => error);
    await new Promise((resolve) => setTimeout(resolve, ms));
    const startedAt = performance.now();
    controller.abort();
    const error = await outcome;
    return { error, tookMs: performance.now() - startedAt };
  };

  it.each([
    ['count-slowly', { ms: 60_000 }],
    ['loop-forever', null],
    ['write-columns', { jobId: null, nRows: 400_000, nColumns: 200 }],
  ])('ends %s within 2 s', async (taskName, input) => {
    for (const ms of [0, 150, 700]) {
      const { error, tookMs } = await cancelAfter(taskName, input, ms);
      expect(error).toBeInstanceOf(Cancelled);
      expect(tookMs).toBeLessThan(2_000);
    }
    expect(await compute.run('echo', 'the threads are there again')).toBe('the threads are there again');
    expect(database.store.db.pragma('integrity_check', { simple: true })).toBe('ok');
  });

  it('starts nothing that was cancelled before', async () => {
    await expect(compute.run('echo', 1, { signal: AbortSignal.abort() })).rejects.toBeInstanceOf(Cancelled);
  });

  it('takes queued work out of the queue', async () => {
    const busy = [1, 2].map(() => compute.run('count-slowly', { ms: 1_500 }));
    const { error, tookMs } = await cancelAfter('count-slowly', { ms: 60_000 }, 200);
    expect(error).toBeInstanceOf(Cancelled);
    expect(tookMs).toBeLessThan(500);
    await Promise.all(busy);
  });
});

describe('passwords', () => {
  const own = createCompute({ databaseFile: '/nowhere/never-opened.sqlite', dataDir: tmpdir(), threads: 2 });
  afterAll(() => own.close());

  it('AU-04 hashes at cost 12 and tells a right password from a wrong one', async () => {
    const password = 'späte Störung quert';
    const { hash } = await own.run<HashPasswordInput, HashPasswordOutput>('hash-password', { password });
    expect(hash).toMatch(/^\$2[aby]\$12\$/);
    const matches = (tried: string) =>
      own.run<VerifyPasswordInput, VerifyPasswordOutput>('verify-password', { password: tried, hash });
    expect([await matches(password), await matches(`${password}.`)]).toEqual([{ matches: true }, { matches: false }]);
  });
});

test('close rejects what runs and refuses what comes', async () => {
  const closing = testCompute(database.folder, database.file);
  await closing.ready();
  const running = closing.run('loop-forever', null);
  const outcome = running.catch((error: unknown) => error);
  await closing.close();
  expect(await outcome).toMatchObject({ code: 'closed' });
  expect(closing.isHealthy()).toBe(false);
  await expect(closing.run('echo', 1)).rejects.toMatchObject({ code: 'closed' });
});
