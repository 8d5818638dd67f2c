import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { association, entropy, millerMadow, strengthInWords } from '#kernels/tables/association.ts';
import { chiSquareTest, residualSignificance } from '#kernels/tables/chi-square.ts';

/** Gender by party, Agresti (2007), An Introduction to Categorical Data Analysis, p. 39; R's help of chisq.test prints the same counts. */
const agresti = Float64Array.from([762, 327, 468, 484, 239, 477]);
const tested = (counts: Float64Array, nCols: number) => {
  const test = chiSquareTest(counts, nCols);
  if (test === null) throw new Error('expected a test');
  return test;
};
const associated = (counts: Float64Array, nCols: number) => {
  const strength = association(counts, nCols);
  if (strength === null) throw new Error('expected an association');
  return strength;
};

describe('chi-square', () => {
  it('has the published adjusted residuals of the Agresti table', () => {
    const test = tested(agresti, 3);
    expect(test.chiSquare).toBeCloseTo(30.070149, 6);
    expect(test.df).toBe(2);
    const published = [4.502054, 0.6994517, -5.315946];
    published.forEach((value, i) => expect(test.adjustedResiduals[i]).toBeCloseTo(value, 6));
    expect(test.nominalP).toBeCloseTo(Math.exp(-test.chiSquare / 2), 15);
  });

  it('marks the cells that stand out among all cells', () => {
    const p = residualSignificance(tested(agresti, 3).adjustedResiduals);
    // residual .69945: two-sided .48427 (normal table), the largest of six, so unchanged
    expect(p[1]).toBeCloseTo(0.48427, 4);
    expect([...p].map((value) => value <= 0.05)).toEqual([true, false, true, true, false, true]);
  });

  it('scales with the number of rows, which is why metres are not counts', () => {
    const scaled = (by: number) =>
      tested(
        agresti.map((n) => n / by),
        3,
      ).chiSquare;
    expect(scaled(2)).toBeCloseTo(15.035075, 6);
    expect(scaled(100)).toBeCloseTo(0.300701, 6);
  });

  it('withholds p when expected counts are small', () => {
    expect(tested(Float64Array.of(1, 1, 1, 20), 2).withheld).toBe(
      '1 of 4 expected counts are below 1',
    );
    const few = tested(Float64Array.of(3, 3, 3, 3), 2);
    expect(few.withheld).toBe('4 of 4 expected counts are below 5 (more than 20 %)');
    expect(few.nominalP).toBeNull();
    expect(tested(Float64Array.of(10, 10, 10, 10), 2).withheld).toBeNull();
  });

  it('does not test a single row or column, and refuses an empty one', () => {
    expect(chiSquareTest(Float64Array.of(1, 2, 3), 3)).toBeNull();
    expect(chiSquareTest(Float64Array.of(1, 2, 3), 1)).toBeNull();
    expect(() => chiSquareTest(Float64Array.of(0, 0, 1, 2), 2)).toThrow('found row 0 empty');
    expect(() => chiSquareTest(Float64Array.of(1, 0, 1, 0), 2)).toThrow('found col 1 empty');
  });
});

describe('association', () => {
  it('has the published V and corrected V of i mod 10 against i mod 4, i below 150', () => {
    // Both digits stand in a column-store database's public documentation of these functions.
    const counts = new Float64Array(40);
    for (let i = 0; i < 150; i++) counts[(i % 10) * 4 + (i % 4)]! += 1;
    const { cramersV, cramersVCorrected } = associated(counts, 4);
    expect(cramersV).toBeCloseTo(0.5798088336225178, 12);
    expect(cramersVCorrected).toBeCloseTo(0.5305112825189074, 12);
  });

  it('has the values computed from the definitions in numpy', () => {
    const strength = associated(agresti, 3);
    expect(strength.cramersV).toBeCloseTo(0.104436, 6);
    expect(strength.cramersVCorrected).toBeCloseTo(0.10092, 6);
    expect(strength.mutualInformation).toBeCloseTo(0.00544372, 8);
    expect(strength.rowsToldByCols).toBeCloseTo(0.00795006, 8);
    expect(strength.colsToldByRows).toBeCloseTo(0.00517966, 8);
    const square = associated(Float64Array.of(40, 5, 10, 45), 2);
    expect(square.cramersV).toBeCloseTo(0.703526, 6);
    expect(square.cramersVCorrected).toBeCloseTo(0.699854, 6);
    expect(square.mutualInformation).toBeCloseTo(0.275396, 6);
    expect(square.rowsToldByCols).toBeCloseTo(0.400204, 6);
    expect(square.colsToldByRows).toBeCloseTo(0.397313, 6);
    expect(square.purity).toBeCloseTo(0.85, 12);
  });

  it('measures entropy: 1.5 bits of (.5, .25, .25), none of one class', () => {
    expect(entropy(Float64Array.of(2, 1, 1)) / Math.LN2).toBeCloseTo(1.5, 12);
    expect(entropy(Float64Array.of(7, 0))).toBe(0);
    expect(entropy(new Float64Array(0))).toBe(0);
    expect(millerMadow(3, 50)).toBeCloseTo(0.02, 12);
  });

  it.each([
    [0.09, 'none'],
    [0.1, 'weak'],
    [0.3, 'moderate'],
    [0.5, 'strong'],
  ])('reads V %f as %s', (v, words) => {
    expect(strengthInWords(v)).toBe(words);
  });

  it('is 1 when one label decides the other and null with one level', () => {
    const same = associated(Float64Array.of(5, 0, 0, 0, 8, 0, 0, 0, 9), 3);
    expect(same.cramersV).toBeCloseTo(1, 12);
    expect(same.rowsToldByCols).toBeCloseTo(1, 12);
    expect(association(Float64Array.of(5, 3, 0, 0), 2)).toBeNull();
    expect(association(new Float64Array(4), 2)).toBeNull();
  });

  it('does not change when rows or columns change places', () => {
    const table = fc.array(fc.integer({ min: 1, max: 60 }), { minLength: 12, maxLength: 12 });
    fc.assert(
      fc.property(table, (cells) => {
        const counts = Float64Array.from(cells);
        const swapped = counts.map((_, i) => counts[(2 - Math.floor(i / 4)) * 4 + (3 - (i % 4))]!);
        const transposed = counts.map((_, i) => counts[(i % 3) * 4 + Math.floor(i / 3)]!);
        const strength = associated(counts, 4);
        for (const other of [associated(swapped, 4), associated(transposed, 3)]) {
          expect(other.cramersV).toBeCloseTo(strength.cramersV, 10);
          expect(other.mutualInformation).toBeCloseTo(strength.mutualInformation, 10);
        }
        expect(tested(transposed, 3).chiSquare).toBeCloseTo(tested(counts, 4).chiSquare, 7);
      }),
    );
  });
});
