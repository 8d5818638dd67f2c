import { describe, expect, it } from 'vitest';
import { biplot } from '#kernels/components/biplot.ts';
import { fitComponents } from '#kernels/components/components.ts';
import { fitRobustComponents } from '#kernels/components/robust-components.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import { helmertBasis } from '#kernels/compositions/ilr-basis.ts';
import { seededRandom } from '#kernels/random.ts';
import { loadReference } from '#tests/support/reference.ts';
import { rawTable, toColumns } from '#tests/support/reference-transform.ts';

const columnsOf = (name: 'meuse' | 'jura_prediction') => {
  const set = loadReference(name);
  return toColumns(rawTable(set, set.check(`${name}.mcd.h`)));
};

/** One strong factor in five parts; a tenth of the rows carries another. */
function withOutliers(nRows: number, outliers: boolean): Float64Array[] {
  const random = seededRandom(31);
  const columns = Array.from({ length: 5 }, () => new Float64Array(nRows));
  for (let row = 0; row < nRows; row++) {
    const factor = random.normal();
    const other = outliers && row % 10 === 0 ? 6 + random.normal() : 0;
    columns.forEach((column, j) => {
      const log = factor * [1, 1, -1, -1, 0][j]! + other * [1, -1, 1, -1, 0][j]!;
      column[row] = Math.exp(j + log + 0.2 * random.normal());
    });
  }
  return columns;
}

