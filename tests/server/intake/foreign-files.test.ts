import { beforeAll, describe, expect, test, vi } from 'vitest';
import type { Revision, Upload } from '#contract/files.ts';
import { JobStarted } from '#contract/jobs.ts';
import { Problem } from '#contract/problem.ts';
import { testClient, type TestClient } from '#tests/support/test-client.ts';
import { COLLARS, csv, type IntakeDesk, intakeDesk } from './intake-desk.ts';

const NEVER = 987_654;
/** A refusal but for the id of its request. */
const Told = Problem.omit({ requestId: true });
const ASSAYS = csv('HoleID,From,To,Cu_ppm', 'TH-1,0,2,10', 'TH-2,0,2,20');

let client: TestClient;
let desk: IntakeDesk;
let theirs: { upload: Upload; revision: Revision };

/** Deposit B holds a loaded table; deposit A is asked for it. */
beforeAll(async () => {
  client = await testClient({ compute: true });
  desk = intakeDesk(client);
  const other = intakeDesk({ ...client, as: () => client.as('lead-of-b') }, client.otherDepositId);
  const upload = await other.upload('secret-collars.csv', COLLARS);
  expect((await other.load(upload.id)).state).toBe('done');
  const [revision] = await other.revisions();
  if (!revision) throw new Error('nothing was loaded into deposit B');
  theirs = { upload: await other.get(upload.id), revision };
});

type Ask = (uploadId: number) => PromiseLike<{ status: number; body: unknown; text: string }>;

describe('AZ-02 files of another deposit, asked for under one’s own', () => {
  const ways = (): [string, Ask][] => {
    const { lead, at, base } = desk;
    const { mapping } = theirs.upload;
    return [
      ['read', (id) => lead.get(at(id))],
      ['download', (id) => lead.get(`${at(id)}/file`)],
      ['map', (id) => lead.put(`${at(id)}/mapping`).send(mapping)],
      ['preview', (id) => lead.post(`${at(id)}/preview`).send({ mapping, rows: 5 })],
      ['check', (id) => lead.post(`${at(id)}/check`)],
      ['load', (id) => lead.post(`${at(id)}/load`).send({ mode: 'replace' })],
      ['problems', (id) => lead.get(`${at(id)}/problems`)],
      ['problems as a file', (id) => lead.get(`${at(id)}/problems.csv`)],
      ['discard', (id) => lead.delete(at(id))],
      ['use its revision', (id) => lead.post(`${base}/revisions/${id === NEVER ? NEVER : theirs.revision.id}/use`)],
      ['its table', (id) => lead.get(`${base}/tables/${id === NEVER ? NEVER : theirs.revision.tableId}`)],
      ['a column of its table', (id) => lead.get(`${base}/tables/${id === NEVER ? NEVER : theirs.revision.tableId}/columns/hole`)],
    ];
  };

  test('each way answers 404 as for what never was, and tells nothing of it', async () => {
    for (const [label, ask] of ways()) {
      const [foreign, never] = [await ask(theirs.upload.id), await ask(NEVER)];
      expect([label, foreign.status, Told.parse(foreign.body)]).toEqual([label, 404, Told.parse(never.body)]);
      expect(foreign.text).not.toMatch(/secret|TH-1/);
    }
    await desk.stillAnswers();
  });

  test('what was asked for stands as it was', async () => {
    const other = intakeDesk({ ...client, as: () => client.as('lead-of-b') }, client.otherDepositId);
    expect(await other.get(theirs.upload.id)).toEqual(theirs.upload);
    expect(await other.revisions()).toEqual([theirs.revision]);
    expect((await other.bytesOf(theirs.upload.id)).toString()).toBe(COLLARS);
  });

  test('holes of another deposit are no holes of this one', async () => {
    const { check } = await desk.checked('assay.csv', ASSAYS);
    expect(check.notes).toContain('No collars are loaded yet: hole names and ends of holes could not be checked.');
    const { id } = await desk.upload('collar.csv', csv('HoleID,Easting,Northing,Elevation,Length', 'TH-2,1,2,3,50'));
    await desk.load(id);
    const { problems } = await desk.checked('assay.csv', ASSAYS);
    expect(problems).toEqual([expect.objectContaining({ row: 2, code: 'hole-unknown', message: 'no hole TH-1 among the collars' })]);
  });
});

