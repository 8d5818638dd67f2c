import { existsSync, readdirSync } from 'node:fs';
import { beforeAll, describe, expect, test } from 'vitest';
import { testClient, type TestClient } from '#tests/support/test-client.ts';
import { COLLARS, csv, type IntakeDesk, intakeDesk } from './intake-desk.ts';

let client: TestClient;
let desk: IntakeDesk;
beforeAll(async () => {
  client = await testClient({ compute: true });
  desk = intakeDesk(client);
});

/** Files still lying where uploads arrive. */
const halfReceived = (): string[] => (existsSync(client.env.paths.incoming) ? readdirSync(client.env.paths.incoming) : []);

const PNG = Uint8Array.of(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13);
const WORKBOOK = Uint8Array.of(0x50, 0x4b, 0x03, 0x04, 20, 0, 6, 0);

describe('IN-04, IN-06 a file that is no table is refused by name, and the others are kept', () => {
  test.each<[string, string | Uint8Array, RegExp]>([
    ['picture.csv', PNG, /expected CSV text, found binary content/],
    ['workbook.csv', WORKBOOK, /expected CSV text, found a workbook or archive/],
    ['empty.csv', '', /row 1: expected column names, found an empty line/],
    ['blank.csv', '\n\n', /row 1: expected column names, found an empty line/],
    ['header-only.csv', 'HoleID,From,To,Cu_ppm\n', /expected rows below the column names, found none/],
    ['header-and-blanks.csv', 'HoleID,From,To,Cu_ppm\n\n,,,\n', /expected rows below the column names, found none/],
    [
      'open-quote.csv',
      csv('HoleID,From,To,Cu_ppm,Comment', 'TH-1,0,2,10,whole', 'TH-1,2,4,10,"left open', 'TH-1,4,6,10,whole'),
      /row [2-5]: expected one CSV record, found that a quotation mark opens and is not closed/,
    ],
    [
      'open-quote-in-the-first-row.csv',
      csv('HoleID,From,To,Lithology', 'TH-1,0,10,"AND', 'TH-1,10,20,AND', 'TH-2,0,30,RHY'),
      /row 2: expected one CSV record, found that a quotation mark opens and is not closed/,
    ],
    [
      'open-quote-in-the-names.csv',
      csv('HoleID,"From,To,Cu_ppm', 'TH-1,0,10,5'),
      /row 1: expected one CSV record, found that a quotation mark opens and is not closed/,
    ],
    [
      'endless-record.csv',
      `HoleID,From,To,Cu_ppm\nTH-1,0,2,"${'x'.repeat(1_100_000)}\n`,
      /row 2: expected one CSV record, found no end of it in 256 KiB; is a quotation mark not closed\?/,
    ],
    [
      'endless-later.csv',
      `HoleID,From,To,Cu_ppm\n${'TH-1,0,2,10\n'.repeat(9)}TH-1,2,4,"${'x'.repeat(1_100_000)}\n`,
      /row 1[01]: expected one CSV record, found that a quotation mark opens and is not closed/,
    ],
  ])('%s', async (name, content, message) => {
    const { uploads, refused } = await desk.receive([name, content], ['good.csv', COLLARS]);
    expect(refused).toEqual([{ fileName: name, message: expect.stringMatching(message) }]);
    expect(uploads.map(({ fileName, rowCount }) => [fileName, rowCount])).toEqual([['good.csv', 2]]);
    expect(halfReceived()).toEqual([]);
    await desk.stillAnswers();
  });

  test('a name that is no text file: 415 with the name and what was expected', async () => {
    const res = await desk.send(['plan.xlsx', WORKBOOK], ['good.csv', COLLARS]);
    expect(desk.refusal(res)).toMatchObject({
      answered: 415, code: 'not-csv', detail: '“plan.xlsx”: expected a file ending in .csv, .tsv or .txt',
    });
    expect(halfReceived()).toEqual([]);
    await desk.stillAnswers();
  });

  test('no file at all, and files in a field of another name', async () => {
    const none = await desk.lead.post(`${desk.base}/uploads`).field('note', 'nothing attached');
    expect(desk.refusal(none)).toMatchObject({ answered: 400, code: 'no-files', detail: 'Expected at least one file in the field “files”, found none.' });
    const astray = await desk.lead.post(`${desk.base}/uploads`).attach('table', Buffer.from(COLLARS), 'collar.csv');
    expect(desk.refusal(astray)).toMatchObject({ answered: 400, code: 'upload-refused', detail: expect.stringMatching(/expected files in the field “files”, found the field “table”/i) });
    expect(halfReceived()).toEqual([]);
    await desk.stillAnswers();
  });

  test('more files at once than are taken', async () => {
    const files = Array.from({ length: 21 }, (_, i) => [`collar-${i}.csv`, COLLARS] as const);
    const res = await desk.send(...files);
    expect(desk.refusal(res)).toMatchObject({ answered: 400, code: 'upload-refused', detail: expect.stringMatching(/expected at most 20 files at once, found more/i) });
    expect(halfReceived()).toEqual([]);
    await desk.stillAnswers();
  });

  test('a body that is no multipart form', async () => {
    const res = await desk.lead.post(`${desk.base}/uploads`).set('Content-Type', 'text/csv').send(COLLARS);
    expect(desk.refusal(res)).toMatchObject({ answered: 400, code: 'no-files' });
    await desk.stillAnswers();
  });

  test('an upload broken off leaves nothing behind', async () => {
    const body = `--cut\r\nContent-Disposition: form-data; name="files"; filename="a.csv"\r\nContent-Type: text/csv\r\n\r\n${COLLARS}`;
    const res = await desk.lead.post(`${desk.base}/uploads`).set('Content-Type', 'multipart/form-data; boundary=cut').send(body);
    expect(desk.refusal(res)).toMatchObject({ answered: 400, code: 'bad-form', detail: expect.stringContaining('Expected a whole multipart form') });
    expect(halfReceived()).toEqual([]);
    await desk.stillAnswers();
  });
});
