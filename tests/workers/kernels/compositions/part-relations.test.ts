import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { balance, partitionSigns } from '#kernels/compositions/balances.ts';
import { balanceBasis } from '#kernels/compositions/ilr-basis.ts';
import { isometricLogRatio } from '#kernels/compositions/isometric-log-ratio.ts';
import { linkParts } from '#kernels/compositions/link-parts.ts';
import { partRelations } from '#kernels/compositions/part-relations.ts';
import { variation } from '#kernels/compositions/variation.ts';
import { seededRandom } from '#kernels/random.ts';
import { loadReference } from '#tests/support/reference.ts';
import { rawTable, toColumns } from '#tests/support/reference-transform.ts';

const set = loadReference('jura_prediction');
/** Cd Co Cr Cu Ni Pb Zn of 259 soils of the Swiss Jura (Atteia, Dubois & Webster 1994). */
const jura = rawTable(set, set.check('jura_prediction.mcd.h'));
const juraVariation = variation(jura.values, 7);
const FOUR_ROWS = Float64Array.of(10, 30, 60, 12, 28, 60, 20, 20, 60, 8, 40, 52);

function madeUp(nRows: number, nCols: number, seed: number): Float64Array {
  const random = seededRandom(seed);
  return Float64Array.from({ length: nRows * nCols }, () => Math.exp(random.normal()));
}

describe('partRelations', () => {
  it('of seven metals agrees with clr variances and proportionality (numpy 2.4.6)', () => {
    const { clrVariances, proportionality } = partRelations(juraVariation, 7);
    [0.239697, 0.105073, 0.061553, 0.288943, 0.075055, 0.108151, 0.021148].forEach((value, i) =>
      expect(clrVariances[i]).toBeCloseTo(value, 6),
    );
    [-0.24494, 1, 0.154727, -0.34648, 0.536378, -0.421905, -0.171264].forEach((value, j) =>
      expect(proportionality[7 + j]).toBeCloseTo(value, 6),
    );
    const total = clrVariances.reduce((a, b) => a + b, 0);
    expect(total).toBeCloseTo(juraVariation.totalVariance, 12);
  });

  it('names parts that keep a constant ratio, the closest first', () => {
    const values = madeUp(40, 4, 2);
    for (let start = 0; start < values.length; start += 4) {
      values[start + 3] = 2 * values[start]!;
      values[start + 1] = values[start]! * (start % 8 === 0 ? 1 : 1.05);
    }
    const { duplicates, proportionality } = partRelations(variation(values, 4), 4);
    expect(duplicates[0]).toMatchObject({ i: 0, j: 3 });
    expect(duplicates.map(({ i, j }) => 10 * i + j).sort((a, b) => a - b)).toEqual([1, 3, 13]);
    expect(proportionality[3]).toBeCloseTo(1, 9);
  });

  it('of constant rows is finite', () => {
    const { clrVariances, proportionality } = partRelations(
      variation(new Float64Array(12).fill(5), 3),
      3,
    );
    expect([...clrVariances]).toEqual([0, 0, 0]);
    expect([...proportionality]).toEqual(new Array<number>(9).fill(1));
  });

  it.each([
    ['too-few-parts', () => partRelations({ matrix: new Float64Array(1), totalVariance: 0 }, 1)],
    ['shape', () => partRelations({ matrix: new Float64Array(5), totalVariance: 0 }, 3)],
    ['shape', () => partRelations({ matrix: new Float64Array(4).fill(NaN), totalVariance: 0 }, 2)],
    ['bad-parameter', () => partRelations(variation(FOUR_ROWS, 3), 3, -1)],
    ['shape', () => linkParts(new Float64Array(5), 3)],
    ['too-few-parts', () => linkParts(new Float64Array(1), 1)],
  ] as const)('refuses with %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });
});

describe('linkParts', () => {
  it('of seven metals joins as average linkage does (scipy 1.17.1, linkage "average")', () => {
    const { merges, order } = linkParts(juraVariation.matrix, 7);
    const joined = merges.map(({ above, below }) => [...above, ...below].sort());
    expect(joined).toEqual([
      [2, 6],
      [1, 4],
      [1, 2, 4, 6],
      [3, 5],
      [0, 1, 2, 4, 6],
      [0, 1, 2, 3, 4, 5, 6],
    ]);
    [0.07850242, 0.08351137, 0.12753293, 0.22726482, 0.31839056, 0.41243713].forEach((height, i) =>
      expect(merges[i]!.height).toBeCloseTo(height, 7),
    );
    expect([...order].sort()).toEqual([0, 1, 2, 3, 4, 5, 6]);
  });

  it('gives signs that make an orthonormal basis', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 2, max: 9 }),
        fc.integer({ min: 1, max: 99 }),
        (nParts, seed) => {
          const { signs } = linkParts(variation(madeUp(20, nParts, seed), nParts).matrix, nParts);
          expect(signs).toHaveLength(nParts - 1);
          expect(balanceBasis(signs).nParts).toBe(nParts);
          expect(signs[0]).not.toContain(0);
        },
      ),
      { numRuns: 30 },
    );
  });
});

