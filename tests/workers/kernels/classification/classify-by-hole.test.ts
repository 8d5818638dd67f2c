import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import * as z from 'zod';
import {
  classifyByHole,
  type ClassifyByHoleInput,
} from '#kernels/classification/classify-by-hole.ts';
import { linearDiscriminant } from '#kernels/classification/linear-discriminant.ts';
import { nearestNeighbours } from '#kernels/classification/nearest-neighbours.ts';
import { seededRandom } from '#kernels/random.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import { toColumns, transformedTable } from '#tests/support/reference-transform.ts';
import { loadReference } from '#tests/support/reference.ts';

const table = z.array(z.array(z.number().nullable()));
const Answer = z.object({ confusion: z.array(z.array(z.number())), firstRows: table });
/** Confusion tables from scikit-learn, probabilities as `source` says. */
const expected = z
  .object({ levels: z.array(z.string()), lda: Answer, knn: Answer })
  .parse(
    JSON.parse(
      readFileSync(
        new URL('../../../fixtures/classification/jura_rock.json', import.meta.url),
        'utf8',
      ),
    ),
  );

describe('scikit-learn on published data, groups of 26 rows as holes', () => {
  const set = loadReference('jura_prediction');
  const [check] = set.checksOf('dbscan');
  const columns = toColumns(
    transformedTable(set, {
      ...check!,
      inputs: { columns: ['Cd', 'Co', 'Cr', 'Cu', 'Ni', 'Pb', 'Zn'], transform: 'ilr_pivot_std' },
    }),
  );
  const logged = categoryFrom(
    set.rows.map((row) => (row['Rock'] === 'Portlandian' ? null : (row['Rock'] ?? null))),
  );
  const holeStarts = Int32Array.from([...Array.from({ length: 10 }, (_, h) => 26 * h), 259]);
  it.each([
    ['linear discriminant', linearDiscriminant(columns), expected.lda],
    ['nearest neighbours', nearestNeighbours(columns), expected.knn],
  ] as const)('%s: probabilities, confusion and recall', (_, classifier, answer) => {
    const found = classifyByHole({
      classifier,
      logged,
      holeStarts,
      lengthM: new Float64Array(259).fill(2),
      seed: 1,
    });
    expect(found.levels).toEqual(expected.levels);
    expect([found.folds, found.nUnscored]).toEqual([10, 0]);
    expect([...found.counts]).toEqual(answer.confusion.flat());
    expect([...found.metres]).toEqual(answer.confusion.flat().map((count) => 2 * count));
    answer.firstRows.forEach((row, i) => {
      const most = row[0] === null ? NaN : Math.max(...row.map((value) => value ?? NaN));
      expect(found.probability[i]).toBeCloseTo(most, 4); // the ridge moves the fifth place
    });
    found.recalls.forEach(({ recall, recallByMetres, rows, precision }, c) => {
      const own = answer.confusion[c]!;
      expect(rows).toBe(own.reduce((a, b) => a + b, 0));
      expect(recall).toBeCloseTo(own[c]! / rows, 12);
      expect(recallByMetres).toBeCloseTo(own[c]! / rows, 12);
      expect(precision).toBeCloseTo(
        own[c]! / answer.confusion.reduce((sum, r) => sum + r[c]!, 0),
        12,
      );
    });
  });
});

/** Two squares of rows, spread I/3 within, and a row to ask about. */
const squares = [
  Float64Array.of(0, 1, 0, 1, 3, 4, 3, 4, 1.8, NaN),
  Float64Array.of(0, 0, 1, 1, 3, 3, 4, 4, 1.8, 0),
];
const training = Int32Array.of(0, 1, 2, 3, 4, 5, 6, 7);
const classOf = Int32Array.of(0, 0, 0, 0, 1, 1, 1, 1);

it('has the posterior of the squares, worked by hand', () => {
  // δ² 3 (1.3² + 1.3²) = 10.14 and 3 (1.7² + 1.7²) = 17.34: P = 1 / (1 + exp(-3.6))
  const predict = linearDiscriminant(squares)(training, classOf, 2);
  const answer = predict(Int32Array.of(8, 9));
  expect(answer[0]).toBeCloseTo(0.973403, 5);
  expect(answer[0]! + answer[1]!).toBeCloseTo(1, 12);
  expect([answer[2], answer[3]]).toEqual([NaN, NaN]);
});

it('priors by frequency shift the boundary by the log ratio of the classes', () => {
  const [rows, classes] = [training.slice(0, 6), classOf.slice(0, 6)];
  const odds = (priors: 'equal' | 'frequency') => {
    const [a = NaN, b = NaN] = linearDiscriminant(squares, priors)(rows, classes, 2)(
      Int32Array.of(8),
    );
    return Math.log(a / b);
  };
  expect(odds('frequency') - odds('equal')).toBeCloseTo(Math.log(2), 9);
});

it('neighbours: shares over class frequencies', () => {
  const [rows, classes] = [training.slice(0, 6), classOf.slice(0, 6)];
  const ask = (k: number) => [...nearestNeighbours(squares, k)(rows, classes, 2)(Int32Array.of(8))];
  expect(ask(1)).toEqual([1, 0]);
  expect(ask(99)).toEqual([0.5, 0.5]); // all six answer: 4/4 against 2/2
});

