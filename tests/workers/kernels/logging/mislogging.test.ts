import { describe, expect, it } from 'vitest';
import { agreementOf } from '#kernels/logging/confusion.ts';
import { crossValidate, type FitClassifier } from '#kernels/logging/cross-validate.ts';
import { holeFolds } from '#kernels/logging/hole-folds.ts';
import { suspectMislogging } from '#kernels/logging/mislogging.ts';
import { seededRandom } from '#kernels/random.ts';
import { categoryFrom } from '#kernels/tables/category.ts';

/** Normal classes of one spread about their training means: enough of a classifier to test with. */
const byMeans =
  (values: Float64Array, sharpness = 1): FitClassifier =>
  (rows, classOf, nClasses) => {
    const means = Array.from({ length: nClasses }, (_, k) => {
      const own = [...rows].filter((_row, i) => classOf[i] === k);
      return own.reduce((sum, row) => sum + values[row]! / own.length, 0);
    });
    return (asked) =>
      Float64Array.from(
        [...asked].flatMap((row) => {
          const weights = means.map((mean) =>
            Math.exp(-0.5 * sharpness * (values[row]! - mean) ** 2),
          );
          const total = weights.reduce((a, b) => a + b, 0);
          return weights.map((weight) => weight / total);
        }),
      );
  };

describe('agreement', () => {
  it('[[40,5],[10,45]]: kappa .70, balanced accuracy .853535 (computed)', () => {
    const found = agreementOf(Float64Array.of(40, 5, 10, 45), 2);
    expect(found.kappa).toBeCloseTo(0.7, 12);
    expect(found.balancedAccuracy).toBeCloseTo(0.853535, 6);
    expect(found.accuracy).toBeCloseTo(0.85, 12);
  });

  it('has no kappa when one class is all there is', () => {
    expect(agreementOf(Float64Array.of(5, 0, 0, 0), 2)).toEqual({
      accuracy: 1,
      balancedAccuracy: 1,
      kappa: null,
    });
  });
});

describe('folds', () => {
  it('leave holes out one by one up to 30, and deal more out to 10', () => {
    const few = holeFolds(Int32Array.of(0, 2, 2, 5), 1);
    expect(few.folds).toBe(2);
    expect([...few.foldOf]).toEqual([0, 0, 1, 1, 1]);
    const starts = Int32Array.from({ length: 32 }, (_, hole) => 3 * hole);
    const many = holeFolds(starts, 1);
    expect(many.folds).toBe(10);
    for (let row = 0; row < 93; row += 3)
      expect(new Set(many.foldOf.slice(row, row + 3)).size).toBe(1);
    expect(holeFolds(starts, 1)).toEqual(many);
    expect([...holeFolds(starts, 2).foldOf]).not.toEqual([...many.foldOf]);
  });
});

/** Six holes of 40 metres: A above, B below at 20 m; in the first hole rows 5 to 9 of A are B rock. */
function deposit() {
  const random = seededRandom(2);
  const n = 240;
  const rows = Array.from({ length: n }, (_, i) => i);
  const isB = rows.map((i) => i % 40 >= 20);
  const isMislogged = (i: number) => i >= 5 && i <= 9;
  const values = Float64Array.from(
    rows,
    (i) => (isB[i] !== isMislogged(i) ? 8 : 0) + random.normal(),
  );
  return {
    values,
    intervals: {
      holeStarts: Int32Array.from({ length: 7 }, (_, hole) => 40 * hole),
      fromM: Float64Array.from(rows, (i) => i % 40),
      toM: Float64Array.from(rows, (i) => (i % 40) + 1),
    },
    logged: categoryFrom(isB.map((b) => (b ? 'B' : 'A'))),
  };
}

describe('cross-validation', () => {
  const { values, intervals, logged } = deposit();

  it('never trains on the hole it scores', () => {
    const seen: [number[], number[]][] = [];
    const watching: FitClassifier = (rows, classOf, k) => (asked) => {
      seen.push([[...rows], [...asked]]);
      return byMeans(values)(rows, classOf, k)(asked);
    };
    const found = crossValidate(watching, logged.codes, 2, intervals.holeStarts, { seed: 1 });
    expect(seen).toHaveLength(6);
    const holeOf = (row: number) => Math.floor(row / 40);
    for (const [training, asked] of seen) {
      const held = new Set(asked.map(holeOf));
      expect(held.size).toBe(1);
      expect(training.some((row) => held.has(holeOf(row)))).toBe(false);
      expect(training.length + asked.length).toBe(240);
    }
    expect(found).toMatchObject({ nUnscored: 0, folds: 6 });
  });

  it('leaves rows unscored whose class is in one hole only, or that a classifier cannot score', () => {
    const classOf = logged.codes.map((code, row) => (row < 10 ? 2 : row === 50 ? -1 : code));
    const found = crossValidate(byMeans(values), classOf, 3, intervals.holeStarts, { seed: 1 });
    expect(found.nUnscored).toBe(10);
    expect(found.probabilities[3 * 5]).toBeNaN();
    expect(found.probabilities[3 * 50]).toBeNaN();
    // class 2 stays possible where the first hole is trained on
    const total = found.probabilities.subarray(3 * 100, 3 * 101).reduce((a, b) => a + b, 0);
    expect(total).toBeCloseTo(1, 12);
    const blind: FitClassifier = (_rows, _classOf, k) => (asked) =>
      new Float64Array(asked.length * k).fill(NaN);
    expect(crossValidate(blind, logged.codes, 2, intervals.holeStarts, { seed: 1 }).nUnscored).toBe(
      240,
    );
  });
});

