import { screen } from '@testing-library/react';
import { describe, expect, it, vi } from 'vitest';
import { AcceptForm } from '#src/features/auth/components/accept-form.tsx';
import { SignInForm } from '#src/features/auth/components/sign-in-form.tsx';
import { deviceWords } from '#src/features/auth/device-words.ts';
import { axeViolations } from '#tests/support/axe.ts';
import { problem, renderPage } from '#tests/support/render-page.tsx';

const ME = {
  id: 2,
  email: 'm.ivers@tarnfell.example',
  name: 'M. Ivers',
  isAdministrator: false,
  isDemoInstance: true,
};
const CLOSED = { isDemoInstance: false, demoSignIns: [] };
const DEMO = {
  isDemoInstance: true,
  demoSignIns: [
    {
      email: 'm.ivers@tarnfell.example',
      password: 'a long demonstration',
      name: 'M. Ivers',
      role: 'geologist',
    },
  ],
};

describe('signing in', () => {
  it('asks for both before it sends anything', async () => {
    const { user, sent } = renderPage(<SignInForm onSignedIn={() => undefined} />, {
      answers: { 'GET /instance': CLOSED },
    });
    await user.type(screen.getByLabelText('E-mail'), 'no address');
    await user.click(screen.getByRole('button', { name: 'Sign in' }));
    expect(
      await screen.findByText('Expected an address such as name@site.example'),
    ).toBeInTheDocument();
    expect(screen.getByText('Expected a password')).toBeInTheDocument();
    expect(sent.filter(({ key }) => key.startsWith('POST'))).toEqual([]);
  });

  it('sends the address in lower case and goes on', async () => {
    const onSignedIn = vi.fn();
    const { user, sent } = renderPage(<SignInForm onSignedIn={onSignedIn} />, {
      answers: { 'GET /instance': CLOSED, 'POST /session': ME },
    });
    await user.type(screen.getByLabelText('E-mail'), 'M.Ivers@Tarnfell.example');
    await user.type(screen.getByLabelText('Password'), 'sulphide edge 21{Enter}');
    await vi.waitFor(() => expect(onSignedIn).toHaveBeenCalledExactlyOnceWith(ME));
    expect(sent.find(({ key }) => key === 'POST /session')?.body).toEqual({
      email: 'm.ivers@tarnfell.example',
      password: 'sulphide edge 21',
    });
    expect(
      Object.keys(localStorage).filter((key) => localStorage.getItem(key)?.includes('sulphide')),
    ).toEqual([]);
  });

  it('keeps what was typed when refused, and says why', async () => {
    const { user } = renderPage(<SignInForm onSignedIn={() => undefined} />, {
      answers: {
        'GET /instance': CLOSED,
        'POST /session': problem(
          401,
          'Expected an e-mail and password that belong together, found none.',
        ),
      },
    });
    await user.type(screen.getByLabelText('E-mail'), 'm.ivers@tarnfell.example');
    await user.type(screen.getByLabelText('Password'), 'wrong');
    await user.click(screen.getByRole('button', { name: 'Sign in' }));
    expect(await screen.findByRole('alert')).toHaveTextContent('that belong together');
    expect(screen.getByLabelText('E-mail')).toHaveValue('m.ivers@tarnfell.example');
  });

  it('opens a demonstration by one press, and lists nobody elsewhere', async () => {
    const onSignedIn = vi.fn();
    const { user, sent, container } = renderPage(<SignInForm onSignedIn={onSignedIn} />, {
      answers: { 'GET /instance': DEMO, 'POST /session': ME },
    });
    await user.click(await screen.findByRole('button', { name: /M. Ivers/ }));
    await vi.waitFor(() => expect(onSignedIn).toHaveBeenCalledOnce());
    expect(sent.find(({ key }) => key === 'POST /session')?.body).toEqual({
      email: 'm.ivers@tarnfell.example',
      password: 'a long demonstration',
    });
    expect(await axeViolations(container)).toEqual([]);
  });
});

describe('an invitation', () => {
  const token = 'abcdefghijklmnopqrstuvwxyz';
  const invitation = {
    email: 'n.sorley@tarnfell.example',
    depositName: 'Tarnfell',
    role: 'viewer',
    invitedBy: 'R. Okonjo',
    hasAccount: false,
  } as const;

  it('AU-04 counts a new password in bytes before it is sent', async () => {
    const { user, sent } = renderPage(
      <AcceptForm token={token} invitation={invitation} onAccepted={() => undefined} />,
    );
    expect(screen.getByText('R. Okonjo asks you to join Tarnfell as viewer.')).toBeInTheDocument();
    await user.type(screen.getByLabelText('Your name'), 'N. Sorley');
    await user.type(screen.getByLabelText('New password'), 'elevenbytes');
    await user.click(screen.getByRole('button', { name: 'Join' }));
    expect(await screen.findByText('Expected at least 12 bytes')).toBeInTheDocument();
    expect(sent).toEqual([]);
  });

  it('makes the account and opens the deposit', async () => {
    const onAccepted = vi.fn();
    const { user, sent } = renderPage(
      <AcceptForm token={token} invitation={invitation} onAccepted={onAccepted} />,
      {
        answers: { [`POST /invitations/${token}`]: { me: ME, depositId: 4 } },
      },
    );
    await user.type(screen.getByLabelText('Your name'), 'N. Sorley');
    await user.type(screen.getByLabelText('New password'), 'twelve bytes and more');
    await user.click(screen.getByRole('button', { name: 'Join' }));
    await vi.waitFor(() => expect(onAccepted).toHaveBeenCalledExactlyOnceWith(4));
    expect(sent[0]?.body).toEqual({ name: 'N. Sorley', password: 'twelve bytes and more' });
  });

  it('asks a person with an account for its password only', () => {
    renderPage(
      <AcceptForm
        token={token}
        invitation={{ ...invitation, hasAccount: true }}
        onAccepted={() => undefined}
      />,
    );
    expect(screen.queryByLabelText('Your name')).toBeNull();
    expect(screen.getByLabelText('Your password')).toHaveAttribute(
      'autocomplete',
      'current-password',
    );
  });
});

it.each([
  ['Mozilla/5.0 (X11; Linux x86_64; rv:140.0) Gecko/20100101 Firefox/140.0', 'Firefox on Linux'],
  [
    'Mozilla/5.0 (Windows NT 10.0) AppleWebKit/537.36 Chrome/140.0 Safari/537.36 Edg/140.0',
    'Edge on Windows',
  ],
  ['curl/8.5.0', 'curl'],
  ['', 'unknown'],
])('%s is named %s', (userAgent, words) => {
  expect(deviceWords(userAgent)).toBe(words);
});