it('a linear change of the coordinates changes no answer', () => {
  const [x = new Float64Array(0), y = new Float64Array(0)] = squares;
  const turned = [x.map((v, i) => 3 * v - 2 * y[i]!), x.map((v, i) => v + 5 * y[i]! + 7)];
  const asked = Int32Array.of(0, 3, 8);
  for (const make of [linearDiscriminant, (c: Float64Array[]) => nearestNeighbours(c, 3)]) {
    const [a, b] = [squares, turned].map((columns) => make(columns)(training, classOf, 2)(asked));
    a!.forEach((p, i) => expect(b![i]).toBeCloseTo(p, 5));
  }
});

/** Twelve holes of ten rows in two codes, 4 apart in the first of two coordinates. */
function drilled(): ClassifyByHoleInput {
  const random = seededRandom(5);
  const codes = Array.from({ length: 120 }, (_, row) => (row % 10 < 4 ? 'MDS' : 'DIO'));
  const columns = [0, 1].map((j) =>
    Float64Array.from(codes, (code) => random.normal() + (j === 0 && code === 'DIO' ? 4 : 0)),
  );
  return {
    classifier: linearDiscriminant(columns),
    logged: categoryFrom(codes),
    holeStarts: Int32Array.from({ length: 13 }, (_, h) => 10 * h),
    lengthM: Float64Array.from(codes, (_, row) => 1 + (row % 2)),
    seed: 1,
  };
}

it('never trains on the hole it scores, and refits the coordinates each time', () => {
  const trained: number[][] = [];
  const columns = [
    Float64Array.from({ length: 120 }, (_, row) => (row % 10) + (row % 10 < 4 ? 0 : 1)),
  ];
  const classifier = linearDiscriminant((rows) => {
    trained.push([...rows]);
    return columns;
  });
  const { given } = classifyByHole({ ...drilled(), classifier });
  expect(trained).toHaveLength(12);
  trained.forEach((rows, hole) => {
    expect(rows).toHaveLength(110);
    expect(rows.some((row) => Math.floor(row / 10) === hole)).toBe(false);
  });
  expect([...given.slice(0, 10)]).toEqual([1, 1, 1, 1, 0, 0, 0, 0, 0, 0]);
});

it('rows without a code or a coordinate are not scored; codes nothing is given keep null', () => {
  const input = drilled();
  const codes = input.logged.codes.slice();
  codes[0] = -1;
  const found = classifyByHole({
    ...input,
    logged: { levels: [...input.logged.levels, 'ZZZ'], codes },
  });
  expect([found.given[0], found.probability[0]]).toEqual([-1, NaN]);
  expect(found.counts.reduce((a, b) => a + b, 0)).toBe(119);
  expect(found.metres.reduce((a, b) => a + b, 0)).toBe(179);
  expect(found.recalls[2]).toEqual({
    level: 'ZZZ',
    rows: 0,
    metres: 0,
    recall: null,
    recallByMetres: null,
    precision: null,
  });
  expect(found.recalls[0]!.recall).toBeGreaterThan(0.9);
  expect(found.agreement.kappa).toBeGreaterThan(0.8);
});

const fit = (columns: Float64Array[], rows = training, classes = classOf, nClasses = 2) =>
  linearDiscriminant(columns)(rows, classes, nClasses);

it.each([
  ['too-few-parts', () => fit([])],
  ['shape', () => fit([squares[0]!, new Float64Array(3)])],
  ['shape', () => fit(squares, training, classOf.slice(1))],
  ['not-finite', () => fit([squares[0]!.map((v, i) => (i === 2 ? Infinity : v))])],
  ['bad-parameter', () => fit(squares, Int32Array.of(0, 99), Int32Array.of(0, 1))],
  [
    'bad-parameter',
    () =>
      fit(
        squares,
        training,
        classOf.map((c) => 2 * c),
      ),
  ],
  ['too-few-rows', () => fit(squares, training, classOf, 3)],
  ['too-few-rows', () => fit(squares, Int32Array.of(0, 4), Int32Array.of(0, 1))],
  ['singular', () => fit([Float64Array.from({ length: 10 }, (_, i) => (i < 4 ? -0 : 1))])],
  ['bad-parameter', () => nearestNeighbours(squares, 0)],
  ['bad-parameter', () => nearestNeighbours(squares, NaN)],
  ['bad-parameter', () => classifyByHole({ ...drilled(), lengthM: new Float64Array(120) })],
  ['shape', () => classifyByHole({ ...drilled(), lengthM: new Float64Array(3).fill(1) })],
  ['too-few-groups', () => classifyByHole({ ...drilled(), holeStarts: Int32Array.of(0, 120) })],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});

it('a column that repeats another stays invertible by the ridge', () => {
  const [x = new Float64Array(0)] = squares;
  const answer = fit([x, x])(Int32Array.of(8));
  expect(answer[0]).toBeGreaterThan(0.5);
  expect(answer.every(Number.isFinite)).toBe(true);
});
