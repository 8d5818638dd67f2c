import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseAssayCell } from '#kernels/units/assay-cell.ts';
import { COMMON_ASSAY_CODES, withAssayCodes } from '#kernels/units/assay-codes.ts';

const point = { decimalMark: '.' } as const;
const comma = { decimalMark: ',' } as const;
const limits = { ...point, knownLimits: [0.5], columnLimit: 0.5, columnUpperLimit: 10000 };

describe('parseAssayCell', () => {
  it.each([
    ['0.53', 0.53],
    ['1.2e3', 1200],
    ['1,234', 1234],
    ['1,234,567.8', 1234567.8],
    [' 7 ', 7],
    ['.5', 0.5],
    ['1.', 1],
    ['+3', 3],
    ['１２.５', 12.5],
  ])('reads the number %j', (text, value) => {
    expect(parseAssayCell(text, point)).toEqual({
      value,
      censoring: 'none',
      bound: null,
      reason: null,
      qualifier: null,
    });
  });

  it.each([
    ['1,5', 1.5],
    ['0,53', 0.53],
    ['12', 12],
  ])('reads %j with a decimal comma', (text, value) => {
    expect(parseAssayCell(text, comma)).toMatchObject({ value, censoring: 'none' });
  });

  it.each([
    ['<0.5'],
    ['< 0.5'],
    ['<=0.5'],
    ['≤0.5'],
    ['-0.5'],
    ['−0.5'],
    ['BDL'],
    ['bdl'],
    ['LOD'],
    ['ND'],
    ['TR'],
  ])('reads %j as below 0.5', (text) => {
    expect(parseAssayCell(text, limits)).toEqual({
      value: null,
      censoring: 'below',
      bound: 0.5,
      reason: null,
      qualifier: null,
    });
  });

  it('gives the same record for <0.5 and -0.5 once 0.5 is a known limit (identity)', () => {
    expect(parseAssayCell('-0.5', limits)).toEqual(parseAssayCell('<0.5', limits));
  });

  it('refuses a negative number that is no known limit', () => {
    expect(parseAssayCell('-0.7', limits)).toMatchObject({ censoring: 'unparsed', value: null });
    expect(parseAssayCell('-0.5', point)).toMatchObject({ censoring: 'unparsed' });
  });

  it.each([['>10000'], ['> 10000'], ['OVR'], ['over'], ['10000+'], ['10,000 +']])(
    'reads %j as above 10000',
    (text) => {
      expect(parseAssayCell(text, limits)).toEqual({
        value: null,
        censoring: 'above',
        bound: 10000,
        reason: null,
        qualifier: null,
      });
    },
  );

  it.each([
    ['NS', 'missing', 'no sample'],
    ['NSS', 'missing', 'insufficient sample'],
    ['IS', 'missing', 'insufficient sample'],
    ['INS', 'missing', 'insufficient sample'],
    ['LNR', 'missing', 'listed, not received'],
    ['NR', 'missing', 'listed, not received'],
    ['SNR', 'missing', 'listed, not received'],
    ['INTF', 'missing', 'interference'],
    ['CONT', 'missing', 'contamination'],
    ['NA', 'not-analysed', 'not analysed'],
    ['n.a.', 'not-analysed', 'not analysed'],
    ['n/a', 'not-analysed', 'not analysed'],
    ['-', 'not-analysed', 'not analysed'],
    ['', 'not-analysed', 'blank'],
    ['   ', 'not-analysed', 'blank'],
    ['-9', 'not-analysed', 'not analysed'],
    ['-99', 'not-analysed', 'not analysed'],
    ['-99.00', 'not-analysed', 'not analysed'],
    ['-999', 'not-analysed', 'not analysed'],
    ['-9999', 'not-analysed', 'not analysed'],
  ] as const)('reads %j as %s: %s', (text, censoring, reason) => {
    expect(parseAssayCell(text, limits)).toEqual({
      value: null,
      censoring,
      bound: null,
      reason,
      qualifier: null,
    });
  });

  it('lets codes win over the negative convention', () => {
    expect(parseAssayCell('-9', { ...point, knownLimits: [9] })).toMatchObject({
      censoring: 'not-analysed',
    });
  });

  it('takes a word without a known limit as missing, and says so', () => {
    expect(parseAssayCell('BDL', point)).toMatchObject({
      censoring: 'missing',
      bound: null,
      reason: expect.stringContaining('no limit'),
    });
    expect(parseAssayCell('OVR', point)).toMatchObject({ censoring: 'missing', bound: null });
  });

  it('never takes a zero as a grade', () => {
    expect(parseAssayCell('0', limits)).toMatchObject({
      censoring: 'below',
      bound: 0.5,
      value: null,
      reason: expect.stringContaining('zero'),
    });
    expect(parseAssayCell('0.00', point)).toMatchObject({
      censoring: 'missing',
      value: null,
      reason: expect.stringContaining('zero'),
    });
  });

  it.each([
    ['0.5*', '*'],
    ['0.5 H', 'H'],
    ['0.5H', 'H'],
    ['1,250 #', '#'],
  ])('keeps the qualifier of %j', (text, qualifier) => {
    expect(parseAssayCell(text, point)).toMatchObject({ censoring: 'none', qualifier });
  });

  it.each([
    'abc',
    '1,5',
    '1,23,456',
    '0,123',
    '1 234',
    '1.2.3',
    '<',
    '<x',
    '<-1',
    '<0',
    '>',
    '1e999',
    '5 ppm',
    '10k',
    '2M',
    '0x10',
    '1e',
    '5%',
    '10²',
    'Infinity',
    '0.5 H2O',
    '١٢',
  ])('refuses %j rather than guess', (text) => {
    expect(parseAssayCell(text, limits)).toMatchObject({
      censoring: 'unparsed',
      value: null,
      bound: null,
    });
  });

  it.each(['1.5', '1.234', '1,234,567'])('refuses %j with a decimal comma', (text) => {
    expect(parseAssayCell(text, comma)).toMatchObject({ censoring: 'unparsed' });
  });

  it('follows a laboratory’s own code table', () => {
    const codes = withAssayCodes(COMMON_ASSAY_CODES, {
      ns: { meaning: 'below', reason: 'not seen' },
      CONT: null,
      9999: { meaning: 'above', reason: 'over' },
    });
    const context = { ...limits, codes };
    expect(parseAssayCell('NS', context)).toMatchObject({ censoring: 'below', bound: 0.5 });
    expect(parseAssayCell('CONT', context)).toMatchObject({ censoring: 'unparsed' });
    expect(parseAssayCell('9999', context)).toMatchObject({ censoring: 'above', bound: 10000 });
    expect(COMMON_ASSAY_CODES.get('NS')?.meaning).toBe('missing');
  });

  it('answers any text without throwing, a value only for a positive number', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (text) => {
        const cell = parseAssayCell(text, limits);
        expect(cell.value === null || cell.value > 0).toBe(true);
        expect((cell.censoring === 'none') === (cell.value !== null)).toBe(true);
        expect(cell.censoring === 'below' || cell.censoring === 'above').toBe(cell.bound !== null);
      }),
    );
  });

  it('reads every positive number as written', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 1e9, noNaN: true }), (value) => {
        expect(parseAssayCell(String(value), point)).toMatchObject({ censoring: 'none', value });
      }),
    );
  });
});
