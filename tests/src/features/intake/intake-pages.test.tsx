import { screen, waitFor, within } from '@testing-library/react';
import { Suspense } from 'react';
import { describe, expect, it } from 'vitest';
import { IntakePage } from '#src/app/routes/intake.tsx';
import { UploadPage } from '#src/app/routes/upload.tsx';
import { axeViolations } from '#tests/support/axe.ts';
import { problem, renderPage, type Answers } from '#tests/support/render-page.tsx';
import { CHECK, column, DEPOSIT, mapping, PREVIEW, revision, upload, ASSAY_COLUMNS } from './intake-data.ts';

const answersWith = (more: Answers): Answers => ({
  'GET /deposits/1': DEPOSIT,
  'GET /deposits/1/uploads': [],
  'GET /deposits/1/revisions': [],
  'GET /deposits/1/snapshot': { snapshot: null, assembling: false },
  'GET /deposits/1/jobs': [],
  'GET /demo-files': () => problem(404, 'no demonstration'),
  ...more,
});

const openIntake = (more: Answers = {}) =>
  renderPage(<Suspense><IntakePage /></Suspense>, { path: '/deposits/:depositId/intake', at: '/deposits/1/intake', answers: answersWith(more) });

const openFile = (file: ReturnType<typeof upload>, more: Answers = {}) =>
  renderPage(<Suspense><UploadPage /></Suspense>, {
    path: '/deposits/:depositId/intake/:uploadId',
    at: `/deposits/1/intake/${file.id}`,
    answers: answersWith({ [`GET /deposits/1/uploads/${file.id}`]: file, [`POST /deposits/1/uploads/${file.id}/preview`]: PREVIEW, ...more }),
  });

describe('Intake', () => {
  it('UX-09 says what goes here and what comes first', async () => {
    const { container } = openIntake();
    expect(await screen.findByText(/Nothing is loaded yet\. Collars, surveys and assays come first/)).toBeInTheDocument();
    expect(screen.getByText('needs columns for hole, x, y, z, length')).toBeInTheDocument();
    expect(screen.queryByRole('heading', { name: 'Demonstration tables' })).not.toBeInTheDocument();
    expect(await axeViolations(container)).toEqual([]);
  });

  it('says before loading all what becomes of each table', async () => {
    const known = upload({ mappingRemembered: true });
    openIntake({ 'GET /deposits/1/uploads': [known, upload({ id: 4, fileName: 'january.csv', mappingRemembered: true })], 'GET /deposits/1/revisions': [revision()] });
    expect(within(await screen.findByRole('row', { name: /^december.csv/ })).getByText('replaces revision 9, 5,000 rows')).toBeInTheDocument();
    expect(within(screen.getByRole('row', { name: /^january.csv/ })).getByText('added to december.csv')).toBeInTheDocument();
    expect(screen.getByRole('button', { name: 'Load all 2 as guessed' })).not.toHaveAttribute('aria-disabled');
  });

  it('does not load all while a unit is only a guess', async () => {
    const { user, sent } = openIntake({ 'GET /deposits/1/uploads': [upload()] });
    const load = await screen.findByRole('button', { name: 'Load it as guessed' });
    expect(load).toHaveAttribute('aria-disabled', 'true');
    await user.click(load);
    expect(sent.map(({ key }) => key)).not.toContain('POST /deposits/1/uploads/3/load');
  });

  it('lets a viewer read everything and change nothing', async () => {
    openIntake({
      'GET /deposits/1': { ...DEPOSIT, myRole: 'viewer' },
      'GET /deposits/1/uploads': [upload({ mappingRemembered: true })],
      'GET /deposits/1/revisions': [revision(), revision({ id: 8, number: 8, isCurrent: false })],
    });
    for (const name of ['Browse', 'Load it as guessed', 'Discard december.csv', 'Use this revision, 8 of assays'])
      expect(await screen.findByRole('button', { name })).toHaveAttribute('aria-disabled', 'true');
  });

  it('goes back to an earlier revision, and forward again by Undo', async () => {
    const { user, sent } = openIntake({
      'GET /deposits/1/revisions': [revision(), revision({ id: 8, number: 8, isCurrent: false })],
      'POST /deposits/1/revisions/8/use': revision({ id: 8, number: 8 }),
      'POST /deposits/1/revisions/9/use': revision(),
    });
    await user.click(await screen.findByRole('button', { name: 'Use this revision, 8 of assays' }));
    (await screen.findByRole('button', { name: 'Undo' })).focus();
    await user.keyboard('{Enter}');
    await waitFor(() => expect(sent.filter(({ key }) => key.startsWith('POST')).map(({ key }) => key)).toEqual(['POST /deposits/1/revisions/8/use', 'POST /deposits/1/revisions/9/use']));
  });

  it('shows a lost connection with one button', async () => {
    openIntake({ 'GET /deposits/1/uploads': () => problem(503, 'The server is starting.') });
    expect(await screen.findByText('The server is starting.')).toBeInTheDocument();
    expect(screen.getByRole('button', { name: 'Try again' })).toBeInTheDocument();
  });
});

