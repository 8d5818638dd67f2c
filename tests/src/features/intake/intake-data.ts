import type { ColumnGuess, ColumnMapping, FileCheck, FileMapping, Revision, Upload } from '#contract/files.ts';

const PERSON = { id: 2, name: 'T. Whitlock' };

export const column = (index: number, header: string, change: Partial<ColumnMapping> = {}): ColumnMapping => ({
  index, header, role: 'skip', analyte: null, unit: null, oxide: null, method: null, ...change,
});

export const ASSAY_COLUMNS: ColumnMapping[] = [
  column(0, 'hole_id', { role: 'hole' }),
  column(1, 'from_m', { role: 'from' }),
  column(2, 'to_m', { role: 'to' }),
  column(3, 'Cu_ppm', { role: 'analyte', analyte: 'Cu', unit: 'ppm' }),
  column(4, 'Ag', { role: 'analyte', analyte: 'Ag', unit: 'ppm' }),
  column(5, 'remarks'),
];

export const mapping = (change: Partial<FileMapping> = {}): FileMapping => ({
  kind: 'assay', delimiter: ',', decimalMark: '.', downIs: 'negative', referenceLine: 'bottom', columns: ASSAY_COLUMNS, ...change,
});

export const guessOf = (columns: readonly ColumnMapping[]): ColumnGuess[] =>
  columns.map((guessed) => ({
    ...guessed,
    certainty: guessed.header === 'Ag' ? 'check' : guessed.role === 'skip' ? 'unknown' : 'sure',
    reason: guessed.header === 'Ag' ? 'no unit in the header; ppm proposed from the size of the values' : 'common column name',
    firstValue: guessed.header === 'remarks' ? '' : '12.4',
  }));

export const CHECK: FileCheck = {
  rows: 1284, rowsToLoad: 1277, rowsAside: 7, warnings: 31, holes: 12, notes: [],
  byCode: [{ code: 'hole-unknown', severity: 'aside', count: 7 }, { code: 'past-end', severity: 'warning', count: 31 }],
  marks: [{ fromRow: 6, toRow: 6, severity: 'aside' }, { fromRow: 611, toRow: 640, severity: 'warning' }],
};

export const upload = (change: Partial<Upload> = {}): Upload => ({
  id: 3, fileName: 'december.csv', sizeBytes: 90_000, sha256: 'ab', uploadedBy: PERSON, uploadedAt: '2026-11-30T09:00:00Z', state: 'mapped', encoding: 'utf-8',
  rowCount: 1284, guess: guessOf(ASSAY_COLUMNS), mapping: mapping(), mappingRemembered: false, check: null, revisionId: null, ...change,
});

export const revision = (change: Partial<Revision> = {}): Revision => ({
  id: 9, kind: 'assay', number: 9, fileName: 'november.csv', uploadId: 1, mode: 'replace', isCurrent: true, rows: 5000, rowsAdded: 5000, rowsAside: 2, tableId: 4,
  loadedBy: PERSON, loadedAt: '2026-11-27T09:00:00Z', ...change,
});

export const DEPOSIT = {
  id: 1, name: 'Tarnfell', description: '', grid: { kind: 'local', name: 'mine grid' }, payAnalytes: [{ analyte: 'Cu', unit: '%' }], deleteriousAnalytes: ['As'],
  isDemo: false, version: 3, createdAt: '2026-01-01T00:00:00Z', myRole: 'geologist', leads: [],
};

export const PREVIEW = {
  columns: [
    { index: 0, label: 'hole', unit: null, isNumber: false },
    { index: 3, label: 'Cu', unit: 'ppm', isNumber: true },
    { index: 4, label: 'Ag', unit: 'ppm', isNumber: true },
  ],
  rows: [
    { row: 2, aside: false, cells: [{ text: 'TFD-031', mark: 'plain', note: null }, { text: '>10000', mark: 'above', note: null }, { text: '<0.1', mark: 'below', note: null }] },
    { row: 3, aside: true, cells: [{ text: 'TFD-O31', mark: 'refused', note: 'no hole TFD-O31; TFD-031 meant?' }, { text: 'NS', mark: 'missing', note: null }, { text: '4', mark: 'plain', note: null }] },
  ],
};
