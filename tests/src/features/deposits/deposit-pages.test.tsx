import { screen, within } from '@testing-library/react';
import { Suspense } from 'react';
import { describe, expect, it } from 'vitest';
import { NewDepositPage } from '#src/app/routes/new-deposit.tsx';
import { SettingsPage } from '#src/app/routes/settings.tsx';
import { DepositsPage } from '#src/app/routes/deposits.tsx';
import { DepositOverview } from '#src/features/deposits/components/deposit-overview.tsx';
import { axeViolations } from '#tests/support/axe.ts';
import { problem, renderPage, type Answer } from '#tests/support/render-page.tsx';

const DEPOSIT = {
  id: 1,
  name: 'Tarnfell',
  description: '',
  grid: { kind: 'local', name: 'mine grid' },
  payAnalytes: [{ analyte: 'Cu', unit: '%' }],
  deleteriousAnalytes: ['As'],
  isDemo: true,
  version: 3,
  createdAt: '2026-01-01T00:00:00Z',
  myRole: 'lead',
  leads: [],
};
const OVERVIEW = {
  finding: 'New assays have made Groups stale.',
  totalMetres: 7712,
  metres: [
    { label: 'Drilled', metres: 7712, note: '24 holes', isStale: false },
    { label: 'Grouped', metres: 7297, note: 'on snapshot 13', isStale: true },
  ],
  waiting: [
    {
      stage: 'groups',
      tone: 'stale',
      title: 'Run Groups again',
      detail: 'They lack 212 new assays',
    },
  ],
  lately: [{ at: '2026-11-27T09:42:00Z', who: 'L. Amadi', what: 'set the arsenic limit' }],
  grades: [
    { domainCode: '1200', analyte: 'Cu', unit: '%', median: 26_100, verdict: 'mixed', n: 80 },
    { domainCode: '1100', analyte: 'As', unit: 'ppm', median: null, verdict: 'too-few', n: 4 },
  ],
};

describe('the list of deposits', () => {
  it('draws each as a run against the longest', async () => {
    const row = {
      description: '',
      isDemo: false,
      myRole: 'viewer',
      payAnalytes: [{ analyte: 'Au', unit: 'g/t' }],
      finding: '',
    };
    renderPage(<DepositsPage />, {
      answers: {
        'GET /deposits': [
          { ...row, id: 1, name: 'A', holes: 1, metres: 2000 },
          { ...row, id: 2, name: 'B', holes: 61, metres: 8000 },
        ],
      },
    });
    expect(await screen.findByText(/2 deposits you belong to, 10,000/)).toBeInTheDocument();
    expect(screen.getByRole('img', { name: /^A, drilled: 2,000.m 25 %$/ })).toBeInTheDocument();
    expect(screen.getByRole('link', { name: 'B' })).toHaveAttribute('href', '/deposits/2');
  });

  it('UX-09 says what to do when there is none', async () => {
    renderPage(<DepositsPage />, { answers: { 'GET /deposits': [] } });
    expect(await screen.findByText(/You belong to no deposit yet/)).toBeInTheDocument();
  });
});

describe('a new deposit', () => {
  it('says at each field what was expected, then creates it once', async () => {
    const { user, sent } = renderPage(<NewDepositPage />, {
      answers: { 'POST /deposits': { ...DEPOSIT, id: 8 } },
    });
    await user.click(screen.getByLabelText(/A projected grid/));
    await user.clear(screen.getByLabelText('Pay analyte 1'));
    await user.type(screen.getByLabelText('Pay analyte 1'), 'copper');
    await user.click(screen.getByRole('button', { name: 'Create the deposit' }));
    expect(await screen.findByText('Expected a name of 1 to 120 letters')).toBeInTheDocument();
    expect(screen.getByLabelText('EPSG code')).toBeInvalid();
    expect(screen.getByLabelText('Pay analyte 1')).toHaveAccessibleDescription(
      'Expected an element symbol such as Cu',
    );
    expect(sent).toEqual([]);
    await user.type(screen.getByLabelText('Name'), 'Tarnfell');
    await user.type(screen.getByLabelText('EPSG code'), '25833');
    await user.clear(screen.getByLabelText('Pay analyte 1'));
    await user.type(screen.getByLabelText('Pay analyte 1'), 'Zn');
    await user.click(screen.getByRole('button', { name: 'Create the deposit' }));
    expect(await screen.findByText('another page')).toBeInTheDocument();
    expect(sent[0]?.body).toMatchObject({
      name: 'Tarnfell',
      grid: { kind: 'epsg', code: 25833 },
      payAnalytes: [{ analyte: 'Zn', unit: '%' }],
    });
  });
});

