import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { additiveLogRatio } from '#kernels/compositions/additive-log-ratio.ts';
import {
  aitchisonDistance,
  aitchisonNorm,
  perturb,
  power,
} from '#kernels/compositions/aitchison-geometry.ts';
import { centredLogRatio } from '#kernels/compositions/centred-log-ratio.ts';
import { close } from '#kernels/compositions/closure.ts';
import { balanceBasis, helmertBasis, pivotBasis } from '#kernels/compositions/ilr-basis.ts';
import {
  inverseIsometricLogRatio,
  isometricLogRatio,
} from '#kernels/compositions/isometric-log-ratio.ts';
import { columnsOfTable, requireColumns } from '#kernels/compositions/require-parts.ts';
import {
  compositionalCentre,
  variation,
  variationOfCovariance,
} from '#kernels/compositions/variation.ts';

const x = Float64Array.of(10, 30, 60);
const y = Float64Array.of(20, 20, 60);

function expectClose(found: Float64Array, expected: readonly number[], digits = 6): void {
  expect(found).toHaveLength(expected.length);
  found.forEach((value, i) => expect(value).toBeCloseTo(expected[i]!, digits));
}

describe('worked row (10, 30, 60) (computed: python; clr and pivot also Node)', () => {
  it('clr, pivot, Helmert, alr, balance', () => {
    expectClose(centredLogRatio(x, 3), [-0.963457, 0.135155, 0.828302]);
    // Each part over the exponential of its coordinate is the geometric mean.
    centredLogRatio(x, 3).forEach((value, j) =>
      expect(x[j]! / Math.exp(value)).toBeCloseTo(26.207414, 6),
    );
    expectClose(isometricLogRatio(x, pivotBasis(3)), [-1.179989, -0.490129]);
    expectClose(isometricLogRatio(x, helmertBasis(3)), [-0.776836, -1.014459]);
    expectClose(additiveLogRatio(x, 3), [-1.791759, -0.693147]);
    expectClose(
      isometricLogRatio(
        x,
        balanceBasis([
          [1, 1, -1],
          [1, -1, 0],
        ]),
      ),
      [-1.014459, -0.776836],
    );
  });

  it('isometric norms all 1.277733', () => {
    expect(aitchisonNorm(x)).toBeCloseTo(1.277733, 6);
    for (const basis of [pivotBasis(3), helmertBasis(3)])
      expect(Math.hypot(...isometricLogRatio(x, basis))).toBeCloseTo(1.277733, 6);
  });

  it('pivot basis of three parts (computed)', () => {
    expectClose(pivotBasis(3).vectors, [0.816497, 0, -0.408248, 0.707107, -0.408248, -0.707107]);
  });

  it('distance .785664, perturbation and powering', () => {
    expect(aitchisonDistance(x, y)).toBeCloseTo(0.785664, 6);
    expect(aitchisonDistance(y, x)).toBeCloseTo(0.785664, 6);
    expectClose(perturb(x, y), [0.045455, 0.136364, 0.818182]);
    expectClose(power(x, 0.5), [0.192993, 0.334273, 0.472734]);
    expect(aitchisonNorm(power(x, 0.5))).toBeCloseTo(0.638866, 6);
  });

  it('variation of four rows: .451676, .120642, .118086, total .230135 (computed)', () => {
    const { matrix, totalVariance } = variation(
      Float64Array.of(10, 30, 60, 12, 28, 60, 20, 20, 60, 8, 40, 52),
      3,
    );
    expectClose(matrix, [0, 0.451676, 0.120642, 0.451676, 0, 0.118086, 0.120642, 0.118086, 0]);
    expect(totalVariance).toBeCloseTo(0.230135, 6);
    expectClose(variationOfCovariance(Float64Array.of(2, 1, 1, 3), 2).matrix, [0, 3, 3, 0], 12);
  });
});

const composition = (size: number) =>
  fc
    .array(fc.double({ min: 1e-3, max: 1e6, noNaN: true }), { minLength: size, maxLength: size })
    .map((parts) => Float64Array.from(parts));

