import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { leastSquares } from '#kernels/geomet/least-squares.ts';
import { nonNegativeLeastSquares } from '#kernels/geomet/non-negative-least-squares.ts';
import { normativeMinerals } from '#kernels/geomet/normative-minerals.ts';
import { normativeRange } from '#kernels/geomet/normative-range.ts';

const solve = (rows: number[][], rhs: number[]) =>
  nonNegativeLeastSquares(Float64Array.from(rows.flat()), Float64Array.from(rhs), rows[0]!.length);

describe('non-negative least squares', () => {
  // The two examples of the documentation of scipy.optimize.nnls.
  it.each([
    [[2, 1, 1], [1.5, 1], Math.SQRT1_2],
    [[-1, -1, -1], [0, 0], Math.sqrt(3)],
  ] as const)('b %j: x %j, residual %d', (rhs, x, residual) => {
    const found = solve(
      [
        [1, 0],
        [1, 0],
        [0, 1],
      ],
      [...rhs],
    );
    x.forEach((value, j) => expect(found.x[j]).toBeCloseTo(value, 12));
    expect(found.residualNorm).toBeCloseTo(residual, 12);
  });

  // scipy 1.17.1 on random matrices, two decimals.
  it.each([
    [
      [
        [1.79, 0.44, 0.1, -1.86],
        [-0.28, -0.35, -0.08, -0.63],
        [-0.04, -0.48, -1.31, 0.88],
        [0.88, 1.71, 0.05, -0.4],
        [-0.55, -1.55, 0.98, -1.1],
        [-1.19, -0.21, 1.49, 0.24],
      ],
      [-1.02, -0.71, 0.63, -0.16, -0.77, -0.23],
      [0.22147365706087221, 0, 0, 0.7374799628062485],
      0.2940660079959632,
    ],
    [
      [
        [0.75, 1.98, -1.24, -0.63],
        [-0.8, -2.42, -0.92, -1.02],
        [1.12, -0.13, -1.62, 0.65],
        [-0.36, -1.74, -0.6, -0.59],
        [-0.87, 0.03, -2.25, -0.27],
        [1.01, 0.85, 1.11, 1.12],
      ],
      [1.49, -1.12, 0.85, -1.86, -0.6, -1.91],
      [0, 0.5275126064069342, 0, 0],
      2.809915021352506,
    ],
    [
      [
        [1.05, 1.33, -0.2, 1.77],
        [-0.67, 0.15, 0.15, -1.06],
        [0.44, 1.94, -1.02, 0.9],
        [-0.15, 1.77, 0.48, 0.68],
        [0.64, 0.25, -1.4, 1.39],
        [-1.37, 0.24, 0.61, -0.84],
      ],
      [0.15, 1.17, -0.02, -0.89, -2.92, -0.97],
      [0.5395803126798658, 0, 1.2598745952415824, 0],
      2.852636068285057,
    ],
  ])('matrix %#', (rows, rhs, x, residual) => {
    const found = solve(rows, rhs);
    x.forEach((value, j) => expect(found.x[j]).toBeCloseTo(value, 10));
    expect(found.residualNorm).toBeCloseTo(residual, 10);
  });

  it('meets the conditions of an optimum: x >= 0, gradient <= 0, and 0 where x > 0', () => {
    const value = fc.double({ min: -3, max: 3, noNaN: true });
    const rows = fc.array(fc.tuple(value, value, value, value), { minLength: 4, maxLength: 7 });
    fc.assert(
      fc.property(rows, fc.array(value, { minLength: 7, maxLength: 7 }), (matrix, given) => {
        const rhs = given.slice(0, matrix.length);
        const { x } = solve(matrix, rhs);
        const residual = rhs.map(
          (b, i) => b - matrix[i]!.reduce((sum, a, j) => sum + a * x[j]!, 0),
        );
        x.forEach((amount, j) => {
          const gradient = matrix.reduce((sum, row, i) => sum + row[j]! * residual[i]!, 0);
          expect(amount).toBeGreaterThanOrEqual(0);
          expect(gradient).toBeLessThan(1e-9);
          if (amount > 1e-9) expect(Math.abs(gradient)).toBeLessThan(1e-7);
        });
      }),
    );
  });

  it('answers equal columns and columns of zeros', () => {
    const twins = solve(
      [
        [1, 1],
        [2, 2],
        [0, 0],
      ],
      [1, 2, 5],
    );
    expect(twins.x[0]! + twins.x[1]!).toBeCloseTo(1, 12);
    expect([
      ...solve(
        [
          [0, 0],
          [0, 0],
        ],
        [1, 1],
      ).x,
    ]).toEqual([0, 0]);
    expect([...solve([[1]], [0]).x]).toEqual([0]);
  });

  it('refuses shapes and numbers that are none', () => {
    expect(() => solve([[1, 2]], [1, 2])).toThrow(expect.objectContaining({ code: 'shape' }));
    expect(() => solve([[1]], [NaN])).toThrow(expect.objectContaining({ code: 'not-finite' }));
  });

  it('gives a column that hangs on another 0 in the plain fit', () => {
    const fit = leastSquares(Float64Array.of(1, 2, 1, 2), Float64Array.of(3, 3), 2, [0, 1]);
    expect([...fit]).toEqual([expect.closeTo(3, 12), 0]);
  });
});

