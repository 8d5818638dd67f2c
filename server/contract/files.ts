import * as z from 'zod';
import { Analyte, DepositParams, Done, Id, Instant, Name, Opaque, PageQuery, PersonRef, pageOf } from './common.ts';
import { endpoint } from './endpoint.ts';
import { JobStarted } from './jobs.ts';
import { ANALYSTS, ANY_MEMBER } from './roles.ts';

export const TABLE_KINDS = ['collar', 'survey', 'assay', 'surface', 'lithology', 'weathering', 'structure', 'fault'] as const;
export const TableKind = z.enum(TABLE_KINDS);
export type TableKind = z.infer<typeof TableKind>;

/** What a column of a file may be. Which roles a kind needs: REQUIRED_ROLES. */
export const COLUMN_ROLES = [
  'skip', 'hole', 'from', 'to', 'depth', 'sample', 'x', 'y', 'z', 'length', 'azimuth', 'dip', 'dip-direction',
  'alpha', 'beta', 'confidence', 'structure-type', 'code', 'name', 'campaign', 'laboratory', 'batch', 'date', 'analyte', 'note',
] as const;
export const ColumnRole = z.enum(COLUMN_ROLES);
export type ColumnRole = z.infer<typeof ColumnRole>;

/** Roles that must be mapped before a file of a kind can be read; inner lists are alternatives. */
export const REQUIRED_ROLES: Record<TableKind, readonly (readonly ColumnRole[])[]> = {
  collar: [['hole'], ['x'], ['y'], ['z'], ['length']],
  survey: [['hole'], ['depth'], ['azimuth'], ['dip']],
  assay: [['hole'], ['from'], ['to'], ['analyte']],
  surface: [['x'], ['y'], ['analyte']],
  lithology: [['hole'], ['from'], ['to'], ['code']],
  weathering: [['hole'], ['from'], ['to'], ['code']],
  structure: [['hole'], ['depth'], ['alpha', 'dip']],
  fault: [['name'], ['x'], ['y'], ['z'], ['dip'], ['dip-direction']],
};

/** What a table of a kind uses, its required columns and the others; the rest of a file is skipped. */
export const ROLES_OF_KIND: Record<TableKind, readonly ColumnRole[]> = {
  collar: ['hole', 'x', 'y', 'z', 'length', 'azimuth', 'dip', 'campaign', 'date', 'note'],
  survey: ['hole', 'depth', 'azimuth', 'dip', 'date', 'note'],
  assay: ['hole', 'from', 'to', 'sample', 'campaign', 'laboratory', 'batch', 'date', 'analyte', 'note'],
  surface: ['sample', 'x', 'y', 'z', 'code', 'campaign', 'laboratory', 'batch', 'date', 'analyte', 'note'],
  lithology: ['hole', 'from', 'to', 'code', 'note'],
  weathering: ['hole', 'from', 'to', 'code', 'note'],
  structure: ['hole', 'depth', 'alpha', 'beta', 'dip', 'dip-direction', 'structure-type', 'confidence', 'note'],
  fault: ['name', 'x', 'y', 'z', 'dip', 'dip-direction', 'note'],
};

/** Units an analyte column may be written in; storage is ppm. */
export const ASSAY_UNITS = ['ppm', 'ppb', '%', 'g/t', 'mg/kg', 'ug/kg', 'kg/t', 'oz/st', 'oz/lt', 'oz/t'] as const;
export const AssayUnit = z.enum(ASSAY_UNITS);
export type AssayUnit = z.infer<typeof AssayUnit>;

export const ColumnMapping = z.strictObject({
  /** 0-based position in the file. */
  index: z.number().int().min(0).max(9999),
  header: z.string().max(1000),
  role: ColumnRole,
  analyte: Analyte.nullable().default(null),
  unit: AssayUnit.nullable().default(null),
  /** An oxide (`Al2O3`) is turned into its element on load; null for an element. */
  oxide: z.string().max(12).nullable().default(null),
  method: z.string().max(80).nullable().default(null),
});
export type ColumnMapping = z.infer<typeof ColumnMapping>;

