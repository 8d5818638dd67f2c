import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { biplot } from '#kernels/components/biplot.ts';
import { componentsOfMoments, fitComponents } from '#kernels/components/components.ts';
import {
  combineLogMoments,
  logMoments,
  logMomentsOfSpan,
  SPAN_ROWS,
} from '#kernels/components/log-moments.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import { centredLogRatio } from '#kernels/compositions/centred-log-ratio.ts';
import { columnsOfTable } from '#kernels/compositions/require-parts.ts';
import { variation } from '#kernels/compositions/variation.ts';
import { seededRandom } from '#kernels/random.ts';

const FOUR_ROWS = Float64Array.of(10, 30, 60, 12, 28, 60, 20, 20, 60, 8, 40, 52);

function rowsOf(values: Float64Array, nCols: number): number[][] {
  return Array.from({ length: values.length / nCols }, (_, row) => [
    ...values.subarray(row * nCols, (row + 1) * nCols),
  ]);
}

/** Correlated lognormal parts, the same for the same seed. */
function madeUpColumns(nRows: number, nParts: number, seed: number): Float64Array[] {
  const random = seededRandom(seed);
  const columns = Array.from({ length: nParts }, () => new Float64Array(nRows));
  for (let row = 0; row < nRows; row++) {
    const [a, b] = [random.normal(), random.normal()];
    columns.forEach(
      (column, j) =>
        (column[row] = Math.exp(j + a * Math.sin(j) + b * Math.cos(3 * j) + 0.3 * random.normal())),
    );
  }
  return columns;
}

