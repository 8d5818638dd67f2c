import { spawn, type ChildProcess } from 'node:child_process';
import { dirname } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterEach, beforeEach, expect, test } from 'vitest';
import type { JobState } from '#contract/jobs.ts';
import { createLog } from '#server/lib/log.ts';
import { createEvents } from '#server/modules/jobs/events.ts';
import { createJobsService } from '#server/modules/jobs/jobs.service.ts';
import { jobHarness, registerTestKinds, until, type JobHarness } from './job-harness.ts';

const KILLS = 10;
const PATIENCE_MS = 600_000;
let harness: JobHarness;

beforeEach(async () => {
  harness = await jobHarness();
});
afterEach(() => harness.close());

function startServer(nJobs: number): { server: ChildProcess; acknowledged: Set<number>; said: (word: string) => Promise<void> } {
  const script = fileURLToPath(new URL('./job-server.ts', import.meta.url));
  const { databaseFile, people } = harness;
  const settings = [databaseFile, dirname(databaseFile), String(people.of('lead').id), String(nJobs)];
  const server = spawn(process.execPath, ['--import', 'tsx', script, ...settings], { stdio: ['ignore', 'pipe', 'inherit'] });
  const acknowledged = new Set<number>();
  let printed = '';
  const waiting = new Map<string, () => void>();
  server.stdout.on('data', (chunk: Buffer) => {
    printed += chunk.toString();
    for (const [, id] of printed.matchAll(/^job (\d+)$/gm)) acknowledged.add(Number(id));
    for (const [word, resolve] of waiting) if (printed.includes(word)) resolve();
  });
  const said = (word: string): Promise<void> =>
    new Promise((resolve, reject) => {
      waiting.set(word, resolve);
      if (printed.includes(word)) resolve();
      server.once('exit', () => reject(new Error(`the server ended before it said ${word}`)));
    });
  return { server, acknowledged, said };
}

async function kill(server: ChildProcess): Promise<void> {
  const ended = new Promise((resolve) => server.once('exit', resolve));
  server.kill('SIGKILL');
  await ended;
}

test(`JO-03 ${KILLS} kills at random moments: no job lost, none done twice`, { timeout: PATIENCE_MS }, async () => {
  const acknowledged = new Set<number>();
  for (let time = 0; time < KILLS; time++) {
    const { server, said, acknowledged: seen } = startServer(3);
    // Half of them while it starts, half while its jobs write.
    await said(time % 2 === 0 ? 'started' : 'working');
    await new Promise((resolve) => setTimeout(resolve, Math.random() * 800));
    await kill(server);
    for (const id of seen) acknowledged.add(id);
  }
  const last = startServer(1);
  await last.said('idle');
  await kill(last.server);

  const rows: { id: number; state: JobState; error_code: string | null }[] = await harness.db('jobs').select('id', 'state', 'error_code');
  const known = new Set(rows.map(({ id }) => id));
  for (const id of acknowledged) expect(known).toContain(id);
  for (const { id, state, error_code } of rows) {
    const isDone = state === 'done';
    if (!isDone) expect([state, error_code]).toEqual(['failed', 'stopped-twice']);
    expect(await harness.effectsOf(id)).toBe(isDone ? 1 : 0);
    expect((await harness.tablesOf(id)).filter(({ state: tableState }) => tableState === 'live')).toHaveLength(isDone ? 1 : 0);
  }
  expect(rows.filter(({ state }) => state === 'done').length).toBeGreaterThan(0);
  const [{ integrity_check: verdict }] = await harness.db.raw('PRAGMA integrity_check');
  expect(verdict).toBe('ok');
});

async function insertRow(state: JobState, tries: number, more: object = {}): Promise<number> {
  const { db, people } = harness;
  const [id] = await db('jobs').insert({
    deposit_id: people.depositId, kind: 'load-file', title: 'Load', params: '{}', state, tries, progress: 0.4,
    started_by: people.of('lead').id, created_at: '2026-01-01T00:00:00.000Z', ...more,
  });
  if (id === undefined) throw new Error('no job was made');
  return id;
}

test('JO-03 what ran is run once more, what stopped the service twice is not, what waited or ended stays', async () => {
  const ran = await insertRow('running', 1);
  const poison = await insertRow('running', 2);
  const waited = await insertRow('queued', 0);
  const ended = await insertRow('cancelled', 1);
  const owing = await insertRow('done', 1, { follow_up_due: 1 });
  await harness.jobs.start();
  const { jobs, people: { depositId } } = harness;
  expect((await jobs.waitFor(ran)).state).toBe('done');
  expect(await jobs.get(depositId, poison)).toMatchObject({ state: 'failed', error: { code: 'stopped-twice' } });
  expect((await jobs.waitFor(waited)).state).toBe('done');
  expect((await jobs.get(depositId, ended)).state).toBe('cancelled');
  expect(harness.followed).toContain(owing);
});

test('work given back because the compute host was closed is not taken up again by the same service', async () => {
  const { jobs, compute, db } = harness;
  const { id } = await harness.enqueue('grouping', { ms: 60_000 });
  await until(async () => (await jobs.get(1, id)).progress > 0);
  await compute.close();
  await until(async () => (await jobs.get(1, id)).state === 'interrupted');
  const startedAt: unknown = await db('jobs').where({ id }).pluck('started_at');
  await new Promise((resolve) => setTimeout(resolve, 300));
  expect(await db('jobs').where({ id }).pluck('started_at')).toEqual(startedAt);
  expect(await db('jobs').where({ id }).pluck('tries')).toEqual([0]);
});

test('a clean stop leaves running work to the next start and does not count it as a try', { timeout: PATIENCE_MS }, async () => {
  const { db, compute } = harness;
  const first = createJobsService({ db, compute, events: createEvents(), log: createLog('silent') });
  registerTestKinds(first);
  await compute.ready();
  const actor = harness.people.of('lead');
  const params = { nRows: 200_000, nColumns: 60 };
  const { id, depositId } = await first.enqueue({ depositId: 1, kind: 'components', title: 'Write columns', params, actor });
  await until(async () => (await first.get(depositId, id)).progress > 0);
  await first.close();
  expect(await db('jobs').where({ id }).first('state', 'tries')).toEqual({ state: 'interrupted', tries: 0 });

  await harness.jobs.start();
  expect((await harness.jobs.waitFor(id)).state).toBe('done');
  expect(await harness.tablesOf(id)).toEqual([{ state: 'live' }]);
  expect(await harness.effectsOf(id)).toBe(1);
});
