import { act, screen, within } from '@testing-library/react';
import { Suspense } from 'react';
import { beforeEach, describe, expect, it } from 'vitest';
import type { Role } from '#contract/roles.ts';
import { CardPlace, SlotProvider, TrayPlace } from '#src/components/layout/slots.tsx';
import { GroupsPage } from '#src/app/routes/groups.tsx';
import { clearSelection, currentSelection } from '#src/lib/selection.ts';
import { undoLast } from '#src/lib/undo.ts';
import { axeViolations } from '#tests/support/axe.ts';
import { problem, renderPage, type Answers } from '#tests/support/render-page.tsx';
import { analysisAnswers, group, grouping } from '../analysis-fixtures.ts';

const open = (role: Role = 'geologist', answers: Answers = {}, search = '') =>
  renderPage(
    <SlotProvider>
      <Suspense>
        <GroupsPage />
      </Suspense>
      <CardPlace className="" />
      <TrayPlace className="" />
    </SlotProvider>,
    { path: '/deposits/:depositId/groups', at: `/deposits/1/groups${search}`, answers: { ...analysisAnswers(role), ...answers } },
  );

describe('the groups page', () => {
  beforeEach(() => act(() => clearSelection()));

  it('opens with a finding, the plots, the groups and the core of the telling hole', async () => {
    const { container } = open();
    expect(await screen.findByText(/Two groups hold in runs longer than chance/)).toBeInTheDocument();
    for (const name of ['Biplot', 'Fingerprints', 'Section', 'Sweep', 'Groups']) expect(await screen.findByRole('heading', { level: 2, name })).toBeInTheDocument();
    expect(await screen.findByRole('application', { name: /Core of TFD-001/ })).toBeInTheDocument();
    expect(await axeViolations(container)).toEqual([]);
  });

  it('renames a group where it stands, on the version shown, and takes it back', async () => {
    let name = 'Stringer';
    const answer = ({ body }: { body: unknown }) => {
      if (typeof body === 'object' && body !== null && 'name' in body && typeof body.name === 'string') name = body.name;
      return group(2, name, { version: 2, intervals: 2, metres: 4 });
    };
    const { user, sent } = open('geologist', { 'PATCH /deposits/1/groupings/4/groups/2': answer });
    await user.click(await screen.findByRole('button', { name: 'Stringer, rename' }));
    await user.clear(screen.getByRole('textbox', { name: 'Name of Stringer' }));
    await user.keyboard('Chlorite stringer{Enter}');
    expect(await screen.findByRole('button', { name: 'Chlorite stringer, rename' })).toHaveFocus();
    const first = sent.find(({ key }) => key.startsWith('PATCH'));
    expect(first?.body).toEqual({ name: 'Chlorite stringer' });
    expect(first?.headers.get('If-Match')).toBe('"1"');
    await act(async () => void (await undoLast()));
    expect(await screen.findByRole('button', { name: 'Stringer, rename' })).toBeInTheDocument();
    expect(sent.filter(({ key }) => key.startsWith('PATCH')).at(-1)?.headers.get('If-Match')).toBe('"2"');
  });

  it('says what stood against a rename and shows the name that holds', async () => {
    const { user } = open('geologist', { 'PATCH /deposits/1/groupings/4/groups/2': () => problem(412, 'Somebody else changed it first.') });
    await user.click(await screen.findByRole('button', { name: 'Stringer, rename' }));
    await user.keyboard('X{Enter}');
    expect(await screen.findByText(/Somebody else changed it first/)).toBeInTheDocument();
    expect(await screen.findByRole('button', { name: 'Stringer, rename' })).toBeInTheDocument();
  });

  it('ticks groups into the address and leads to a domain of them', async () => {
    const { user, router } = open();
    await user.click(await screen.findByRole('checkbox', { name: 'Take Stringer for a domain' }));
    expect(router.state.location.search).toBe('?groups=2');
    expect(screen.getByRole('link', { name: 'Make a candidate domain of 1 group' })).toHaveAttribute('href', '/deposits/1/domains?new=1&groups=2');
  });

  it('shows a viewer everything and changes nothing', async () => {
    open('viewer');
    expect(await screen.findByRole('table', { name: 'Groups of Two groups' })).toHaveTextContent('Stringer');
    expect(screen.queryByRole('button', { name: 'Stringer, rename' })).not.toBeInTheDocument();
    const runButton = screen.getByRole('button', { name: /^Run/ });
    expect(runButton).toHaveAttribute('aria-disabled', 'true');
  });

  it('marks a grouping on an older snapshot as stale and offers to run again', async () => {
    open('geologist', { 'GET /deposits/1/groupings': [{ ...grouping, isStale: true, snapshotNumber: 1 }] });
    expect(await screen.findByRole('heading', { level: 2, name: 'Fingerprints' })).toBeInTheDocument();
    expect(screen.getAllByText('stale: on snapshot 1').length).toBeGreaterThan(3);
    expect(screen.getByRole('button', { name: /Run again/ })).toBeInTheDocument();
  });

  it('takes a group from its fingerprint: card and address follow', async () => {
    const { user } = open();
    await user.click(await screen.findByRole('button', { name: 'Take group Stringer' }));
    expect([...currentSelection().rows]).toEqual([2, 3]);
    const card = await screen.findByRole('complementary', { name: 'Selection' });
    expect(within(card).getByText('4.0 m in 1 hole · all of Stringer')).toBeInTheDocument();
    expect(await within(card).findByText('1.5 %')).toBeInTheDocument();
    expect(within(card).getByRole('link', { name: /Make a candidate domain/ })).toHaveAttribute('href', '/deposits/1/domains?new=1&groups=2');
  });

  it('waits for components where there are none, and says where to go', async () => {
    open('geologist', { 'GET /deposits/1/groupings': [], 'GET /deposits/1/component-runs': [], 'GET /deposits/1/sweeps': [] });
    expect(await screen.findByRole('link', { name: 'Go to components' })).toHaveAttribute('href', '/deposits/1/components');
  });
});
