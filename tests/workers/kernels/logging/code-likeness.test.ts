import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { centredLogRatio } from '#kernels/compositions/centred-log-ratio.ts';
import { averageLinkage, leafOrder } from '#kernels/clustering/average-linkage.ts';
import { codeLikeness } from '#kernels/logging/code-likeness.ts';
import { centreDistances, codeSpace, standardisedDistances } from '#kernels/logging/code-space.ts';
import { nestedVariance } from '#kernels/logging/nested-variance.ts';
import { seededRandom } from '#kernels/random.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import computed from './fixtures/logging-codes.json' with { type: 'json' };

const columnsOf = (rows: Float64Array, p: number) =>
  Array.from({ length: p }, (_, k) => rows.filter((_value, at) => at % p === k));
/** Codes 1 to 4 in pairs of rows; parents {1, 2} and {3, 4}. */
const eight = columnsOf(
  centredLogRatio(
    Float64Array.of(
      10,
      30,
      60,
      12,
      28,
      60,
      20,
      20,
      60,
      22,
      20,
      58,
      8,
      40,
      52,
      9,
      41,
      50,
      30,
      10,
      60,
      28,
      12,
      60,
    ),
    3,
  ),
  3,
);
const four = categoryFrom(['1', '1', '2', '2', '3', '3', '4', '4']);
const nestedInput = { coordinates: eight, codeOf: four.codes, parentOf: Int32Array.of(0, 0, 1, 1) };

describe('eight rows of four codes (computed)', () => {
  it('sums of squares .028822, 3.779643, .044442; F 170.0945 and .015251', () => {
    const found = nestedVariance(nestedInput, { seed: 1, draws: 199 });
    expect(found.parents).toBeCloseTo(0.028822, 6);
    expect(found.codes).toBeCloseTo(3.779643, 6);
    expect(found.within).toBeCloseTo(0.044442, 6);
    expect(found.total).toBeCloseTo(3.852906, 6);
    expect(found.fCodes).toBeCloseTo(170.0945, 3);
    expect(found.fParents).toBeCloseTo(0.015251, 6);
    expect(found.pParents).toBeGreaterThan(0.5);
  });

  it('distances of centres, and a tree that crosses the parents', () => {
    const space = codeSpace(eight, four, 2);
    const distances = centreDistances(space);
    const at = (a: number, b: number) => distances[a * 4 + b];
    expect(at(0, 1)).toBeCloseTo(0.732875, 6);
    expect(at(0, 2)).toBeCloseTo(0.448651, 6);
    expect(at(0, 3)).toBeCloseTo(1.375966, 6);
    expect(at(1, 2)).toBeCloseTo(1.139448, 6);
    expect(at(1, 3)).toBeCloseTo(0.666614, 6);
    expect(at(2, 3)).toBeCloseTo(1.800704, 6);
    const tree = averageLinkage(distances, 4);
    expect(tree.map(({ a, b, size }) => [a, b, size])).toEqual([
      [0, 2, 2],
      [1, 3, 2],
      [4, 5, 4],
    ]);
    [0.448651, 0.666614, 1.262249].forEach((h, i) => expect(tree[i]?.height).toBeCloseTo(h, 6));
    expect(leafOrder(tree, 4)).toEqual([0, 2, 1, 3]);
  });
});

describe('scipy and numpy', () => {
  it('tree of nine points by average linkage', () => {
    const { distances, n, linkage } = computed.tree;
    const tree = averageLinkage(Float64Array.from(distances), n);
    linkage.forEach(([a, b, height = NaN, size], i) => {
      expect([tree[i]?.a, tree[i]?.b, tree[i]?.size]).toEqual([a, b, size]);
      expect(tree[i]?.height).toBeCloseTo(height, 12);
    });
  });

  it('pooled covariance, distances and nested sums of forty rows', () => {
    const { coordinates, code, parent, within, distance, standardised, sums } = computed.codes;
    const columns = coordinates.map((column) => Float64Array.from(column));
    const space = codeSpace(
      columns,
      { levels: ['a', 'b', 'c', 'd'], codes: Int32Array.from(code) },
      5,
    );
    within.forEach((value, i) => expect(space.within[i]).toBeCloseTo(value, 10));
    centreDistances(space).forEach((d, i) => expect(d).toBeCloseTo(distance[i] ?? NaN, 10));
    standardisedDistances(space).forEach((d, i) =>
      expect(d).toBeCloseTo(standardised[i] ?? NaN, 8),
    );
    const found = nestedVariance(
      { coordinates: columns, codeOf: Int32Array.from(code), parentOf: Int32Array.from(parent) },
      { seed: 1, draws: 9 },
    );
    [found.parents, found.codes, found.within].forEach((s, i) =>
      expect(s).toBeCloseTo(sums[i] ?? NaN, 9),
    );
  });
});

it('nested sums add up to the total about the mean, whatever the order of rows', () => {
  const row = fc.tuple(fc.integer({ min: 0, max: 3 }), fc.integer({ min: -30, max: 30 }));
  fc.assert(
    fc.property(fc.array(row, { minLength: 4, maxLength: 30 }), (rows) => {
      const all = [...rows, [0, 1], [1, 2], [2, 3], [3, 4]] as [number, number][];
      const partsOf = (list: typeof all) => {
        const values = Float64Array.from(list, ([, v]) => v);
        const found = nestedVariance(
          {
            coordinates: [values],
            codeOf: Int32Array.from(list, ([c]) => c),
            parentOf: Int32Array.of(0, 1, 0, 1),
          },
          { seed: 1, draws: 1 },
        );
        const mean = values.reduce((a, b) => a + b, 0) / values.length;
        const squares = values.reduce((a, b) => a + (b - mean) ** 2, 0);
        expect(found.parents + found.codes + found.within).toBeCloseTo(squares, 7);
        return found;
      };
      const turned = partsOf([...all].reverse());
      const found = partsOf(all);
      expect(turned.codes).toBeCloseTo(found.codes, 8);
      expect(turned.parents).toBeCloseTo(found.parents, 8);
    }),
  );
});

