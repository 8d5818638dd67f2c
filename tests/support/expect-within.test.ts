import { describe, expect, it } from 'vitest';
import { expectWithin, type ReferenceResult } from './expect-within.ts';
import { loadReference, numbersOf, type ReferenceCheck } from './reference.ts';
import { transformedTable } from './reference-transform.ts';

const base = loadReference('jura_prediction').check('jura_prediction.closure');

function checkWith(
  compare: ReferenceCheck['tolerance']['compare'],
  value: ReferenceCheck['value'],
): ReferenceCheck {
  return { ...base, value, tolerance: { compare, abs: 0.01, rel: 0, min_ari: 0.9 } };
}

describe('expectWithin', () => {
  it.each<
    [
      ReferenceCheck['tolerance']['compare'],
      ReferenceCheck['value'],
      ReferenceResult,
      ReferenceResult,
    ]
  >([
    ['close', [1, 2], [1.005, 2], [1.02, 2]],
    ['close', [1, 2], Float64Array.of(1, 2), [1, 2, 3]],
    ['close', { a: 1, b: null }, { a: 1, b: NaN }, { a: 1, b: 0 }],
    ['close', { a: 1 }, { a: 1, b: 2 }, { b: 1 }],
    [
      'close_up_to_column_sign',
      [
        [1, 2],
        [3, 4],
      ],
      [
        [-1, 2],
        [-3, 4],
      ],
      [
        [-1, 2],
        [3, 4],
      ],
    ],
    ['at_most', 5, 5.005, 5.02],
    ['at_least', 5, 4.995, 4.98],
    ['mixture_loglik', { loglik: -10 }, { loglik: -10.005, mu: 3 }, -11],
    ['partition', [1, 1, 2, 2], [7, 7, 3, 3], [1, 2, 1, 2]],
    ['partition_ari_at_least', [1, 1, 2, 2], [2, 2, 1, 1], [1, 1, 1, 2]],
  ])('%s of %j accepts %j and refuses %j', (compare, value, good, bad) => {
    const check = checkWith(compare, value);
    expectWithin(check, good);
    expect(() => expectWithin(check, bad)).toThrow();
  });

  it('compares core points only, and the same noise rows', () => {
    const set = loadReference('jura_prediction');
    const check = set.check('jura_prediction.dbscan.labels');
    const labels = numbersInList(check.value);
    expectWithin(
      check,
      labels.map((label) => label * 4),
    );
    expect(() =>
      expectWithin(
        check,
        labels.map(() => 1),
      ),
    ).toThrow(/noise/);
  });
});

function numbersInList(value: ReferenceCheck['value']): number[] {
  return Array.isArray(value) ? value.map(Number) : [];
}

describe('the reference sets', () => {
  it('drops rows with a missing value in a listed column', () => {
    const meuse = loadReference('meuse');
    expect(numbersOf(meuse, meuse.check('meuse.om.summary'))).toHaveLength(153);
    expect(numbersOf(meuse, meuse.check('meuse.zinc.summary'))).toHaveLength(155);
  });

  it('gives principal scores whose columns are centred', () => {
    const set = loadReference('skye_afm');
    const check = {
      ...set.check('skye_afm.clr'),
      inputs: { columns: ['A', 'F', 'M'], transform: 'pca_clr_cov_scores', components: 2 },
    };
    const { values, nRows, nCols } = transformedTable(set, check);
    expect([nRows, nCols]).toEqual([23, 2]);
    expect(values.reduce((a, b) => a + b, 0)).toBeCloseTo(0, 10);
  });
});
