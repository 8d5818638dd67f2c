import { beforeAll, describe, expect, test } from 'vitest';
import type { ColumnMapping, FileMapping } from '#contract/files.ts';
import { testClient, type TestClient } from '#tests/support/test-client.ts';
import { csv, type IntakeDesk, intakeDesk } from './intake-desk.ts';

let client: TestClient;
let desk: IntakeDesk;
beforeAll(async () => {
  client = await testClient({ compute: true });
  desk = intakeDesk(client);
});

const ROWS = ['TH-1,0,2,10', 'TH-1,2,4,20'];
const CONTENT = csv('HoleID,From,To,Cu_ppm', ...ROWS);
const withColumn = (mapping: FileMapping, index: number, change: Partial<ColumnMapping>): FileMapping => ({
  ...mapping, columns: mapping.columns.map((column) => (column.index === index ? { ...column, ...change } : column)),
});

describe('a mapping that cannot read the table is refused and changes nothing', () => {
  test.each<[string, (mapping: FileMapping) => FileMapping, string]>([
    ['no hole', (mapping) => withColumn(mapping, 0, { role: 'skip' }), 'expected a column for hole in a assay table, found none'],
    ['no to', (mapping) => withColumn(mapping, 2, { role: 'skip' }), 'expected a column for to in a assay table, found none'],
    ['no analyte', (mapping) => withColumn(mapping, 3, { role: 'note', analyte: null, unit: null }), 'expected a column for analyte in a assay table, found none'],
    ['neither alpha nor dip', (mapping) => withColumn(withColumn({ ...mapping, kind: 'structure' }, 1, { role: 'depth' }), 3, { role: 'note' }), 'expected a column for alpha or dip in a structure table, found none'],
    ['two columns for one thing', (mapping) => withColumn(withColumn({ ...mapping, columns: [...mapping.columns, { index: 4, header: 'End', role: 'to', analyte: null, unit: null, oxide: null, method: null }] }, 3, {}), 2, {}), 'expected one column for to, found “To” and “End”'],
    ['one column twice', (mapping) => ({ ...mapping, columns: [...mapping.columns, { index: 3, header: 'Cu_ppm', role: 'note', analyte: null, unit: null, oxide: null, method: null }] }), 'expected each column once, found column 4 as “Cu_ppm” and “Cu_ppm”'],
    ['an analyte without a unit', (mapping) => withColumn(mapping, 3, { unit: null }), 'column “Cu_ppm” (Cu): expected a unit'],
    ['a unit without an analyte', (mapping) => withColumn(mapping, 3, { analyte: null }), 'column “Cu_ppm”: expected which analyte it is'],
  ])('%s', async (_label, change, detail) => {
    const { id, mapping } = await desk.upload('assay.csv', CONTENT);
    const res = await desk.map(id, change(mapping));
    expect(desk.refusal(res)).toMatchObject({ answered: 422, code: 'bad-mapping', detail });
    expect((await desk.get(id)).mapping).toEqual(mapping);
    await desk.stillAnswers();
  });

  test.each<[string, (mapping: FileMapping) => object, string]>([
    ['a unit nobody knows', (mapping) => ({ ...mapping, columns: mapping.columns.map((column) => (column.index === 3 ? { ...column, unit: 'bushel' } : column)) }), 'body.columns.3.unit'],
    ['a role nobody knows', (mapping) => ({ ...mapping, columns: mapping.columns.map((column) => (column.index === 0 ? { ...column, role: 'owner' } : column)) }), 'body.columns.0.role'],
    ['a table kind nobody knows', (mapping) => ({ ...mapping, kind: 'wells' }), 'body.kind'],
    ['a separator nobody uses', (mapping) => ({ ...mapping, delimiter: '#' }), 'body.delimiter'],
    ['no columns', (mapping) => ({ ...mapping, columns: [] }), 'body.columns'],
    ['a key of its own', (mapping) => ({ ...mapping, depositId: 2 }), 'body'],
  ])('%s: 400 with the field', async (_label, change, path) => {
    const { id, mapping } = await desk.upload('assay.csv', CONTENT);
    const problem = desk.refusal(await desk.map(id, change(mapping)));
    expect(problem).toMatchObject({ answered: 400, code: 'invalid' });
    expect(problem.fields?.map((field) => field.path)).toContain(path);
    expect((await desk.get(id)).mapping).toEqual(mapping);
    await desk.stillAnswers();
  });

  test('a header in no known unit is guessed without one, and cannot be checked or loaded before it has one', async () => {
    const { id, guess } = await desk.upload('assay.csv', csv('HoleID,From,To,Cu_bushel', ...ROWS));
    const copper = guess[3];
    expect([copper?.unit, copper?.certainty]).not.toContain('sure');
    for (const way of ['check', 'load'] as const) {
      const call = desk.lead.post(`${desk.at(id)}/${way}`);
      const res = await (way === 'load' ? call.send({ mode: 'replace' }) : call);
      expect(desk.refusal(res)).toMatchObject({ answered: 422, code: 'bad-mapping', detail: expect.stringMatching(/expected/) });
    }
    expect(await desk.revisions()).toEqual([]);
    await desk.stillAnswers();
  });
});

describe('a mapping that speaks of other columns than the file has', () => {
  test.each<[string, (mapping: FileMapping) => FileMapping, string]>([
    ['another separator', (mapping) => ({ ...mapping, delimiter: ';' }), 'row 1: expected “HoleID” as column 1, found “HoleID,From,To,Cu_ppm”'],
    ['columns in another order', (mapping) => withColumn(withColumn(mapping, 1, { header: 'To' }), 2, { header: 'From' }), 'row 1: expected “To” as column 2, found “From”'],
    ['a column past the last', (mapping) => ({ ...mapping, columns: mapping.columns.map((column) => (column.index === 3 ? { ...column, index: 9 } : column)) }), 'row 1: expected “Cu_ppm” as column 10, found 4 columns only'],
  ])('%s: the preview and the check say which, and no row is read', async (_label, change, message) => {
    const { id, mapping } = await desk.upload('assay.csv', CONTENT);
    const preview = await desk.lead.post(`${desk.at(id)}/preview`).send({ mapping: change(mapping), rows: 5 });
    expect(desk.refusal(preview)).toMatchObject({ answered: 422, code: 'bad-mapping', detail: message });
    await desk.map(id, change(mapping)).expect(200);
    expect(await desk.check(id)).toMatchObject({ state: 'failed', error: { code: 'bad-mapping', message } });
    expect((await desk.get(id)).check).toBeNull();
    expect(await desk.load(id)).toMatchObject({ state: 'failed', error: { code: 'bad-mapping', message } });
    expect(await desk.revisions()).toEqual([]);
    await desk.stillAnswers();
  });

  test('the separator put right afterwards reads the rows', async () => {
    const { id, mapping } = await desk.upload('assay.csv', CONTENT);
    await desk.map(id, { ...mapping, delimiter: ';' }).expect(200);
    expect((await desk.check(id)).state).toBe('failed');
    await desk.map(id, mapping).expect(200);
    expect((await desk.check(id)).state).toBe('done');
    expect((await desk.get(id)).check).toMatchObject({ rows: 2, rowsToLoad: 2, rowsAside: 0 });
  });
});
