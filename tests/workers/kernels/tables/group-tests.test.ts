import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { groupValues } from '#kernels/tables/grouped-values.ts';
import { kolmogorovSmirnovPairs } from '#kernels/tables/kolmogorov-smirnov.ts';
import { dunnZ, kruskalWallis, mannWhitneyPairs } from '#kernels/tables/rank-tests.ts';
import { midranks } from '#kernels/tables/ranks.ts';
import { anovaOfLogs } from '#kernels/tables/variance-between.ts';

const small = [Float64Array.of(1, 2, 3), Float64Array.of(4, 5, 6, 7)];

describe('by hand', () => {
  it('ranks with ties', () => {
    const { ranks, tieSum } = midranks(Float64Array.of(5, 1, 5, 3, 5));
    expect([...ranks]).toEqual([4, 1, 4, 2, 4]);
    expect(tieSum).toBe(24);
  });

  it('separates two groups: U 0, D 1, H 12/56 (6²/3 + 22²/4) - 24', () => {
    expect(mannWhitneyPairs(small)[0]).toMatchObject({
      first: 0,
      second: 1,
      u: 0,
      cliffsDelta: -1,
    });
    expect(kolmogorovSmirnovPairs(small)[0]?.d).toBe(1);
    expect(kruskalWallis(small).h).toBeCloseTo((12 / 56) * (36 / 3 + 484 / 4) - 24, 12);
  });

  it('does not depend on order inside groups, on the order of groups, or on a rising scale', () => {
    const group = fc.array(fc.integer({ min: 1, max: 30 }), { minLength: 2, maxLength: 15 });
    fc.assert(
      fc.property(fc.array(group, { minLength: 2, maxLength: 4 }), (lists) => {
        const groups = lists.map((list) => Float64Array.from(list));
        const turned = [...groups].reverse().map((values) => values.slice().reverse());
        const scaled = groups.map((values) => values.map((value) => Math.exp(value / 7)));
        expect(kruskalWallis(turned).h).toBeCloseTo(kruskalWallis(groups).h, 8);
        expect(kruskalWallis(scaled).h).toBeCloseTo(kruskalWallis(groups).h, 8);
        expect(kolmogorovSmirnovPairs(scaled)).toEqual(kolmogorovSmirnovPairs(groups));
        expect(anovaOfLogs(turned).betweenShare ?? 0).toBeCloseTo(
          anovaOfLogs(groups).betweenShare ?? 0,
          8,
        );
      }),
    );
  });
});

describe('edges', () => {
  const flat = [Float64Array.of(2, 2), Float64Array.of(2, 2, 2)];

  it('finds no difference among equal values', () => {
    expect(kruskalWallis(flat)).toMatchObject({ h: 0, nominalP: 1 });
    expect(mannWhitneyPairs(flat)[0]).toMatchObject({ nominalP: 1, cliffsDelta: 0 });
    expect([...dunnZ(flat)]).toEqual([0]);
    expect(kolmogorovSmirnovPairs(flat)[0]).toMatchObject({ d: 0, nominalP: 1 });
    expect(anovaOfLogs(flat)).toMatchObject({ f: null, betweenShare: null });
  });

  it('gives the share but no ratio when only the groups differ', () => {
    const groups = [Float64Array.of(1, 1), Float64Array.of(5, 5)];
    expect(anovaOfLogs(groups)).toMatchObject({ f: null, nominalP: null, betweenShare: 1 });
  });

  it('drops rows without value or label and levels without rows', () => {
    const label = { levels: ['x', 'y', 'z'], codes: Int32Array.of(0, 0, 1, -1) };
    const split = groupValues(Float64Array.of(1, NaN, 3, 4), label);
    expect(split).toMatchObject({ levels: ['x', 'y'], nUsed: 2, nDropped: 2 });
    expect(split.groups.map((values) => [...values])).toEqual([[1], [3]]);
  });

  it('refuses what cannot be compared', () => {
    expect(() => kruskalWallis([Float64Array.of(1)])).toThrow(
      'expected 2 or more groups with values, found 1 of 1',
    );
    expect(() => dunnZ([Float64Array.of(1), new Float64Array(0)])).toThrow('found 1 of 2');
    expect(() => kruskalWallis([Float64Array.of(1), Float64Array.of(NaN)])).toThrow(
      'found NaN in row 1',
    );
    expect(() => kolmogorovSmirnovPairs([Float64Array.of(1), Float64Array.of(NaN)])).toThrow(
      'NaN in group 1',
    );
    expect(() => anovaOfLogs([Float64Array.of(1, 0), Float64Array.of(1)])).toThrow(
      'expected a value > 0, found 0 as value 1 of group 0',
    );
    expect(() => anovaOfLogs([Float64Array.of(1), Float64Array.of(2)])).toThrow('found 2');
  });
});
