import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { MINERALS } from '#kernels/geomet/minerals.ts';
import { ELEMENT_BY_SYMBOL } from '#kernels/units/atomic-weights.ts';
import { digestionNotes } from '#kernels/units/digestion-notes.ts';
import { ironOf } from '#kernels/units/iron-forms.ts';
import { findRowProblems, MAXIMA } from '#kernels/units/row-sanity.ts';

const rowsOf = (...rows: number[][]) => Float64Array.from(rows.flat(), (percent) => percent * 1e4);

describe('findRowProblems', () => {
  it('has the maxima of FeO, FeS2, Cu2S and Cu2O: 77.7, 53.5, 79.9, 88.8 % (computed)', () => {
    expect(MAXIMA.Fe).toBeCloseTo(77.73, 2);
    expect(MAXIMA.S).toBeCloseTo(53.4489, 4);
    expect(MAXIMA.Cu).toBeCloseTo(79.8557, 4);
    expect(MAXIMA.cuprite).toBeCloseTo(88.82, 2);
  });

  it('names the element over its maximum, and nothing of a sound row', () => {
    const problems = findRowProblems(rowsOf([78, 0, 0], [10, 54, 0], [5, 5, 80], [30, 20, 5]), [
      'Fe',
      'S',
      'Cu',
    ]);
    expect(problems.map(({ row, element, code }) => [row, element, code])).toEqual([
      [0, 'Fe', 'over-stoichiometric-maximum'],
      [1, 'S', 'over-stoichiometric-maximum'],
      [2, 'Cu', 'over-stoichiometric-maximum'],
    ]);
    expect(problems[0]?.message).toBe(
      'expected at most 77.7 % Fe, found 78.00 % in row 0: check its unit',
    );
  });

  it('allows native sulphur and cuprite where they are known', () => {
    const rich = rowsOf([99, 0], [0, 88]);
    expect(
      findRowProblems(rich, ['S', 'Cu'], {
        nativeElements: new Set(['S']),
        isCupritePresent: true,
        mostPercent: 200,
      }),
    ).toEqual([]);
  });

  it('finds a rock whose unit is wrong by the sum of its oxides', () => {
    const elements = ['Al', 'Fe', 'K', 'Si'];
    expect(findRowProblems(rowsOf([8, 5, 3, 30]), elements)).toEqual([]);
    const [problem] = findRowProblems(rowsOf([16, 5, 3, 30]), elements);
    // 16 x 1.8894 + 5 x 1.2865 + 3 x 1.2046 + 30 x 2.1393
    expect(problem?.percent).toBeCloseTo(104.46, 1);
    expect(problem).toMatchObject({ code: 'over-100-percent', element: null, limitPercent: 102 });
  });

  it('raises no alarm for any pure mineral of the table', () => {
    for (const { name, massFractions } of MINERALS.values()) {
      const elements = [...massFractions.keys()].filter(
        (symbol) => symbol !== 'O' && symbol !== 'H',
      );
      const row = Float64Array.from(elements, (symbol) => 1e6 * (massFractions.get(symbol) ?? 0));
      expect(findRowProblems(row, elements), name).toEqual([]);
    }
  });

  it('counts missing grades as nothing and refuses grades and symbols that are none', () => {
    expect(findRowProblems(Float64Array.of(NaN, NaN), ['Fe', 'S'])).toEqual([]);
    expect(() => findRowProblems(Float64Array.of(1, -1), ['Fe', 'S'])).toThrow(
      'S, found -1 in row 0',
    );
    expect(() => findRowProblems(Float64Array.of(1, Infinity), ['Fe', 'S'])).toThrow(/Infinity/);
    expect(() => findRowProblems(Float64Array.of(1), ['LOI'])).toThrow(/element symbol, found LOI/);
    expect(() => findRowProblems(Float64Array.of(1, 2, 3), ['Fe', 'S'])).toThrow(/rows of 2/);
    expect(() => findRowProblems(new Float64Array(0), [])).toThrow(/rows of 0/);
  });
});

describe('ironOf', () => {
  it('adds separate determinations and never two reports of the same iron', () => {
    const forms = { feo: Float64Array.of(7.1844), fe2o3: Float64Array.of(15.9687) };
    // FeO 71.844 and Fe2O3 159.687 g/mol: 5.5845 and 11.169 of Fe
    expect(ironOf(forms, 'separate')[0]).toBeCloseTo(16.7535, 4);
    expect(ironOf(forms, 'total')[0]).toBeCloseTo(11.169, 4);
    expect(ironOf({ ...forms, fe2o3: null }, 'total')[0]).toBeCloseTo(5.5845, 4);
  });

  it('is missing where a form is, and refuses what does not fit', () => {
    const feo = Float64Array.of(1, NaN);
    expect(ironOf({ feo, fe2o3: Float64Array.of(NaN, 1) }, 'separate')).toEqual(
      Float64Array.of(NaN, NaN),
    );
    expect(() => ironOf({ feo: null, fe2o3: null }, 'total')).toThrow(/found neither/);
    expect(() => ironOf({ feo, fe2o3: Float64Array.of(1) }, 'separate')).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
    expect(() => ironOf({ feo: Float64Array.of(-1), fe2o3: null }, 'total')).toThrow('row 0');
  });

  it('grows with either form', () => {
    const grade = fc.double({ min: 0, max: 50, noNaN: true });
    fc.assert(
      fc.property(grade, grade, (a, b) => {
        const forms = { feo: Float64Array.of(a), fe2o3: Float64Array.of(b) };
        expect(ironOf(forms, 'separate')[0]).toBeGreaterThanOrEqual(ironOf(forms, 'total')[0]!);
      }),
    );
  });
});

describe('digestion notes', () => {
  it('warn of elements held back, lost, brought down, interfered with, or no assay', () => {
    const effects = (element: string) => digestionNotes(element).map(({ effect }) => effect);
    expect(effects('Zr')).toEqual(['partly-opened']);
    expect(effects('Cr')).toEqual(['partly-opened', 'lost']);
    expect(effects('Si')).toEqual(['lost']);
    expect(effects('Ag')).toEqual(['precipitated', 'interference']);
    expect(effects('Au')).toEqual(['not-an-assay']);
    expect(digestionNotes('Cu')).toEqual([]);
  });

  it('speak of elements only, once for each effect', () => {
    for (const symbol of ELEMENT_BY_SYMBOL.keys()) {
      const effects = digestionNotes(symbol).map(({ effect }) => effect);
      expect(new Set(effects).size).toBe(effects.length);
    }
  });
});
