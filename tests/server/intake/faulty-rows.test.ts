import { beforeAll, describe, expect, test } from 'vitest';
import { QUALIFIER } from '#contract/tables.ts';
import { testClient, type TestClient } from '#tests/support/test-client.ts';
import { COLLARS, csv, type IntakeDesk, intakeDesk } from './intake-desk.ts';

let client: TestClient;
let desk: IntakeDesk;
beforeAll(async () => {
  client = await testClient({ compute: true });
  desk = intakeDesk(client);
  const { id } = await desk.upload('collar.csv', COLLARS);
  expect((await desk.load(id)).state).toBe('done');
});

interface Expected {
  row: number;
  column: string;
  code: string;
  message: string | RegExp;
  value?: string;
}

const ASSAYS = 'HoleID,From,To,Cu_ppm';
const LOGS = 'HoleID,From,To,Lithology';
const SURVEYS = 'HoleID,Depth,Azimuth,Dip';

/** Each table has one row that does not hold, and rows around it that do. */
const FAULTS: [label: string, name: string, lines: string[], found: Expected][] = [
  ['an unknown hole', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-9,0,2,10', 'TH-2,0,2,10'],
    { row: 3, column: 'HoleID', code: 'hole-unknown', message: 'no hole TH-9 among the collars', value: 'TH-9' }],
  ['a hole written otherwise', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'th 2,0,2,10', 'TH-2,2,4,10'],
    { row: 3, column: 'HoleID', code: 'hole-unknown', message: 'no hole th 2 among the collars; TH-2 meant?' }],
  ['no hole', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', ',2,4,10', 'TH-2,0,2,10'],
    { row: 3, column: 'HoleID', code: 'text-missing', message: 'expected a hole name, found an empty cell' }],
  ['from beyond to', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,6,4,10', 'TH-1,8,10,10'],
    { row: 3, column: 'To', code: 'interval-reversed', message: 'expected to beyond from 6, found 4', value: '4' }],
  ['from equal to to', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,4,4,10', 'TH-1,8,10,10'],
    { row: 3, column: 'To', code: 'interval-reversed', message: 'expected to beyond from 4, found 4' }],
  ['an interval above the collar', 'assay.csv', [ASSAYS, 'TH-1,-2,2,10', 'TH-1,2,4,10'],
    { row: 2, column: 'From', code: 'interval-negative', message: 'expected from at or below the collar, found -2' }],
  ['an overlap', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,1.5,4,10', 'TH-1,4,6,10'],
    { row: 3, column: 'From', code: 'interval-overlap', message: 'overlaps row 2 by 0.50 m', value: '1.5' }],
  ['an interval given twice', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-2,0,2,10', 'TH-1,0,2,11'],
    { row: 4, column: 'From', code: 'interval-repeated', message: 'repeats the interval of row 2' }],
  ['an interval past the end of the hole', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,52,54,10'],
    { row: 3, column: 'To', code: 'past-end', message: 'lies wholly past the end of the hole at 50 m' }],
  ['text for a depth', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,two,4,10', 'TH-1,4,6,10'],
    { row: 3, column: 'From', code: 'not-a-number', message: 'expected a number for from, found “two”', value: 'two' }],
  ['text for a grade', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,2,4,lots', 'TH-1,4,6,10'],
    { row: 3, column: 'Cu_ppm', code: 'not-a-number', message: /expected .*“?lots”?/, value: 'lots' }],
  ['a lone negative grade', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,2,4,-7', 'TH-1,4,6,10'],
    { row: 3, column: 'Cu_ppm', code: 'negative-value', message: 'expected a grade, found -7, which is no limit of this column', value: '-7' }],
  ['more than the whole sample', 'assay.csv', ['HoleID,From,To,S_pct', 'TH-1,0,2,10', 'TH-1,2,4,104', 'TH-1,4,6,10'],
    { row: 3, column: 'S_pct', code: 'over-the-whole', message: '104 % is more than the whole sample; is the unit right?', value: '104' }],
  ['a depth left empty', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,2,,10', 'TH-1,4,6,10'],
    { row: 3, column: 'To', code: 'number-missing', message: 'expected a number for to, found an empty cell' }],
  ['a row too short', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,2', 'TH-1,4,6,10'],
    { row: 3, column: '', code: 'row-short', message: 'expected at least 4 cells, found 2' }],
  ['a decimal comma in a file divided by commas', 'assay.csv', [ASSAYS, 'TH-1,0,2,10', 'TH-1,2,4,1,5', 'TH-1,4,6,10'],
    { row: 3, column: '', code: 'row-long', message: 'expected at most 4 cells, found 5' }],
  ['a log without its code', 'lithology.csv', [LOGS, 'TH-1,0,2,BAS', 'TH-1,2,4,', 'TH-1,4,6,BAS'],
    { row: 3, column: 'Lithology', code: 'text-missing', message: 'expected a code, found an empty cell' }],
  ['a dip over 90°', 'survey.csv', [SURVEYS, 'TH-1,0,90,-60', 'TH-1,30,90,-95'],
    { row: 3, column: 'Dip', code: 'dip-out-of-range', message: 'expected dip between −90 and 90°, found −95' }],
  ['an azimuth over 360°', 'survey.csv', [SURVEYS, 'TH-1,0,400,-60', 'TH-1,30,90,-60'],
    { row: 2, column: 'Azimuth', code: 'azimuth-out-of-range', message: 'expected azimuth between 0 and 360°, found 400' }],
  ['a station given twice', 'survey.csv', [SURVEYS, 'TH-1,0,90,-60', 'TH-1,0,91,-60'],
    { row: 3, column: 'Depth', code: 'station-repeated', message: 'repeats the station of row 2' }],
  ['a collar given twice', 'collar.csv', ['HoleID,Easting,Northing,Elevation,Length', 'TH-1,1,2,3,50', 'TH-1,1,2,3,60'],
    { row: 3, column: 'HoleID', code: 'collar-repeated', message: 'repeats the collar of row 2', value: 'TH-1' }],
  ['a hole of no length', 'collar.csv', ['HoleID,Easting,Northing,Elevation,Length', 'TH-1,1,2,3,0', 'TH-2,1,2,3,60'],
    { row: 2, column: 'Length', code: 'length-not-positive', message: 'expected a length above 0 m, found 0' }],
];

