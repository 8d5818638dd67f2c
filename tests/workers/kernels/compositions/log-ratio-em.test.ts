import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { inverseOfCovariance } from '#kernels/compositions/covariance-inverse.ts';
import { replaceByLogRatioEm } from '#kernels/compositions/log-ratio-em.ts';
import { VALUE_STATE } from '#kernels/compositions/replacement.ts';
import { seededRandom } from '#kernels/random.ts';

const { measured, below, missing } = VALUE_STATE;

const A = Float64Array.of(2, 3.1, 1.4, 5, 1, 1, 2.4, 1.1, 4.1, 1);
const B = Float64Array.of(50, 70, 40, 95, 30, 25, 60, 33, 90, 45);
const C = Float64Array.of(1000, 1100, 900, 1000, 1050, 980, 950, 1020, 1200, 1000);
const A_STATES = Uint8Array.of(0, 0, 0, 0, 1, 1, 0, 0, 0, 1);
const ALL = new Uint8Array(10);

/** Correlated lognormal parts; those under a limit of the first parts become below it. */
function censored(nRows: number, nParts: number, nCensored: number, seed: number) {
  const random = seededRandom(seed);
  const columns = Array.from({ length: nParts }, () => new Float64Array(nRows));
  const states = columns.map(() => new Uint8Array(nRows));
  for (let row = 0; row < nRows; row++) {
    const factor = random.normal();
    columns.forEach((column, j) => {
      const value = Math.exp(factor * Math.cos(j) + 0.5 * random.normal());
      const isBelow = j < nCensored && value < 0.6;
      column[row] = isBelow ? 0.6 : value;
      states[j]![row] = isBelow ? below : measured;
    });
  }
  return { columns, states };
}

