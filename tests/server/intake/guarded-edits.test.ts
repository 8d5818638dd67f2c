import { beforeAll, describe, expect, test } from 'vitest';
import type { Endpoint } from '#contract/endpoint.ts';
import { startComponents } from '#contract/components.ts';
import { createDomain, deleteDomain, gatherEvidence, updateDomain } from '#contract/domains.ts';
import { saveZoneRules } from '#contract/geomet.ts';
import { startGrouping, startSweep, updateGroup } from '#contract/groupings.ts';
import { listJobs } from '#contract/jobs.ts';
import { Problem } from '#contract/problem.ts';
import { startScreen } from '#contract/screens.ts';
import { createSuite, deleteSuite, updateSuite } from '#contract/suites.ts';
import { foreignId } from '../foreign-ids.ts';
import { type HttpClient, newDeposit } from '../journeys/http-client.ts';
import { smallTables } from '../journeys/small-tables.ts';
import { pathOf } from '#tests/support/calls.ts';
import { testClient, type TestClient } from '#tests/support/test-client.ts';

const ANALYTES = ['Al', 'Fe', 'Mg', 'Ca', 'Cu', 'Zn'];
const SUITE = { name: 'Six elements', support: 'drill', analytes: ANALYTES } as const;
const DOMAIN = { code: 'D1', name: 'First', rationale: 'One rock by its chemistry.', slot: 1, groupLabels: [1] } as const;

let client: TestClient;
let api: HttpClient;
/** Ids of things made in the deposit, and of a second suite nothing stands on. */
let ids: { suiteId: number; spareSuiteId: number; runId: number; groupingId: number; domainId: number };

beforeAll(async () => {
  client = await testClient({ compute: true });
  api = await newDeposit(client, { name: 'Guarded', description: 'Made up for the tests', grid: { kind: 'local', name: 'Mine grid' }, payAnalytes: [{ analyte: 'Cu', unit: '%' }], deleteriousAnalytes: ['Zn'] });
  await api.bringIn(smallTables());
  const { id: suiteId } = await api.call(createSuite, { body: SUITE });
  const { id: spareSuiteId } = await api.call(createSuite, { body: { ...SUITE, name: 'Spare' } });
  const runId = await api.made(startComponents, { body: { suiteId } });
  const groupingId = await api.made(startGrouping, { body: { componentRunId: runId, components: 3, k: 3 } });
  const { id: domainId } = await api.call(createDomain, { body: DOMAIN });
  ids = { suiteId, spareSuiteId, runId, groupingId, domainId };
});

/** A request by a person's browser to the deposit in hand. */
function request({ method, path }: Pick<Endpoint, 'method' | 'path'>, params: Readonly<Record<string, string | number>>, ifMatch: string | null = null) {
  const call = client.as('lead')[method](pathOf({ path }, { depositId: api.depositId, ...params }));
  return ifMatch === null ? call : call.set('If-Match', ifMatch);
}

/** A refusal but for the id of its request. */
const Told = Problem.omit({ requestId: true });
const told = (res: { body: unknown }) => Told.parse(res.body);

describe('AZ-02 an id of another deposit inside a body', () => {
  test.each<[label: string, endpoint: Endpoint, parameter: string, body: (id: number) => object, what: string]>([
    ['components of a foreign suite', startComponents, 'suiteId', (suiteId) => ({ suiteId }), 'suite'],
    ['a sweep on foreign components', startSweep, 'runId', (componentRunId) => ({ componentRunId, components: 2 }), 'component-run'],
    ['a grouping of foreign components', startGrouping, 'runId', (componentRunId) => ({ componentRunId, components: 2, k: 3 }), 'component-run'],
    ['a screen by a foreign grouping', startScreen, 'groupingId', (groupingId) => ({ variables: ['Cu'], groupingId }), 'grouping'],
    ['evidence for a foreign domain', gatherEvidence, 'domainId', (id) => ({ domainIds: [id] }), 'domain'],
    ['evidence for an own domain and a foreign one', gatherEvidence, 'domainId', (id) => ({ domainIds: [ids.domainId, id] }), 'domain'],
  ])('%s: 404 as if it had never been, and nothing is started', async (_label, endpoint, parameter, body, what) => {
    const before = await api.call(listJobs);
    const foreign = await request(endpoint, {}).send(body(await foreignId(client, endpoint.id, parameter)));
    const never = await request(endpoint, {}).send(body(987_654));
    expect([foreign.status, told(foreign).code]).toEqual([404, `no-such-${what}`]);
    expect(told(foreign)).toEqual(told(never));
    expect(await api.call(listJobs)).toEqual(before);
  });
});

