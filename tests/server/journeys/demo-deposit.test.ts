import { beforeAll, describe, expect, test } from 'vitest';
import { getCodeSet, listCodeSets, makeCodes, verifyCodes } from '#contract/codes.ts';
import { getComponentRun, startComponents } from '#contract/components.ts';
import { getOverview, listStages } from '#contract/deposits.ts';
import { createDomain, deleteDomain, gatherEvidence, getEvidence, listDomains, restoreDomain, UNASSIGNED } from '#contract/domains.ts';
import { getZoneRules, listZoneRuns, listZones, saveZoneRules, startZones } from '#contract/geomet.ts';
import { getGrouping, listSweeps, startGrouping, startSweep } from '#contract/groupings.ts';
import { listRevisions, listUploads, useRevision as stepBack } from '#contract/files.ts';
import { getScreen, getScreenCell, startScreen } from '#contract/screens.ts';
import { createSuite } from '#contract/suites.ts';
import { adjustedRandIndex } from '#kernels/clustering/agreement.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import { type DemoDeposit, makeDemoDeposit } from '#seeds/demo/demo-deposit.ts';
import { testClient } from '#tests/support/test-client.ts';
import { type HttpClient, newDeposit } from './http-client.ts';
import { type CodesRow, readCodes } from './read-codes.ts';
import { readCategory, readNumbers } from './read-columns.ts';

const K = 6;
const SEED = 1;
/** Agreement of the codes with the invented ground that the journey must reach. */
const LEAST_ARI = 0.8;

const keyOf = (hole: string, fromM: number): string => `${hole} ${fromM.toFixed(3)}`;
/** Labels as numbers from 1, for the kernel. */
const numbered = (labels: readonly string[]): Int32Array => categoryFrom(labels).codes.map((code) => code + 1);

let api: HttpClient;
let demo: DemoDeposit;
let truth: ReadonlyMap<string, string>;
let codeSetId = 0;
/** A negative grade that is no limit of its column sets its row aside: unplanned, by rule. */
let loneNegatives = 0;
let rows: CodesRow[] = [];

beforeAll(async () => {
  const client = await testClient({ compute: true });
  demo = makeDemoDeposit();
  truth = new Map(demo.truth.map(({ hole, fromM, domain }) => [keyOf(hole, fromM), domain]));
  const { description, grid } = demo;
  api = await newDeposit(client, { name: 'By program', description, grid, payAnalytes: [{ analyte: 'Cu', unit: '%' }], deleteriousAnalytes: ['As'] });
});

/** The domain most intervals of each group lie in, by what is known of the invented ground. */
async function majorityDomains(frameTableId: number, groupTableId: number): Promise<string[]> {
  const groups = await readNumbers(api, groupTableId, 'group');
  const from = await readNumbers(api, frameTableId, 'from');
  const holes = await readCategory(api, frameTableId, 'hole');
  const counts = Array.from({ length: K }, () => new Map<string, number>());
  groups.forEach((group, row) => {
    const domain = truth.get(keyOf(holes[row] ?? '', from[row] ?? 0));
    const own = counts[group - 1];
    if (domain !== undefined && own) own.set(domain, (own.get(domain) ?? 0) + 1);
  });
  return counts.map((own) => [...own].sort((a, b) => b[1] - a[1])[0]?.[0] ?? 'HW');
}

/** Groups of one rock become one domain. */
async function acceptDomains(codes: readonly string[]): Promise<void> {
  for (const [place, code] of [...new Set(codes)].entries()) {
    const groupLabels = codes.flatMap((one, i) => (one === code ? [i + 1] : []));
    const body = { code, name: `Rock ${code}`, rationale: 'Most of its intervals are of one rock.', slot: place + 1, groupLabels };
    await api.call(createDomain, { body });
  }
}