describe('invariants', () => {
  it('rescaling a row changes nothing; clr sums to zero', () => {
    fc.assert(
      fc.property(
        composition(5),
        fc.double({ min: 1e-3, max: 1e3, noNaN: true }),
        (parts, factor) => {
          const clr = centredLogRatio(parts, 5);
          expect(clr.reduce((a, b) => a + b, 0)).toBeCloseTo(0, 9);
          centredLogRatio(
            parts.map((value) => value * factor),
            5,
          ).forEach((value, i) => expect(value).toBeCloseTo(clr[i]!, 9));
        },
      ),
    );
  });

  it('every basis keeps distances, and returns to the closed row', () => {
    const bases = [
      pivotBasis(4),
      helmertBasis(4),
      balanceBasis([
        [1, 1, -1, -1],
        [1, -1, 0, 0],
        [0, 0, 1, -1],
      ]),
    ];
    fc.assert(
      fc.property(composition(4), composition(4), (a, b) => {
        const closed = close(a, 4);
        for (const basis of bases) {
          const [za, zb] = [isometricLogRatio(a, basis), isometricLogRatio(b, basis)];
          expect(Math.hypot(...za.map((value, i) => value - zb[i]!))).toBeCloseTo(
            aitchisonDistance(a, b),
            8,
          );
          inverseIsometricLogRatio(za, basis).forEach((value, i) =>
            expect(value).toBeCloseTo(closed[i]!, 9),
          );
        }
      }),
    );
  });

  it('a subcomposition is never further apart than the whole', () => {
    fc.assert(
      fc.property(composition(5), composition(5), (a, b) => {
        expect(aitchisonDistance(a.slice(0, 3), b.slice(0, 3))).toBeLessThanOrEqual(
          aitchisonDistance(a, b) + 1e-9,
        );
      }),
    );
  });

  it('does not overflow far out', () => {
    const far = inverseIsometricLogRatio(Float64Array.of(1500, -1500), pivotBasis(3));
    expect(far.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 12);
    expect(power(x, 2000).every(Number.isFinite)).toBe(true);
  });
});

describe('refusals', () => {
  const tables: [string, (parts: Float64Array, nCols: number) => Float64Array][] = [
    ['closure', close],
    ['clr', centredLogRatio],
    ['alr', additiveLogRatio],
    ['ilr, pivot', (parts, n) => isometricLogRatio(parts, pivotBasis(n))],
    ['ilr, Helmert', (parts, n) => isometricLogRatio(parts, helmertBasis(n))],
  ];
  it.each(tables)('%s refuses broken rows and parts without a logarithm', (_, kernel) => {
    expect(() => kernel(Float64Array.of(1, 2, 3, 4), 3)).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
    for (const bad of [0, -1, NaN, Infinity]) {
      const where = { code: 'not-positive', detail: { row: 1, col: 2 } };
      expect(() => kernel(Float64Array.of(1, 2, 3, 4, 5, bad), 3)).toThrow(
        expect.objectContaining(where),
      );
    }
  });

  it.each([
    ['shape', () => centredLogRatio(Float64Array.of(1), 1)],
    ['shape', () => centredLogRatio(Float64Array.of(1, 2), 2, new Float64Array(3))],
    ['bad-parameter', () => close(x, 3, 0)],
    ['bad-parameter', () => additiveLogRatio(x, 3, 3)],
    ['too-few-parts', () => pivotBasis(1)],
    [
      'bad-parameter',
      () =>
        balanceBasis([
          [1, 1, 1],
          [1, -1, 0],
        ]),
    ],
    [
      'bad-parameter',
      () =>
        balanceBasis([
          [1, -1, 0],
          [0, 1, -1],
        ]),
    ],
    [
      'shape',
      () =>
        balanceBasis([
          [1, -1],
          [1, -1],
        ]),
    ],
    ['shape', () => inverseIsometricLogRatio(Float64Array.of(1, 2, 3), pivotBasis(3))],
    ['not-finite', () => inverseIsometricLogRatio(Float64Array.of(1, NaN), pivotBasis(3))],
    ['shape', () => aitchisonDistance(x, Float64Array.of(1, 2))],
    ['bad-parameter', () => power(x, NaN)],
    ['too-few-rows', () => variation(Float64Array.of(1, 2, 3, 4), 2)],
    ['too-few-rows', () => compositionalCentre(new Float64Array(0), 3)],
    ['too-few-parts', () => requireColumns([x], 2)],
    ['shape', () => requireColumns([x, Float64Array.of(1)], 2)],
    ['shape', () => columnsOfTable(x, 2)],
  ] as const)('%s: %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });

  it('gives constant parts no variation', () => {
    const { matrix, totalVariance } = variation(Float64Array.of(1, 2, 1, 2, 1, 2), 2);
    expect([...matrix, totalVariance]).toEqual([0, 0, 0, 0, 0]);
  });
});

it('centredLogRatio writes where it is told, the table itself included', () => {
  const table = Float64Array.from({ length: 3 * 2000 }, (_, i) => 1 + ((7 * i) % 13));
  const expected = centredLogRatio(table, 3);
  const room = new Float64Array(table.length);
  expect(centredLogRatio(table, 3, room)).toBe(room);
  expect(room).toEqual(expected);
  expect(centredLogRatio(table, 3, table)).toBe(table);
  expect(table).toEqual(expected);
});