describe('AZ-03 a body cannot say which deposit it is for', () => {
  test.each<[Endpoint, object]>([
    [createSuite, SUITE],
    [createDomain, DOMAIN],
    [startGrouping, { componentRunId: 1, components: 2, k: 3 }],
  ])('$id', async (endpoint, body) => {
    const res = await request(endpoint, {}).send({ ...body, depositId: client.otherDepositId });
    expect([res.status, told(res).code]).toEqual([400, 'invalid']);
    expect(told(res).fields?.[0]?.message).toContain('depositId');
  });
});

interface Edit {
  label: string;
  endpoint: Endpoint;
  params: () => Record<string, number>;
  body: object | undefined;
  /** The thing is gone after a good call: it is made only once. */
  takesAway?: true;
}

const EDITS: Edit[] = [
  { label: 'a suite', endpoint: updateSuite, params: () => ({ suiteId: ids.spareSuiteId }), body: { ...SUITE, name: 'Renamed' } },
  { label: 'a group', endpoint: updateGroup, params: () => ({ groupingId: ids.groupingId, label: 1 }), body: { name: 'Basalt' } },
  { label: 'a domain', endpoint: updateDomain, params: () => ({ domainId: ids.domainId }), body: { ...DOMAIN, name: 'Renamed' } },
  { label: 'zone rules', endpoint: saveZoneRules, params: () => ({}), body: { limits: [{ analyte: 'Zn', limit: 500, unit: 'ppm' }], minLengthM: 4, maxDilutionM: 2 } },
  { label: 'a suite that goes', endpoint: deleteSuite, params: () => ({ suiteId: ids.spareSuiteId }), body: undefined, takesAway: true },
  { label: 'a domain that goes', endpoint: deleteDomain, params: () => ({ domainId: ids.domainId }), body: undefined, takesAway: true },
];

describe('DU-01 an edit of something somebody changed meanwhile', () => {
  test.each(EDITS)('$label: refused with the version now current, and nothing is changed', async ({ endpoint, params, body, takesAway }) => {
    const change = async (ifMatch: string | null) => {
      const call = request(endpoint, params(), ifMatch);
      return body ? call.send(body) : call;
    };
    const stale = await change('"999"');
    expect([stale.status, told(stale).code]).toEqual([412, 'stale-version']);
    const { currentVersion: version = 0, detail } = told(stale);
    expect(detail).toBe(`Somebody changed this meanwhile: it is now version ${version}. Read it again, then repeat your change.`);

    const absent = await change(null);
    expect([absent.status, told(absent).code]).toEqual([428, 'version-needed']);
    for (const odd of ['999', '*', 'W/"1"', '"1", "2"', '"-1"', '""']) {
      const res = await change(odd);
      expect([odd, res.status, told(res).code]).toEqual([odd, 400, 'bad-version']);
    }

    const good = await change(`"${version}"`);
    expect([good.status, good.text]).toEqual([200, expect.any(String)]);
    const again = await change(`"${version}"`);
    if (takesAway) return expect(again.status).toBe(404);
    expect([again.status, told(again).currentVersion]).toEqual([412, version + 1]);
    return expect(good.get('etag')).toBe(`"${version + 1}"`);
  });

  test('of several edits from one version one goes through', async () => {
    const { body } = await request(updateGroup, { groupingId: ids.groupingId, label: 2 }, '"999"').send({ name: 'A' });
    const version = Problem.parse(body).currentVersion ?? 0;
    const answers = await Promise.all(
      ['B', 'C', 'D', 'E'].map((name) => request(updateGroup, { groupingId: ids.groupingId, label: 2 }, `"${version}"`).send({ name })),
    );
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 412, 412, 412]);
  });

  test('a suite components stand on keeps its analytes: 409 with the reason', async () => {
    const { body } = await request(updateSuite, { suiteId: ids.suiteId }, '"999"').send(SUITE);
    const version = Problem.parse(body).currentVersion ?? 0;
    const change = await request(updateSuite, { suiteId: ids.suiteId }, `"${version}"`).send({ ...SUITE, analytes: ANALYTES.slice(0, 4) });
    expect(change.status).toBe(409);
    const removal = await request(deleteSuite, { suiteId: ids.suiteId }, `"${version}"`);
    expect([removal.status, told(removal).detail.length > 0]).toEqual([409, true]);
  });
});