describe('components', () => {
  it('of four rows: .225840, .004294, loadings and signs (computed: python)', () => {
    const { eigenvalues, shares, loadings, notes } = fitComponents(columnsOfTable(FOUR_ROWS, 3));
    expect([...eigenvalues].map((value) => Number(value.toFixed(6)))).toEqual([0.22584, 0.004294]);
    expect(100 * shares[0]!).toBeCloseTo(98.134, 3);
    const expected = [0.708462, -0.405892, -0.705743, -0.410601, -0.002719, 0.816492];
    expected.forEach((value, i) => expect(loadings[i]).toBeCloseTo(value, 6));
    expect(notes).toEqual([]);
  });

  it('has loadings that sum to zero per component, orthonormal, the largest positive', () => {
    const { loadings, eigenvalues } = fitComponents(madeUpColumns(500, 9, 4));
    const rows = rowsOf(loadings, eigenvalues.length);
    eigenvalues.forEach((_, k) => {
      const column = rows.map((row) => row[k]!);
      expect(column.reduce((a, b) => a + b, 0)).toBeCloseTo(0, 12);
      expect(Math.max(...column)).toBeGreaterThanOrEqual(-Math.min(...column) - 1e-12);
      eigenvalues.forEach((__, l) => {
        const product = column.reduce((sum, value, part) => sum + value * rows[part]![l]!, 0);
        expect(product).toBeCloseTo(k === l ? 1 : 0, 9);
      });
    });
  });

  it('gives scores whose variances are the eigenvalues, and rescaled rows the same scores', () => {
    const columns = madeUpColumns(3000, 7, 8);
    const components = fitComponents(columns);
    const scores = scoreComponents(columns, components, 6);
    scores.forEach((score, k) => {
      const mean = score.reduce((a, b) => a + b, 0) / 3000;
      const variance = score.reduce((sum, value) => sum + (value - mean) ** 2, 0) / 2999;
      expect(mean).toBeCloseTo(0, 9);
      expect(variance / components.eigenvalues[k]!).toBeCloseTo(1, 9);
    });
    const scaled = columns.map((column) => column.map((value, row) => value * (1 + (row % 5))));
    scoreComponents(scaled, components, 6).forEach((score, k) =>
      expect(score[77]).toBeCloseTo(scores[k]![77]!, 9),
    );
  });

  it('gives centred clr back from all scores and loadings', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 3, max: 9 }),
        fc.integer({ min: 4, max: 40 }),
        fc.integer({ min: 1, max: 1000 }),
        (nParts, nRows, seed) => {
          const columns = madeUpColumns(nRows, nParts, seed);
          const components = fitComponents(columns);
          const rank = components.eigenvalues.length;
          const scores = scoreComponents(columns, components, rank);
          const clr = centredLogRatio(
            Float64Array.from(
              { length: nRows * nParts },
              (_, i) => columns[i % nParts]![Math.floor(i / nParts)]!,
            ),
            nParts,
          );
          const centre = components.logMean.reduce((a, b) => a + b, 0) / nParts;
          // A component dropped as noise has λ <= 1e-12 p λ1, and no score beyond √((n - 1) λ).
          const dropped = (nParts - 1 - rank) * 1e-12 * nParts * components.eigenvalues[0]!;
          const tolerance = 1e-9 + Math.sqrt((nRows - 1) * dropped);
          for (let i = 0; i < clr.length; i++) {
            const [row, part] = [Math.floor(i / nParts), i % nParts];
            const back = scores.reduce(
              (sum, score, k) => sum + score[row]! * components.loadings[part * rank + k]!,
              0,
            );
            const centred = clr[i]! - (components.logMean[part]! - centre);
            expect(Math.abs(back - centred)).toBeLessThanOrEqual(tolerance);
          }
        },
      ),
      { numRuns: 200, examples: [[7, 7, 3]] },
    );
  });

  it('uses masked rows only, wherever the others hold', () => {
    const columns = madeUpColumns(900, 5, 2);
    const mask = Uint8Array.from({ length: 900 }, (_, row) => (row % 3 === 0 ? 0 : 1 + (row % 2)));
    const kept = columns.map((column) => column.filter((_, row) => mask[row] !== 0));
    columns.forEach((column, j) =>
      column.forEach((_, row) => mask[row] === 0 && (column[row] = j === 0 ? NaN : -1)),
    );
    const [masked, plain] = [fitComponents(columns, { mask }), fitComponents(kept)];
    expect(masked.nRows).toBe(600);
    masked.eigenvalues.forEach((value, k) => expect(value).toBeCloseTo(plain.eigenvalues[k]!, 10));
    const [first = new Float64Array(0)] = scoreComponents(columns, masked, 2, { mask });
    expect(first[0]).toBeNaN();
    expect(first[1]).toBeCloseTo(scoreComponents(kept, masked, 1)[0]![0]!, 12);
  });

  it('writes into shared memory and into a part of the rows', () => {
    const shared = madeUpColumns(1000, 4, 5).map((column) => {
      const copy = new Float64Array(new SharedArrayBuffer(8 * column.length));
      copy.set(column);
      return copy;
    });
    const components = fitComponents(shared);
    const whole = scoreComponents(shared, components, 3);
    const out = whole.map(() => new Float64Array(new SharedArrayBuffer(8000)));
    scoreComponents(shared, components, 3, { out, from: 0, to: 300 });
    scoreComponents(shared, components, 3, { out, from: 300, to: 1000 });
    expect(out.map((score) => [...score])).toEqual(whole.map((score) => [...score]));
  });

  it('does not depend on who sums which span', () => {
    const columns = madeUpColumns(SPAN_ROWS + 5000, 6, 3);
    const apart = [1, 0].map((span) => logMomentsOfSpan(columns, span)).reverse();
    const together = logMoments(columns);
    expect(combineLogMoments(6, apart)).toEqual(together);
    expect(componentsOfMoments(together).nRows).toBe(SPAN_ROWS + 5000);
  });

  it('keeps its figures for parts with a large mean and little spread', () => {
    const random = seededRandom(6);
    const columns = Array.from({ length: 4 }, () =>
      Float64Array.from({ length: 9000 }, () => 1e12 * Math.exp(1e-5 * random.normal())),
    );
    const { totalVariance } = variation(
      Float64Array.from({ length: 36_000 }, (_, i) => columns[i % 4]![Math.floor(i / 4)]!),
      4,
    );
    const total = fitComponents(columns).eigenvalues.reduce((a, b) => a + b, 0);
    expect(total / totalVariance).toBeCloseTo(1, 6);
  });

  it('takes logs of the smallest and largest numbers', () => {
    const extremes = [
      5e-324,
      1e-310,
      Number.MIN_VALUE * 3,
      2.2250738585072014e-308,
      1,
      Number.MAX_VALUE,
      0.9999999999999999,
      1.9999999999999998,
    ];
    const columns = [
      Float64Array.from(extremes),
      new Float64Array(8).fill(2),
      new Float64Array(8).fill(3),
    ];
    const mean = extremes.reduce((sum, value) => sum + Math.log(value), 0) / 8;
    expect(logMoments(columns).mean[0]).toBeCloseTo(mean, 10);
  });

  it('reports progress some hundreds of times at most, and stops when the report throws', () => {
    const columns = madeUpColumns(SPAN_ROWS * 2, 3, 1);
    const shares: number[] = [];
    const components = fitComponents(columns, { onProgress: (share) => shares.push(share) });
    expect(shares.length).toBe(32);
    expect(shares.every((share, i) => share >= (shares[i - 1] ?? 0) && share < 1)).toBe(true);
    const cancel = () => {
      throw new Error('cancelled');
    };
    expect(() => fitComponents(columns, { onProgress: cancel })).toThrow('cancelled');
    expect(() => scoreComponents(columns, components, 1, { onProgress: cancel })).toThrow(
      'cancelled',
    );
  });

  it('drops components without variance and says so', () => {
    const constantRatio = madeUpColumns(50, 4, 9);
    constantRatio[3] = constantRatio[2]!.map((value) => value * 7);
    const found = fitComponents(constantRatio);
    expect(found.eigenvalues).toHaveLength(2);
    expect(found.notes).toEqual([expect.stringContaining('constant')]);
    const few = fitComponents(madeUpColumns(4, 9, 9));
    expect(few.eigenvalues).toHaveLength(3);
    expect(few.notes).toEqual([expect.stringContaining('4 rows for 9 parts')]);
  });

  const three = () => [
    Float64Array.of(1, 2, 3),
    Float64Array.of(1, 1, 2),
    Float64Array.of(5, 1, 1),
  ];
  it.each([
    ['too-few-parts', () => fitComponents(three().slice(0, 2))],
    ['too-few-rows', () => fitComponents(three().map((column) => column.slice(0, 1)))],
    ['too-few-rows', () => fitComponents(three(), { mask: Uint8Array.of(1, 0, 1) })],
    ['shape', () => fitComponents([...three(), Float64Array.of(1)])],
    ['shape', () => fitComponents(three(), { mask: new Uint8Array(2) })],
    ['singular', () => fitComponents(three().map(() => new Float64Array(3).fill(2)))],
    [
      'singular',
      () => fitComponents([...three(), new Float64Array(3).fill(2)], { basis: 'log-correlation' }),
    ],
    ['shape', () => scoreComponents(three().slice(0, 2), fitComponents(three()), 1)],
    ['bad-parameter', () => scoreComponents(three(), fitComponents(three()), 3)],
    [
      'bad-parameter',
      () => scoreComponents(three(), fitComponents(three()), 1, { from: 2, to: 1 }),
    ],
    [
      'shape',
      () => scoreComponents(three(), fitComponents(three()), 1, { mask: new Uint8Array(1) }),
    ],
    ['shape', () => scoreComponents(three(), fitComponents(three()), 1, { out: [] })],
    ['bad-parameter', () => biplot(fitComponents(three()), 'form', 3)],
  ] as const)('refuses with %s: %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });

  it.each([0, -1, NaN, Infinity])('names the row and part of a value %d', (bad) => {
    const columns = madeUpColumns(700, 3, 1);
    columns[2]![600] = bad;
    const where = { code: 'not-positive', detail: { row: 600, col: 2 } };
    expect(() => fitComponents(columns)).toThrow(expect.objectContaining(where));
    columns[2]![0] = bad;
    expect(() => fitComponents(columns)).toThrow(
      expect.objectContaining({ code: 'not-positive', detail: { row: 0, col: 2 } }),
    );
  });
});

