import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { mapCodes } from '#kernels/logging/code-mapping.ts';
import { normaliseCode, synonymGroups } from '#kernels/logging/code-synonyms.ts';
import { consolidationTree } from '#kernels/logging/consolidation-tree.ts';
import { loggerEffects } from '#kernels/logging/logger-effect.ts';
import { rareCodes } from '#kernels/logging/rare-codes.ts';
import { categoryFrom } from '#kernels/tables/category.ts';

const use = (code: string, metres: number, intervals = 50) => ({ code, metres, intervals });

describe('synonyms', () => {
  it.each([
    ['Qtz-Vein', 'qtzvein'],
    [' qtz vein ', 'qtzvein'],
    ['ＱＴＺ＿vein', 'qtzvein'],
    ['Å1', 'å1'],
    ['--', ''],
  ])('%j is written %j', (code, plain) => {
    expect(normaliseCode(code)).toBe(plain);
  });

  it('keep the code of most metres; different rocks and bare punctuation stay apart', () => {
    const groups = synonymGroups([
      use('tuff', 10),
      use('TUFF', 90),
      use('Tuff ', 20),
      use('tuff2', 5),
      use('-', 1),
      use('--', 1),
      use('vn', 3),
      use('VN', 3),
    ]);
    expect(groups).toEqual([
      { keep: 'TUFF', merge: ['Tuff ', 'tuff'], metres: 120 },
      { keep: 'VN', merge: ['vn'], metres: 6 },
    ]);
  });
});

describe('rare codes', () => {
  const centre = (...values: number[]) => Float64Array.from(values);
  it('go to the nearest code of their parent that is not rare', () => {
    const found = rareCodes({
      uses: [
        use('big', 500),
        use('far', 400),
        use('short', 5),
        use('few', 50, 3),
        use('lone', 2),
        use('blind', 4),
      ],
      parents: ['p', 'p', 'p', 'q', 'r', 'p'],
      centres: [centre(0, 0), centre(3, -3), centre(1, -1), centre(0, 0), centre(0, 0), null],
    });
    expect(found.map(({ code, nearest }) => [code, nearest])).toEqual([
      ['lone', null],
      ['blind', null],
      ['short', 'big'],
      ['few', null],
    ]);
    expect(found[2]?.distance).toBeCloseTo(Math.SQRT2, 12);
    expect(found[2]?.share).toBeCloseTo(5 / 961, 12);
  });

  it('are none when all are common', () => {
    expect(rareCodes({ uses: [use('a', 1)], parents: [null], centres: [null] })).toEqual([]);
  });
});

describe('tree for consolidation', () => {
  it('is half chemistry, half contacts (by hand)', () => {
    // a and b alike and always side by side; c far and rarely beside either
    const distances = Float64Array.of(0, 1, 4, 1, 0, 4, 4, 4, 0);
    const contacts = [0, 8, 2, 8, 0, 0, 2, 0, 0];
    const { tree, dissimilarity } = consolidationTree(distances, contacts, 3);
    // a-b: 1/8 + (1 - 8/8)/2; a-c: 1/2 + (1 - 2/2)/2; b-c: 1/2 + 1/2
    expect([...dissimilarity]).toEqual([0, 0.125, 0.5, 0.125, 0, 1, 0.5, 1, 0]);
    expect(tree).toEqual([
      { a: 0, b: 1, height: 0.125, size: 2 },
      { a: 2, b: 3, height: 0.75, size: 3 },
    ]);
  });

  it('copes with codes that touch nothing and lie at one spot', () => {
    expect([...consolidationTree(new Float64Array(4), [0, 0, 0, 0], 2).dissimilarity]).toEqual([
      0, 0.5, 0.5, 0,
    ]);
  });
});

describe('mapping', () => {
  const raw = categoryFrom(['tuff', 'TUFF', 'vein', null, 'tuff']);
  const lengths = Float64Array.of(1, 2, 3, 4, 5);

  it('moves metres and shows from where; the raw codes stay', () => {
    const found = mapCodes(raw, new Map([['TUFF', 'tuff']]), lengths);
    expect(found.codes.levels).toEqual(['tuff', 'vein']);
    expect([...found.codes.codes]).toEqual([0, 0, 1, -1, 0]);
    expect(found).toMatchObject({ metres: 11, changedMetres: 2 });
    expect(found.table[0]).toEqual({
      code: 'tuff',
      metres: 8,
      from: [
        { raw: 'TUFF', metres: 2 },
        { raw: 'tuff', metres: 6 },
      ],
    });
    expect(raw.levels).toEqual(['TUFF', 'tuff', 'vein']);
  });

  it('conserves length whatever the mapping', () => {
    const code = fc.constantFrom('a', 'b', 'c', null);
    const target = fc.constantFrom('x', 'y', 'a');
    const row = fc.tuple(code, fc.integer({ min: 0, max: 30 }));
    fc.assert(
      fc.property(fc.array(row, { minLength: 1 }), target, target, (rows, forB, forC) => {
        const labels = categoryFrom(rows.map(([label]) => label));
        const mapping = new Map(
          [
            ['b', forB],
            ['c', forC],
          ].filter(([from = '']) => labels.levels.includes(from)) as [string, string][],
        );
        const m = Float64Array.from(rows, ([, length]) => length);
        const found = mapCodes(labels, mapping, m);
        const logged = rows.reduce(
          (sum, [label, length]) => sum + (label === null ? 0 : length),
          0,
        );
        expect(found.metres).toBe(logged);
        expect(found.table.reduce((sum, { metres }) => sum + metres, 0)).toBe(logged);
        expect(mapCodes(found.codes, new Map(), m).changedMetres).toBe(0);
      }),
    );
  });
});