const MINERALS = [
  'pyrite',
  'chalcopyrite',
  'muscovite',
  'albite',
  'K-feldspar',
  'clinochlore',
  'chamosite',
  'calcite',
];
const AMOUNTS = [3, 1.5, 20, 25, 10, 4, 3, 5];
/** The rock of those amounts, mass % (computed in python from the 2021 atomic weights). */
const ROCK = {
  Na: 2.19185394,
  Mg: 0.87461237,
  Al: 8.22160429,
  K: 3.36801153,
  Ca: 2.00217813,
  Fe: 3.02705801,
  Cu: 0.51941845,
  S: 2.12757795,
};
const assaysOf = (rock: Record<string, number>, limitPercent = 1e-4) =>
  Object.entries(rock).map(([element, percent]) => ({ element, percent, limitPercent }));

describe('normative minerals', () => {
  it('recovers eight minerals from eight elements, weighted condition 60 (computed in numpy)', () => {
    const fit = normativeMinerals(assaysOf(ROCK), MINERALS);
    AMOUNTS.forEach((amount, j) => expect(fit.percents[j]).toBeCloseTo(amount, 5));
    expect(fit.condition).toBeCloseTo(60.1586, 3);
    expect(fit.residuals.every(({ isPoor }) => !isPoor)).toBe(true);
    expect(fit.unexplainedPercent).toBeCloseTo(28.5, 5);
    expect(fit.misfit).toBeLessThan(1e-6);
  });

  it('S up 10 % and Ca down 10 % (scipy.optimize.nnls 1.17.1)', () => {
    const rock = { ...ROCK, S: ROCK.S * 1.1, Ca: ROCK.Ca * 0.9 };
    const { percents } = normativeMinerals(assaysOf(rock), MINERALS);
    [3.39805815, 1.5, 20.26432264, 25, 9.81529568, 4, 2.52651166, 4.5].forEach((amount, j) =>
      expect(percents[j]).toBeCloseTo(amount, 5),
    );
  });

  it('lets a mineral be absent', () => {
    // scipy.optimize.nnls 1.17.1, errors max(5 %, 0.01 %)
    const rock = { Na: 2, Mg: 0.5, Al: 7, K: 2.5, Ca: 0.3, Fe: 4, Cu: 0.2, S: 5.5 };
    const fit = normativeMinerals(assaysOf(rock, 0.01), MINERALS);
    [
      8.91251315, 0.57756901, 19.96912054, 22.81173895, 3.84251388, 2.28672733, 0, 0.74918409,
    ].forEach((amount, j) => expect(fit.percents[j]).toBeCloseTo(amount, 6));
    expect(fit.misfit).toBeCloseTo(2.5324130465, 8);
    expect(fit.residuals.some(({ isPoor }) => isPoor)).toBe(false);
  });

  it('names the elements it explains badly: sulphur with too little iron for pyrite', () => {
    const { residuals, percents } = normativeMinerals(assaysOf({ Fe: 1, S: 5, Ti: 0.6 }), [
      'pyrite',
      'rutile',
    ]);
    expect(residuals.map(({ isPoor }) => isPoor)).toEqual([true, true, false]);
    expect(residuals[0]!.relative).toBeLessThan(0);
    expect(residuals[1]!.relative).toBeGreaterThan(0);
    expect(percents[1]).toBeCloseTo(0.6 / 0.599349, 4);
  });

  it('does not mind the order of minerals', () => {
    const turned = normativeMinerals(assaysOf(ROCK), [...MINERALS].reverse());
    AMOUNTS.toReversed().forEach((amount, j) => expect(turned.percents[j]).toBeCloseTo(amount, 5));
  });

  it('answers barren rock with nothing', () => {
    const { percents } = normativeMinerals(assaysOf({ Fe: 0, S: 0 }), ['pyrite']);
    expect([...percents]).toEqual([0]);
  });

  it('refuses minerals that cannot be told apart, and names them', () => {
    const refuses = (code: string, run: () => unknown) =>
      expect(run).toThrow(expect.objectContaining({ code }));
    const iron = assaysOf({ Fe: 5, Ti: 1 });
    expect(() => normativeMinerals(iron, ['magnetite', 'hematite'])).toThrow(
      /leave out one of magnetite, hematite/,
    );
    refuses('singular', () => normativeMinerals(iron, ['magnetite', 'hematite']));
    refuses('too-few-parts', () => normativeMinerals(iron, ['magnetite', 'rutile', 'pyrite']));
    refuses('too-few-parts', () => normativeMinerals(iron, []));
    refuses('too-few-parts', () => normativeMinerals(iron, ['rutile', 'rutile']));
    refuses('bad-parameter', () => normativeMinerals(iron, ['fluorite']));
    refuses('bad-parameter', () => normativeMinerals(iron, ['kryptonite']));
    refuses('bad-parameter', () => normativeMinerals(assaysOf({ Fe: -1 }), ['magnetite']));
    refuses('bad-parameter', () => normativeMinerals(assaysOf({ Fe: NaN }), ['magnetite']));
    refuses('bad-parameter', () => normativeMinerals(assaysOf({ Fe: 1 }, 0), ['magnetite']));
    refuses('bad-parameter', () => normativeMinerals(iron, ['rutile'], { relativeError: 0 }));
  });
});

