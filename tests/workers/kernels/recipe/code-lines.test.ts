import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { codeLines, csvField, formatDepth } from '#kernels/recipe/code-lines.ts';

const two = [
  { hole: 'DH1', fromM: 2, toM: 5, code: 'B' },
  { hole: 'DH1', fromM: 0, toM: 2, code: 'A' },
];

it('writes sorted lines with three decimals, whose SHA-256 a general tool gives too', () => {
  const text = codeLines(two);
  expect(text).toBe('DH1,0.000,2.000,A\nDH1,2.000,5.000,B\n');
  // coreutils: printf 'DH1,0.000,2.000,A\nDH1,2.000,5.000,B\n' | sha256sum
  expect(createHash('sha256').update(text, 'utf8').digest('hex')).toBe(
    '34761cfa34cf3b699381ae8a7d9c5b8d7ea9abdc7e9dc5f86d5a29a9c98af465',
  );
});

it('sorts holes by code point and depths by value, not by text', () => {
  const holes = ['b', 'B', '\u{1F600}', '\uFB01', 'a'].map((hole) => ({
    hole,
    fromM: 0,
    toM: 1,
    code: 'A',
  }));
  const order = codeLines(holes)
    .split('\n')
    .map((line) => line.split(',')[0]);
  expect(order).toEqual(['B', 'a', 'b', '\uFB01', '\u{1F600}', '']);
  const depths = [10, 9, 100].map((fromM) => ({ hole: 'H', fromM, toM: fromM + 1, code: 'A' }));
  expect(codeLines(depths)).toBe('H,9.000,10.000,A\nH,10.000,11.000,A\nH,100.000,101.000,A\n');
});

it('does not depend on the order of rows', () => {
  const interval = fc.record({
    hole: fc.constantFrom('H1', 'H2', 'h,3'),
    fromM: fc.integer({ min: 0, max: 9 }),
    toM: fc.integer({ min: 10, max: 20 }),
    code: fc.constantFrom('A', 'B'),
  });
  fc.assert(
    fc.property(fc.array(interval, { maxLength: 20 }), (rows) => {
      expect(codeLines([...rows].reverse())).toBe(codeLines(rows));
    }),
  );
});

it('quotes fields that would break a line (RFC 4180)', () => {
  expect(csvField('plain')).toBe('plain');
  expect(csvField('a,b')).toBe('"a,b"');
  expect(csvField('say "x"\n')).toBe('"say ""x""\n"');
  expect(formatDepth(1234.5678)).toBe('1234.568');
});

it('refuses depths that are none and empty names; no intervals give no text', () => {
  expect(() => codeLines([{ hole: 'H', fromM: 2, toM: 1, code: 'A' }])).toThrow('in row 0');
  expect(() => codeLines([{ hole: 'H', fromM: NaN, toM: 1, code: 'A' }])).toThrow('in row 0');
  expect(() => codeLines([{ hole: '', fromM: 0, toM: 1, code: 'A' }])).toThrow(
    'expected a hole and a code',
  );
  expect(codeLines([])).toBe('');
});
