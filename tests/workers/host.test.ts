import { spawn } from 'node:child_process';
import { afterAll, beforeAll, describe, expect, it, test } from 'vitest';
import { ComputeError, type Compute } from '#workers/client.ts';
import { columnDatabase, type ColumnDatabase } from '../server/db/column-database.ts';
import { testCompute } from './test-compute.ts';

let database: ColumnDatabase;
let compute: Compute;

// One host for all: each test runs after what the one before did to it.
beforeAll(async () => {
  database = await columnDatabase();
  compute = testCompute(database.folder, database.file);
  await compute.ready();
});
afterAll(async () => {
  await compute.close();
  database.remove();
});

const failureOf = async (taskName: string): Promise<ComputeError> => {
  const error: unknown = await compute.run(taskName, null).catch((thrown: unknown) => thrown);
  if (!(error instanceof ComputeError)) throw new Error(`${taskName}: expected a ComputeError, found ${String(error)}`);
  return error;
};

// Running out of a heap takes seconds of collecting, minutes on a busy machine.
const PATIENCE_MS = 300_000;

describe('JO-01 a worker takes down its own job, not the service', () => {
  it.each([
    ['exit', ['thread-ended'], /thread that did this work ended/],
    ['push-endlessly', ['out-of-memory', 'host-ended'], /memory/],
    ['grow-one-array', ['out-of-memory', 'host-ended'], /memory/],
    ['fill-typed-arrays', ['out-of-memory'], /more memory than the 1500 MiB/],
  ])('%s fails with a plain reason, and the next job runs', async (taskName, codes, reason) => {
    const failure = await failureOf(taskName);
    expect(codes).toContain(failure.code);
    expect(failure.message).toMatch(reason);
    expect(failure.wasAlone).toBe(true);
    expect(await compute.run('echo', 'next')).toBe('next');
  });

  test('an endless loop leaves the other thread and short work free', async () => {
    const controller = new AbortController();
    const endless = compute.run('loop-forever', null, { signal: controller.signal }).catch((error: unknown) => error);
    expect(await compute.run('echo', 1)).toBe(1);
    expect(await compute.run('count-slowly', { ms: 50 })).toHaveProperty('steps');
    controller.abort();
    await endless;
  });

  test('a host that ends names every job it ran as not alone, and comes back', async () => {
    const bystander = compute.run('count-slowly', { ms: 60_000 }).catch((error: unknown) => error);
    const culprit = compute.run('grow-one-array', null).catch((error: unknown) => error);
    const errors = await Promise.all([bystander, culprit]);
    const hostEnded = errors.every((error) => error instanceof ComputeError && error.code === 'host-ended');
    const oneStopped = errors.some((error) => error instanceof ComputeError && error.code === 'out-of-memory');
    expect(hostEnded || oneStopped).toBe(true);
    for (const error of errors) expect(error).toHaveProperty('wasAlone', false);
    expect(await compute.run('echo', 'back')).toBe('back');
    expect(compute.isHealthy()).toBe(true);
  });
});

test('work asked for while the host is away waits for the next one', { timeout: PATIENCE_MS }, async () => {
  await failureOf('grow-one-array');
  expect(await Promise.all([1, 2, 3].map((n) => compute.run('echo', n)))).toEqual([1, 2, 3]);
});

test('AU-04 sign-ins do not fail when the host ends under them: they are worked out by the next one', { timeout: PATIENCE_MS }, async () => {
  let isDying = true;
  const dying = failureOf('grow-one-array').finally(() => (isDying = false));
  const outcomes: unknown[] = [];
  while (isDying) {
    outcomes.push(await compute.run('hash-password', { password: 'plum wagon 41 otters' }).catch((error: unknown) => error));
  }
  await dying;
  expect(outcomes.length).toBeGreaterThan(0);
  for (const outcome of outcomes) expect(outcome).toHaveProperty('hash');
});

test('a host whose server has gone ends by itself', async () => {
  const script = `
    import { testCompute } from '#tests/workers/test-compute.ts';
    const compute = testCompute(process.argv[1], process.argv[2]);
    await compute.ready();
    void compute.run('host-pid', null).then((pid) => { console.log(pid); process.kill(process.pid, 'SIGKILL'); });`;
  const server = spawn(process.execPath, ['--import', 'tsx', '--input-type=module', '-e', script, database.folder, database.file]);
  let printed = '';
  server.stdout.on('data', (chunk: Buffer) => (printed += chunk.toString()));
  await new Promise((resolve) => server.once('exit', resolve));
  const hostPid = Number(printed);
  expect(hostPid).toBeGreaterThan(1);
  const isAlive = (): boolean => {
    try {
      return process.kill(hostPid, 0);
    } catch {
      return false;
    }
  };
  const endsAt = performance.now() + 5_000;
  while (isAlive() && performance.now() < endsAt) await new Promise((resolve) => setTimeout(resolve, 50));
  expect(isAlive()).toBe(false);
});
