import { screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { RecordPage } from '#src/app/routes/record.tsx';
import { renderPage, type Answer } from '#tests/support/render-page.tsx';

const HASH = '9f2c41aa7be0d1f2c3b4a5968778695a4b3c2d1e0f9e8d7c6b5a493827160a3f';
const entry = (number: number, sentence: string) => ({
  number,
  at: '2026-11-30T16:20:00Z',
  who: 'M. Ivers',
  action: 'domain.created',
  sentence,
  subject: 'domain 4',
  hash: HASH,
});
const page = (rows: object[], total: number, chain: object = {}) => ({
  rows,
  total,
  page: 1,
  pageSize: 100,
  chain: { holds: true, entries: 240, head: HASH, firstBadEntry: null, ...chain },
});

const open = (answer: Answer, at = '/deposits/1/record') =>
  renderPage(<RecordPage />, {
    path: '/deposits/:depositId/record',
    at,
    answers: { 'GET /deposits/1/record': answer },
  });

describe('the record', () => {
  it('DU-09 says that the chain holds, and by which entry', async () => {
    open(page([entry(240, 'M. Ivers accepted group 3 as domain 2110')], 240));
    expect(await screen.findByText('chain holds')).toBeInTheDocument();
    expect(screen.getByText('accepted group 3 as domain 2110')).toBeInTheDocument();
    expect(screen.getByText('domain created')).toBeInTheDocument();
    expect(screen.getAllByText('9f2c 41aa 7be0').length).toBe(2);
  });

  it('DU-09 names the first bad entry', async () => {
    open(page([], 240, { holds: false, firstBadEntry: 17 }));
    expect(await screen.findByText('chain broken')).toBeInTheDocument();
    expect(screen.getByText(/breaks at entry 17/)).toBeInTheDocument();
  });

  it('searches on the server, keeps the search in the address, and pages', async () => {
    const { user, sent, router } = open(page([entry(240, 'Loaded assays')], 240));
    await user.type(await screen.findByLabelText('Find in the record'), 'assays{Enter}');
    await screen.findByText(/entries with “assays”/);
    expect(router.state.location.search).toBe('?text=assays');
    await user.click(screen.getByRole('button', { name: 'Older' }));
    expect(await screen.findByText(/page 2 of 3/)).toBeInTheDocument();
    expect(sent.at(-1)?.url.search).toBe('?page=2&pageSize=100&text=assays');
  });

  it('offers the whole record as a file', async () => {
    open(page([], 0));
    expect(await screen.findByRole('link', { name: 'CSV' })).toHaveAttribute(
      'href',
      '/api/deposits/1/record.csv',
    );
  });
});
