import { parse } from 'csv-parse/sync';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { attachment, escapeCsvText, toCsv, unescapeCsvText } from '#server/lib/csv.ts';

describe('OU-01 text in CSV', () => {
  test.each([
    ['=1+1', "'=1+1"],
    ['+a', "'+a"],
    ['-b', "'-b"],
    ['@c', "'@c"],
    ['\td', "'\td"],
    ['\re', "'\re"],
    ['\0f', "'\0f"],
    ['plain', 'plain'],
    ["it's", "it's"],
    ["'=x", "''=x"],
    ['', ''],
  ])('%j is written %j', (text, written) => {
    expect(escapeCsvText(text)).toBe(written);
    expect(unescapeCsvText(written)).toBe(text);
  });

  test('any table reads back unchanged, and no text cell begins a formula', () => {
    const text = fc.oneof(
      fc.string(),
      fc.string({
        unit: fc.constantFrom("'", '=', '+', '-', '@', '\t', '\r', '\n', '"', ',', 'a'),
      }),
    );
    fc.assert(
      fc.property(
        fc.array(fc.array(text, { minLength: 3, maxLength: 3 }), { minLength: 1, maxLength: 5 }),
        (rows) => {
          const read: string[][] = parse(toCsv(['a', 'b', 'c'], rows), {
            record_delimiter: '\r\n',
            skip_empty_lines: false,
          });
          for (const cell of read.flat()) expect(cell).not.toMatch(/^[=+\-@\t\r\0]/);
          expect(read.slice(1).map((row) => row.map(unescapeCsvText))).toEqual(rows);
        },
      ),
      { numRuns: 500 },
    );
  });

  test('numbers are never altered', () => {
    expect(toCsv(['n'], [[-0.5], [1e-9], [12], [null]])).toBe('n\r\n-0.5\r\n1e-9\r\n12\r\n\r\n');
  });
});

test('IN-03 a download is named by RFC 6266', () => {
  // The UTF-8 form is that of RFC 8187, section 3.2.3: `£ and € rates` as %c2%a3%20and%20%e2%82%ac%20rates.
  expect(attachment('£ and € rates').toLowerCase()).toBe(
    `attachment; filename="_ and _ rates"; filename*=utf-8''%c2%a3%20and%20%e2%82%ac%20rates`,
  );
  expect(attachment('a"\r\nSet-Cookie: x=1')).not.toMatch(/[\r\n]|a"/);
});
