import { render, screen } from '@testing-library/react';
import { describe, expect, it, vi } from 'vitest';
import type { Job } from '#contract/jobs.ts';
import { planLoads } from '#src/features/intake/load-plan.ts';
import { dismissRun, runLoads, stopRun, useLoadRun, type LoadCalls } from '#src/features/intake/load-run.ts';
import { upload } from './intake-data.ts';

const job = (id: number, change: Partial<Job> = {}): Job => ({
  id, depositId: 1, kind: 'load-file', title: 'Load', state: 'queued', progress: 0, phase: '', error: null, result: null, startedBy: { id: 2, name: 'T' },
  createdAt: '2026-11-30T09:00:00Z', startedAt: null, endedAt: null, ...change,
});

const plan = planLoads([upload({ id: 4, fileName: 'a.csv' }), upload({ id: 5, fileName: 'b.csv' }), upload({ id: 6, fileName: 'c.csv' })], []);

function Steps() {
  const run = useLoadRun(1);
  return <p>{run?.steps.map(({ fileName, state, message }) => `${fileName} ${state}${message ? ` (${message})` : ''}`).join(', ') ?? 'no run'}</p>;
}

function callsWith(read: LoadCalls['read']): LoadCalls {
  return { start: vi.fn((uploadId: number) => Promise.resolve(job(uploadId))), read, cancel: vi.fn(() => Promise.resolve()), pause: () => Promise.resolve() };
}

describe('loading several files', () => {
  it('starts each only when the one before is done', async () => {
    const order: string[] = [];
    const calls = callsWith((id) => {
      order.push(`read ${id}`);
      return Promise.resolve(job(id, { state: order.filter((entry) => entry === `read ${id}`).length > 1 ? 'done' : 'running' }));
    });
    calls.start = vi.fn((uploadId: number, mode: string) => {
      order.push(`start ${uploadId} ${mode}`);
      return Promise.resolve(job(uploadId));
    });
    await runLoads(1, plan, calls);
    expect(order).toEqual(['start 4 replace', 'read 4', 'read 4', 'start 5 add', 'read 5', 'read 5', 'start 6 add', 'read 6', 'read 6']);
    render(<Steps />);
    expect(screen.getByText('a.csv done, b.csv done, c.csv done')).toBeInTheDocument();
    dismissRun(1);
  });

  it('stops at the first that fails and leaves the rest unloaded', async () => {
    await runLoads(1, plan, callsWith((id) => Promise.resolve(job(id, id === 5 ? { state: 'failed', error: { code: 'x', message: 'no row holds' } } : { state: 'done' }))));
    render(<Steps />);
    expect(screen.getByText('a.csv done, b.csv failed (no row holds), c.csv left')).toBeInTheDocument();
    dismissRun(1);
  });

  it('cancels the file in hand when stopped', async () => {
    const calls = callsWith((id) => {
      stopRun(1);
      return Promise.resolve(job(id, { state: vi.mocked(calls.cancel).mock.calls.length > 0 ? 'cancelled' : 'running' }));
    });
    await runLoads(1, plan, calls);
    expect(calls.cancel).toHaveBeenCalledExactlyOnceWith(4);
    render(<Steps />);
    expect(screen.getByText('a.csv left (cancelled), b.csv left, c.csv left')).toBeInTheDocument();
    dismissRun(1);
  });
});