describe('fitRobustComponents', () => {
  // Eigenvectors and back-transformed centre by numpy 2.4.6 of the scatter and centre that
  // robustbase 0.95-0 gives for pivot coordinates (tests/fixtures/reference); band 2 % as there.
  it.each([
    [
      'meuse',
      [0.587837, 0.355411, 0.056752],
      [0.7828, -0.0412, -0.6059, -0.1357],
      [0.004667, 0.06245, 0.232337, 0.700546],
    ],
    [
      'jura_prediction',
      [0.624008, 0.183799, 0.098646, 0.043585, 0.033141, 0.01682],
      [-0.4788, -0.1559, -0.163, 0.7184, -0.2979, 0.3369, 0.0402],
      [0.004903, 0.044519, 0.170643, 0.095516, 0.090459, 0.247157, 0.346803],
    ],
  ] as const)('%s: shares, first loadings and centre', (name, shares, first, centre) => {
    const found = fitRobustComponents(columnsOf(name), { seed: 1 });
    const rank = found.eigenvalues.length;
    shares.forEach((share, k) => expect(found.shares[k]).toBeCloseTo(share, 3));
    first.forEach((value, part) => expect(found.loadings[part * rank]).toBeCloseTo(value, 3));
    centre.forEach((value, part) => expect(found.centre[part]).toBeCloseTo(value, 5));
  });

  it('does not depend on the coordinates: pivot and Helmert give the same scores', () => {
    const columns = columnsOf('jura_prediction');
    const pivot = fitRobustComponents(columns, { seed: 5, starts: 100 });
    const helmert = fitRobustComponents(columns, {
      seed: 5,
      starts: 100,
      basis: helmertBasis(columns.length),
    });
    const scores = scoreComponents(columns, helmert, 6);
    scoreComponents(columns, pivot, 6).forEach((score, k) =>
      score.forEach((value, row) => expect(value).toBeCloseTo(scores[k]![row]!, 8)),
    );
    expect(helmert.nOutliers).toBe(pivot.nOutliers);
  });

  it('has loadings that sum to zero, and a centre whose clr is the mean of the scores', () => {
    const found = fitRobustComponents(columnsOf('meuse'), { seed: 1, starts: 50 });
    for (let k = 0; k < 3; k++) {
      const column = [0, 1, 2, 3].map((part) => found.loadings[3 * part + k]!);
      expect(column.reduce((a, b) => a + b, 0)).toBeCloseTo(0, 12);
    }
    expect(found.logMean.reduce((a, b) => a + b, 0)).toBeCloseTo(0, 12);
    expect(found.centre.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 12);
    const atCentre = Array.from(found.centre, (value) => Float64Array.of(value));
    scoreComponents(atCentre, found, 3).forEach((score) => expect(score[0]).toBeCloseTo(0, 12));
  });

  it('keeps the direction of the majority where classical components follow the outliers', () => {
    const columns = withOutliers(400, true);
    const direction = fitComponents(withOutliers(400, false)).loadings;
    const agreement = (loadings: Float64Array) =>
      Math.abs([0, 1, 2, 3, 4].reduce((sum, j) => sum + loadings[4 * j]! * direction[4 * j]!, 0));
    const robust = fitRobustComponents(columns, { seed: 3, starts: 100 });
    expect(agreement(robust.loadings)).toBeGreaterThan(0.99);
    expect(agreement(fitComponents(columns).loadings)).toBeLessThan(0.5);
    for (let row = 0; row < 400; row += 10) expect(robust.isOutlier[row]).toBe(1);
    expect(robust.nOutliers).toBeLessThan(60);
    expect(robust.notes).toEqual([expect.stringContaining('unlike the majority')]);
  });

  it('plots by the same biplot, and is the same for rescaled rows', () => {
    const columns = withOutliers(200, true);
    const found = fitRobustComponents(columns, { seed: 3, starts: 50 });
    expect(biplot(found, 'covariance', 2).parts).toHaveLength(10);
    const scaled = columns.map((column) => column.map((value, row) => value * (1 + (row % 7))));
    const again = fitRobustComponents(scaled, { seed: 3, starts: 50 });
    again.eigenvalues.forEach((value, k) =>
      expect(value / found.eigenvalues[k]!).toBeCloseTo(1, 9),
    );
  });

  it('uses masked rows only, whatever the others hold', () => {
    const columns = withOutliers(200, false);
    const mask = Uint8Array.from({ length: 200 }, (_, row) => (row < 150 ? 1 : 0));
    columns[2]![180] = NaN;
    const found = fitRobustComponents(columns, { seed: 3, starts: 50, mask });
    expect(found.nRows).toBe(150);
    expect(found.distances[180]).toBeNaN();
    expect(found.distances[149]).toBeGreaterThan(0);
    expect(found.isOutlier[180]).toBe(0);
  });

  it.each([
    ['too-few-parts', (columns: Float64Array[]) => columns.slice(0, 2), {}],
    ['too-few-rows', (columns: Float64Array[]) => columns.map((c) => c.subarray(0, 19)), {}],
    ['shape', (columns: Float64Array[]) => columns, { mask: new Uint8Array(3) }],
    ['shape', (columns: Float64Array[]) => columns, { basis: helmertBasis(3) }],
    ['bad-parameter', (columns: Float64Array[]) => columns, { share: 0.2 }],
    ['not-positive', (columns: Float64Array[]) => columns.map((c) => c.map(() => -0)), {}],
    ['not-positive', (columns: Float64Array[]) => columns.map((c) => c.map(() => Infinity)), {}],
    [
      'singular',
      ([first = new Float64Array(0), ...others]: Float64Array[]) => [
        first,
        first.map((value) => 3 * value),
        ...others.slice(1),
      ],
      {},
    ],
  ] as const)('refuses with %s', (code, change, options) => {
    expect(() =>
      fitRobustComponents(change(withOutliers(60, false)), { seed: 1, starts: 20, ...options }),
    ).toThrow(expect.objectContaining({ code }));
  });

  it('names the row and part of a bad value', () => {
    const columns = withOutliers(60, false);
    columns[1]![7] = NaN;
    expect(() => fitRobustComponents(columns, { seed: 1 })).toThrow(
      expect.objectContaining({ code: 'not-positive', detail: { row: 7, col: 1 } }),
    );
  });
});
