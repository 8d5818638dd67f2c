import { screen } from '@testing-library/react';
import { expect, it } from 'vitest';
import type { Stage } from '#contract/deposits.ts';
import { StageRail } from '#src/components/layout/stage-rail.tsx';
import { axeViolations } from '#tests/support/axe.ts';
import { renderPage } from '#tests/support/render-page.tsx';

const stage = (
  key: Stage['key'],
  state: Stage['state'],
  word: string,
  waitsFor: string | null = null,
): Stage => ({ key, state, word, count: null, waitsFor });
const STAGES = [
  stage('deposit', 'done', 'done'),
  stage('intake', 'ready', 'ready'),
  stage('suite', 'attention', '3 to settle'),
  stage('components', 'stale', 'stale'),
  stage('groups', 'empty', 'waits', 'components'),
];

it('lists the stages in order with number, name and state in words; the present one is marked', async () => {
  const { container } = renderPage(<StageRail depositId={7} stages={STAGES} foot="Snapshot 14" />, {
    path: '/deposits/:depositId/suite',
    at: '/deposits/7/suite',
  });
  const links = screen.getAllByRole('link');
  expect(links.map((link) => link.textContent)).toEqual([
    '1Depositdone',
    '2Intakeready',
    '3Suite3 to settle',
    '4Componentsstale',
    '5Groupswaits',
  ]);
  expect(links.map((link) => link.getAttribute('href'))).toEqual([
    '/deposits/7',
    '/deposits/7/intake',
    '/deposits/7/suite',
    '/deposits/7/components',
    '/deposits/7/groups',
  ]);
  expect(links.filter((link) => link.getAttribute('aria-current') === 'page')).toEqual([links[2]]);
  expect(links[4]).toHaveAttribute('title', 'Groups: waits: waits for components');
  expect(await axeViolations(container)).toEqual([]);
});
