import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { association, entropy, millerMadow } from '#kernels/tables/association.ts';
import { campaignCheck } from '#kernels/tables/campaign-check.ts';
import { categoryFrom, type Category } from '#kernels/tables/category.ts';
import { chiSquareTest } from '#kernels/tables/chi-square.ts';
import { correctedInformation } from '#kernels/tables/corrected-information.ts';
import { crossTabulate } from '#kernels/tables/cross-tabulation.ts';
import { lengthWeightedCounts } from '#kernels/tables/length-weighted-counts.ts';

/** Label columns whose counts are a table. */
function columnsOf(counts: readonly (readonly number[])[]): [Category, Category] {
  const labels = counts.flatMap((row, r) =>
    row.flatMap((count, c) => Array.from({ length: count }, () => [`r${r}`, `c${c}`] as const)),
  );
  return [categoryFrom(labels.map(([r]) => r)), categoryFrom(labels.map(([, c]) => c))];
}
const agresti = columnsOf([
  [762, 327, 468],
  [484, 239, 477],
]);
const ones = (n: number, length = 1) => new Float64Array(n).fill(length);

describe('length weighting', () => {
  it('equal lengths give the counts: chi-square 30.070149 in any unit (Agresti 2007)', () => {
    for (const length of [0.5, 1, 100]) {
      const { counts, effectiveN } = lengthWeightedCounts(...agresti, ones(2757, length));
      expect(effectiveN).toBeCloseTo(2757, 8);
      expect(chiSquareTest(counts, 3)?.chiSquare).toBeCloseTo(30.070149, 6);
    }
  });

  it('metres as counts would not: /2 15.035075, /100 .300701 (computed)', () => {
    const { counts } = lengthWeightedCounts(...agresti, ones(2757));
    expect(
      chiSquareTest(
        counts.map((c) => c / 2),
        3,
      )?.chiSquare,
    ).toBeCloseTo(15.035075, 6);
    expect(
      chiSquareTest(
        counts.map((c) => c / 100),
        3,
      )?.chiSquare,
    ).toBeCloseTo(0.300701, 6);
  });

  it('unequal lengths add up to the effective number 4.121951 (computed)', () => {
    const rows = categoryFrom(['a', 'a', 'b', 'b', 'a']);
    const cols = categoryFrom(['x', 'y', 'x', 'x', 'y']);
    const table = lengthWeightedCounts(rows, cols, Float64Array.of(1, 1, 2, 2, 0.5));
    expect(table.effectiveN).toBeCloseTo(4.121951, 6);
    expect(table.counts.reduce((sum, c) => sum + c, 0)).toBeCloseTo(4.121951, 6);
    expect(table.counts[2]! / table.effectiveN).toBeCloseTo(4 / 6.5, 12);
  });

  it('never inflates n, does not see the unit, keeps shares of length', () => {
    const row = fc.tuple(
      fc.constantFrom('a', 'b', null),
      fc.constantFrom('x', 'y'),
      fc.integer({ min: 0, max: 40 }),
    );
    fc.assert(
      fc.property(fc.array(row, { minLength: 1, maxLength: 30 }), (list) => {
        fc.pre(list.some(([a, , length]) => a !== null && length > 0));
        const rows = categoryFrom(list.map(([a]) => a));
        const cols = categoryFrom(list.map(([, b]) => b));
        const lengths = Float64Array.from(list, ([, , length]) => length);
        const table = lengthWeightedCounts(rows, cols, lengths);
        expect(table.effectiveN).toBeLessThanOrEqual(table.nUsed + 1e-9);
        const feet = lengthWeightedCounts(
          rows,
          cols,
          lengths.map((l) => l / 0.3048),
        ).counts;
        feet.forEach((cell, i) => expect(cell).toBeCloseTo(table.counts[i]!, 8));
        expect(
          association(table.counts, table.colLevels.length)?.cramersV ?? 0,
        ).toBeLessThanOrEqual(1);
      }),
    );
  });

  it('drops intervals without length, and refuses a table without any', () => {
    const labels = categoryFrom(['a', 'b']);
    const table = lengthWeightedCounts(labels, labels, Float64Array.of(2, 0));
    expect(table).toMatchObject({ rowLevels: ['a'], nUsed: 1, nDropped: 1, effectiveN: 1 });
    expect(() => lengthWeightedCounts(labels, labels, ones(2, 0))).toThrow(
      expect.objectContaining({ code: 'too-few-rows' }),
    );
    expect(() => lengthWeightedCounts(labels, labels, ones(2, NaN))).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });
});