describe('logger effect', () => {
  /** Twelve holes of ten rows in one geology. */
  const holeStarts = Int32Array.from({ length: 13 }, (_, hole) => 10 * hole);
  const rows = Array.from({ length: 120 }, (_, i) => i);
  const loggers = categoryFrom(rows.map((i) => (Math.floor(i / 10) % 2 ? 'second' : 'first')));
  const parents = categoryFrom(rows.map(() => 'volcanic'));

  it('shows two loggers with codes of their own for one rock', () => {
    const codes = categoryFrom(
      rows.map((i) => ((Math.floor(i / 10) % 2 === 1) !== (i % 10 === 0) ? 'ash' : 'tuff')),
    );
    const [found] = loggerEffects({ codes, loggers, parents, holeStarts }, { seed: 1, draws: 199 });
    expect(found).toMatchObject({ parent: 'volcanic', n: 120, holes: 12 });
    expect(found?.v).toBeGreaterThan(0.7);
    expect(found?.p).toBeLessThan(0.05);
  });

  it('does not take runs of rock for loggers: rows are many, holes few', () => {
    const codes = categoryFrom(
      rows.map((i) => ([0, 1, 4, 7, 9, 10].includes(Math.floor(i / 10)) ? 'ash' : 'tuff')),
    );
    const [found] = loggerEffects({ codes, loggers, parents, holeStarts }, { seed: 1, draws: 199 });
    expect(found?.p).toBeGreaterThan(0.2);
  });

  it('says nothing where one code, one logger or no rows are', () => {
    const one = categoryFrom(rows.map(() => 'tuff'));
    const none = categoryFrom(rows.map(() => null));
    expect(loggerEffects({ codes: one, loggers, parents, holeStarts }, { seed: 1 })).toEqual([]);
    expect(loggerEffects({ codes: none, loggers, parents, holeStarts }, { seed: 1 })).toEqual([]);
    expect(
      loggerEffects({ codes: loggers, loggers: none, parents, holeStarts }, { seed: 1 }),
    ).toEqual([]);
  });

  it('refuses columns that do not fit', () => {
    const wrong = () =>
      loggerEffects({ codes: categoryFrom(['x']), loggers, parents, holeStarts }, { seed: 1 });
    expect(wrong).toThrow(expect.objectContaining({ code: 'shape' }));
    const noDraws = () =>
      loggerEffects({ codes: loggers, loggers, parents, holeStarts }, { seed: 1, draws: 0 });
    expect(noDraws).toThrow(expect.objectContaining({ code: 'bad-parameter' }));
  });
});

const ab = categoryFrom(['a', 'b']);
const two = Float64Array.of(1, 1);
it.each([
  ['bad-parameter', () => synonymGroups([use('a', 1), use('a', 2)])],
  ['bad-parameter', () => synonymGroups([use('a', NaN)])],
  ['bad-parameter', () => synonymGroups([use('a', 1, -1)])],
  ['shape', () => rareCodes({ uses: [use('a', 1)], parents: [], centres: [null] })],
  [
    'shape',
    () =>
      rareCodes({
        uses: [use('a', 1), use('b', 1)],
        parents: [null, null],
        centres: [two, Float64Array.of(1)],
      }),
  ],
  [
    'not-finite',
    () => rareCodes({ uses: [use('a', 1)], parents: [null], centres: [Float64Array.of(NaN)] }),
  ],
  ['shape', () => consolidationTree(two, [0], 1)],
  ['bad-parameter', () => consolidationTree(new Float64Array(4), [0, 1, 2, 0], 2)],
  ['unknown-code', () => mapCodes(ab, new Map([['c', 'a']]), two)],
  ['bad-parameter', () => mapCodes(ab, new Map([['a', '']]), two)],
  [
    'bad-parameter',
    () =>
      mapCodes(
        ab,
        new Map([
          ['a', 'b'],
          ['b', 'c'],
        ]),
        two,
      ),
  ],
  ['bad-parameter', () => mapCodes(ab, new Map(), Float64Array.of(1, -1))],
  ['shape', () => mapCodes(ab, new Map(), Float64Array.of(1))],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