describe('what a loaded file no longer takes: 409 with the reason', () => {
  test('a new mapping, a second load, a discard', async () => {
    const { id, mapping } = await desk.upload('collar.csv', COLLARS);
    expect((await desk.load(id)).state).toBe('done');
    const before = await desk.revisions();
    const answers = [
      [await desk.map(id, mapping), 'This file is loaded; upload it again to read it another way.'],
      [await desk.lead.post(`${desk.at(id)}/load`).send({ mode: 'add' }), 'This file is loaded already.'],
      [await desk.lead.delete(desk.at(id)), 'A loaded file is kept: revisions stand on it.'],
    ] as const;
    for (const [res, detail] of answers) expect(desk.refusal(res)).toMatchObject({ answered: 409, code: 'upload-loaded', detail });
    expect(await desk.revisions()).toEqual(before);
    await desk.stillAnswers();
  });

  test('while it is being loaded: no second load, no new mapping, no discard; one revision is made', async () => {
    const { id, mapping } = await desk.upload('lithology.csv', csv('HoleID,From,To,Lithology', 'TH-2,0,2,BAS', 'TH-2,2,4,BAS'));
    const before = (await desk.revisions()).length;
    const first = await desk.lead.post(`${desk.at(id)}/load`).send({ mode: 'replace' });
    const others = await Promise.all([desk.lead.post(`${desk.at(id)}/load`).send({ mode: 'replace' }), desk.map(id, { ...mapping, kind: 'weathering' }), desk.lead.delete(desk.at(id))]);
    for (const res of others) expect(desk.refusal(res)).toMatchObject({ answered: 409, code: expect.stringMatching(/^upload-(busy|loaded)$/) });
    expect((await desk.ended(first)).state).toBe('done');
    expect((await desk.revisions()).length).toBe(before + 1);
    expect((await desk.revisions())[0]).toMatchObject({ kind: 'lithology', rows: 2 });
  });

  test('two loads asked for in one instant make one revision', async () => {
    const { id } = await desk.upload('lithology.csv', csv('HoleID,From,To,Lithology', 'TH-1,0,2,BAS'));
    const before = (await desk.revisions()).length;
    const answers = await Promise.all([1, 2].map(() => desk.lead.post(`${desk.at(id)}/load`).send({ mode: 'replace' })));
    const jobs = await Promise.all(answers.filter(({ status }) => status === 202).map((res) => desk.ended(res)));
    expect(jobs.filter(({ state }) => state === 'done')).toHaveLength(1);
    for (const { error } of jobs.filter(({ state }) => state === 'failed')) expect(error).toMatchObject({ code: 'upload-loaded' });
    expect((await desk.revisions()).length).toBe(before + 1);
  });

  test('a check of an earlier mapping is not kept as one of the mapping saved meanwhile', async () => {
    const rows = Array.from({ length: 20_000 }, (_, i) => `TH-2,${i / 1000},${(i + 1) / 1000},BAS`);
    const { id, mapping } = await desk.upload('lithology.csv', csv('HoleID,From,To,Lithology', ...rows));
    const started = await desk.lead.post(`${desk.at(id)}/check`);
    await vi.waitFor(async () => expect((await desk.lead.get(`${desk.base}/jobs/${JobStarted.parse(started.body).job.id}`)).body).toMatchObject({ startedAt: expect.any(String) }), { interval: 5, timeout: 20_000 });
    await desk.map(id, { ...mapping, kind: 'weathering' }).expect(200);
    const job = await desk.ended(started);
    expect(job).toMatchObject({ state: 'failed', error: { code: 'mapping-changed', message: 'The mapping was changed while rows were checked with the earlier one: check again.' } });
    expect(await desk.get(id)).toMatchObject({ state: 'mapped', check: null });
    expect((await desk.check(id)).state).toBe('done');
  });
});
