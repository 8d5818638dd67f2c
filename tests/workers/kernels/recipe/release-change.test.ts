import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { codingAgreement, releaseChange } from '#kernels/recipe/release-change.ts';
import { releaseDifferences } from '#kernels/recipe/release-pieces.ts';
import { gradeChanges } from '#kernels/recipe/release-grades.ts';
import { categoryFrom } from '#kernels/tables/category.ts';

type Piece = readonly [code: string | null, lengthM: number];

/** Intervals of one hole from the top; null leaves a gap. */
function hole(pieces: readonly Piece[], name = 'DH1') {
  let depth = 0;
  return pieces.flatMap(([code, lengthM]) => {
    const interval = { hole: name, fromM: depth, toM: (depth += lengthM), code: code ?? '' };
    return code === null ? [] : [interval];
  });
}

describe('A to A 40, A to B 5, B to A 10, B to B 45 m (computed)', () => {
  const found = releaseChange(
    hole([
      ['A', 45],
      ['B', 55],
    ]),
    hole([
      ['A', 40],
      ['B', 5],
      ['A', 10],
      ['B', 45],
    ]),
  );

  it('moves .15 of the metres', () => {
    expect(found.commonMetres).toBe(100);
    expect(found.movedShare).toBeCloseTo(0.15, 12);
    expect(found.table).toEqual([
      { before: 'A', after: 'A', metres: 40 },
      { before: 'A', after: 'B', metres: 5 },
      { before: 'B', after: 'A', metres: 10 },
      { before: 'B', after: 'B', metres: 45 },
    ]);
    expect(found.domains[0]).toEqual({
      code: 'A',
      metresBefore: 45,
      metresAfter: 50,
      keptMetres: 40,
      addedMetres: 0,
      removedMetres: 0,
    });
  });

  it('as counts has an adjusted Rand index of .484848', () => {
    const pairs: (readonly [string, string, number])[] = [
      ['A', 'A', 40],
      ['A', 'B', 5],
      ['B', 'A', 10],
      ['B', 'B', 45],
    ];
    const column = (place: 0 | 1) =>
      pairs.flatMap((pair) => Array.from({ length: pair[2] }, () => pair[place]));
    expect(codingAgreement(column(0), column(1))).toBeCloseTo(0.484848, 6);
  });
});

describe('change between releases', () => {
  it('keeps added and removed ground apart, and matches by name', () => {
    const found = releaseChange(
      [
        ...hole([
          ['A', 10],
          ['B', 5],
        ]),
        ...hole([['A', 7]], 'DH2'),
      ],
      [
        ...hole([
          ['A', 8],
          [null, 4],
          ['C', 10],
        ]),
        ...hole([['B', 3]], 'DH3'),
      ],
    );
    expect(found).toMatchObject({ commonMetres: 11, addedMetres: 10, removedMetres: 11 });
    expect(found.movedShare).toBeCloseTo(3 / 11, 12);
    expect(found.table).toEqual([
      { before: 'A', after: 'A', metres: 8 },
      { before: 'B', after: 'C', metres: 3 },
    ]);
    expect(found.domains.find(({ code }) => code === 'C')).toMatchObject({
      metresBefore: 0,
      metresAfter: 10,
      addedMetres: 7,
    });
    expect(found.domains.find(({ code }) => code === 'A')).toMatchObject({ removedMetres: 9 });
  });

  it('a renamed domain counts as moved; a first release has nothing to compare', () => {
    expect(releaseChange(hole([['A', 10]]), hole([['Z', 10]])).movedShare).toBe(1);
    expect(releaseChange([], hole([['A', 10]]))).toMatchObject({
      commonMetres: 0,
      addedMetres: 10,
      movedShare: null,
    });
  });

  it('conserves the metres of both releases, and nothing changes against itself', () => {
    const piece = fc.tuple(fc.constantFrom('A', 'B', 'C', null), fc.integer({ min: 1, max: 9 }));
    const pieces = fc.array(piece, { minLength: 1, maxLength: 12 });
    fc.assert(
      fc.property(pieces, pieces, (a, b) => {
        const [old, fresh] = [hole(a), hole(b)];
        fc.pre(old.length > 0 && fresh.length > 0);
        const metres = (rows: typeof old) =>
          rows.reduce((sum, { fromM, toM }) => sum + toM - fromM, 0);
        const found = releaseChange(old, [...fresh].reverse());
        expect(found.commonMetres + found.removedMetres).toBeCloseTo(metres(old), 9);
        expect(found.commonMetres + found.addedMetres).toBeCloseTo(metres(fresh), 9);
        expect(found.domains.reduce((sum, d) => sum + d.metresBefore, 0)).toBeCloseTo(
          metres(old),
          9,
        );
        expect(found.domains.reduce((sum, d) => sum + d.metresAfter, 0)).toBeCloseTo(
          metres(fresh),
          9,
        );
        expect(found.table.reduce((sum, cell) => sum + cell.metres, 0)).toBeCloseTo(
          found.commonMetres,
          9,
        );
        const same = releaseChange(old, old);
        expect(same).toMatchObject({ movedShare: 0, addedMetres: 0, removedMetres: 0 });
      }),
    );
  });

  it('agreement leaves out what one release does not code', () => {
    expect(codingAgreement(['A', 'A', 'B', 'B', null], ['x', 'x', 'y', 'y', 'y'])).toBe(1);
    expect(codingAgreement(['A', null], [null, 'x'])).toBeNull();
  });
});

