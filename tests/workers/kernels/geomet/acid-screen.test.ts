import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ACID_CAUTION, acidScreen, type AcidAssay } from '#kernels/geomet/acid-screen.ts';
import { penalty, PENALTY_CAUTION, shareOverOnset } from '#kernels/geomet/penalty.ts';
import { massFraction, MINERALS } from '#kernels/geomet/minerals.ts';

describe('acid screening', () => {
  it('S 2 %, ANC 20: MPA 61.2, NAPP 41.2, ANC/MPA .3268; AP 62.5 (computed)', () => {
    const screen = acidScreen({ sulphurPercent: 2, ancKgPerT: 20 });
    expect(screen.mpa).toBeCloseTo(61.2, 10);
    expect(screen.napp).toBeCloseTo(41.2, 10);
    expect(screen.ancOverMpa).toBeCloseTo(0.3268, 4);
    expect(screen.ap).toBeCloseTo(62.5, 10);
  });

  it('has the factors of the reactions, rounded as published (30.5901, 31.2183, 83.328, .979877)', () => {
    const acid = 2 * 1.008 + 32.06 + 4 * 15.999;
    const calcite = MINERALS.get('calcite')?.molarMass ?? NaN;
    expect((10 * acid) / 32.06).toBeCloseTo(30.5901, 3);
    expect((10 * calcite) / 32.06).toBeCloseTo(31.2183, 3);
    expect(10 / massFraction('calcite', 'C')).toBeCloseTo(83.328, 2);
    expect(acid / calcite).toBeCloseTo(0.979877, 4);
    expect(acidScreen({ sulphurPercent: 1, ancKgPerT: 0 }).mpa).toBeCloseTo(30.6, 12);
    const carbon = acidScreen({ sulphurPercent: 1, carbonPercent: 1 });
    expect(carbon.np).toBeCloseTo(83.3, 12);
    expect(Math.abs((carbon.anc ?? 0) - 81.65)).toBeLessThan(0.03);
    expect(carbon.nnp).toBeCloseTo(83.3 - 31.25, 10);
    expect(carbon.npr).toBeCloseTo(83.3 / 31.25, 10);
  });

  // AMIRA (2002) P387A: NAPP and NAG pH must agree.
  it.each([
    [20, 3.1, 'potentially-acid-forming'],
    [20, 4.5, 'uncertain'],
    [80, 3.1, 'uncertain'],
    [80, 4.5, 'not-acid-forming'],
    [61.2, 4.5, 'uncertain'],
    [80, null, null],
    [null, 3.1, null],
  ] as const)('S 2 %, ANC %s, NAG pH %s is %s', (ancKgPerT, nagPh, expected) => {
    expect(acidScreen({ sulphurPercent: 2, ancKgPerT, nagPh }).classByNag).toBe(expected);
  });

  it.each([
    [0.3, 'potentially-acid-forming'],
    [0.5, 'uncertain'],
    [0.8, 'not-acid-forming'],
  ] as const)('S 1 %, C %d %% is %s by the ratio NP / AP', (carbonPercent, expected) => {
    expect(acidScreen({ sulphurPercent: 1, carbonPercent }).classByRatio).toBe(expected);
  });

  it('takes other limits, as some rules ask for a ratio of 3', () => {
    const limits = { lower: 1, upper: 3, nagPh: 4.5 };
    const screen = acidScreen({ sulphurPercent: 1, carbonPercent: 0.8 }, limits);
    expect(screen.classByRatio).toBe('uncertain');
  });

  it('takes off sulphate and the carbon of iron carbonates, and says what it assumed', () => {
    const plain = acidScreen({ sulphurPercent: 2, carbonPercent: 1 });
    expect(plain.notes).toEqual([
      'all sulphur taken as sulphide',
      'all carbon taken as calcite: siderite and ankerite would neutralise less',
    ]);
    const known = acidScreen({
      sulphurPercent: 2,
      sulphatePercent: 0.5,
      carbonPercent: 1,
      ironCarbonatePercent: 0.4,
    });
    expect(known.sulphidePercent).toBeCloseTo(1.5, 12);
    expect(known.np).toBeCloseTo(0.6 * 83.3, 10);
    expect(known.notes).toEqual([]);
    const odd = acidScreen({
      sulphurPercent: 1,
      sulphatePercent: 2,
      carbonPercent: 1,
      ironCarbonatePercent: 3,
    });
    expect(odd).toMatchObject({ sulphidePercent: 0, np: 0, npr: null, ancOverMpa: null });
    expect(odd.notes).toHaveLength(2);
  });

  it('has no account without a capacity, and no ratio without sulphide', () => {
    const bare = acidScreen({ sulphurPercent: 2 });
    expect(bare).toMatchObject({ anc: null, napp: null, npr: null, classByRatio: null });
    expect(acidScreen({ sulphurPercent: 0, carbonPercent: 1 })).toMatchObject({
      npr: null,
      classByRatio: 'not-acid-forming',
    });
  });

  it('calls for no less concern with more sulphur', () => {
    const order = ['not-acid-forming', 'uncertain', 'potentially-acid-forming'];
    const percent = fc.double({ min: 0, max: 20, noNaN: true });
    fc.assert(
      fc.property(percent, percent, percent, (a, b, carbonPercent) => {
        const rank = (sulphurPercent: number) =>
          order.indexOf(acidScreen({ sulphurPercent, carbonPercent }).classByRatio ?? '');
        expect(rank(Math.max(a, b))).toBeGreaterThanOrEqual(rank(Math.min(a, b)));
      }),
    );
  });

  it('refuses grades, capacities, pH and limits that are none', () => {
    const bad: AcidAssay[] = [
      { sulphurPercent: -1 },
      { sulphurPercent: NaN },
      { sulphurPercent: 1, carbonPercent: 101 },
      { sulphurPercent: 1, ancKgPerT: -5 },
      { sulphurPercent: 1, ancKgPerT: Infinity },
      { sulphurPercent: 1, nagPh: 15 },
    ];
    for (const assay of bad) {
      expect(() => acidScreen(assay)).toThrow(expect.objectContaining({ code: 'bad-parameter' }));
    }
    expect(() => acidScreen({ sulphurPercent: 1 }, { lower: 2, upper: 1, nagPh: 4.5 })).toThrow(
      /limits in order/,
    );
  });

  it('says that it is screening only', () => {
    expect(ACID_CAUTION).toMatch(/screening only/);
    expect(ACID_CAUTION).toMatch(/never a classification for a permit/);
    expect(PENALTY_CAUTION).toMatch(/screening only/);
  });
});