describe('IN-06 a row that does not hold is set aside with what, where and why; the others stay', () => {
  test.each(FAULTS)('%s', async (_label, name, lines, { row, column, code, message, value }) => {
    const { id, check, problems } = await desk.checked(name, csv(...lines));
    expect(problems).toHaveLength(1);
    expect(problems[0]).toMatchObject({ row, column, code, severity: 'aside', message: typeof message === 'string' ? message : expect.stringMatching(message), ...(value !== undefined && { value }) });
    const good = lines.length - 2;
    expect(check).toMatchObject({ rows: good + 1, rowsToLoad: good, rowsAside: 1, byCode: [{ code, severity: 'aside', count: 1 }], marks: [{ fromRow: row, toRow: row, severity: 'aside' }] });
    const list = await desk.lead.get(`${desk.at(id)}/problems.csv`).expect(200);
    const wanted = lines[row - 1] ?? '';
    expect(list.text).toContain(wanted.includes(',') ? `"${wanted}"` : wanted);
    await desk.stillAnswers();
  });

  test('of many faults each row is told once per fault, and the good rows load as they were written', async () => {
    const content = csv(ASSAYS, 'TH-1,0,2,10', 'TH-9,x,2,10', 'TH-1,2,4,<5', 'TH-1,3,5,10', 'TH-2,4,2,10', 'TH-2,6,8,12.5');
    const { id, check, problems } = await desk.checked('assay.csv', content);
    expect(problems.map(({ row, code }) => [row, code])).toEqual([[3, 'not-a-number'], [5, 'interval-overlap'], [6, 'interval-reversed']]);
    expect(check).toMatchObject({ rows: 6, rowsToLoad: 3, rowsAside: 3, holes: 2 });
    expect((await desk.load(id)).state).toBe('done');
    const [revision] = await desk.revisions();
    expect(revision).toMatchObject({ kind: 'assay', rows: 3, rowsAside: 3, isCurrent: true });
    const tableId = revision?.tableId ?? 0;
    expect(await desk.rowsOf(tableId)).toBe(3);
    expect(await desk.numbers(tableId, 'from')).toEqual([0, 2, 6]);
    expect(await desk.numbers(tableId, 'Cu')).toEqual([10, 5, 12.5]);
    expect(await desk.numbers(tableId, 'row')).toEqual([2, 4, 7]);
    const flags = await desk.lead.get(`${desk.base}/tables/${tableId}/columns/Cu?part=qualifiers`).buffer(true).expect(200);
    expect([...Buffer.from(flags.body as Buffer)]).toEqual([QUALIFIER.measured, QUALIFIER.below, QUALIFIER.measured]);
    expect((await desk.bytesOf(id)).toString()).toBe(content);
  });

  test('a file of which no row holds: the load fails, says so, and the table before it stands', async () => {
    const before = await desk.revisions();
    const { id } = await desk.checked('assay.csv', csv(ASSAYS, 'TH-8,0,2,10', 'TH-9,0,2,10'));
    const job = await desk.load(id);
    expect(job).toMatchObject({ state: 'failed', error: { code: 'no-rows-to-load', message: 'expected at least one row that holds, found none among 2; see the listed problems' } });
    expect((await desk.problems(id)).map(({ row }) => row)).toEqual([2, 3]);
    expect(await desk.revisions()).toEqual(before);
    await desk.stillAnswers();
  });

  test('a station that points up among stations that point down is told and loads', async () => {
    const { check, problems } = await desk.checked('survey.csv', csv(SURVEYS, 'TH-1,0,90,-60', 'TH-1,30,90,58', 'TH-2,0,90,-55'));
    expect(problems).toEqual([expect.objectContaining({ row: 3, column: 'Dip', code: 'points-up', severity: 'warning', message: 'points up at 58° where most stations point down; is its sign right?' })]);
    expect(check).toMatchObject({ rows: 3, rowsToLoad: 3, warnings: 1 });
  });

  test('a hole whose grades lie ten thousand times off is told row by row and loads', async () => {
    const rows = (hole: string, count: number, grade: (row: number) => number): string[] => Array.from({ length: count }, (_, i) => `${hole},${i},${i + 1},${grade(i)}`);
    const { check, problems } = await desk.checked('assay.csv', csv(ASSAYS, ...rows('TH-1', 20, (i) => 2_000 + 300 * i), ...rows('TH-2', 12, (i) => 0.2 + i / 20)));
    expect(problems.map(({ row }) => row)).toEqual(Array.from({ length: 12 }, (_, i) => 22 + i));
    expect(problems[0]).toMatchObject({ column: 'Cu_ppm', code: 'unit-doubtful', severity: 'warning', message: 'Cu of hole TH-2 is about 10,000 times lower than elsewhere; is it in another unit?' });
    expect(check).toMatchObject({ rows: 32, rowsToLoad: 32, warnings: 12 });
  });

  test('a quotation mark closed only rows later is told, since it takes those rows in', async () => {
    const lines = ['HoleID,From,To,Lithology,Comment', 'TH-1,0,2,BAS,whole', 'TH-1,2,4,BAS,"left open', 'TH-1,4,6,BAS,fine', 'TH-1,6,8,BAS,closed"', 'TH-1,8,10,BAS,whole'];
    const { check, problems } = await desk.checked('lithology.csv', csv(...lines));
    expect(problems).toEqual([expect.objectContaining({ row: 3, column: 'Comment', code: 'cell-spans-lines', severity: 'warning', message: 'expected a cell on one line, found 3 lines; is a quotation mark not closed?' })]);
    expect(check).toMatchObject({ rows: 3, rowsToLoad: 3, warnings: 1 });
  });
});