describe('range under assay error', () => {
  const assays = assaysOf(ROCK);

  it('holds the fitted amount, is wider for a worse assay, and is the same for the same seed', () => {
    const ranges = normativeRange(
      assays,
      MINERALS,
      assays.map(() => 0.05),
      { seed: 5 },
    );
    ranges.forEach(({ low, median, high }, j) => {
      expect(low).toBeLessThanOrEqual(median);
      expect(high).toBeGreaterThanOrEqual(median);
      expect(low).toBeLessThanOrEqual(AMOUNTS[j]!);
      expect(high).toBeGreaterThanOrEqual(AMOUNTS[j]!);
    });
    const worse = normativeRange(
      assays,
      MINERALS,
      assays.map(() => 0.15),
      { seed: 5 },
    );
    expect(worse[0]!.high - worse[0]!.low).toBeGreaterThan(ranges[0]!.high - ranges[0]!.low);
    const again = normativeRange(
      assays,
      MINERALS,
      assays.map(() => 0.05),
      { seed: 5 },
    );
    expect(again).toEqual(ranges);
  });

  it('closes up on the fit without error', () => {
    const ranges = normativeRange(
      assays,
      MINERALS,
      assays.map(() => 0),
      { seed: 1, draws: 20 },
    );
    ranges.forEach(({ low, high }, j) => {
      expect(low).toBeCloseTo(AMOUNTS[j]!, 5);
      expect(high).toBeCloseTo(AMOUNTS[j]!, 5);
    });
  });

  it('refuses errors and draws that are none', () => {
    const run = (cvs: number[], draws = 20) =>
      normativeRange(assays, MINERALS, cvs, { seed: 1, draws });
    expect(() => run([0.1])).toThrow('expected 8 errors, found 1');
    expect(() => run(assays.map(() => -0.1))).toThrow(/errors >= 0/);
    expect(() =>
      run(
        assays.map(() => 0.1),
        3,
      ),
    ).toThrow(/20 or more draws/);
  });
});
