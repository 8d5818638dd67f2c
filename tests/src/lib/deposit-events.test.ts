import { QueryClient } from '@tanstack/react-query';
import { beforeEach, describe, expect, it } from 'vitest';
import type { Job } from '#contract/jobs.ts';
import { applyDepositEvent } from '#src/lib/deposit-events.ts';
import { jobQuery, jobsQuery } from '#src/lib/jobs.ts';

const job = (changes: Partial<Job> = {}): Job => ({
  id: 9,
  depositId: 1,
  kind: 'grouping',
  title: 'Group',
  state: 'running',
  progress: 0.4,
  phase: 'restart 3',
  error: null,
  result: null,
  startedBy: { id: 2, name: 'M. Ivers' },
  createdAt: '2026-11-30T16:00:00Z',
  startedAt: null,
  endedAt: null,
  ...changes,
});

let client = new QueryClient();
beforeEach(() => {
  client = new QueryClient();
  for (const resource of ['stages', 'overview', 'domains', 'suites'])
    client.setQueryData(['deposits', 1, resource], 'read');
  client.setQueryData(['deposits', 2, 'stages'], 'read');
});
const isOld = (depositId: number, resource: string) =>
  client.getQueryState(['deposits', depositId, resource])?.isInvalidated;
const send = (changed: Job) => applyDepositEvent(client, 1, { type: 'job', job: changed });

describe('a changed resource', () => {
  it('CO-04 makes old what was read of it, the stages and the overview, of this deposit only', () => {
    applyDepositEvent(client, 1, { type: 'changed', resource: 'domains' });
    expect([isOld(1, 'domains'), isOld(1, 'stages'), isOld(1, 'overview')]).toEqual([
      true,
      true,
      true,
    ]);
    expect([isOld(1, 'suites'), isOld(2, 'stages')]).toEqual([false, false]);
  });
});

describe('a job', () => {
  beforeEach(() => client.setQueryData(jobsQuery(1).queryKey, [job({ id: 8, state: 'done' })]));

  it('joins the list, newest first', () => {
    send(job());
    expect(client.getQueryData(jobsQuery(1).queryKey)?.map(({ id }) => id)).toEqual([9, 8]);
    expect(client.getQueryData(jobQuery(1, 9).queryKey)?.progress).toBe(0.4);
  });

  it('JO-07 never runs backwards', () => {
    send(job({ progress: 0.6 }));
    send(job({ progress: 0.5 }));
    expect(client.getQueryData(jobQuery(1, 9).queryKey)?.progress).toBe(0.6);
    send(job({ state: 'done', progress: 1 }));
    send(job({ progress: 0.9 }));
    expect(client.getQueryData(jobQuery(1, 9).queryKey)?.state).toBe('done');
  });

  it('makes the stages old when it ends, not when an old end is told again', () => {
    send(job({ id: 8, state: 'done' }));
    expect(isOld(1, 'stages')).toBe(false);
    send(job());
    expect(isOld(1, 'stages')).toBe(false);
    send(job({ state: 'failed' }));
    expect(isOld(1, 'stages')).toBe(true);
  });
});
