import type { FileCheck, FileMapping } from '#contract/files.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { eachRow, type RowSource } from './csv-rows.ts';
import { draftOfTable, joinDrafts } from './draft-tables.ts';
import { knownHoles } from './hole-names.ts';
import { type FoundProblem, ProblemList } from './problem-list.ts';
import { sortedRows } from './row-order.ts';
import { resolveDeterminations, settleConflicts, settlePending, tellUnitBlocks, tellUpwardStations } from './settle.ts';
import { TableDraft } from './table-draft.ts';
import { TableReader } from './table-reader.ts';
import type { TextEncoding } from './text-encoding.ts';

export interface ReadTableInput {
  path: string;
  encoding: TextEncoding;
  mapping: FileMapping;
  /** Table of the current collars, to know holes by; null while there is none. */
  collarTableId: number | null;
  /** Table whose rows the file is added to; null to replace. */
  baseTableId: number | null;
}

export interface ReadTableOutput {
  draft: TableDraft;
  /** Rows to keep, in stored order. */
  order: Int32Array;
  /** Rows of the file that were kept. */
  rowsAdded: number;
  check: FileCheck;
  problems: ProblemList;
}

/** Needs collars to be judged against, when they are loaded. */
const KINDS_WITH_HOLES = ['survey', 'assay', 'lithology', 'weathering', 'structure'];

function collarsOf(store: ColumnStore, { collarTableId, mapping }: ReadTableInput) {
  if (collarTableId === null || !KINDS_WITH_HOLES.includes(mapping.kind)) return null;
  const { codes, dictionary } = store.readCategory(collarTableId, 'hole');
  const names = Array.from(codes, (code) => dictionary[code] ?? '');
  return knownHoles(names, store.readNumbers(collarTableId, 'length'));
}

/**
 * Reads a whole file by its mapping: rows that hold go into a draft, the others are listed with the
 * reason and kept aside. Nothing is written.
 */
export async function readTable(
  store: ColumnStore,
  input: ReadTableInput,
  onProgress: (share: number) => void,
): Promise<ReadTableOutput> {
  const { mapping, baseTableId } = input;
  const source = { path: input.path, delimiter: mapping.delimiter, encoding: input.encoding };
  const holes = collarsOf(store, input);
  const problems = new ProblemList();
  const fileDraft = new TableDraft();
  const reader = new TableReader(mapping, { holes }, fileDraft, problems);
  let rows = 0;
  let blank = 0;
  await eachRow(source, (row, cells) => {
    if (row === 1) return reader.readHeader(cells);
    if (cells.length === 1 && cells[0]?.trim() === '') blank += 1;
    else rows += 1;
    reader.read(row, cells);
  }, onProgress);

  const fileLeftOut = settlePending(reader, fileDraft, problems);
  resolveDeterminations(reader, fileDraft);
  if (mapping.kind === 'survey') tellUpwardStations(reader, fileDraft, problems);
  if (mapping.kind === 'assay') tellUnitBlocks(reader, fileDraft, problems);
  const base = baseTableId === null ? null : draftOfTable(store, baseTableId);
  const draft = base ? joinDrafts(base, fileDraft) : fileDraft;
  const leftOut = new Uint8Array(draft.rows);
  leftOut.set(fileLeftOut, base?.rows ?? 0);
  settleConflicts(mapping.kind, reader, draft, problems, leftOut);
  await giveOriginals(source, problems);

  const order = sortedRows(draft).filter((i) => leftOut[i] === 0);
  const rowsAdded = order.reduce((sum, i) => sum + (draft.sourceRow.at(i) > 0 ? 1 : 0), 0);
  const notes = notesOf(input, holes === null, blank, reader);
  const hole = draft.categories.get('hole');
  const check: FileCheck = {
    rows, rowsToLoad: rowsAdded, rowsAside: rows - rowsAdded, warnings: problems.count('warning'),
    holes: hole ? new Set(order.map((i) => hole.codes.at(i))).size : 0,
    byCode: problems.byCode(), marks: problems.marks(), notes,
  };
  return { draft, order, rowsAdded, check, problems };
}

/** Problems that showed only once all rows were read get their record from a second look at the file. */
async function giveOriginals(source: RowSource, problems: ProblemList): Promise<void> {
  const without = new Map<number, FoundProblem[]>();
  for (const problem of problems.listed) {
    if (problem.original === '') without.set(problem.row, [...(without.get(problem.row) ?? []), problem]);
  }
  if (without.size === 0) return;
  await eachRow(source, (row, cells) => {
    for (const problem of without.get(row) ?? []) problem.original = cells.join(source.delimiter);
  });
}

function notesOf({ mapping }: ReadTableInput, isWithoutCollars: boolean, blank: number, reader: TableReader): string[] {
  const notes: string[] = [];
  if (isWithoutCollars && KINDS_WITH_HOLES.includes(mapping.kind)) {
    notes.push('No collars are loaded yet: hole names and ends of holes could not be checked.');
  }
  if (blank > 0) notes.push(`${blank} blank ${blank === 1 ? 'line' : 'lines'} passed over.`);
  const counts = new Map<string, string[]>();
  for (const { analyte, header } of reader.plan.analytes) counts.set(analyte, [...(counts.get(analyte) ?? []), header]);
  for (const [analyte, headers] of counts) {
    if (headers.length > 1) notes.push(`${analyte} has ${headers.length} columns (${headers.join(', ')}): the first stands, a later one fills what it lacks or caps.`);
  }
  return notes;
}