export const FileMapping = z.strictObject({
  kind: TableKind,
  delimiter: z.enum([',', ';', '\t', '|']),
  decimalMark: z.enum(['.', ',']),
  /** Sign of a dip that points down, for surveys: the trade writes both. */
  downIs: z.enum(['negative', 'positive']).default('negative'),
  /** Which line beta is read from, for structures measured on core. */
  referenceLine: z.enum(['bottom', 'top']).default('bottom'),
  columns: z.array(ColumnMapping).min(1).max(5000),
});
export type FileMapping = z.infer<typeof FileMapping>;
export type FileMappingInput = z.input<typeof FileMapping>;

/** How sure the guess of one column is, with the reason in a few words. */
export const ColumnGuess = ColumnMapping.extend({
  certainty: z.enum(['sure', 'check', 'unknown']),
  reason: z.string(),
  firstValue: z.string(),
});
export type ColumnGuess = z.infer<typeof ColumnGuess>;

export const CellMark = z.enum(['plain', 'below', 'above', 'missing', 'refused']);
export type CellMark = z.infer<typeof CellMark>;
export const PreviewRow = z.object({
  /** 1-based line of the file; the header is line 1. */
  row: z.number().int(),
  cells: z.array(z.object({ text: z.string(), mark: CellMark, note: z.string().nullable() })),
  aside: z.boolean(),
});
export type PreviewRow = z.infer<typeof PreviewRow>;

export const RowProblem = z.object({
  row: z.number().int(),
  column: z.string(),
  value: z.string(),
  /** Stable, for example `interval-overlap`. */
  code: z.string(),
  message: z.string(),
  severity: z.enum(['aside', 'warning']),
});
export type RowProblem = z.infer<typeof RowProblem>;

/** What a whole-file check found. `blocks` draw the file as one run. */
export const FileCheck = z.object({
  rows: z.number().int(),
  rowsToLoad: z.number().int(),
  rowsAside: z.number().int(),
  warnings: z.number().int(),
  holes: z.number().int(),
  byCode: z.array(z.object({ code: z.string(), severity: z.enum(['aside', 'warning']), count: z.number().int() })),
  marks: z.array(z.object({ fromRow: z.number().int(), toRow: z.number().int(), severity: z.enum(['aside', 'warning']) })),
  notes: z.array(z.string()),
});
export type FileCheck = z.infer<typeof FileCheck>;

export const Upload = z.object({
  id: z.number().int(),
  fileName: z.string(),
  sizeBytes: z.number(),
  sha256: z.string(),
  uploadedBy: PersonRef,
  uploadedAt: Instant,
  state: z.enum(['mapped', 'checked', 'loaded']),
  encoding: z.string(),
  /** Lines after the header. */
  rowCount: z.number().int(),
  guess: z.array(ColumnGuess),
  /** The mapping in force: the guess, or what a person saved. */
  mapping: FileMapping,
  mappingRemembered: z.boolean(),
  check: FileCheck.nullable(),
  revisionId: z.number().int().nullable(),
});
export type Upload = z.infer<typeof Upload>;

const tag = 'Intake';
const read = { kind: 'deposit', roles: ANY_MEMBER } as const;
const write = { kind: 'deposit', roles: ANALYSTS } as const;
const UploadParams = DepositParams.extend({ uploadId: Id });

