import { screen } from '@testing-library/react';
import { Suspense } from 'react';
import { expect, it } from 'vitest';
import type { Role } from '#contract/roles.ts';
import type { Suite } from '#contract/suites.ts';
import { SuiteStage, suiteFinding } from '#src/features/suites/components/suite-stage.tsx';
import { axeViolations } from '#tests/support/axe.ts';
import { problem, renderPage, type Answers } from '#tests/support/render-page.tsx';
import { analysisAnswers, analyte, snapshot } from '../analysis-fixtures.ts';

const suite: Suite = {
  id: 1, name: 'Whole rock', note: '', support: 'drill', analytes: ['Cu', 'Na', 'Zn'], replacementFraction: 0.65, version: 3, createdBy: { id: 1, name: 'R. Okonjo' }, createdAt: '2026-11-30T00:00:00Z', runs: 0,
};
const analytes = [
  analyte('Cu', { supports: ['drill', 'surface'] }), analyte('Na'), analyte('Zn'),
  analyte('Cr', { decision: 'keep-with-care', belowShare: 0.036, reason: '3.6 % below detection', caution: 'four-acid digestion may open its minerals only in part' }),
  analyte('Re', { decision: 'drop', belowShare: 0.9, reason: '90 % below detection' }),
];

const open = (role: Role = 'geologist', answers: Answers = {}) =>
  renderPage(
    <Suspense>
      <SuiteStage />
    </Suspense>,
    { path: '/deposits/:depositId/suite', at: '/deposits/1/suite', answers: { ...analysisAnswers(role), 'GET /deposits/1/snapshot': { snapshot: { ...snapshot, analytes }, assembling: false }, 'GET /deposits/1/suites': [suite], ...answers } },
  );

it('says how many analytes can bear log-ratios', () => {
  expect(suiteFinding(analytes, 'drill', [suite])).toBe('4 of 5 analytes can bear log-ratios, 1 of them with care. One suite is made of them.');
  expect(suiteFinding(analytes, 'surface', [suite])).toContain('No suite is made of them yet.');
});

it('ticks what is advised, counts live, and makes the suite of what is ticked', async () => {
  const { user, sent, container } = open('geologist', { 'POST /deposits/1/suites': () => new Response(JSON.stringify({ ...suite, id: 2, name: 'Without chromium' }), { status: 201 }) });
  expect(await screen.findByText('4 of 5 ticked')).toBeInTheDocument();
  expect(await axeViolations(container)).toEqual([]);
  await user.click(screen.getByRole('checkbox', { name: 'Take Cr' }));
  expect(screen.getByText('3 of 5 ticked')).toBeInTheDocument();
  const name = screen.getByRole('textbox', { name: 'Name' });
  await user.clear(name);
  await user.type(name, 'Without chromium');
  await user.click(screen.getByRole('button', { name: 'Make the suite' }));
  expect(await screen.findByText('“Without chromium” is made')).toBeInTheDocument();
  expect(sent.find(({ key }) => key === 'POST /deposits/1/suites')?.body).toEqual({ name: 'Without chromium', note: '', replacementFraction: 0.65, support: 'drill', analytes: ['Cu', 'Na', 'Zn'] });
});

it('reads an analyte of the surface samples by their own rows', async () => {
  const reading = analyte('Cu', { n: 130, medianPpm: 44.4, belowShare: 0.25, reason: '25 % below detection' });
  const both = [analyte('Cu', { supports: ['drill', 'surface'], onSurface: reading }), analyte('Na'), analyte('Zn')];
  const { user } = open('geologist', { 'GET /deposits/1/snapshot': { snapshot: { ...snapshot, analytes: both }, assembling: false } });
  await user.click(await screen.findByRole('radio', { name: 'Surface samples' }));
  const row = screen.getByRole('row', { name: /Take Cu/ });
  expect(row).toHaveTextContent('44.4');
  expect(row).toHaveTextContent('25 % below detection');
  expect(screen.getByText(/n = 130 rows at most/)).toBeInTheDocument();
});

it('asks for three analytes at least, and shows only those of the support', async () => {
  const { user } = open();
  await user.click(await screen.findByRole('radio', { name: 'Surface samples' }));
  expect(screen.getByText('1 of 1 ticked')).toBeInTheDocument();
  expect(screen.getByRole('button', { name: 'Make the suite' })).toHaveAttribute('aria-disabled', 'true');
});

it('refuses a replacement outside its range at its field', async () => {
  const { user, sent } = open();
  const field = await screen.findByLabelText(/Below detection becomes/);
  await user.clear(field);
  await user.type(field, '2');
  await user.click(screen.getByRole('button', { name: 'Make the suite' }));
  expect(field).toHaveAttribute('aria-invalid', 'true');
  expect(sent.some(({ key }) => key.startsWith('POST'))).toBe(false);
});

it('renames a suite on its version and deletes only one nothing stands on', async () => {
  const { user, sent } = open('geologist', { 'PUT /deposits/1/suites/1': { ...suite, name: 'Majors', version: 4 } });
  await user.click(await screen.findByRole('button', { name: 'Whole rock, rename' }));
  await user.clear(screen.getByRole('textbox', { name: 'Name of Whole rock' }));
  await user.keyboard('Majors{Enter}');
  expect(await screen.findByRole('button', { name: 'Majors, rename' })).toBeInTheDocument();
  const put = sent.find(({ key }) => key.startsWith('PUT'));
  expect(put?.headers.get('If-Match')).toBe('"3"');
  expect(put?.body).toMatchObject({ name: 'Majors', analytes: ['Cu', 'Na', 'Zn'] });
});

it('keeps a suite in use, and keeps a viewer from changing any', async () => {
  open('viewer', { 'GET /deposits/1/suites': [{ ...suite, runs: 2 }] });
  expect(await screen.findByText('Whole rock')).toBeInTheDocument();
  expect(screen.queryByRole('button', { name: 'Whole rock, rename' })).not.toBeInTheDocument();
  expect(screen.getByRole('button', { name: /Delete/ })).toHaveAttribute('aria-disabled', 'true');
});

it('sends to intake before anything is loaded, and says what failed', async () => {
  open('geologist', { 'GET /deposits/1/snapshot': { snapshot: null, assembling: false } });
  expect(await screen.findByRole('link', { name: 'Go to intake' })).toBeInTheDocument();
});

it('shows what the server said where the suites cannot be read', async () => {
  open('geologist', { 'GET /deposits/1/suites': () => problem(503, 'The service is starting.') });
  expect(await screen.findByText('The service is starting.')).toBeInTheDocument();
});
