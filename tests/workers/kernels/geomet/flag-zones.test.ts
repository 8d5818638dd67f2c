import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { deleteriousZones } from '#kernels/geomet/deleterious-elements.ts';
import { flagZones, type ZoneRules } from '#kernels/geomet/flag-zones.ts';
import { flaggedShares } from '#kernels/geomet/flagged-shares.ts';
import { lengthsOf, type IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';
import { categoryFrom } from '#kernels/tables/category.ts';

/** One hole from rows of from, to, value. */
function hole(rows: (readonly [number, number, number])[]) {
  const intervals: IntervalsByHole = {
    holeStarts: Int32Array.of(0, rows.length),
    fromM: Float64Array.from(rows, ([from]) => from),
    toM: Float64Array.from(rows, ([, to]) => to),
  };
  return { intervals, element: { valuesPpm: Float64Array.from(rows, ([, , value]) => value) } };
}
const rules: ZoneRules = { limitPpm: 800, minLengthM: 3, maxDilutionM: 2 };
const worked = [
  [0, 2, 50],
  [2, 4, 900],
  [4, 6, 1200],
  [6, 7, 100],
  [7, 9, 1500],
  [9, 14, 40],
  [14, 15, 2500],
  [15, 20, 10],
] as const;

describe('zones', () => {
  it('bridges a metre and drops a short run (worked by hand)', () => {
    const { intervals, element } = hole([...worked]);
    const [zone, ...more] = flagZones(intervals, element, rules);
    expect(more).toEqual([]);
    expect(zone).toMatchObject({
      hole: 0,
      firstRow: 1,
      lastRow: 4,
      fromM: 2,
      toM: 9,
      lengthM: 7,
      maxPpm: 1500,
    });
    // (2 x 900 + 2 x 1200 + 100 + 2 x 1500) / 7
    expect(zone?.meanPpm).toBeCloseTo(7300 / 7, 9);
    expect(zone).toMatchObject({ dilutionM: 1, notAssayedM: 0, isLowerBound: false });
  });

  it('does not bridge a gap over the limit of dilution, a mean under the limit, or mostly dilution', () => {
    const lengths = (
      rows: (readonly [number, number, number])[],
      change: Partial<ZoneRules> = {},
    ) => {
      const { intervals, element } = hole(rows);
      return flagZones(intervals, element, { ...rules, minLengthM: 0, ...change }).map(
        ({ lengthM }) => lengthM,
      );
    };
    expect(
      lengths([
        [0, 2, 900],
        [2, 4, 700],
        [4, 6, 900],
      ]),
    ).toEqual([6]);
    expect(
      lengths([
        [0, 2, 900],
        [2, 4.1, 790],
        [4.1, 6, 900],
      ]),
    ).toEqual([2, 1.9000000000000004]);
    expect(
      lengths([
        [0, 2, 810],
        [2, 4, 700],
        [4, 6, 810],
      ]),
    ).toEqual([2, 2]);
    expect(
      lengths(
        [
          [0, 1, 5000],
          [1, 4, 700],
          [4, 5, 5000],
        ],
        { maxDilutionM: 3 },
      ),
    ).toEqual([1, 1]);
  });

  it('bridges the shortest gap first, then the richest, then the upper', () => {
    // joining both would leave a mean under 800; only one pair may join
    const firsts = (gaps: [number, number], grades: [number, number, number]) => {
      const [a, b] = gaps;
      const rows = [
        [0, 2, grades[0]],
        [2, 2 + a, 0],
        [2 + a, 4 + a, grades[1]],
        [4 + a, 4 + a + b, 0],
        [4 + a + b, 6 + a + b, grades[2]],
      ] as const;
      const { intervals, element } = hole([...rows]);
      return flagZones(intervals, element, { ...rules, minLengthM: 0 }).map(
        ({ firstRow, lastRow }) => [firstRow, lastRow],
      );
    };
    expect(firsts([2, 1.5], [1300, 1200, 1000])).toEqual([
      [0, 0],
      [2, 4],
    ]);
    expect(firsts([2, 2], [1250, 1200, 1300])).toEqual([
      [0, 0],
      [2, 4],
    ]);
    expect(firsts([2, 2], [1250, 1200, 1250])).toEqual([
      [0, 2],
      [4, 4],
    ]);
  });

  it('counts not assayed metres and depths without interval as dilution outside the mean', () => {
    const { intervals, element } = hole([
      [0, 2, 900],
      [2, 3, NaN],
      [3, 5, 1100],
      [6, 8, 1000],
    ]);
    const [zone] = flagZones(intervals, element, rules);
    expect(zone).toMatchObject({ fromM: 0, toM: 8, dilutionM: 2, notAssayedM: 2, meanPpm: 1000 });
    const none = hole([
      [0, 2, NaN],
      [2, 4, NaN],
    ]);
    expect(flagZones(none.intervals, none.element, rules)).toEqual([]);
  });

  it('counts an over-range value as over and says that the mean is a lower bound', () => {
    const { intervals, element } = hole([[0, 4, 500]]);
    const marked = { ...element, isLowerBound: Uint8Array.of(1) };
    expect(flagZones(intervals, marked, rules)[0]).toMatchObject({
      isLowerBound: true,
      maxPpm: 500,
    });
    expect(flagZones(intervals, element, rules)).toEqual([]);
  });

  it('crosses neither holes nor breaks', () => {
    const { intervals, element } = hole(
      [
        [0, 2, 900],
        [2, 4, 900],
        [0, 2, 900],
        [2, 4, 900],
      ].map(([a = 0, b = 0, c = 0]) => [a, b, c] as const),
    );
    const split = {
      ...intervals,
      holeStarts: Int32Array.of(0, 2, 4),
      isBreakBefore: Uint8Array.of(0, 0, 0, 1),
    };
    const zones = flagZones(split, element, { ...rules, minLengthM: 0 });
    expect(zones.map((zone) => [zone.hole, zone.firstRow, zone.lastRow])).toEqual([
      [0, 0, 1],
      [1, 2, 2],
      [1, 3, 3],
    ]);
  });

  it('is inside the rules, apart and started and ended over the limit, whatever the values', () => {
    const row = fc.tuple(
      fc.integer({ min: 1, max: 4 }),
      fc.oneof(fc.constant(NaN), fc.integer({ min: 0, max: 1600 })),
    );
    fc.assert(
      fc.property(fc.array(row, { minLength: 1, maxLength: 40 }), (list) => {
        let depth = 0;
        const { intervals, element } = hole(
          list.map(([length, value]) => [depth, (depth += length), value] as const),
        );
        const zones = flagZones(intervals, element, rules);
        zones.forEach((zone, i) => {
          expect(zone.lengthM).toBeGreaterThanOrEqual(rules.minLengthM);
          expect(zone.meanPpm).toBeGreaterThanOrEqual(rules.limitPpm - 1e-9);
          expect(zone.dilutionM).toBeLessThanOrEqual(zone.lengthM / 2);
          for (const end of [zone.firstRow, zone.lastRow])
            expect(element.valuesPpm[end]).toBeGreaterThanOrEqual(800);
          if (i > 0) expect(zone.firstRow).toBeGreaterThan(zones[i - 1]!.lastRow);
        });
        // every run of 3 m or more over the limit lies in a zone
        let runM = 0;
        list.forEach(([length, value], r) => {
          runM = value >= 800 ? runM + length : 0;
          if (runM >= 3)
            expect(zones.some(({ firstRow, lastRow }) => firstRow <= r && r <= lastRow)).toBe(true);
        });
      }),
    );
  });

  it('refuses bad intervals, values and rules', () => {
    const { intervals, element } = hole([
      [0, 2, 900],
      [1, 3, 900],
    ]);
    expect(() => flagZones(intervals, element, rules)).toThrow(
      'row 1 starts at 1 m, above the end 2 m of row 0',
    );
    const good = hole([[0, 2, -1]]);
    expect(() => flagZones(good.intervals, good.element, rules)).toThrow(
      'expected ppm >= 0, found -1 in row 0',
    );
    const inverted = hole([[2, 1, 5]]);
    expect(() => flagZones(inverted.intervals, inverted.element, rules)).toThrow('in row 0');
    expect(() => flagZones(good.intervals, { valuesPpm: new Float64Array(2) }, rules)).toThrow(
      'expected 1 values',
    );
    expect(() =>
      flagZones(good.intervals, { valuesPpm: new Float64Array(1) }, { ...rules, limitPpm: 0 }),
    ).toThrow('found 0 ppm');
    const bound = { valuesPpm: Float64Array.of(NaN), isLowerBound: Uint8Array.of(1) };
    expect(() => flagZones(good.intervals, bound, rules)).toThrow('found NaN in row 0');
    expect(() =>
      flagZones({ ...intervals, holeStarts: Int32Array.of(0, 3) }, element, rules),
    ).toThrow('expected 3 rows');
  });
});

describe('several elements', () => {
  const { intervals, element } = hole([...worked]);
  const second = { valuesPpm: Float64Array.of(0, 0, 0, 0, 30, 30, 0, 0) };
  const elements = [
    { analyte: 'As', limitPpm: 800, ...element },
    { analyte: 'Sb', limitPpm: 20, ...second },
  ];

  it('flags the union of the zones and counts metres once', () => {
    const shares: number[] = [];
    const found = deleteriousZones(intervals, elements, { minLengthM: 3, maxDilutionM: 2 }, (s) =>
      shares.push(s),
    );
    expect([...found.isFlagged]).toEqual([0, 1, 1, 1, 1, 1, 0, 0]);
    expect(found).toMatchObject({ flaggedMetres: 12, totalMetres: 20 });
    const [arsenic, antimony] = found.byElement;
    expect(arsenic).toMatchObject({
      analyte: 'As',
      zoneMetres: 7,
      intervalsOver: 4,
      metresOver: 7,
    });
    expect(antimony).toMatchObject({ zoneMetres: 7, intervalsOver: 2, metresOver: 7 });
    expect(shares).toEqual([0.5, 1]);
  });

  it('flags nothing without limits', () => {
    const found = deleteriousZones(intervals, [], { minLengthM: 3, maxDilutionM: 2 });
    expect(found).toMatchObject({ byElement: [], flaggedMetres: 0, totalMetres: 20 });
  });

  it('shares flagged metres among the domains', () => {
    const domains = categoryFrom(['A', 'A', 'B', 'B', 'B', 'UNASSIGNED', 'A', 'A']);
    const { isFlagged } = deleteriousZones(intervals, elements, { minLengthM: 3, maxDilutionM: 2 });
    const shares = flaggedShares(domains, lengthsOf(intervals), isFlagged);
    expect(shares).toEqual([
      { code: 'A', metres: 10, flaggedMetres: 2, share: 0.2 },
      { code: 'B', metres: 5, flaggedMetres: 5, share: 1 },
      { code: 'UNASSIGNED', metres: 5, flaggedMetres: 5, share: 1 },
    ]);
    const empty = { levels: ['A'], codes: new Int32Array(0) };
    expect(flaggedShares(empty, new Float64Array(0), new Uint8Array(0))[0]?.share).toBeNull();
    expect(() => flaggedShares(domains, lengthsOf(intervals), new Uint8Array(1))).toThrow(
      'expected 8 flags',
    );
    const none = { levels: ['A'], codes: Int32Array.of(-1) };
    expect(() => flaggedShares(none, Float64Array.of(1), new Uint8Array(1))).toThrow(
      'expected a code',
    );
  });
});
