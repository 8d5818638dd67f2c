import { describe, expect, it } from 'vitest';
import { openColumns, certaintyOf } from '#src/features/intake/certainty.ts';
import { runMarks, runTicks } from '#src/features/intake/file-run.ts';
import { attentionOf, planLoads } from '#src/features/intake/load-plan.ts';
import { columnsWithoutUnit, mappingProblems, readAnalyteText, withColumn, withDelimiter, withKind, withRole, withUnitForAll } from '#src/features/intake/mapping.ts';
import { ASSAY_COLUMNS, CHECK, column, guessOf, mapping, revision, upload } from './intake-data.ts';

describe('what stands in the way of reading a file', () => {
  it('is nothing for a mapping with every needed column', () => {
    expect(mappingProblems(mapping())).toEqual([]);
  });

  it('names all missing columns at once, alternatives together', () => {
    expect(mappingProblems(mapping({ kind: 'structure', columns: [column(0, 'h', { role: 'hole' })] }))).toEqual([
      { index: null, message: 'structures still need columns for depth, alpha or dip' },
    ]);
  });

  it('points at a doubled role, and at an analyte without name or unit', () => {
    const columns = [...ASSAY_COLUMNS, column(6, 'bhid', { role: 'hole' }), column(7, 'Moly', { role: 'analyte' }), column(8, 'Mo', { role: 'analyte', analyte: 'Mo' })];
    expect(mappingProblems(mapping({ columns }))).toEqual([
      { index: 6, message: '“hole_id” is hole already' },
      { index: 7, message: 'say which analyte it is' },
      { index: 8, message: 'say in which unit it is' },
    ]);
  });
});

describe('changing a mapping', () => {
  it('drops what a role does not use', () => {
    expect(withColumn(mapping(), 3, { role: 'skip' }).columns[3]).toEqual(column(3, 'Cu_ppm'));
  });

  it('reads analyte and unit off the header when a column becomes an analyte', () => {
    const before = mapping({ columns: [column(0, 'Zn_pct')] });
    expect(withRole(before, 0, 'analyte', '1.2').columns[0]).toMatchObject({ role: 'analyte', analyte: 'Zn', unit: '%' });
  });

  it('keeps fitting roles and reads the others anew when the kind changes', () => {
    const columns = [column(0, 'hole_id', { role: 'hole' }), column(1, 'from_m'), column(2, 'Cu_ppm'), column(3, 'length_m', { role: 'length' })];
    const changed = withKind(mapping({ kind: 'collar', columns }), 'assay', []);
    expect(changed.columns.map(({ role }) => role)).toEqual(['hole', 'from', 'analyte', 'skip']);
  });

  it('gives one unit to all analytes that have none and leaves the others', () => {
    const columns = [column(0, 'Cu', { role: 'analyte', analyte: 'Cu' }), column(1, 'S_pct', { role: 'analyte', analyte: 'S', unit: '%' })];
    const set = withUnitForAll(mapping({ columns }), 'ppb');
    expect(columnsWithoutUnit(mapping({ columns }))).toBe(1);
    expect(set.columns.map(({ unit }) => unit)).toEqual(['ppb', '%']);
  });

  it('divides the header anew by another separator', () => {
    const one = mapping({ columns: [column(0, 'hole_id;from;to;Cu_ppm')] });
    expect(withDelimiter(one, ';').columns.map(({ header, role }) => [header, role])).toEqual([
      ['hole_id', 'hole'], ['from', 'from'], ['to', 'to'], ['Cu_ppm', 'analyte'],
    ]);
  });

  it.each([
    ['cu', { analyte: 'Cu', oxide: null }],
    ['al2o3', { analyte: 'Al', oxide: 'Al2O3' }],
    ['LOI', { analyte: 'LOI', oxide: null }],
    ['molyb!', null],
  ])('reads the analyte %s', (text, read) => {
    expect(readAnalyteText(text)).toEqual(read);
  });
});

describe('certainty', () => {
  it('asks for a look at a doubtful guess until a person changes it or the file is checked', () => {
    expect(openColumns(upload()).map(({ header }) => header)).toEqual(['Ag']);
    expect(openColumns(upload({ state: 'checked', check: CHECK }))).toEqual([]);
    expect(openColumns(upload({ mapping: withColumn(mapping(), 4, { unit: 'g/t' }) }))).toEqual([]);
  });

  it('says which column a second determination fills in for', () => {
    const columns = [...ASSAY_COLUMNS, column(6, 'Cu_OG_pct', { role: 'analyte', analyte: 'Cu', unit: '%' })];
    const guess = { guess: guessOf(columns), mappingRemembered: false };
    expect(certaintyOf(columns[6]!, columns, guess, false)).toMatchObject({ word: 'fills in', reason: 'where Cu_ppm is capped or empty' });
  });
});

describe('loading all', () => {
  const collar = mapping({ kind: 'collar', columns: [] });
  it('goes collars first; the first of a kind replaces, later ones are added', () => {
    const files = [upload({ id: 5, fileName: 'b.csv' }), upload({ id: 4, fileName: 'a.csv' }), upload({ id: 6, mapping: collar }), upload({ id: 2, state: 'loaded' })];
    expect(planLoads(files, [revision()]).map(({ upload: { id }, mode, effect }) => [id, mode, effect])).toEqual([
      [6, 'replace', 'first table of collars'],
      [4, 'replace', 'replaces revision 9, 5,000 rows'],
      [5, 'add', 'added to a.csv'],
    ]);
  });

  it('waits for a doubtful analyte, a missing column and a file without a good row', () => {
    expect(attentionOf(upload())).toBe('1 analyte to look at: Ag');
    expect(attentionOf(upload({ mapping: collar }))).toContain('collars still need columns for hole');
    expect(attentionOf(upload({ state: 'checked', check: { ...CHECK, rowsToLoad: 0 } }))).toBe('no row holds');
    expect(attentionOf(upload({ mappingRemembered: true }))).toBeNull();
  });
});

describe('the file as one run', () => {
  it('puts marks where their rows lie, set-aside rows on top', () => {
    const marks = runMarks({ rows: 99, marks: [{ fromRow: 11, toRow: 11, severity: 'aside' }, { fromRow: 51, toRow: 60, severity: 'warning' }] });
    expect(marks.map(({ start, width, severity }) => [start, width, severity])).toEqual([[0.5, 0.1, 'warning'], [0.1, 0.01, 'aside']]);
  });

  it('labels no more than eight steps of 1, 2 or 5', () => {
    const labels = runTicks(1285).flatMap(({ label }) => label ?? []);
    expect(labels).toEqual(['0', '200', '400', '600', '800', '1000', '1200']);
  });
});
