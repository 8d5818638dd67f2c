import { describe, expect, it } from 'vitest';
import {
  brokenStick,
  countAbove,
  countAboveMean,
  countForShare,
  suggestCount,
} from '#kernels/components/component-count.ts';
import { mineralReading } from '#kernels/components/mineral-reading.ts';
import { parallelAnalysis } from '#kernels/components/parallel-analysis.ts';
import { seededRandom } from '#kernels/random.ts';

const rounded = (values: readonly number[]) => values.map((value) => Number(value.toFixed(6)));

/** Loadings of two factors that oppose parts, so that clr keeps them whole. */
const FACTORS = [
  [1, 1, -1, -1, 0, 0],
  [1, -1, 0, 0, 1, -1],
];

/** Parts with independent spread, plus planted factors. */
function planted(nRows: number, nParts: number, nFactors: number, seed: number): Float64Array[] {
  const random = seededRandom(seed);
  const columns = Array.from({ length: nParts }, () => new Float64Array(nRows));
  for (let row = 0; row < nRows; row++) {
    const factors = FACTORS.slice(0, nFactors).map((loadings) => ({
      loadings,
      value: random.normal(),
    }));
    columns.forEach((column, j) => {
      const shared = factors.reduce((sum, { loadings, value }) => sum + loadings[j]! * value, 0);
      column[row] = Math.exp(shared + 0.5 * random.normal());
    });
  }
  return columns;
}

describe('broken stick', () => {
  it('gives the known shares for p 5 and p 10 (computed from the formula)', () => {
    expect(rounded(brokenStick(5))).toEqual([0.456667, 0.256667, 0.156667, 0.09, 0.04]);
    expect(rounded(brokenStick(10))).toEqual([
      0.292897, 0.192897, 0.142897, 0.109563, 0.084563, 0.064563, 0.047897, 0.033611, 0.021111,
      0.01,
    ]);
    expect(brokenStick(37).reduce((a, b) => a + b, 0)).toBeCloseTo(1, 12);
  });

  it('refuses no component', () => {
    expect(() => brokenStick(0)).toThrow(expect.objectContaining({ code: 'bad-parameter' }));
  });
});

describe('suggestCount', () => {
  it('counts to the first failure, and to a share', () => {
    expect(countAbove([0.5, 0.2, 0.3], [0.4, 0.25, 0.1])).toBe(1);
    expect(countForShare([0.5, 0.3, 0.2])).toBe(2);
    expect(() => countForShare([1], 0)).toThrow(expect.objectContaining({ code: 'bad-parameter' }));
  });

  it.each([
    [0, 12, 2],
    [1, 12, 2],
    [5, 12, 5],
    [11, 12, 10],
    [3, 1, 1],
  ])('parallel %i of %i components proposes %i', (parallel, p, suggested) => {
    const found = suggestCount(new Array<number>(p).fill(1 / p), parallel);
    expect(found.suggested).toBe(suggested);
    expect(found.sentence).toContain(`${suggested} proposed`);
  });
});

describe('countAboveMean', () => {
  it.each([
    [[2.5, 1.4, 0.6, 0.5], 2],
    [[0.7, 0.2, 0.1], 1],
    [[0.1, 0.1, 0.1], 0],
    [[1], 0],
  ])('%j: %i above the mean (by hand)', (shares, count) => {
    expect(countAboveMean(shares)).toBe(count);
  });

  it('refuses no shares and shares that are none', () => {
    expect(() => countAboveMean([])).toThrow(expect.objectContaining({ code: 'too-few-rows' }));
    expect(() => countAboveMean([1, NaN])).toThrow(expect.objectContaining({ code: 'not-finite' }));
  });
});