describe('biplot', () => {
  it('full covariance form: squared links are the variation matrix (identity)', () => {
    const components = fitComponents(columnsOfTable(FOUR_ROWS, 3));
    const { parts } = biplot(components, 'covariance', 2);
    const { matrix } = variation(FOUR_ROWS, 3);
    for (const [i, j] of [
      [0, 1],
      [0, 2],
      [1, 2],
    ] as const) {
      const link =
        (parts[2 * i]! - parts[2 * j]!) ** 2 + (parts[2 * i + 1]! - parts[2 * j + 1]!) ** 2;
      expect(link).toBeCloseTo(matrix[3 * i + j]!, 12);
    }
  });

  it('rows times parts give the same product in both forms', () => {
    const columns = madeUpColumns(30, 5, 7);
    const components = fitComponents(columns);
    const scores = scoreComponents(columns, components, 4);
    const product = (scaling: 'form' | 'covariance') => {
      const { parts, rowFactors } = biplot(components, scaling, 4);
      return scores.reduce(
        (sum, score, k) => sum + score[11]! * rowFactors[k]! * parts[4 * 3 + k]!,
        0,
      );
    };
    expect(product('covariance')).toBeCloseTo(product('form'), 12);
  });

  it('covariance form: rays are as long as the sd of clr, rows have unit variance (identity)', () => {
    const columns = madeUpColumns(60, 4, 3);
    const components = fitComponents(columns);
    const { parts, rowFactors } = biplot(components, 'covariance', 3);
    const table = Float64Array.from({ length: 240 }, (_, i) => columns[i % 4]![Math.floor(i / 4)]!);
    const clr = centredLogRatio(table, 4);
    const varianceOf = (values: readonly number[]) => {
      const mean = values.reduce((a, b) => a + b, 0) / values.length;
      return values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1);
    };
    for (let part = 0; part < 4; part++) {
      const ray = parts.subarray(3 * part, 3 * part + 3).reduce((sum, end) => sum + end * end, 0);
      expect(ray).toBeCloseTo(varianceOf([...clr].filter((_, i) => i % 4 === part)), 12);
    }
    scoreComponents(columns, components, 3).forEach((score, k) =>
      expect(varianceOf(Array.from(score, (value) => value * rowFactors[k]!))).toBeCloseTo(1, 12),
    );
  });
});
