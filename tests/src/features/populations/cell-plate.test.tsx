import { screen } from '@testing-library/react';
import { expect, it } from 'vitest';
import type { CellDetail, Screen } from '#contract/screens.ts';
import { CellPlate } from '#src/features/populations/components/cell-plate.tsx';
import { renderPage } from '#tests/support/render-page.tsx';
import { analysisAnswers } from '../analysis-fixtures.ts';

const subset = { key: 'group:2', kind: 'group', label: 'Stringer', slot: 2, n: 40, metres: 80 } as const;
const summary = { subsetKey: 'group:2', variable: 'Cu', verdict: 'mixed', n: 40, mean: 900, median: 800, cv: 0.7, dip: 0.05, dipP: 0.01, deltaBic: 30, populations: 2 } as const;
const stale: Screen = {
  id: 5, groupingId: 4, groupingName: 'Two groups', snapshotId: 's0', snapshotNumber: 1, isStale: true, support: 'drill', variables: ['Cu'], subsets: [subset], cells: [summary],
  createdBy: { id: 1, name: 'R. Okonjo' }, createdAt: '2026-11-30T00:00:00Z', finding: 'Cu in Stringer is more than one population.',
};
const cell: CellDetail = {
  ...summary, subsetLabel: 'Stringer', metres: 80, nBelow: 0, nAbove: 0, nMissing: 0, min: 10, max: 5000, logSd: 1, weighted: true, dipPText: 'p 0.010', mixtures: [], chosenK: null, evenOddsPpm: null,
  reasons: ['Two lognormal populations beat one.'], plot: { z: [], ppm: [], drawnOf: 0 }, histogram: { edgesPpm: [], counts: [] }, notes: [],
};

it('of a screen on older tables the reasons stay and the picture says what to do', async () => {
  renderPage(<CellPlate screen={stale} subset={subset} variable="Cu" values={null} isDrawn={false} view="probability" onView={() => undefined} />, {
    path: '/deposits/:depositId/populations', at: '/deposits/1/populations', answers: { ...analysisAnswers('viewer'), 'GET /deposits/1/screens/5/cell': cell },
  });
  expect(await screen.findByText('The tables have changed since this screen ran: screen again to draw its cells.')).toBeInTheDocument();
  expect(screen.getByText('Two lognormal populations beat one.')).toBeInTheDocument();
  expect(screen.queryByRole('status')).not.toBeInTheDocument();
});
