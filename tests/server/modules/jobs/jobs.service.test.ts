import { afterAll, beforeAll, describe, expect, it, test } from 'vitest';
import type { DepositEvent, Job, JobKind } from '#contract/jobs.ts';
import { removeTemplate } from '#tests/support/temp-instance.ts';
import { jobHarness, until, type JobHarness } from './job-harness.ts';

const PATIENCE_MS = 240_000;
let harness: JobHarness;

beforeAll(async () => {
  harness = await jobHarness();
});
afterAll(async () => {
  await harness.close();
  await removeTemplate();
});

describe('a job that ends well', () => {
  it('publishes its tables together with what it made', async () => {
    const job = await harness.runToEnd('components', { nRows: 100, nColumns: 3 });
    expect(job).toMatchObject({ state: 'done', progress: 1, error: null, result: { kind: 'component-run' } });
    expect(job.startedBy.name).toBe('Test geologist');
    expect(Date.parse(job.endedAt ?? '')).toBeGreaterThanOrEqual(Date.parse(job.startedAt ?? ''));
    expect(await harness.tablesOf(job.id)).toEqual([{ state: 'live' }]);
    expect(await harness.effectsOf(job.id)).toBe(1);
  });

  it('asks for what follows it, and notes that it did', async () => {
    const job = await harness.runToEnd('load-file');
    expect(harness.followed).toContain(job.id);
    expect(await harness.db('jobs').where({ id: job.id }).pluck('follow_up_due')).toEqual([0]);
  });

  test('JO-07 tells of itself: queued, then a progress that never goes back, then done and what changed', async () => {
    const heard: DepositEvent[] = [];
    const stop = harness.events.subscribe(harness.people.depositId, ({ event }) => heard.push(event));
    const job = await harness.runToEnd('grouping', { ms: 2_500 });
    stop();
    const seen = heard.flatMap((event) => (event.type === 'job' && event.job.id === job.id ? [event.job] : []));
    expect([seen[0]?.state, seen.at(-1)?.state]).toEqual(['queued', 'done']);
    expect(new Set(seen.map(({ phase }) => phase))).toEqual(new Set(['', 'start', 'count up', 'count on']));
    const shares = seen.map(({ progress }) => progress);
    expect(shares).toEqual([...shares].sort((a, b) => a - b));
    expect(seen.length).toBeGreaterThanOrEqual(5);
    expect(heard.slice(-3)).toEqual(['groupings', 'domains', 'record'].map((resource) => ({ type: 'changed', resource })));
  });
});

