import { describe, expect, it } from 'vitest';
import { ppmPerUnit, readUnit, toPpm, type AssayUnit } from '#kernels/units/assay-unit.ts';

describe('assay units', () => {
  // Computed: 31.1034768 g a troy ounce; 0.90718474 t a short ton; 1.0160469088 t a long ton.
  it.each<[AssayUnit, number]>([
    ['ppm', 1],
    ['mg/kg', 1],
    ['g/t', 1],
    ['ppb', 0.001],
    ['ug/kg', 0.001],
    ['%', 10000],
    ['kg/t', 1000],
    ['oz/st', 34.285714],
    ['oz/lt', 30.612245],
    ['oz/t', 31.1034768],
  ])('one %s is %d ppm', (unit, ppm) => {
    expect(ppmPerUnit(unit)).toBeCloseTo(ppm, 6);
  });

  it('keeps 1 kg/t = 0.1 % (identity)', () => {
    expect(toPpm(1, 'kg/t')).toBe(toPpm(0.1, '%'));
  });

  it.each([
    ['PPM', 'ppm'],
    ['pct', '%'],
    ['wt%', '%'],
    ['g_t', 'g/t'],
    ['GPT', 'g/t'],
    ['µg/kg', 'ug/kg'],
    ['mg/kg', 'mg/kg'],
  ])('reads %s as %s', (token, unit) => {
    expect(readUnit(token)).toEqual({ unit, isLoose: false });
  });

  it('marks ounces per ton as loose and refuses other words', () => {
    expect(readUnit('oz/t')).toEqual({ unit: 'oz/t', isLoose: true });
    expect(readUnit('opt')).toEqual({ unit: 'oz/st', isLoose: true });
    for (const token of ['', 'ppt', 'm', 'constructor']) expect(readUnit(token)).toBeNull();
  });
});