export const uploadFiles = endpoint({
  id: 'uploadFiles', method: 'post', path: '/deposits/:depositId/uploads', tag, access: write, consumes: 'multipart',
  summary: 'Upload one or several CSV files (multipart field `files`); each is looked at and its columns are guessed',
  params: DepositParams, status: 201,
  response: z.object({ uploads: z.array(Upload), refused: z.array(z.object({ fileName: z.string(), message: z.string() })) }),
});
export const listUploads = endpoint({
  id: 'listUploads', method: 'get', path: '/deposits/:depositId/uploads', tag, access: read, summary: 'Uploads, newest first', params: DepositParams, response: z.array(Upload),
});
export const getUpload = endpoint({
  id: 'getUpload', method: 'get', path: '/deposits/:depositId/uploads/:uploadId', tag, access: read, summary: 'One upload', params: UploadParams, response: Upload,
});
export const downloadUpload = endpoint({
  id: 'downloadUpload', method: 'get', path: '/deposits/:depositId/uploads/:uploadId/file', tag, access: read, produces: 'binary', summary: 'The file as it was uploaded', params: UploadParams, response: Opaque,
});
export const discardUpload = endpoint({
  id: 'discardUpload', method: 'delete', path: '/deposits/:depositId/uploads/:uploadId', tag, access: write, summary: 'Discard an upload that was not loaded', params: UploadParams, response: Done,
});
export const saveMapping = endpoint({
  id: 'saveMapping', method: 'put', path: '/deposits/:depositId/uploads/:uploadId/mapping', tag, access: write,
  summary: 'Say what each column is; any earlier check is dropped', params: UploadParams, body: FileMapping, response: Upload,
});
export const previewRows = endpoint({
  id: 'previewRows', method: 'post', path: '/deposits/:depositId/uploads/:uploadId/preview', tag, access: read,
  summary: 'The first rows read with a mapping, each cell marked', params: UploadParams,
  body: z.strictObject({ mapping: FileMapping, rows: z.number().int().min(1).max(200).default(100) }),
  response: z.object({ columns: z.array(z.object({ index: z.number().int(), label: z.string(), unit: z.string().nullable(), isNumber: z.boolean() })), rows: z.array(PreviewRow) }),
});
export const checkFile = endpoint({
  id: 'checkFile', method: 'post', path: '/deposits/:depositId/uploads/:uploadId/check', tag, access: write,
  summary: 'Check every row with the saved mapping, loading nothing', params: UploadParams, response: JobStarted, status: 202,
});
export const loadFile = endpoint({
  id: 'loadFile', method: 'post', path: '/deposits/:depositId/uploads/:uploadId/load', tag, access: write,
  summary: 'Load the good rows as a new revision: `replace` the table, or `add` to its current rows', params: UploadParams,
  body: z.strictObject({ mode: z.enum(['replace', 'add']) }), response: JobStarted, status: 202,
});
export const listProblems = endpoint({
  id: 'listProblems', method: 'get', path: '/deposits/:depositId/uploads/:uploadId/problems', tag, access: read,
  summary: 'Row problems of the last check or load', params: UploadParams, query: PageQuery.extend({ severity: z.enum(['aside', 'warning']).optional(), code: z.string().max(60).optional() }), response: pageOf(RowProblem),
});
export const downloadProblems = endpoint({
  id: 'downloadProblems', method: 'get', path: '/deposits/:depositId/uploads/:uploadId/problems.csv', tag, access: read, produces: 'csv',
  summary: 'Row problems as CSV, each with its original row', params: UploadParams, response: Opaque,
});

export const Revision = z.object({
  id: z.number().int(),
  kind: TableKind,
  /** Counts up within a deposit. */
  number: z.number().int(),
  fileName: z.string(),
  uploadId: z.number().int(),
  mode: z.enum(['replace', 'add']),
  isCurrent: z.boolean(),
  rows: z.number().int(),
  rowsAdded: z.number().int(),
  rowsAside: z.number().int(),
  tableId: z.number().int(),
  loadedBy: PersonRef,
  loadedAt: Instant,
});
export type Revision = z.infer<typeof Revision>;

export const listRevisions = endpoint({
  id: 'listRevisions', method: 'get', path: '/deposits/:depositId/revisions', tag, access: read, summary: 'All revisions of all tables, newest first', params: DepositParams, response: z.array(Revision),
});
export const useRevision = endpoint({
  id: 'useRevision', method: 'post', path: '/deposits/:depositId/revisions/:revisionId/use', tag, access: write,
  summary: 'Make a revision the current one of its table (go back or forward)', params: DepositParams.extend({ revisionId: Id }), response: Revision,
});

/** Demonstration tables, to try intake by hand. */
export const DemoFile = z.object({ name: Name, kind: TableKind, mode: z.enum(['replace', 'add']), rows: z.number().int(), sizeBytes: z.number().int() });
export type DemoFile = z.infer<typeof DemoFile>;
export const listDemoFiles = endpoint({
  id: 'listDemoFiles', method: 'get', path: '/demo-files', tag, access: { kind: 'signed-in' }, summary: 'Tables of the demonstration deposit, ready to download (404 on other instances)', response: z.array(DemoFile),
});
export const downloadDemoFile = endpoint({
  id: 'downloadDemoFile', method: 'get', path: '/demo-files/:name', tag, access: { kind: 'signed-in' }, produces: 'csv', summary: 'One demonstration table as CSV', params: z.strictObject({ name: z.string().min(1).max(120) }), response: Opaque,
});