/** 8 holes of 40 rows in runs of 10: tuff, ash (the same rock), vein, and mixed, half of either. */
function deposit() {
  const random = seededRandom(6);
  const names = ['tuff', 'vein', 'ash', 'mixed'];
  const rows = Array.from(
    { length: 320 },
    (_, i) => names[(Math.floor(i / 10) + (Math.floor(i / 40) % 4)) % 4]!,
  );
  const level = (name: string, i: number) =>
    name === 'vein' ? 6 : name === 'mixed' ? 6 * (i % 2) : 0;
  return {
    coordinates: [
      Float64Array.from(rows, (name, i) => level(name, i) + random.normal()),
      Float64Array.from(rows, () => random.normal()),
    ],
    codes: categoryFrom([...rows.slice(0, 318), 'rare', null]),
    holeStarts: Int32Array.from({ length: 9 }, (_, hole) => 40 * hole),
  };
}

describe('likeness of codes in a deposit', () => {
  const { coordinates, codes, holeStarts } = deposit();
  // ash, mixed, rare, tuff, vein
  const parents = ['volcanic', null, 'other', 'volcanic', 'veins'];
  const shares: number[] = [];
  const found = codeLikeness(
    { coordinates, codes, parents, holeStarts },
    { seed: 1, draws: 199, onProgress: (share) => shares.push(share) },
  );

  it('proposes to merge what is alike and nothing else', () => {
    const merges = found.pairs
      .filter((pair) => pair.proposesMerge)
      .map(({ first, second }) => [first, second]);
    expect(merges).toEqual([['ash', 'tuff']]);
    const apart = found.pairs.find(({ first, second }) => first === 'tuff' && second === 'vein');
    expect(apart?.pAdjusted).toBeLessThan(0.05);
    expect(apart?.standardised).toBeGreaterThan(2);
  });

  it('proposes to split what is mixed and lists what is rare', () => {
    expect(found.splits.map(({ level }) => level)).toEqual(['mixed']);
    expect(found.tooFew).toEqual([{ level: 'rare', rows: 1 }]);
    expect(found.levels).toEqual(['ash', 'mixed', 'tuff', 'vein']);
    expect(found.tree[0]).toMatchObject({ a: 0, b: 2 });
    expect(shares.at(-1)).toBe(1);
  });

  it('tests the hierarchy of codes that have a parent', () => {
    expect(found.nested?.fCodes).toBeLessThan(5);
    expect(found.nested?.fParents).toBeGreaterThan(5);
    expect(found.crossings).toEqual([]);
  });

  it('names codes nearer to another parent', () => {
    const crossed = codeLikeness(
      { coordinates, codes, parents: ['a', 'b', null, 'b', 'b'], holeStarts },
      { seed: 1, draws: 19 },
    );
    expect(crossed.crossings[0]).toEqual({
      level: 'ash',
      parent: 'a',
      nearest: 'tuff',
      nearestParent: 'b',
    });
    expect(
      codeLikeness(
        { coordinates, codes, parents: parents.map(() => null), holeStarts },
        { seed: 1, draws: 19 },
      ).nested,
    ).toBeNull();
  });
});

it('gives no F where there is no spread to compare with', () => {
  const flat = { ...nestedInput, coordinates: [new Float64Array(8)] };
  expect(nestedVariance(flat, { seed: 1, draws: 9 })).toMatchObject({
    total: 0,
    fCodes: null,
    fParents: null,
    pParents: null,
  });
});

const flatSpace = () => codeSpace([new Float64Array(8)], four, 2);
const starts = Int32Array.of(0, 8);
it.each([
  ['too-few-groups', () => codeSpace(eight, four, 3)],
  ['shape', () => codeSpace([], four, 2)],
  ['shape', () => codeSpace([new Float64Array(7)], four, 2)],
  ['not-finite', () => codeSpace([new Float64Array(8).fill(NaN)], four, 2)],
  ['too-few-rows', () => codeSpace([Float64Array.of(1, 2)], categoryFrom(['a', 'b']), 1)],
  ['singular', () => standardisedDistances(flatSpace())],
  ['shape', () => averageLinkage(new Float64Array(3), 2)],
  ['bad-parameter', () => averageLinkage(Float64Array.of(0, 1, 2, 0), 2)],
  ['bad-parameter', () => averageLinkage(Float64Array.of(0, NaN, NaN, 0), 2)],
  [
    'shape',
    () =>
      codeLikeness(
        { coordinates: eight, codes: four, parents: [], holeStarts: starts },
        { seed: 1 },
      ),
  ],
  [
    'too-few-groups',
    () =>
      nestedVariance(
        { ...nestedInput, codeOf: new Int32Array(8), parentOf: Int32Array.of(0) },
        { seed: 1 },
      ),
  ],
  [
    'too-few-rows',
    () => nestedVariance({ ...nestedInput, parentOf: Int32Array.of(0, 0, 1, 1, 1) }, { seed: 1 }),
  ],
  ['shape', () => nestedVariance({ ...nestedInput, parentOf: Int32Array.of(0, 1) }, { seed: 1 })],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});

it('one code alone is a tree without joins', () => {
  expect(averageLinkage(Float64Array.of(0), 1)).toEqual([]);
  expect(leafOrder([], 1)).toEqual([0]);
});