describe('interval by interval', () => {
  it('lists what changed, neighbours of one change joined', () => {
    const old = [
      ...hole([
        ['A', 5],
        ['A', 5],
        ['B', 5],
      ]),
      ...hole([['A', 2]], 'DH2'),
    ];
    const fresh = [
      ...hole([
        ['A', 4],
        ['B', 6],
        [null, 2],
        ['B', 3],
        ['C', 1],
      ]),
      ...hole([['A', 2]], 'DH2'),
    ];
    expect(releaseDifferences(old, fresh)).toEqual([
      { hole: 'DH1', fromM: 4, toM: 10, before: 'A', after: 'B' },
      { hole: 'DH1', fromM: 10, toM: 12, before: 'B', after: null },
      { hole: 'DH1', fromM: 15, toM: 16, before: null, after: 'C' },
    ]);
    expect(releaseDifferences(old, old)).toEqual([]);
  });
});

describe('grades before and after', () => {
  const lengths = Float64Array.of(1, 2, 1, 1);
  const grades = Float64Array.of(1, 2, 3, NaN);
  const before = categoryFrom(['A', 'A', 'A', 'A']);
  const after = categoryFrom(['A', 'A', 'B', null]);

  it('mean 2, s² .8 of lengths 1, 2, 1 (computed); metal 8 before, 5 and 3 after', () => {
    const [a, b] = gradeChanges(before, after, grades, lengths);
    expect(a?.before).toMatchObject({ intervals: 3, metres: 4, mean: 2, metal: 8 });
    expect(a?.before?.cv).toBeCloseTo(Math.sqrt(0.8) / 2, 12);
    expect(a?.after).toMatchObject({ metres: 3, metal: 5 });
    expect(b).toMatchObject({
      code: 'B',
      before: null,
      after: { intervals: 1, cv: null, metal: 3 },
    });
  });

  it('has no grade where nothing is assayed', () => {
    expect(gradeChanges(before, after, new Float64Array(4).fill(NaN), lengths)).toEqual([]);
  });
});

const one = categoryFrom(['A']);
const row = { hole: 'DH1', fromM: 0, toM: 1, code: 'A' };
it.each([
  ['too-few-rows', () => releaseChange([], [])],
  ['overlap', () => releaseChange([row, { ...row, fromM: 0.5 }], [])],
  ['bad-interval', () => releaseChange([{ ...row, toM: 0 }], [])],
  ['bad-interval', () => releaseChange([], [{ ...row, fromM: NaN }])],
  ['bad-parameter', () => releaseChange([{ ...row, code: '' }], [])],
  ['bad-parameter', () => releaseChange([], [{ ...row, hole: '' }])],
  ['shape', () => codingAgreement(['A'], [])],
  ['shape', () => gradeChanges(one, one, Float64Array.of(1, 2), Float64Array.of(1, 1))],
  ['shape', () => gradeChanges(one, one, Float64Array.of(1), new Float64Array(2))],
  ['not-finite', () => gradeChanges(one, one, Float64Array.of(Infinity), Float64Array.of(1))],
  ['bad-parameter', () => gradeChanges(one, one, Float64Array.of(1), Float64Array.of(0))],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