describe('a job that does not', () => {
  it.each<[JobKind, string, RegExp]>([
    ['screen', 'not-positive', /^expected a part > 0, found -1$/],
    ['zones', 'thread-ended', /thread that did this work ended/],
    ['codes', 'time-limit', /took longer than/],
    ['evidence', 'unexpected', /fault of ours/],
    ['assemble', 'unexpected', /fault of ours/],
  ])('%s fails as %s and leaves nothing', async (kind, code, message) => {
    const job = await harness.runToEnd(kind);
    expect(job).toMatchObject({ state: 'failed', error: { code } });
    expect(job.error?.message).toMatch(message);
    expect(job.error?.message).not.toMatch(/disk|broken|at \//);
    await until(async () => (await harness.tablesOf(job.id)).length === 0);
    expect(await harness.effectsOf(job.id)).toBe(0);
  });

  test('JO-01 that ends the whole compute host fails by itself; what ran beside it runs again', { timeout: PATIENCE_MS }, async () => {
    const bystander = await harness.enqueue('grouping', { ms: 4_000 }, harness.people.otherDepositId);
    const culprit = await harness.enqueue('sweep');
    const [good, bad] = await Promise.all([harness.jobs.waitFor(bystander.id), harness.jobs.waitFor(culprit.id)]);
    expect(good.state).toBe('done');
    expect(bad).toMatchObject({ state: 'failed' });
    expect(bad.error?.message).toMatch(/memory/);
    expect((await harness.runToEnd('load-file')).state).toBe('done');
  });
});

test('work in parts, one a thread, is put together in order', { timeout: PATIENCE_MS }, async () => {
  expect(harness.compute.threads).toBeGreaterThan(1);
  expect(await harness.runToEnd('check-file')).toMatchObject({ state: 'done', progress: 1, result: { kind: 'upload', id: 1234 } });
});

describe('JO-02 cancel', () => {
  const lead = (): { id: number; role: 'lead' } => ({ id: harness.people.of('lead').id, role: 'lead' });

  it.each<[JobKind, object]>([
    ['components', { nRows: 300_000, nColumns: 300 }],
    ['grouping', { ms: 60_000 }],
  ])('%s at ten random moments: cancelled within 2 s, nothing left', { timeout: PATIENCE_MS }, async (kind, params) => {
    for (let time = 0; time < 10; time++) {
      const { id, depositId } = await harness.enqueue(kind, params);
      await new Promise((resolve) => setTimeout(resolve, Math.random() * 900));
      const startedAt = performance.now();
      const cancelled = await harness.jobs.cancel(depositId, id, lead());
      expect(cancelled.state).toBe('cancelled');
      expect(performance.now() - startedAt).toBeLessThan(2_000);
      expect(await harness.effectsOf(id)).toBe(0);
      await until(async () => (await harness.tablesOf(id)).length === 0);
    }
    const [{ integrity_check: verdict }] = await harness.db.raw('PRAGMA integrity_check');
    expect(verdict).toBe('ok');
  });

  it('takes a waiting job out of the queue', async () => {
    const first = await harness.enqueue('grouping', { ms: 1_500 });
    const second = await harness.enqueue('grouping', { ms: 60_000 });
    expect((await harness.jobs.cancel(second.depositId, second.id, lead())).state).toBe('cancelled');
    expect((await harness.jobs.waitFor(first.id)).state).toBe('done');
    expect((await harness.jobs.get(second.depositId, second.id)).startedAt).toBeNull();
  });

  it('is for the starter and leads, and for jobs that have not ended', async () => {
    const job = await harness.enqueue('grouping', { ms: 1_000 });
    const as = (role: 'geologist' | 'estimator') => ({ id: harness.people.of(role).id, role });
    await expect(harness.jobs.cancel(job.depositId, job.id, as('estimator'))).rejects.toMatchObject({ status: 403 });
    await expect(harness.jobs.cancel(harness.people.otherDepositId, job.id, lead())).rejects.toMatchObject({ status: 404 });
    expect((await harness.jobs.cancel(job.depositId, job.id, as('geologist'))).state).toBe('cancelled');
    await expect(harness.jobs.cancel(job.depositId, job.id, lead())).rejects.toMatchObject({ status: 409, code: 'job-ended' });
  });

  it('reaches a job on its way from waiting to running', async () => {
    for (let time = 0; time < 20; time++) {
      const { id, depositId } = await harness.enqueue('grouping', { ms: 60_000 });
      for (let turn = 0; turn < time; turn++) await Promise.resolve();
      expect((await harness.jobs.cancel(depositId, id, lead())).state).toBe('cancelled');
    }
  });
});

test('JO-06 the queue is bounded, fair, and runs one job of a deposit at a time', { timeout: PATIENCE_MS }, async () => {
  const { people, jobs } = harness;
  const flood: Job[] = [];
  let refused: unknown = null;
  while (refused === null && flood.length < 40) {
    await harness.enqueue('grouping', { ms: 300 }).then((job) => flood.push(job), (error: unknown) => (refused = error));
  }
  expect(refused).toMatchObject({ status: 429, code: 'queue-full', extras: { retryAfterS: 30 } });
  expect(flood.length).toBeGreaterThanOrEqual(20);
  const other = await jobs.waitFor((await harness.enqueue('grouping', { ms: 300 }, people.otherDepositId)).id);
  const ended = await Promise.all(flood.map(({ id }) => jobs.waitFor(id)));
  const endedBefore = ended.filter(({ endedAt }) => (endedAt ?? '') < (other.startedAt ?? ''));
  const startedBefore = ended.filter(({ createdAt, startedAt }) => createdAt < other.createdAt && (startedAt ?? '') >= other.createdAt && (startedAt ?? '') < (other.startedAt ?? ''));
  expect(endedBefore.length).toBeLessThan(flood.length);
  expect(startedBefore.length).toBeLessThanOrEqual(2);
  const spans = ended.map(({ startedAt, endedAt }) => [startedAt ?? '', endedAt ?? '']).sort();
  for (const [index, [startedAt]] of spans.entries()) {
    if (index > 0) expect(startedAt! >= (spans[index - 1]?.[1] ?? '')).toBe(true);
  }
});
