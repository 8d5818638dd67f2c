import { screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { JobTray } from '#src/features/jobs/components/job-tray.tsx';
import { renderPage } from '#tests/support/render-page.tsx';

const job = (id: number, state: string, more: object = {}) => ({
  id,
  depositId: 1,
  kind: 'grouping',
  title: `Job ${id}`,
  state,
  progress: 0.42,
  phase: 'restart 3 of 8',
  error: null,
  result: null,
  startedBy: { id: 2, name: 'M. Ivers' },
  createdAt: '2026-11-30T16:00:00Z',
  startedAt: null,
  endedAt: null,
  ...more,
});

describe('the job tray', () => {
  it('UX-02 shows progress with its phase, and cancels', async () => {
    const { user } = renderPage(<JobTray depositId={1} />, {
      answers: {
        'GET /deposits/1/jobs': [job(9, 'running')],
        'POST /deposits/1/jobs/9/cancel': job(9, 'cancelled'),
      },
    });
    await user.click(await screen.findByRole('button', { name: 'Jobs: 1 running' }));
    expect(screen.getByRole('progressbar', { name: 'Job 9' })).toHaveAttribute(
      'aria-valuenow',
      '42',
    );
    expect(screen.getByText(/restart 3 of 8, 42/)).toBeInTheDocument();
    await user.click(screen.getByRole('button', { name: 'Cancel' }));
    expect(await screen.findByText('cancelled')).toBeInTheDocument();
    expect(screen.queryByRole('progressbar')).toBeNull();
  });

  it('tells why a job failed', async () => {
    const failed = job(8, 'failed', {
      error: { code: 'too-few', message: 'Expected at least 30 intervals, found 12' },
    });
    const { user } = renderPage(<JobTray depositId={1} />, {
      answers: { 'GET /deposits/1/jobs': [failed] },
    });
    await user.click(await screen.findByRole('button', { name: 'Jobs' }));
    const line = await screen.findByRole('listitem');
    expect(within(line).getByText('failed')).toBeInTheDocument();
    expect(within(line).getByText('Expected at least 30 intervals, found 12')).toBeInTheDocument();
  });

  it('UX-09 says what belongs here when there is nothing', async () => {
    const { user } = renderPage(<JobTray depositId={1} />, {
      answers: { 'GET /deposits/1/jobs': [] },
    });
    await user.click(await screen.findByRole('button', { name: 'Jobs' }));
    expect(await screen.findByText(/Nothing has run on this deposit yet/)).toBeInTheDocument();
  });
});