describe('the columns of a file', () => {
  it('UX-01 shows each column with its guess, and each cell of the preview with its mark', async () => {
    const { container } = openFile(upload());
    const silver = await screen.findByRole('row', { name: /^Ag / });
    expect(within(silver).getByText('look')).toBeInTheDocument();
    expect(within(silver).getByText(/ppm proposed from the size of the values/)).toBeInTheDocument();
    expect(await screen.findByRole('cell', { name: '>10000, over range' })).toBeInTheDocument();
    expect(screen.getByRole('cell', { name: 'TFD-O31, row set aside' })).toHaveAttribute('title', 'no hole TFD-O31; TFD-031 meant?');
    expect(screen.getByRole('rowheader', { name: '3, set aside' })).toBeInTheDocument();
    expect(await axeViolations(container)).toEqual([]);
  });

  it('saves a change by itself and checks with it', async () => {
    const { user, sent } = openFile(upload(), { 'PUT /deposits/1/uploads/3/mapping': ({ body }: { body: unknown }) => upload({ mapping: body as ReturnType<typeof mapping> }) });
    await user.selectOptions(await screen.findByLabelText('Ag: unit'), 'g/t');
    await waitFor(() => expect(sent.find(({ key }) => key.startsWith('PUT'))?.body).toMatchObject({ columns: expect.arrayContaining([expect.objectContaining({ header: 'Ag', unit: 'g/t' })]) }), { timeout: 3000 });
    expect(await screen.findByText(/none to look at; saved/)).toBeInTheDocument();
    expect(within(screen.getByRole('row', { name: /^Ag / })).getByText('set by hand')).toBeInTheDocument();
  });

  it('does not send what cannot be read, and says at the column why', async () => {
    const columns = [...ASSAY_COLUMNS, column(6, 'Moly', { role: 'analyte', analyte: 'Mo' })];
    const { user, sent } = openFile(upload({ id: 5, mapping: mapping({ columns }) }));
    expect(within(await screen.findByRole('row', { name: /^Moly/ })).getByText('say in which unit it is')).toBeInTheDocument();
    await user.selectOptions(screen.getByLabelText('hole_id is'), 'skip');
    expect(screen.getByText('assays still need a column for hole')).toBeInTheDocument();
    expect(screen.getByText(/kept here, saved once it can be read/)).toBeInTheDocument();
    expect(screen.getByRole('button', { name: 'Check all 1,284 rows' })).toHaveAttribute('aria-disabled', 'true');
    expect(sent.some(({ key }) => key.startsWith('PUT'))).toBe(false);
  });

  it('shows a refusal of the server beside the column it names and keeps the edit', async () => {
    const { user } = openFile(upload({ id: 6 }), { 'PUT /deposits/1/uploads/6/mapping': () => problem(422, 'column “Cu_ppm” (Cu): expected another unit', { code: 'bad-mapping' }) });
    await user.selectOptions(await screen.findByLabelText('Cu_ppm: unit'), '%');
    expect(await within(screen.getByRole('row', { name: /^Cu_ppm/ })).findByText(/expected another unit/, undefined, { timeout: 3000 })).toBeInTheDocument();
    expect(screen.getByLabelText('Cu_ppm: unit')).toHaveValue('%');
  });

  it('sets the unit of all analytes that have none at once', async () => {
    const columns = [...ASSAY_COLUMNS.slice(0, 3), column(3, 'Cu', { role: 'analyte', analyte: 'Cu' }), column(4, 'Zn', { role: 'analyte', analyte: 'Zn' })];
    const { user } = openFile(upload({ id: 7, mapping: mapping({ columns }) }));
    await user.selectOptions(await screen.findByLabelText('Unit for all'), '%');
    await user.click(screen.getByRole('button', { name: 'Set 2 units' }));
    expect(screen.getByLabelText('Cu: unit')).toHaveValue('%');
    expect(screen.getByLabelText('Zn: unit')).toHaveValue('%');
  });
});

