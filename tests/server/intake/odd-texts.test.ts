import { beforeAll, describe, expect, test } from 'vitest';
import { getTable } from '#contract/tables.ts';
import { testClient, type TestClient } from '#tests/support/test-client.ts';
import { csv, type IntakeDesk, intakeDesk } from './intake-desk.ts';

let client: TestClient;
let desk: IntakeDesk;
beforeAll(async () => {
  client = await testClient({ compute: true });
  desk = intakeDesk(client);
});

const BOM = '\ufeff';
const HEADER = 'HoleID,From,To,Cu_ppm';
const LINES = [HEADER, 'TH-1,0,2,10', 'TH-1,2,4,20', 'TH-2,0,2,30'];
const utf16 = (text: string): Uint8Array => Buffer.from(BOM + text, 'utf16le');

/** The same three rows each time, however they are written. */
const WAYS: [label: string, content: string | Uint8Array][] = [
  ['line ends of one character', csv(...LINES)],
  ['a byte order mark and CRLF', BOM + LINES.join('\r\n')],
  ['CRLF in the header and LF below', `${LINES[0]}\r\n${LINES.slice(1).join('\n')}\n`],
  ['LF in the header and CRLF below', `${LINES[0]}\n${LINES.slice(1).join('\r\n')}\r\n`],
  ['CRLF but for one line', `${LINES[0]}\r\n${LINES[1]}\n${LINES[2]}\r\n${LINES[3]}`],
  ['CR alone', LINES.join('\r')],
  ['blank lines between', LINES.join('\n\n')],
  ['separators after the last cell', LINES.map((line, i) => (i === 0 ? line : `${line},,`)).join('\n')],
  ['quotation marks round every cell', LINES.map((line) => line.split(',').map((cell) => `"${cell}"`).join(',')).join('\n')],
  ['blanks round the cells', LINES.map((line) => line.replaceAll(',', ' , ')).join('\n')],
  ['semicolons and decimal commas', ['HoleID;From;To;Cu_ppm', 'TH-1;0,0;2,0;10,0', 'TH-1;2,0;4,0;20,0', 'TH-2;0,0;2,0;30,0'].join('\n')],
  ['tabs', LINES.map((line) => line.replaceAll(',', '\t')).join('\n')],
  ['UTF-16 with a byte order mark', utf16(LINES.join('\r\n'))],
];

describe('IN-06 the same rows come in however the text is written', () => {
  test.each(WAYS)('%s', async (_label, content) => {
    const { id, mapping } = await desk.upload('assay.csv', content);
    expect(mapping.columns.map(({ role, header }) => [role, header.trim()]).slice(0, 4)).toEqual([['hole', 'HoleID'], ['from', 'From'], ['to', 'To'], ['analyte', 'Cu_ppm']]);
    expect((await desk.load(id)).state).toBe('done');
    const { check } = await desk.get(id);
    expect(check).toMatchObject({ rows: 3, rowsToLoad: 3, rowsAside: 0, holes: 2 });
    const [revision] = await desk.revisions();
    expect(await desk.numbers(revision?.tableId ?? 0, 'from')).toEqual([0, 2, 0]);
    expect(await desk.numbers(revision?.tableId ?? 0, 'to')).toEqual([2, 4, 2]);
    expect(await desk.numbers(revision?.tableId ?? 0, 'Cu')).toEqual([10, 20, 30]);
    expect(await desk.bytesOf(id)).toEqual(Buffer.from(content));
  });
});

describe('letters beyond ASCII that come late in a long file', () => {
  const early = Array.from({ length: 20_000 }, (_, i) => `TH-1,${i / 1000},${(i + 1) / 1000},BAS`);
  const file = (first: string, last: string, encoding: 'latin1' | 'utf8') =>
    Buffer.concat([Buffer.from(csv('HoleID,From,To,Lithology', `TH-2,0,2,${first}`, ...early), 'utf8'), Buffer.from(csv(`TH-1,30,32,${last}`), encoding)]);

  test.each(['latin1', 'utf8'] as const)('%s is read as what it is', async (encoding) => {
    const { id, encoding: told } = await desk.upload('lithology.csv', file('GNS', 'GRÈS', encoding));
    expect(told).toBe(encoding === 'utf8' ? 'utf-8' : 'windows-1252');
    expect((await desk.load(id)).state).toBe('done');
    const [revision] = await desk.revisions();
    const table = await desk.lead.get(`${desk.base}/tables/${revision?.tableId}`).expect(200);
    const code = getTable.response.parse(table.body).columns.find(({ name }) => name === 'code');
    expect(code?.dictionary).toEqual(['BAS', 'GNS', 'GRÈS']);
  });

  test('a file of two encodings is refused, not half misread', async () => {
    const { uploads, refused } = await desk.receive(['lithology.csv', file('GRÈS', 'GRÈS', 'latin1')]);
    expect(uploads).toEqual([]);
    expect(refused).toEqual([{ fileName: 'lithology.csv', message: 'expected one text encoding, found UTF-8 at the start of the file and another further on' }]);
    await desk.stillAnswers();
  });
});

describe('columns of the same name', () => {
  test('two columns of one analyte: the first stands, the second fills, and the check says so', async () => {
    const { id, check } = await desk.checked('assay.csv', csv('HoleID,From,To,Cu_ppm,Cu_ppm', 'TH-1,0,2,10,11', 'TH-1,2,4,,21', 'TH-2,0,2,30,31'));
    expect(check).toMatchObject({ rows: 3, rowsToLoad: 3 });
    expect(check.notes.join(' ')).toContain('Cu has 2 columns (Cu_ppm, Cu_ppm): the first stands, a later one fills what it lacks or caps.');
    await desk.load(id);
    const [revision] = await desk.revisions();
    expect(await desk.numbers(revision?.tableId ?? 0, 'Cu')).toEqual([10, 21, 30]);
  });

  test('two hole columns: one is taken, the other skipped, neither lost from the file', async () => {
    const content = csv('HoleID,HoleID,From,To,Cu_ppm', 'TH-1,other,0,2,10');
    const { id, guess } = await desk.upload('assay.csv', content);
    expect(guess.map(({ role }) => role)).toEqual(['hole', 'skip', 'from', 'to', 'analyte']);
    expect((await desk.bytesOf(id)).toString()).toBe(content);
  });

  test.each(['__proto__', 'constructor', 'toString'])('a column called %s is a column like any other', async (name) => {
    const { check } = await desk.checked('assay.csv', csv(`HoleID,From,To,Cu_ppm,${name}`, 'TH-1,0,2,10,x'));
    expect(check).toMatchObject({ rows: 1, rowsToLoad: 1, rowsAside: 0 });
  });
});
