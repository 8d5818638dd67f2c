import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, it, vi } from 'vitest';
import { PageWait } from '#src/components/layout/page-wait.tsx';

const read = (over: { data?: unknown; error?: Error | null } = {}) => ({ data: undefined, error: null, refetch: vi.fn(() => Promise.resolve()), ...over });

it('shows lines while a page reads, and what failed with a way to try again', async () => {
  const [domains, groupings] = [read(), read({ data: [] })];
  const { rerender } = render(<PageWait title="Domains" reads={[domains, groupings]} />);
  expect(screen.getByRole('heading', { level: 1, name: 'Domains' })).toBeInTheDocument();
  expect(screen.queryByRole('alert')).not.toBeInTheDocument();
  rerender(<PageWait title="Domains" reads={[{ ...domains, error: new Error('no connection') }, groupings]} />);
  expect(screen.getByRole('alert')).toHaveTextContent('no connection');
  await userEvent.click(screen.getByRole('button', { name: 'Try again' }));
  expect(domains.refetch).toHaveBeenCalledOnce();
  expect(groupings.refetch).toHaveBeenCalledOnce();
});

it('keeps what was read when reading it again fails', () => {
  render(<PageWait title="Domains" reads={[read({ data: [], error: new Error('later') }), read()]} />);
  expect(screen.queryByRole('alert')).not.toBeInTheDocument();
});