describe('the rows of a file', () => {
  const checked = upload({ id: 8, state: 'checked', check: CHECK });
  const listed = { rows: [{ row: 8, column: 'hole_id', value: 'TFD-O31', code: 'hole-unknown', message: 'no hole TFD-O31; TFD-031 meant?', severity: 'aside' }], total: 1, page: 1, pageSize: 100 };

  it('lists what is set aside with its reason, by kind of problem, and draws the file', async () => {
    const { user, sent } = openFile(checked, { 'GET /deposits/1/uploads/8/problems': listed });
    expect(await screen.findByText('no hole TFD-O31; TFD-031 meant?')).toBeInTheDocument();
    expect(screen.getByRole('img', { name: '1,284 rows as one run: 7 set aside, 31 with a warning' })).toBeInTheDocument();
    expect(screen.getByRole('link', { name: 'CSV' })).toHaveAttribute('href', '/api/deposits/1/uploads/8/problems.csv');
    await user.click(screen.getByRole('button', { name: /^unknown hole 7/ }));
    await waitFor(() => expect(sent.at(-1)?.url.search).toContain('code=hole-unknown'));
  });

  it('marks in the preview what showed only once all rows were read', async () => {
    const repeat = { row: 2, column: 'hole_id', value: 'TFD-031', code: 'collar-repeated', message: 'repeats the collar of row 9', severity: 'aside' };
    openFile(checked, { 'GET /deposits/1/uploads/8/problems': { ...listed, rows: [repeat] } });
    expect(await screen.findByRole('cell', { name: 'TFD-031, row set aside' })).toHaveAttribute('title', 'repeats the collar of row 9');
    expect(screen.getByRole('rowheader', { name: '2, set aside' })).toBeInTheDocument();
  });

  it('loads the rows that hold, added to the table in force when asked to', async () => {
    const job = { id: 30, depositId: 1, kind: 'load-file', title: 'Load december.csv', state: 'queued', progress: 0, phase: '', error: null, result: null, startedBy: { id: 2, name: 'T' }, createdAt: '2026-11-30T09:00:00Z', startedAt: null, endedAt: null };
    const { user, sent } = openFile(checked, {
      'GET /deposits/1/uploads/8/problems': listed,
      'GET /deposits/1/revisions': [revision()],
      'POST /deposits/1/uploads/8/load': { job },
      'GET /deposits/1/jobs/30': job,
    });
    expect(await screen.findByRole('button', { name: 'Load 1,277 rows' })).toBeInTheDocument();
    await user.click(screen.getByLabelText(/^is added to it/));
    await user.click(screen.getByRole('button', { name: 'Add 1,277 rows' }));
    await waitFor(() => expect(sent.find(({ key }) => key === 'POST /deposits/1/uploads/8/load')?.body).toEqual({ mode: 'add' }));
  });
});
