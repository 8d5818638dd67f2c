import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen } from '@testing-library/react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import { makeRoutes } from '#src/app/router.tsx';
import { problem, stubFetch, type Answers } from '#tests/support/render-page.tsx';

const ME = {
  id: 2,
  email: 'm.ivers@tarnfell.example',
  name: 'M. Ivers',
  isAdministrator: false,
  isDemoInstance: false,
};
const CLOSED = { isDemoInstance: false, demoSignIns: [] };

function open(at: string, answers: Answers) {
  const sent = stubFetch({ 'GET /instance': CLOSED, ...answers });
  const queryClient = new QueryClient({ defaultOptions: { queries: { retry: false } } });
  const router = createMemoryRouter(makeRoutes(queryClient), { initialEntries: [at] });
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return { router, sent };
}

describe('the addresses', () => {
  it('asks for a sign-in first, and asks nothing of the deposit before it', async () => {
    const { router, sent } = open('/deposits/4/record?text=x', {
      'GET /me': problem(401, 'Expected a session, found none'),
    });
    expect(await screen.findByRole('button', { name: 'Sign in' })).toBeInTheDocument();
    expect(router.state.location.search).toBe('?to=%2Fdeposits%2F4%2Frecord%3Ftext%3Dx');
    expect(sent.map(({ key }) => key)).not.toContain('GET /deposits/4');
  });

  it('lead to the deposits of a person signed in', async () => {
    open('/', { 'GET /me': ME, 'GET /deposits': [] });
    expect(await screen.findByRole('heading', { name: 'Deposits' })).toBeInTheDocument();
    expect(screen.getByRole('link', { name: 'Skip to the evidence' })).toHaveAttribute(
      'href',
      '#main',
    );
  });

  it.each(['/nowhere', '/deposits/zero', '/deposits/4', '/admin', '/mailbox'])(
    'AZ-02 say of %s no more than that nothing is there',
    async (at) => {
      open(at, { 'GET /me': ME, 'GET /deposits': [] });
      expect(
        await screen.findByRole('heading', { name: 'Nothing at this address' }),
      ).toBeInTheDocument();
    },
  );
});