describe('association (computed)', () => {
  it('Agresti: I .00544372, U .00795006 and .00517966, corrected V .100920', () => {
    const { counts } = crossTabulate(...agresti, ones(2757));
    const found = association(counts, 3);
    expect(found?.mutualInformation).toBeCloseTo(0.00544372, 8);
    expect(found?.rowsToldByCols).toBeCloseTo(0.00795006, 8);
    expect(found?.colsToldByRows).toBeCloseTo(0.00517966, 8);
    expect(found?.cramersVCorrected).toBeCloseTo(0.10092, 5);
  });

  it('[[40,5],[10,45]]: V .703526, corrected .699854, I .275396, U .400204 and .397313, purity .85', () => {
    const found = association(Float64Array.of(40, 5, 10, 45), 2);
    expect(found?.cramersV).toBeCloseTo(0.703526, 6);
    expect(found?.cramersVCorrected).toBeCloseTo(0.699854, 6);
    expect(found?.mutualInformation).toBeCloseTo(0.275396, 6);
    expect(found?.rowsToldByCols).toBeCloseTo(0.400204, 6);
    expect(found?.colsToldByRows).toBeCloseTo(0.397313, 6);
    expect(found?.purity).toBe(0.85);
  });

  it('entropy of a half and two quarters is 1.5 bits; Miller-Madow adds (cells - 1) / 2n', () => {
    expect(entropy(Float64Array.of(2, 1, 1)) / Math.LN2).toBeCloseTo(1.5, 12);
    expect(millerMadow(3, 20)).toBeCloseTo(0.05, 15);
  });
});

describe('information with its bias taken off', () => {
  it('[[40,5],[10,45]]: each entropy gains (cells - 1) / 200 (by hand)', () => {
    const found = correctedInformation(Float64Array.of(40, 5, 10, 45), 2);
    // .275396 (computed) + (1 + 1 - 3) / 200
    expect(found?.mutualInformation).toBeCloseTo(0.275396 - 0.005, 6);
    expect(found?.entropyRows).toBeCloseTo(
      -0.45 * Math.log(0.45) - 0.55 * Math.log(0.55) + 1 / 200,
      12,
    );
  });

  it('is not below 0 for unrelated labels, and nothing for an empty table', () => {
    expect(correctedInformation(Float64Array.of(2, 2, 2, 2), 2)?.mutualInformation).toBe(0);
    expect(correctedInformation(new Float64Array(4), 2)).toBeNull();
    expect(() => correctedInformation(Float64Array.of(1, -1), 2)).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });
});

describe('campaign check', () => {
  const laboratories = Array.from({ length: 200 }, (_, i) => (i % 4 < 2 ? 'first' : 'second'));
  const rocks = categoryFrom(Array.from({ length: 200 }, (_, i) => (i < 150 ? 'tuff' : 'vein')));
  const byLaboratory = categoryFrom(laboratories.map((lab) => `group of ${lab}`));
  const byRock = categoryFrom(Array.from({ length: 200 }, (_, i) => (i < 150 ? 'G1' : 'G2')));

  it('suspects groups that follow the laboratory inside one rock', () => {
    const found = campaignCheck(byLaboratory, categoryFrom(laboratories), rocks);
    expect(found.isSuspect).toBe(true);
    expect(found.insideLithology).toMatchObject({ lithology: 'tuff', n: 150 });
    expect(found.insideLithology?.v).toBeCloseTo(1, 1);
    expect(found.text).toContain('inside tuff');
  });

  it('does not suspect groups that follow rock drilled in one campaign', () => {
    const campaign = categoryFrom(Array.from({ length: 200 }, (_, i) => (i < 150 ? 'one' : 'two')));
    const found = campaignCheck(byRock, campaign, rocks);
    expect(found.overall).toBeCloseTo(1, 1);
    expect(found).toMatchObject({ isSuspect: false, insideLithology: { v: null } });
    expect(campaignCheck(byRock, campaign).isSuspect).toBe(true);
  });

  it('has nothing to compare in a single level or without logs', () => {
    const none = categoryFrom(Array.from({ length: 200 }, () => null));
    expect(campaignCheck(byRock, none).text).toContain('Nothing to compare over all');
    expect(campaignCheck(byRock, byLaboratory, none).insideLithology).toBeNull();
    expect(() => campaignCheck(byRock, categoryFrom(['x']))).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
  });
});