describe('parallelAnalysis', () => {
  it('has the null of independent normal variables: n 100, p 5 (computed: simulation of 2000, band .04)', () => {
    const random = seededRandom(21);
    const columns = Array.from({ length: 5 }, () =>
      Float64Array.from({ length: 100 }, () => Math.exp(random.normal())),
    );
    const found = parallelAnalysis(columns, {
      seed: 3,
      basis: 'log-correlation',
      permutations: 2000,
    });
    const expected = {
      mean: [1.29, 1.118, 0.992, 0.869, 0.732],
      p95: [1.429, 1.207, 1.06, 0.951, 0.828],
    };
    found.nullMean.forEach((value, k) =>
      expect(Math.abs(value - expected.mean[k]!)).toBeLessThan(0.04),
    );
    found.null95.forEach((value, k) =>
      expect(Math.abs(value - expected.p95[k]!)).toBeLessThan(0.04),
    );
  });

  it('finds two planted factors and mostly none among independent parts', () => {
    const options = { permutations: 100 };
    const found = [1, 2, 3].map(
      (seed) => parallelAnalysis(planted(300, 6, 2, seed), { seed, ...options }).kept,
    );
    expect(found).toEqual([2, 2, 2]);
    const none = [4, 5, 6, 7, 8, 9].filter(
      (seed) => parallelAnalysis(planted(300, 6, 0, seed), { seed, ...options }).kept > 0,
    );
    expect(none.length).toBeLessThanOrEqual(2);
  });

  it('gives the same answer for the same seed, and samples a larger table', () => {
    const columns = planted(1500, 5, 1, 12);
    const run = (seed: number) =>
      parallelAnalysis(columns, { seed, permutations: 20, maxRows: 400 });
    expect(run(1)).toEqual(run(1));
    expect(run(1).null95).not.toEqual(run(2).null95);
    expect(run(1)).toMatchObject({ rowsUsed: 400, kept: 1 });
    const total = run(1).eigenvalues.reduce((a, b) => a + b, 0);
    expect(run(1).null95Shares[0]).toBeCloseTo(run(1).null95[0]! / total, 12);
  });

  it('uses masked rows only and leaves the columns as they were', () => {
    const columns = planted(60, 3, 1, 5);
    const mask = Uint8Array.from({ length: 60 }, (_, row) => row % 2);
    columns[0]![0] = NaN;
    const before = columns.map((column) => [...column]);
    expect(parallelAnalysis(columns, { seed: 1, mask, permutations: 20 }).rowsUsed).toBe(30);
    expect(columns.map((column) => [...column])).toEqual(before);
  });

  it.each([
    ['too-few-parts', () => parallelAnalysis(planted(30, 2, 0, 1), { seed: 1 })],
    ['too-few-rows', () => parallelAnalysis(planted(2, 3, 0, 1), { seed: 1 })],
    ['bad-parameter', () => parallelAnalysis(planted(30, 3, 0, 1), { seed: 1, permutations: 5 })],
    ['bad-parameter', () => parallelAnalysis(planted(30, 3, 0, 1), { seed: 1, maxRows: 5 })],
    ['shape', () => parallelAnalysis(planted(30, 3, 0, 1), { seed: 1, mask: new Uint8Array(3) })],
    [
      'not-positive',
      () =>
        parallelAnalysis(
          planted(30, 3, 0, 1).map((column) => column.map(() => 0)),
          { seed: 1 },
        ),
    ],
    [
      'singular',
      () =>
        parallelAnalysis(
          planted(30, 3, 0, 1).map((column) => column.map(() => 1)),
          { seed: 1 },
        ),
    ],
  ] as const)('refuses with %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });

  it('stops when the progress report throws', () => {
    const onProgress = () => {
      throw new Error('cancelled');
    };
    expect(() => parallelAnalysis(planted(30, 3, 0, 1), { seed: 1, onProgress })).toThrow(
      'cancelled',
    );
  });
});

describe('mineralReading', () => {
  const parts = ['K', 'Rb', 'Ba', 'Mg', 'Cr', 'Ni'];
  const components = {
    nParts: 6,
    eigenvalues: Float64Array.of(2, 1),
    loadings: Float64Array.of(0.6, 0.1, 0.4, -0.05, 0.1, 0.05, -0.55, 0.8, -0.5, -0.4, -0.05, -0.5),
  };

  it('names the parts that oppose, largest first', () => {
    expect(mineralReading(components, parts, 1)).toEqual({
      component: 1,
      positive: ['K', 'Rb'],
      negative: ['Mg', 'Cr'],
      sentence: 'K and Rb against Mg and Cr',
    });
    expect(mineralReading(components, parts, 2)).toMatchObject({
      positive: ['Mg'],
      negative: ['Ni', 'Cr'],
    });
  });

  it('names at least one part on each side', () => {
    const lone = {
      nParts: 3,
      eigenvalues: Float64Array.of(1),
      loadings: Float64Array.of(0.9, -0.45, -0.46),
    };
    expect(mineralReading(lone, ['S', 'Al', 'Ti'], 1).negative).toEqual(['Ti', 'Al']);
    const weak = {
      nParts: 4,
      eigenvalues: Float64Array.of(1),
      loadings: Float64Array.of(0.9, -0.3, -0.31, -0.29),
    };
    expect(mineralReading(weak, ['S', 'Al', 'Ti', 'Zr'], 1)).toMatchObject({
      negative: ['Ti'],
      sentence: 'S against Ti',
    });
  });

  it('refuses names or components that are not there', () => {
    expect(() => mineralReading(components, ['K'], 1)).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
    expect(() => mineralReading(components, parts, 3)).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
    expect(() => mineralReading(components, parts, 0)).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });
});