describe('penalty', () => {
  const terms = { onsetPpm: 1000, stepPpm: 1000, chargePerStep: 2.5 };

  it.each([
    [0, 0, 0],
    [1000, 0, 0],
    [2500, 1.5, 2],
    [3000, 2, 2],
  ])('%d ppm: %d steps, %d begun (worked by hand)', (grade, steps, begun) => {
    expect(penalty(grade, terms).steps).toBeCloseTo(steps, 12);
    expect(penalty(grade, terms).charge).toBeCloseTo(2.5 * steps, 12);
    expect(penalty(grade, { ...terms, isWholeStep: true }).steps).toBe(begun);
  });

  it('does not begin a step by rounding, and tells of rejection', () => {
    const fine = { onsetPpm: 0, stepPpm: 0.1, chargePerStep: 1, isWholeStep: true };
    expect(penalty(0.3, fine).steps).toBe(3);
    expect(penalty(5000, { ...terms, rejectPpm: 5000 }).isRejected).toBe(true);
    expect(penalty(4999, { ...terms, rejectPpm: 5000 }).isRejected).toBe(false);
  });

  it('refuses grades and terms that are none', () => {
    expect(() => penalty(NaN, terms)).toThrow(/grade >= 0 ppm, found NaN/);
    expect(() => penalty(1, { ...terms, stepPpm: 0 })).toThrow(/a step > 0/);
    expect(() => penalty(1, { ...terms, rejectPpm: 10 })).toThrow(/rejection above the onset/);
  });
});

describe('share over an onset', () => {
  const values = Float64Array.of(50, 100, NaN, 200);
  const lengths = Float64Array.of(1, 2, 5, 1);

  it('is weighted by length, and by length x density for tonnage (worked by hand)', () => {
    const densities = Float64Array.of(4, 2, NaN, 4);
    const share = shareOverOnset(values, lengths, 100, densities);
    expect(share).toEqual({ assayedM: 4, overM: 3, shareOfMetres: 0.75, shareOfTonnage: 8 / 12 });
    expect(shareOverOnset(values, lengths, 100).shareOfTonnage).toBeNull();
  });

  it('has no share without assays, and refuses what does not fit', () => {
    const empty = new Float64Array(0);
    expect(shareOverOnset(empty, empty, 1)).toMatchObject({ shareOfMetres: null });
    expect(() => shareOverOnset(values, empty, 1)).toThrow(/expected 4 values/);
    expect(() => shareOverOnset(values, lengths, NaN)).toThrow(/onset/);
    expect(() => shareOverOnset(values, Float64Array.of(1, -2, 5, 1), 1)).toThrow(/row 1/);
    expect(() => shareOverOnset(values, lengths, 1, Float64Array.of(1, 0, 1, 1))).toThrow(/row 1/);
  });
});
