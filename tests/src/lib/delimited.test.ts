import { parse } from 'csv-parse/sync';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { toCsv, toTsv } from '#src/lib/delimited.ts';

describe('toCsv', () => {
  it('quotes what RFC 4180 section 2 asks to be quoted', () => {
    expect(
      toCsv(
        ['a', 'b'],
        [
          ['x,y', 'say "no"'],
          ['two\nlines', 3.5],
        ],
      ),
    ).toBe('a,b\r\n"x,y","say ""no"""\r\n"two\nlines",3.5\r\n');
  });

  it('OU-01 makes formulas inert and leaves numbers alone', () => {
    expect(
      toCsv(
        ['t', 'n'],
        [
          ['=1+2', -4.25],
          ['@x', 0],
        ],
      ),
    ).toBe("t,n\r\n'=1+2,-4.25\r\n'@x,0\r\n");
  });

  it('writes nothing for what is missing', () => {
    expect(toCsv(['a', 'b', 'c'], [[null, undefined, Number.NaN]])).toBe('a,b,c\r\n,,\r\n');
  });

  it('is read back unchanged by another reader', () => {
    const harmless = fc
      .string({ minLength: 1 })
      .filter((text) => !/^[=+\-@\t\r\0]/.test(text) && !/^['\ufeff]/.test(text));
    fc.assert(
      fc.property(fc.array(fc.tuple(harmless, harmless), { minLength: 1 }), (rows) => {
        const lines: unknown[] = parse(toCsv(['a', 'b'], rows));
        expect(lines.slice(1)).toEqual(rows);
      }),
      { numRuns: 300 },
    );
  });
});

it('toTsv keeps one cell in one cell', () => {
  expect(toTsv(['a', 'b'], [['x\ty', 'two\nlines']])).toBe('a\tb\nx y\ttwo lines\n');
});
