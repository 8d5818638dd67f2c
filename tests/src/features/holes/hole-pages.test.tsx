import { screen, within } from '@testing-library/react';
import { Suspense } from 'react';
import { describe, expect, it } from 'vitest';
import { HolePage } from '#src/app/routes/hole.tsx';
import { HolesPage } from '#src/app/routes/holes.tsx';
import { axeViolations } from '#tests/support/axe.ts';
import { renderPage, type Answers } from '#tests/support/render-page.tsx';
import { HOLE, holeRow } from './hole-data.ts';

const DEPOSIT = {
  id: 1, name: 'Tarnfell', description: '', grid: { kind: 'local', name: 'mine grid' }, payAnalytes: [{ analyte: 'Cu', unit: '%' }], deleteriousAnalytes: ['As'],
  isDemo: false, version: 3, createdAt: '2026-01-01T00:00:00Z', myRole: 'viewer', leads: [],
};
const holes = [holeRow(), holeRow({ hole: 'TFD-002', lengthM: 60 }), holeRow({ hole: 'TFD/3 A', campaign: '2' })];
const answers: Answers = {
  'GET /deposits/1': DEPOSIT,
  'GET /deposits/1/holes': { snapshotId: 'a', holes, faults: [{ name: 'Garron', x: 100, y: 200, z: 0, dip: 60, dipDirection: 90 }] },
  'GET /deposits/1/snapshot': { snapshot: null, assembling: false },
  'GET /deposits/1/holes/TFD-001': HOLE,
};

describe('holes', () => {
  const open = (more: Answers = {}) => renderPage(<Suspense><HolesPage /></Suspense>, { path: '/deposits/:depositId/holes', at: '/deposits/1/holes', answers: { ...answers, ...more } });

  it('lists each with a link that keeps odd names whole', async () => {
    const { container } = open();
    expect(await screen.findByRole('link', { name: 'TFD/3 A' })).toHaveAttribute('href', '/deposits/1/holes/TFD%2F3%20A');
    expect(screen.getByRole('img', { name: 'Plan of the holes of Tarnfell' })).toBeInTheDocument();
    expect(await axeViolations(container)).toEqual([]);
  });

  it('finds holes, and a taken row offers to open it', async () => {
    const { user, router } = open();
    await user.type(await screen.findByLabelText('Find a hole or campaign'), '002');
    const table = screen.getByRole('table', { name: 'Holes of the current snapshot' });
    expect(within(table).getAllByRole('rowheader').map(({ textContent }) => textContent)).toEqual(['TFD-002']);
    await user.click(within(table).getByText('60.0'));
    expect(await screen.findByRole('link', { name: 'Open TFD-002' })).toHaveAttribute('href', '/deposits/1/holes/TFD-002');
    expect(router.state.location.search).toBe('?find=002&hole=TFD-002');
  });

  it('UX-09 says what comes first where there are none', async () => {
    open({ 'GET /deposits/1/holes': { snapshotId: null, holes: [], faults: [] } });
    expect(await screen.findByText(/once collars are loaded/)).toBeInTheDocument();
    expect(screen.getByRole('link', { name: 'Bring in files' })).toHaveAttribute('href', '/deposits/1/intake');
  });
});

describe('one hole', () => {
  const open = () => renderPage(<Suspense><HolePage /></Suspense>, { path: '/deposits/:depositId/holes/:hole', at: '/deposits/1/holes/TFD-001?log=structures', answers });

  it('draws its core and shows assays with their marks, logs and notes', async () => {
    const { container } = open();
    expect(await screen.findByRole('img', { name: 'Core of TFD-001' })).toBeInTheDocument();
    const assays = screen.getByRole('table', { name: 'Assays of TFD-001' });
    expect(within(assays).getByText('>1')).toHaveTextContent('>1, over range');
    expect(within(assays).getByText('<2')).toHaveTextContent('<2, below limit');
    expect(within(screen.getByRole('table', { name: 'Structures of TFD-001' })).getAllByRole('row')).toHaveLength(3);
    expect(screen.getByText(/extended straight to 30 m/)).toBeInTheDocument();
    expect(await axeViolations(container)).toEqual([]);
  });

  it('goes on to the next hole and keeps what is shown', async () => {
    open();
    expect(await screen.findByRole('link', { name: 'TFD-002' })).toHaveAttribute('href', '/deposits/1/holes/TFD-002?log=structures');
    expect(screen.getByRole('button', { name: 'First' })).toHaveAttribute('aria-disabled', 'true');
  });

  it('takes another log and marks a pressed row', async () => {
    const { user, router } = open();
    await user.click(await screen.findByRole('radio', { name: 'Weathering' }));
    expect(router.state.location.search).toBe('?log=weathering');
    const row = within(screen.getByRole('table', { name: 'Weathering of TFD-001' })).getByRole('row', { name: /TR/ });
    await user.click(row);
    expect(row).toHaveAttribute('aria-selected', 'true');
  });
});
