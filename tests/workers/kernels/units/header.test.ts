import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseHeader } from '#kernels/units/header.ts';

describe('parseHeader of analytes', () => {
  it.each([
    ['Cu_ppm', 'Cu', 'ppm', null],
    ['Au g/t FA', 'Au', 'g/t', 'FA'],
    ['S_pct', 'S', '%', null],
    ['Cu (ppm)', 'Cu', 'ppm', null],
    ['Cu%', 'Cu', '%', null],
    ['Cu wt %', 'Cu', '%', null],
    ['Cuppm', 'Cu', 'ppm', null],
    ['Au_g_t', 'Au', 'g/t', null],
    ['Hg [µg/kg]', 'Hg', 'ug/kg', null],
    ['Ag_oz_st', 'Ag', 'oz/st', null],
    ['CU_PPM_4A', 'Cu', 'ppm', '4A'],
    ['Cu_AS_pct', 'Cu', '%', 'AS'],
    ['CO_PPM', 'Co', 'ppm', null],
    ['NA_PCT', 'Na', '%', null],
    ['as_ppm', 'As', 'ppm', null],
    ['ICP Cu ppm', 'Cu', 'ppm', 'ICP'],
    ['copper ppm', 'Cu', 'ppm', null],
    ['Y_ppm', 'Y', 'ppm', null],
    ['\ufeffV_ppb', 'V', 'ppb', null],
    ['LOI_pct', 'LOI', '%', null],
  ])('%s is %s in %s, method %s', (header, element, unit, method) => {
    expect(parseHeader(header)).toMatchObject({
      role: 'analyte',
      element,
      oxide: null,
      oxideFactor: 1,
      unit,
      method,
      certainty: 'sure',
    });
  });

  it.each([
    ['Al2O3_pct', 'Al', 'Al2O3', 1.8894],
    ['AL2O3_PCT', 'Al', 'Al2O3', 1.8894],
    ['Fe2O3T %', 'Fe', 'Fe2O3', 1.4297],
    ['U3O8 ppm', 'U', 'U3O8', 1.1792],
    ['CO2_pct', 'C', 'CO2', 3.6641],
  ])('%s is the oxide of %s', (header, element, oxide, factor) => {
    const found = parseHeader(header);
    expect(found).toMatchObject({ role: 'analyte', element, oxide, certainty: 'sure' });
    expect(found.oxideFactor).toBeCloseTo(factor, 4);
  });

  it('tells cobalt from carbon monoxide by case (Co, CO)', () => {
    expect(parseHeader('Co_ppm')).toMatchObject({
      element: 'Co',
      reason: 'symbol and unit in the header',
    });
    expect(parseHeader('CO_ppm').reason).toMatch(/capitals/);
    expect(parseHeader('CO')).toMatchObject({ element: 'Co', unit: null, certainty: 'check' });
  });

  it('asks about ounces per ton and about a method against the symbol', () => {
    expect(parseHeader('Au_opt')).toMatchObject({ unit: 'oz/st', certainty: 'check' });
    expect(parseHeader('Ag_oz')).toMatchObject({ element: 'Ag', unit: 'oz/st', method: null, certainty: 'check' });
    expect(parseHeader('Au oz/t')).toMatchObject({ unit: 'oz/t', certainty: 'check' });
    expect(parseHeader('AuFA_ppm')).toMatchObject({
      element: 'Au',
      method: 'FA',
      certainty: 'check',
    });
  });

  it.each([
    ['Al', ['7.81', '8.02', '<0.01'], '%'],
    ['Fe', ['34000', '21000'], null],
    ['Cd', ['1.74', '1.335'], null],
    ['Au', ['0.01', '0.2', '3.1'], 'ppm'],
    ['SiO2', ['55.31', '60.2'], '%'],
    ['Al', [], null],
  ] as const)('%s without a unit, values %j: proposes %s and asks', (header, samples, unit) => {
    expect(parseHeader(header, samples)).toMatchObject({
      role: 'analyte',
      unit,
      certainty: 'check',
      reason: expect.stringContaining('no unit'),
    });
  });
});

describe('parseHeader of other columns', () => {
  it.each([
    ['HOLE_ID', 'hole'],
    ['BHID', 'hole'],
    ['Drillhole', 'hole'],
    ['FROM_M', 'from'],
    ['From (m)', 'from'],
    ['Depth From', 'from'],
    ['TO_M', 'to'],
    ['to', 'to'],
    ['Depth', 'depth'],
    ['depth_m', 'depth'],
    ['SampleID', 'sample'],
    ['Sample No.', 'sample'],
    ['Xloc', 'x'],
    ['EASTING', 'x'],
    ['X', 'x'],
    ['Yloc', 'y'],
    ['North_m', 'y'],
    ['RL', 'z'],
    ['Elevation (m)', 'z'],
    ['Z', 'z'],
    ['EOH', 'length'],
    ['Total Depth', 'length'],
    ['Length_m', 'length'],
    ['Azimuth', 'azimuth'],
    ['AZI_GRID', 'azimuth'],
    ['Dip', 'dip'],
    ['dip_deg', 'dip'],
    ['Dip Direction', 'dip-direction'],
    ['DIPDIR', 'dip-direction'],
    ['Alpha', 'alpha'],
    ['beta_deg', 'beta'],
    ['Orientation confidence', 'confidence'],
    ['Structure Type', 'structure-type'],
    ['Rock', 'code'],
    ['LITH', 'code'],
    ['Weathering', 'code'],
    ['Fault_Name', 'name'],
    ['Campaign', 'campaign'],
    ['Lab', 'laboratory'],
    ['Batch_No', 'batch'],
    ['Date', 'date'],
    ['Comments', 'note'],
  ] as const)('%s is %s', (header, role) => {
    expect(parseHeader(header)).toMatchObject({
      role,
      element: null,
      unit: null,
      certainty: 'sure',
    });
  });

  it('says what a code column is about', () => {
    expect(parseHeader('Rock_type').topic).toBe('lithology');
    expect(parseHeader('OX_STATE').topic).toBe('weathering');
    expect(parseHeader('Fault').topic).toBe('fault');
    expect(parseHeader('Gamma')).toMatchObject({
      role: 'note',
      topic: 'gamma',
      certainty: 'check',
    });
  });

  it('asks where a word has two meanings', () => {
    for (const header of ['Alt', 'Inclination', 'Top', 'Type', 'AZI_MAG']) {
      expect(parseHeader(header).certainty).toBe('check');
    }
  });

  it('tells the coordinate Y from yttrium by the values', () => {
    expect(parseHeader('Y', ['6120345.2'])).toMatchObject({ role: 'y', certainty: 'check' });
    expect(parseHeader('Y', ['12.1', '8.4'])).toMatchObject({
      role: 'analyte',
      element: 'Y',
      certainty: 'check',
    });
  });

  it.each([
    '',
    '  ',
    'Landuse',
    'Recovery_%',
    'In situ density',
    'As received',
    'No. of samples',
    'Core',
    '__proto__',
    'constructor',
    'CAT',
    'Mass_as_received',
  ])('knows nothing of %j', (header) => {
    expect(parseHeader(header)).toMatchObject({
      role: 'skip',
      certainty: 'unknown',
      element: null,
    });
  });

  it('answers any header without throwing', () => {
    fc.assert(
      fc.property(
        fc.string({ unit: 'binary', maxLength: 60 }),
        fc.array(fc.string(), { maxLength: 5 }),
        (header, samples) => {
          const found = parseHeader(header, samples);
          expect(found.reason).not.toBe('');
          expect(found.role === 'analyte').toBe(found.element !== null);
        },
      ),
    );
  });
});
