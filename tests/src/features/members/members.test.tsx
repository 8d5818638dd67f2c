import { screen, within } from '@testing-library/react';
import { Suspense } from 'react';
import { describe, expect, it } from 'vitest';
import type { Role } from '#contract/roles.ts';
import { MembersPage } from '#src/app/routes/members.tsx';
import { axeViolations } from '#tests/support/axe.ts';
import { problem, renderPage, type Answers } from '#tests/support/render-page.tsx';

const deposit = (myRole: Role) => ({
  id: 1,
  name: 'Tarnfell',
  description: '',
  grid: { kind: 'local', name: 'local grid' },
  payAnalytes: [{ analyte: 'Cu', unit: '%' }],
  deleteriousAnalytes: [],
  isDemo: false,
  version: 1,
  createdAt: '2026-01-01T00:00:00Z',
  myRole,
  leads: [{ id: 1, name: 'R. Okonjo' }],
});
const PEOPLE = {
  members: [
    {
      userId: 1,
      name: 'R. Okonjo',
      email: 'r.okonjo@tarnfell.example',
      role: 'lead',
      since: '2026-01-01T00:00:00Z',
    },
    {
      userId: 4,
      name: 'A. Brandt',
      email: 'a.brandt@tarnfell.example',
      role: 'viewer',
      since: '2026-02-01T00:00:00Z',
    },
  ],
  invitations: [
    {
      id: 9,
      email: 'n.sorley@tarnfell.example',
      role: 'viewer',
      invitedBy: 'R. Okonjo',
      sentAt: '2026-11-30T00:00:00Z',
      expiresAt: '2026-12-07T00:00:00Z',
    },
  ],
};

const open = (myRole: Role, answers: Answers = {}) =>
  renderPage(
    <Suspense>
      <MembersPage />
    </Suspense>,
    {
      path: '/deposits/:depositId/members',
      at: '/deposits/1/members',
      answers: {
        'GET /deposits/1': deposit(myRole),
        'GET /deposits/1/members': PEOPLE,
        'GET /deposits/1/tokens': [],
        ...answers,
      },
    },
  );

describe('people of a deposit', () => {
  it('shows everybody to a viewer, and why nothing can be changed', async () => {
    const { user } = open('viewer');
    expect(await screen.findByRole('row', { name: /A. Brandt/ })).toHaveTextContent('Viewer');
    expect(screen.queryByRole('button', { name: 'Remove A. Brandt' })).toBeNull();
    const send = screen.getByRole('button', { name: 'Send the invitation' });
    send.focus();
    expect(await screen.findByRole('tooltip')).toHaveTextContent('For lead; yours is viewer');
    await user.keyboard('{Enter}');
    expect(screen.queryByText(/Expected an address/)).toBeNull();
  });

  it('lets a lead change a role, with Undo', async () => {
    const roles: unknown[] = [];
    const { user } = open('lead', {
      'PATCH /deposits/1/members/4': ({ body }: { body: unknown }) => {
        roles.push(body);
        return { ...PEOPLE.members[1], role: 'geologist' };
      },
    });
    await user.selectOptions(await screen.findByLabelText('Role of A. Brandt'), 'geologist');
    expect(await screen.findByText('A. Brandt is now geologist')).toBeInTheDocument();
    await user.click(screen.getByRole('button', { name: 'Undo' }));
    expect(roles).toEqual([{ role: 'geologist' }, { role: 'viewer' }]);
  });

  it('AZ-04 says why the last lead stays', async () => {
    const { user } = open('lead', {
      'DELETE /deposits/1/members/1': problem(409, 'Expected another lead to remain, found none.'),
    });
    await user.click(await screen.findByRole('button', { name: 'Remove R. Okonjo' }));
    const dialog = screen.getByRole('dialog');
    await user.click(within(dialog).getByRole('button', { name: 'Remove R. Okonjo' }));
    expect(await within(dialog).findByRole('alert')).toHaveTextContent(
      'Expected another lead to remain',
    );
  });

  it('sends an invitation with its role, and puts a refused address at its field', async () => {
    let refuses = true;
    const { user, sent } = open('lead', {
      'POST /deposits/1/invitations': () =>
        refuses
          ? problem(400, 'Look at the fields', {
              fields: [{ path: 'body.email', message: 'already a member' }],
            })
          : PEOPLE.invitations[0],
    });
    await user.type(await screen.findByLabelText('E-mail'), 'A.Brandt@tarnfell.example');
    await user.click(screen.getByRole('radio', { name: /Estimator/ }));
    await user.click(screen.getByRole('button', { name: 'Send the invitation' }));
    expect(await screen.findByText('Already a member')).toBeInTheDocument();
    refuses = false;
    await user.click(screen.getByRole('button', { name: 'Send the invitation' }));
    expect(
      await screen.findByText('Invitation sent to a.brandt@tarnfell.example'),
    ).toBeInTheDocument();
    expect(sent.findLast(({ key }) => key.startsWith('POST'))?.body).toEqual({
      email: 'a.brandt@tarnfell.example',
      role: 'estimator',
    });
  });

  it('AU-07 shows a new token once', async () => {
    const token = {
      id: 3,
      name: 'Estimation package',
      right: 'codes',
      createdAt: '2026-11-30T00:00:00Z',
      expiresAt: '2027-02-28T00:00:00Z',
      lastUsedAt: null,
      owner: { id: 1, name: 'R. Okonjo' },
    };
    const { user, sent } = open('estimator', {
      'POST /deposits/1/tokens': { token, text: 'slv_abc' },
    });
    await user.click(await screen.findByRole('button', { name: 'New token' }));
    await user.type(screen.getByLabelText('Name'), 'Estimation package');
    await user.click(screen.getByRole('button', { name: 'Make the token' }));
    expect(await screen.findByText('slv_abc')).toBeInTheDocument();
    expect(sent.findLast(({ key }) => key.startsWith('POST'))?.body).toEqual({
      name: 'Estimation package',
      right: 'codes',
      days: 90,
    });
    await user.click(screen.getByRole('button', { name: 'Done' }));
    await user.click(screen.getByRole('button', { name: 'New token' }));
    expect(screen.queryByText('slv_abc')).toBeNull();
  });

  it('has no accessibility violation', async () => {
    const { container } = open('lead');
    await screen.findByLabelText('Role of A. Brandt');
    expect(await axeViolations(container)).toEqual([]);
  });
});