describe('JO-01 from tables to codes by a program with a token of its own', { timeout: 240_000 }, () => {
  test('tables come in as guessed; each planted problem is set aside; the rest is one snapshot', async () => {
    const snapshot = await api.bringIn(demo.files.map(({ fileName, csv, mode }) => ({ name: fileName, content: csv, mode })));
    const uploads = await api.call(listUploads);
    for (const { fileName, kind } of demo.files) {
      expect(uploads.find((upload) => upload.fileName === fileName)).toMatchObject({ state: 'loaded', mapping: { kind } });
    }
    const found = uploads.filter(({ mapping }) => mapping.kind === 'assay').flatMap(({ check }) => check?.byCode ?? []);
    expect(new Set(found.map(({ code }) => code))).toEqual(new Set(['past-end', 'hole-unknown', 'not-a-number', 'interval-overlap', 'negative-value']));
    loneNegatives = found.find(({ code }) => code === 'negative-value')?.count ?? 0;
    expect(snapshot.rows - snapshot.surfaceRows).toBeGreaterThanOrEqual(demo.truth.length - loneNegatives);
    // An analyte of both is read in each by its own rows.
    const copper = snapshot.analytes.find(({ analyte }) => analyte === 'Cu');
    expect(copper).toMatchObject({ supports: ['drill', 'surface'], onSurface: { n: snapshot.surfaceRows } });
    expect(copper?.n).toBeGreaterThan(1_000);
    expect(snapshot.faults.length).toBeGreaterThan(0);
  });

  test('a suite, its components, a sweep and six groups', async () => {
    const { id: suiteId } = await api.call(createSuite, { body: { name: 'Rock', support: 'drill', analytes: demo.suiteAnalytes } });
    const componentRunId = await api.made(startComponents, { body: { suiteId, seed: SEED } });
    const run = await api.call(getComponentRun, { params: { runId: componentRunId } });
    expect(run.shares.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 9);
    expect(run.suggested).toBeGreaterThanOrEqual(2);

    const choice = { componentRunId, components: run.suggested, seed: SEED };
    const sweepId = await api.made(startSweep, { body: { ...choice, kFrom: 2, kTo: 8 } });
    const sweep = (await api.call(listSweeps)).find(({ id }) => id === sweepId);
    expect(sweep?.rows.map(({ k }) => k)).toEqual([2, 3, 4, 5, 6, 7, 8]);
    sweep?.rows.slice(1).forEach(({ inertia }, i) => expect(inertia).toBeLessThan(sweep.rows[i]?.inertia ?? 0));

    const groupingId = await api.made(startGrouping, { body: { ...choice, k: K } });
    const grouping = await api.call(getGrouping, { params: { groupingId } });
    expect(grouping).toMatchObject({ k: K, isActive: true, isStale: false });
    expect(grouping.groups.reduce((sum, { intervals }) => sum + intervals, 0)).toBe(grouping.n);
    // The same k and seed by way of the sweep and alone: the same sum of squares.
    expect(grouping.inertia).toBeCloseTo(sweep?.rows.find(({ k }) => k === K)?.inertia ?? Number.NaN, 6);
    await acceptDomains(await majorityDomains(grouping.frameTableId, grouping.tableId));
  });

  test('the screen finds copper mixed over the whole deposit and says why', async () => {
    const screenId = await api.made(startScreen, { body: { variables: ['Cu'], subsets: [] } });
    expect((await api.call(getScreen, { params: { screenId } })).cells).toHaveLength(1);
    const cell = await api.call(getScreenCell, { params: { screenId }, query: { subset: 'all', variable: 'Cu' } });
    expect(cell.verdict).toBe('mixed');
    expect(cell.reasons.length).toBeGreaterThan(0);
  });

  test('domains cover the intervals once; one has its evidence', async () => {
    const { domains, unassigned, total } = await api.call(listDomains);
    expect(domains.reduce((sum, { intervals }) => sum + intervals, unassigned.intervals)).toBe(total.intervals);
    const smallest = [...domains].sort((a, b) => a.intervals - b.intervals)[0];
    const domainId = smallest?.id ?? 0;
    await api.made(gatherEvidence, { body: { domainIds: [domainId] } });
    const evidence = await api.call(getEvidence, { params: { domainId } });
    expect(evidence).toMatchObject({ domainId, intervals: smallest?.intervals, isStale: false });
    expect(evidence?.populations.some(({ role, variable }) => role === 'domain' && variable === 'Cu')).toBe(true);
  });

  test('a domain taken back and restored is as it was, its evidence with it', async () => {
    const before = (await api.call(listDomains)).domains.find(({ hasEvidence }) => hasEvidence);
    const params = { domainId: before?.id ?? 0 };
    await api.call(deleteDomain, { params, headers: { 'If-Match': `"${before?.version}"` } });
    expect((await api.call(listDomains)).domains.map(({ id }) => id)).not.toContain(before?.id);
    const after = await api.call(restoreDomain, { params });
    expect(after).toMatchObject({ code: before?.code, groupLabels: before?.groupLabels, hasEvidence: true, evidenceIsStale: false });
  });

  test('limits flag zones, each at least as long as asked', async () => {
    const { version } = await api.call(getZoneRules);
    const body = { limits: [{ analyte: 'As', limit: 300, unit: 'ppm' }], minLengthM: 4, maxDilutionM: 3 };
    await api.call(saveZoneRules, { body, headers: { 'If-Match': `"${version}"` } });
    const runId = await api.made(startZones);
    const { total, rows: zones } = await api.call(listZones, { params: { runId } });
    expect(total).toBeGreaterThan(0);
    for (const { lengthM } of zones) expect(lengthM).toBeGreaterThanOrEqual(4);
    expect((await api.call(listZoneRuns))[0]).toMatchObject({ id: runId, zones: total });
  });

  test('codes come with a checksum that anyone can make again', async () => {
    codeSetId = await api.made(makeCodes);
    const file = await readCodes(api, codeSetId);
    rows = file.rows;
    const recorded = await api.call(getCodeSet, { params: { codeSetId } });
    expect([file.told, recorded.sha256]).toEqual([file.sha256, file.sha256]);
    expect(file.digestTold).toBe(file.digestHere);
    expect(recorded).toMatchObject({ rows: rows.length, sizeBytes: file.bytes.length, isStale: false });
    expect(await api.call(verifyCodes, { params: { codeSetId } })).toMatchObject({ same: true, recorded: file.sha256, again: file.sha256 });
  });

  test('JO-04 made a second time, the codes are the same bytes', async () => {
    const againId = await api.made(makeCodes);
    const [again, first] = (await api.call(listCodeSets)).slice(0, 2);
    expect(again).toMatchObject({ id: againId, sha256: first?.sha256 });
  });

  test('every assayed interval has exactly one code', () => {
    const keys = rows.map(({ hole, from_m }) => keyOf(hole, Number(from_m)));
    expect(new Set(keys).size).toBe(keys.length);
    const coded = new Set(keys);
    expect(demo.truth.filter(({ hole, fromM }) => !coded.has(keyOf(hole, fromM)))).toHaveLength(loneNegatives);
    expect(rows.filter(({ domain }) => !/^[A-Z]+$/.test(domain))).toEqual([]);
  });

  test(`codes agree with the invented ground: adjusted Rand index at least ${LEAST_ARI}`, () => {
    const known = rows.flatMap(({ hole, from_m, domain }) => {
      const real = truth.get(keyOf(hole, Number(from_m)));
      return real === undefined ? [] : [{ domain, real }];
    });
    const index = adjustedRandIndex(numbered(known.map(({ domain }) => domain)), numbered(known.map(({ real }) => real)));
    expect(known).toHaveLength(demo.truth.length - loneNegatives);
    expect(index).toBeGreaterThanOrEqual(LEAST_ARI);
  });

  test('the overview counts the metres with a domain as coded; no stage is empty or stale', async () => {
    const coded = rows.filter(({ domain }) => domain !== UNASSIGNED);
    const { metres } = await api.call(getOverview);
    expect(metres.at(-1)?.metres).toBeCloseTo(coded.reduce((sum, { length_m }) => sum + Number(length_m), 0), 0);
    const stages = await api.call(listStages);
    expect(stages.filter(({ state }) => state === 'stale' || state === 'empty')).toEqual([]);
  });

  test('under an older table the domains turn stale, and are still counted in the tables they stand on', async () => {
    const before = await api.call(listDomains);
    const older = (await api.call(listRevisions)).find(({ kind, isCurrent }) => kind === 'assay' && !isCurrent);
    await api.call(stepBack, { params: { revisionId: older?.id ?? 0 } });
    expect((await api.snapshot()).rows).toBeLessThan(before.total.intervals);
    const after = await api.call(listDomains);
    expect(after.isStale).toBe(true);
    expect([after.total, after.unassigned]).toEqual([before.total, before.unassigned]);
  });
});