describe('balance', () => {
  it('of {1, 2 | 3} in (10, 30, 60) is -1.014459 (computed: python)', () => {
    const columns = [10, 30, 60].map((value) => Float64Array.of(value));
    expect(balance(columns, [0, 1], [2])[0]).toBeCloseTo(-1.014459, 6);
    expect(balance(columns, [2], [0, 1])[0]).toBeCloseTo(1.014459, 6);
  });

  it('is the coordinate of the basis of its partition, in any scale of the rows', () => {
    const columns = toColumns(jura);
    const signs = partitionSigns(
      ['Cd', 'Co', 'Cr', 'Cu', 'Ni', 'Pb', 'Zn'],
      [
        { above: ['Cu', 'Pb'], below: ['Cd', 'Zn', 'Co', 'Cr', 'Ni'] },
        { above: ['Cu'], below: ['Pb'] },
        { above: ['Co', 'Ni', 'Cr'], below: ['Zn', 'Cd'] },
        { above: ['Cd'], below: ['Zn'] },
        { above: ['Cr'], below: ['Ni', 'Co'] },
        { above: ['Co'], below: ['Ni'] },
      ],
    );
    const coordinates = isometricLogRatio(jura.values, balanceBasis(signs));
    const scaled = columns.map((column) => column.map((value, row) => value * (1 + (row % 3))));
    const first = balance(scaled, [3, 5], [0, 6, 1, 2, 4]);
    first.forEach((value, row) => expect(value).toBeCloseTo(coordinates[6 * row]!, 9));
  });

  it('is missing where one of its parts is, and only there', () => {
    const columns = [Float64Array.of(1, 2), Float64Array.of(NaN, 2), Float64Array.of(1, NaN)];
    expect([...balance(columns, [0], [1])]).toEqual([NaN, 0]);
  });

  it.each([
    ['too-few-parts', [[1]], [0], [1]],
    ['shape', [[1], [1, 2]], [0], [1]],
    ['bad-parameter', [[1], [1]], [], [1]],
    ['bad-parameter', [[1], [1]], [0], [0]],
    ['bad-parameter', [[1], [1]], [0], [2]],
    ['not-positive', [[1], [0]], [0], [1]],
    ['not-positive', [[1], [Infinity]], [0], [1]],
  ] as const)('refuses with %s: %j, %j against %j', (code, columns, above, below) => {
    const parts = columns.map((column) => Float64Array.from(column));
    expect(() => balance(parts, above, below)).toThrow(expect.objectContaining({ code }));
  });
});

describe('partitionSigns', () => {
  const parts = ['Cu', 'S', 'Fe'];
  const first = { above: ['Cu'], below: ['S', 'Fe'] };

  it('writes signs in the order of the parts', () => {
    expect(partitionSigns(parts, [first, { above: ['Fe'], below: ['S'] }])).toEqual([
      [1, -1, -1],
      [0, -1, 1],
    ]);
  });

  it.each([
    [0, [{ above: ['Cu'], below: ['S', 'Zn'] }]],
    [0, [{ above: [], below: ['Cu', 'S', 'Fe'] }]],
    [0, [{ above: ['Cu'], below: ['S'] }]],
    [0, [{ above: ['Cu', 'Cu'], below: ['S', 'Fe'] }]],
    [1, [first, { above: ['Cu'], below: ['S'] }]],
    [1, [first]],
    [2, [first, { above: ['Fe'], below: ['S'] }, { above: ['Fe'], below: ['S'] }]],
  ])('names split %i, counted from 0, in %j', (step, steps) => {
    expect(() => partitionSigns(parts, steps)).toThrow(
      expect.objectContaining({ code: 'bad-parameter', detail: { step } }),
    );
  });

  it('refuses parts of one name', () => {
    expect(() => partitionSigns(['Cu', 'Cu'], [])).toThrow(
      expect.objectContaining({ code: 'too-few-parts' }),
    );
  });
});