describe('replaceByLogRatioEm', () => {
  it('replaces three values of ten rows (computed: numpy, to 1e-12)', () => {
    const found = replaceByLogRatioEm([C, A, B], [ALL, A_STATES, ALL], { tolerance: 1e-12 });
    const replaced = [4, 5, 9].map((row) => found.columns[1]![row]!);
    [0.735975, 0.587516, 0.9346].forEach((value, i) => expect(replaced[i]).toBeCloseTo(value, 6));
    expect(found.denominator).toBe(0);
    expect(found.mean[0]).toBeCloseTo(-6.400074, 6);
    expect(found.mean[1]).toBeCloseTo(-3.032625, 6);
    const [aa = 0, ab = 0, , bb = 0] = found.covariance;
    expect(ab / bb).toBeCloseTo(1.600396, 5);
    expect(Math.sqrt(aa - (ab * ab) / bb)).toBeCloseTo(0.18787, 5);
    expect(found.iterations).toBeGreaterThan(40);
    expect(found.iterations).toBeLessThan(52);
    expect(found).toMatchObject({ nReplaced: 3, notes: [] });
    expect([...found.isReplaced[1]!]).toEqual([...A_STATES]);
  });

  it('stopped at a change of 1e-4 is short of that after 12 iterations: .735786 (computed: numpy)', () => {
    const found = replaceByLogRatioEm([C, A, B], [ALL, A_STATES, ALL], { tolerance: 1e-4 });
    expect(found.iterations).toBe(12);
    expect(found.columns[1]![4]).toBeCloseTo(0.735786, 6);
  });

  it('gives the same values with another part as denominator', () => {
    const byC = replaceByLogRatioEm([C, A, B], [ALL, A_STATES, ALL], { tolerance: 1e-12 });
    const byB = replaceByLogRatioEm([B, A, C], [ALL, A_STATES, ALL], { tolerance: 1e-12 });
    byC.columns[1]!.forEach((value, row) => expect(byB.columns[1]![row]).toBeCloseTo(value, 8));
  });

  it('returns observed values as they were and every replacement under its limit', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 3, max: 6 }),
        fc.integer({ min: 1, max: 1000 }),
        (nParts, seed) => {
          const { columns, states } = censored(60, nParts, nParts - 1, seed);
          const found = replaceByLogRatioEm(columns, states, {
            tolerance: 1e-6,
            maxIterations: 2000,
          });
          columns.forEach((column, part) =>
            column.forEach((value, row) => {
              const result = found.columns[part]![row]!;
              if (states[part]![row] === below) {
                expect(result).toBeGreaterThan(0);
                expect(result).toBeLessThan(value);
              } else expect(result).toBe(value);
            }),
          );
        },
      ),
      { numRuns: 20 },
    );
  });

  it('follows the other parts: nearer to the truth than a share of the limit', () => {
    const { columns, states } = censored(400, 5, 0, 3);
    const truth = columns[0]!.slice();
    const limit = 0.8;
    states[0] = Uint8Array.from(truth, (value) => (value < limit ? below : measured));
    columns[0] = truth.map((value) => Math.max(value, limit));
    const found = replaceByLogRatioEm(columns, states).columns[0]!;
    const errorOf = (valueAt: (row: number) => number) =>
      truth.reduce(
        (sum, value, row) =>
          value < limit ? sum + (Math.log(valueAt(row)) - Math.log(value)) ** 2 : sum,
        0,
      );
    expect(errorOf((row) => found[row]!)).toBeLessThan(0.8 * errorOf(() => 0.65 * limit));
  });

  it('without values below detection gives the input and its moments', () => {
    const found = replaceByLogRatioEm([C, A, B], [ALL, ALL, ALL]);
    expect(found.columns.map((column) => [...column])).toEqual([[...C], [...A], [...B]]);
    expect(found).toMatchObject({ iterations: 0, nReplaced: 0 });
    const mean = A.reduce((sum, value, row) => sum + Math.log(value / C[row]!), 0) / 10;
    expect(found.mean[0]).toBeCloseTo(mean, 12);
  });

  it('leaves rows that miss a part out, and says so', () => {
    const b = B.slice();
    b[5] = NaN;
    const bStates = ALL.slice();
    bStates[5] = missing;
    const found = replaceByLogRatioEm([C, A, b], [ALL, A_STATES, bStates]);
    expect(found.columns[1]![5]).toBeNaN();
    expect(found.columns[2]![5]).toBeNaN();
    expect(found.columns[0]![5]).toBe(980);
    expect(found.nReplaced).toBe(2);
    expect(found.notes).toEqual([expect.stringContaining('1 rows miss a part')]);
  });

  it('does not depend on the unit of the rows', () => {
    const found = replaceByLogRatioEm([C, A, B], [ALL, A_STATES, ALL]);
    const scaled = [C, A, B].map((column) => column.map((value) => value * 10_000));
    const again = replaceByLogRatioEm(scaled, [ALL, A_STATES, ALL]);
    found.columns[1]!.forEach((value, row) =>
      expect(again.columns[1]![row]! / value).toBeCloseTo(10_000, 6),
    );
  });

  it.each([
    ['too-few-parts', [A, B], [ALL, ALL], {}],
    ['shape', [A, B, C], [ALL, ALL], {}],
    ['shape', [A, B, C], [ALL, ALL, new Uint8Array(9)], {}],
    [
      'too-few-rows',
      [A, B, C].map((x) => x.subarray(0, 8)),
      [ALL, ALL, ALL].map((x) => x.subarray(0, 8)),
      {},
    ],
    ['no-denominator', [A, B, C], [A_STATES, A_STATES, A_STATES], {}],
    ['not-positive', [A, B, C.map(() => -0)], [A_STATES, ALL, ALL], {}],
    ['not-positive', [A, B, C.map(() => Infinity)], [A_STATES, ALL, ALL], {}],
    ['not-positive', [A.map(() => NaN), B, C], [A_STATES, ALL, ALL], {}],
    ['bad-parameter', [A, B, C], [A_STATES, ALL, ALL], { tolerance: 0 }],
    ['bad-parameter', [A, B, C], [A_STATES, ALL, ALL], { maxIterations: 0 }],
    ['not-converged', [A, B, C], [A_STATES, ALL, ALL], { maxIterations: 1 }],
  ] as const)('refuses with %s', (code, columns, states, options) => {
    expect(() => replaceByLogRatioEm(columns, states, options)).toThrow(
      expect.objectContaining({ code }),
    );
  });

  it('stops early with a note when the last change is small', () => {
    const found = replaceByLogRatioEm([C, A, B], [ALL, A_STATES, ALL], { maxIterations: 20 });
    expect(found.notes).toEqual([expect.stringContaining('stopped after 20 iterations')]);
  });

  it('stops when the progress report throws', () => {
    const onProgress = () => {
      throw new Error('cancelled');
    };
    expect(() => replaceByLogRatioEm([C, A, B], [ALL, A_STATES, ALL], { onProgress })).toThrow(
      'cancelled',
    );
  });
});

describe('inverseOfCovariance', () => {
  it('inverts by hand, and steadies what is singular', () => {
    const { matrix, isRidged } = inverseOfCovariance(Float64Array.of(2, 1, 1, 1), 2);
    [1, -1, -1, 2].forEach((value, i) => expect(matrix[i]).toBeCloseTo(value, 12));
    expect(isRidged).toBe(false);
    expect(inverseOfCovariance(Float64Array.of(1, 1, 1, 1), 2).isRidged).toBe(true);
  });

  it.each([
    [0, 0, 0, 0],
    [NaN, 0, 0, 1],
    [1, 5, 5, 1],
  ])('refuses %j', (...values) => {
    expect(() => inverseOfCovariance(Float64Array.from(values), 2)).toThrow(
      expect.objectContaining({ code: 'singular' }),
    );
  });
});