describe('settings', () => {
  const open = (answer: Answer) =>
    renderPage(
      <Suspense>
        <SettingsPage />
      </Suspense>,
      {
        path: '/deposits/:depositId/settings',
        at: '/deposits/1/settings',
        answers: { 'GET /deposits/1': DEPOSIT, 'PUT /deposits/1': answer },
      },
    );

  it('CO-01 sends the version read, and keeps what was typed when overtaken', async () => {
    const { user, sent } = open(problem(412, 'Expected version 4, found 3', { currentVersion: 4 }));
    const name = await screen.findByLabelText('Name');
    await user.clear(name);
    await user.type(name, 'Tarnfell deep');
    await user.click(screen.getByRole('button', { name: 'Save settings' }));
    expect(await screen.findByText(/Someone else has changed these settings/)).toBeInTheDocument();
    expect(sent.find(({ key }) => key.startsWith('PUT'))?.headers.get('If-Match')).toBe('"3"');
    expect(screen.getByLabelText('Name')).toHaveValue('Tarnfell deep');
  });

  it('says that they are saved', async () => {
    const { user } = open({ ...DEPOSIT, version: 4 });
    await screen.findByLabelText('Name');
    await user.click(screen.getByRole('button', { name: 'Save settings' }));
    expect(await screen.findByText('Settings saved')).toBeInTheDocument();
    expect(screen.queryByText(/Someone else/)).toBeNull();
  });
});

describe('the overview', () => {
  const open = (overview: Answer) =>
    renderPage(
      <Suspense>
        <main>
          <DepositOverview />
        </main>
      </Suspense>,
      {
        path: '/deposits/:depositId',
        at: '/deposits/1',
        answers: { 'GET /deposits/1': DEPOSIT, 'GET /deposits/1/overview': overview },
      },
    );

  it('tells the finding, the metres, what waits and the grades', async () => {
    const { container } = open(OVERVIEW);
    expect(await screen.findByText('New assays have made Groups stale.')).toBeInTheDocument();
    expect(
      screen.getByRole('img', { name: /^Grouped: 7,297.m of 7,712.m, stale, on snapshot 13$/ }),
    ).toBeInTheDocument();
    expect(screen.getByRole('link', { name: 'Go to Groups' })).toHaveAttribute(
      'href',
      '/deposits/1/groups',
    );
    expect(screen.getByRole('link', { name: 'Open: Run Groups again' })).toHaveAttribute(
      'href',
      '/deposits/1/groups',
    );
    // Storage is ppm: 26,100 ppm are 2.61 %.
    expect(screen.getByRole('row', { name: /Cu in 1200/ })).toHaveTextContent(/2\.61.%/);
    const arsenic = screen.getByRole('row', { name: /As in 1100/ });
    expect(within(arsenic).getByText('–')).toBeInTheDocument();
    expect(within(arsenic).getByText('too few')).toBeInTheDocument();
    expect(await axeViolations(container)).toEqual([]);
  });

  it('UX-09 an empty deposit says what comes first', async () => {
    open({ ...OVERVIEW, totalMetres: 0, metres: [], waiting: [], lately: [], grades: [] });
    expect(await screen.findByText(/Collars, surveys and assays come first/)).toBeInTheDocument();
    expect(screen.getByText(/Nothing waits/)).toBeInTheDocument();
  });

  it('says what went wrong, with one button', async () => {
    let fails = true;
    const { user } = open(() =>
      fails ? problem(500, 'The overview could not be put together') : OVERVIEW,
    );
    expect(await screen.findByRole('alert')).toHaveTextContent('could not be put together');
    fails = false;
    await user.click(screen.getByRole('button', { name: 'Try again' }));
    expect(await screen.findByText('What is waiting')).toBeInTheDocument();
  });
});