describe('suspected mislogging', () => {
  const { values, intervals, logged } = deposit();
  const pair = new Map([
    ['sharp', byMeans(values)],
    ['blunt', byMeans(values, 0.5)],
  ]);
  const found = suspectMislogging(intervals, logged, pair, { seed: 1 });

  it('flags the rows put under the wrong code, as a question', () => {
    expect(found.flags).toHaveLength(1);
    expect(found.flags[0]).toMatchObject({
      hole: 0,
      first: 5,
      last: 9,
      fromM: 5,
      toM: 10,
      logged: 'A',
      suggested: 'B',
    });
    expect(found.flags[0]?.loggedAtMost).toBeLessThan(0.05);
    expect(found.flags[0]?.suggestedAtLeast).toBeGreaterThan(0.8);
  });

  it('reports the table of logged against likeliest in rows and metres', () => {
    const [report] = found.reports;
    expect([...(report?.counts ?? [])]).toEqual([115, 5, 0, 120]);
    expect([...(report?.metres ?? [])]).toEqual([115, 5, 0, 120]);
    expect(report?.agreement.kappa).toBeGreaterThan(0.9);
  });

  it('flags neither a single row nor rows that touch a contact, nor where one classifier differs', () => {
    const flagsOf = (wrong: (row: number) => boolean, second = 1) => {
      const shifted = values.map((v, row) => (row < 40 && row < 20 ? (wrong(row) ? 8 : 0) : v));
      const both = new Map([
        ['a', byMeans(shifted)],
        ['b', byMeans(second ? shifted : values)],
      ]);
      return suspectMislogging(intervals, logged, both, { seed: 1 }).flags.map(
        ({ first, last }) => [first, last],
      );
    };
    expect(flagsOf((row) => row === 7)).toEqual([]);
    expect(flagsOf((row) => row >= 18)).toEqual([]);
    expect(flagsOf((row) => row >= 16)).toEqual([[16, 18]]);
    expect(flagsOf((row) => row >= 12 && row <= 14, 0)).toEqual([]);
  });

  it('shows no flag where the codes are not chemical units', () => {
    const random = seededRandom(9);
    const noise = values.map(() => random.normal());
    const weak = suspectMislogging(
      intervals,
      logged,
      new Map([['noise', byMeans(noise)], ...pair]),
      { seed: 1 },
    );
    expect(weak.flags).toEqual([]);
    expect(weak.notes[0]).toContain('not chemical units');
  });

  it('leaves out codes with few rows or holes and says so', () => {
    const rare = categoryFrom(
      logged.codes.length
        ? [...logged.codes].map((c, row) => (row >= 236 ? 'C' : c ? 'B' : 'A'))
        : [],
    );
    const result = suspectMislogging(intervals, rare, pair, { seed: 1 });
    expect(result.leftOut).toEqual([{ level: 'C', rows: 4, holes: 1 }]);
    expect(result.notes).toEqual(['C is left out: 4 rows in 1 holes.']);
    expect(result.flags).toHaveLength(1);
  });
});

const { values, intervals, logged } = deposit();
const one = new Map([['a', byMeans(values)]]);
const wrongSize: FitClassifier = () => () => new Float64Array(1);
it.each([
  [
    'bad-parameter',
    () => suspectMislogging(intervals, logged, new Map<string, FitClassifier>(), { seed: 1 }),
  ],
  [
    'too-few-groups',
    () =>
      suspectMislogging(intervals, categoryFrom(Array.from(values, () => 'A')), one, { seed: 1 }),
  ],
  ['shape', () => suspectMislogging(intervals, categoryFrom(['A']), one, { seed: 1 })],
  ['shape', () => suspectMislogging(intervals, logged, new Map([['a', wrongSize]]), { seed: 1 })],
  [
    'shape',
    () => crossValidate(byMeans(values), new Int32Array(3), 2, intervals.holeStarts, { seed: 1 }),
  ],
  [
    'too-few-groups',
    () => crossValidate(byMeans(values), logged.codes, 2, Int32Array.of(0, 240), { seed: 1 }),
  ],
  ['shape', () => agreementOf(new Float64Array(3), 2)],
  ['too-few-rows', () => agreementOf(new Float64Array(4), 2)],
  ['bad-parameter', () => agreementOf(Float64Array.of(1, -1, 0, 0), 2)],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
