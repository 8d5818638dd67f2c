import { readFileSync } from 'node:fs';
import { beforeAll, describe, expect, test } from 'vitest';
import * as z from 'zod';
import { makeCodes } from '#contract/codes.ts';
import { getComponentRun, startComponents } from '#contract/components.ts';
import { createDomain } from '#contract/domains.ts';
import { type ColumnRole, type FileMappingInput, saveMapping, type Upload } from '#contract/files.ts';
import { getGrouping, startGrouping } from '#contract/groupings.ts';
import type { Snapshot } from '#contract/snapshots.ts';
import { createSuite } from '#contract/suites.ts';
import { loadReference } from '#tests/support/reference.ts';
import { testClient } from '#tests/support/test-client.ts';
import { type HttpClient, newDeposit } from './http-client.ts';
import { readCodes } from './read-codes.ts';

// Jura data of Goovaerts (1997), Geostatistics for Natural Resources Evaluation; the reference values
// beside it were computed by established statistics libraries (tests/fixtures/reference/README.md).
const jura = loadReference('jura_prediction');
const METALS = ['Cd', 'Co', 'Cr', 'Cu', 'Ni', 'Pb', 'Zn'];
const ROLE_OF: Readonly<Record<string, ColumnRole>> = { Xloc: 'x', Yloc: 'y', Rock: 'code' };
const numbers = (value: unknown): number[] => z.array(z.number()).parse(value);

/** Surface samples: position, rock type and seven metals in ppm. */
function mappingOf({ guess, mapping }: Upload): FileMappingInput {
  const columns = guess.map(({ index, header }) =>
    METALS.includes(header) ? { index, header, role: 'analyte' as const, analyte: header, unit: 'ppm' as const } : { index, header, role: ROLE_OF[header] ?? ('skip' as const) },
  );
  return { ...mapping, kind: 'surface', columns };
}

let api: HttpClient;
let snapshot: Snapshot;
let componentRunId = 0;

beforeAll(async () => {
  const client = await testClient({ compute: true });
  api = await newDeposit(client, {
    name: 'Swiss Jura', description: 'Top soil, published data', grid: { kind: 'local', name: 'Local grid of the survey' }, payAnalytes: [{ analyte: 'Zn', unit: 'ppm' }], deleteriousAnalytes: [],
  });
  const content = readFileSync(new URL('../../fixtures/reference/jura_prediction.csv', import.meta.url), 'utf8');
  const upload = await api.upload({ name: 'jura_prediction.csv', content });
  await api.call(saveMapping, { params: { uploadId: upload.id }, body: mappingOf(upload) });
  await api.done(await api.load(upload.id));
  snapshot = await api.snapshot();
  const { id: suiteId } = await api.call(createSuite, { body: { name: 'Seven metals', support: 'surface', analytes: METALS } });
  componentRunId = await api.made(startComponents, { body: { suiteId } });
});

describe('JO-02 open data through to codes', () => {
  test('all 259 samples come in with their rock types', () => {
    expect(snapshot).toMatchObject({ rows: 259, surfaceRows: 259, holes: 0 });
    expect(new Set(snapshot.lithologies.map(({ code }) => code))).toEqual(new Set(jura.rows.map((row) => row['Rock'])));
  });

  test('components have the eigenvalues that libraries find', async () => {
    const { eigenvalues, shares } = await api.call(getComponentRun, { params: { runId: componentRunId } });
    const wanted = numbers(jura.check('jura_prediction.pca_clr_cov.eigenvalues').value);
    const wantedShares = numbers(jura.check('jura_prediction.pca_clr_cov.explained').value);
    wanted.forEach((value, i) => expect(Math.abs((eigenvalues[i] ?? 0) - value)).toBeLessThanOrEqual(1e-9 + 1e-8 * value));
    wantedShares.forEach((value, i) => expect(shares[i]).toBeCloseTo(value, 8));
  });

  // All six components are a rotation of clr space, so distances, and k-means with them, are those of clr.
  test.each([2, 3, 4, 5, 6])('%i groups on all components reach the best sum of squares libraries know for clr', async (k) => {
    const groupingId = await api.made(startGrouping, { body: { componentRunId, components: 6, k } });
    const { inertia, n } = await api.call(getGrouping, { params: { groupingId } });
    const { value, tolerance } = jura.check(`jura_prediction.kmeans.clr.k${k}.inertia`);
    expect(n).toBe(259);
    expect(inertia).toBeLessThanOrEqual(Number(value) * (1 + tolerance.rel) + tolerance.abs);
    // No partition is better than the best one: a smaller sum would mean other data or another distance.
    expect(inertia).toBeGreaterThan(Number(value) * 0.99);
  });

  test('codes hold each sample once, without depths', async () => {
    await api.call(createDomain, { body: { code: 'S1', name: 'First', rationale: 'One kind of soil by its metals.', slot: 1, groupLabels: [1] } });
    const { rows, sha256, told } = await readCodes(api, await api.made(makeCodes));
    expect(rows).toHaveLength(259);
    expect(new Set(rows.map(({ hole }) => hole)).size).toBe(259);
    expect(new Set(rows.map(({ domain }) => domain))).toEqual(new Set(['S1', 'UNASSIGNED']));
    expect(rows.filter(({ from_m, to_m }) => from_m !== '' || to_m !== '')).toEqual([]);
    expect(told).toBe(sha256);
  });
});
