import { QUALIFIER } from '#contract/tables.ts';
import type { ProblemList } from './problem-list.ts';
import { conflictingRows } from './row-order.ts';
import type { TableKind } from '#contract/files.ts';
import type { TableDraft } from './table-draft.ts';
import { determinationName, type TableReader } from './table-reader.ts';
import { unitBlocks } from './unit-blocks.ts';

/** Draft rows that gave way after all: 1 = left out. */
export type LeftOut = Uint8Array;

/**
 * Settles cells that needed the whole column: zeros, words and negative numbers become "below limit"
 * where a limit is known; a lone negative number sets its row aside.
 */
export function settlePending(reader: TableReader, draft: TableDraft, problems: ProblemList): LeftOut {
  const leftOut = new Uint8Array(draft.rows);
  const limitsOf = new Map(reader.plan.analytes.map((column, place) => [column.index, reader.limits[place]]));
  for (const { column, index, row, text, magnitude, original } of reader.pending) {
    const limits = limitsOf.get(column.index);
    const { values, qualifiers } = draft.assayColumn(determinationName(column), column.unit, column.method);
    const problem = { row, column: column.header, value: text, original };
    const limit = magnitude === null ? (limits?.usual() ?? null) : limits?.isLimit(magnitude) ? magnitude : null;
    if (limit !== null) {
      values.set(index, limit * column.toPpm);
      qualifiers.set(index, QUALIFIER.below);
      if (magnitude === null) problems.add({ ...problem, code: 'read-as-below', message: `“${text}” read as below ${limit}, the column's limit`, severity: 'warning' });
    } else if (magnitude === null) {
      problems.add({ ...problem, code: 'limit-unknown', message: `“${text}” needs a limit and the column names none; kept as missing`, severity: 'warning' });
    } else {
      leftOut[index] = 1;
      problems.add({ ...problem, code: 'negative-value', message: `expected a grade, found ${text}, which is no limit of this column`, severity: 'aside' });
    }
  }
  return leftOut;
}

/** Sets aside rows that overlap or repeat another. */
export function settleConflicts(kind: TableKind, reader: TableReader, draft: TableDraft, problems: ProblemList, leftOut: LeftOut): void {
  for (const { index, column, code, message } of conflictingRows(kind, draft)) {
    if (leftOut[index]) continue;
    leftOut[index] = 1;
    const value = column === 'hole' || column === 'name' ? draft.categoryColumn(column).textAt(index) : String(draft.numberColumn(column).at(index));
    problems.add({ row: draft.sourceRow.at(index), column: reader.headerOf(column), value, code, message, severity: 'aside', original: '' });
  }
}

/** Where most stations of a survey point down, those that point up are told: a lost sign turns a hole over. */
export function tellUpwardStations(reader: TableReader, draft: TableDraft, problems: ProblemList): void {
  const dips = draft.numberColumn('dip').view();
  const upward = [...dips.keys()].filter((index) => (dips[index] ?? 0) > 0);
  if (upward.length === 0 || upward.length * 2 >= dips.length) return;
  for (const index of upward) {
    const dip = dips[index] ?? 0;
    problems.add({ row: draft.sourceRow.at(index), column: reader.headerOf('dip'), value: '', code: 'points-up', message: `points up at ${dip}° where most stations point down; is its sign right?`, severity: 'warning', original: '' });
  }
}

/** Tells the rows of a hole or batch whose grades lie a thousand or ten thousand times off, apart from all others. */
export function tellUnitBlocks(reader: TableReader, draft: TableDraft, problems: ProblemList): void {
  const byBatch = draft.categories.get('batch');
  const groups = byBatch ?? draft.categories.get('hole');
  if (!groups) return;
  for (const { analyte, header } of reader.plan.analytes) {
    const column = draft.assays.get(analyte);
    if (!column) continue;
    for (const { group, rows, times, isLower } of unitBlocks(column.values.view(), column.qualifiers.view(), groups.codes.view())) {
      const where = `${byBatch ? 'batch' : 'hole'} ${groups.texts()[group] ?? ''}`;
      const message = `${analyte} of ${where} is about ${times.toLocaleString('en-GB')} times ${isLower ? 'lower' : 'higher'} than elsewhere; is it in another unit?`;
      for (const index of rows) problems.add({ row: draft.sourceRow.at(index), column: header, value: '', code: 'unit-doubtful', message, severity: 'warning', original: '' });
    }
  }
}

const isPoor = (qualifier: number | undefined): boolean => qualifier !== QUALIFIER.measured;

/**
 * One column per analyte. Where the file has several determinations the first stands, except that a
 * later measured one replaces a value above or below its limit or missing (ore-grade over routine).
 */
export function resolveDeterminations(reader: TableReader, draft: TableDraft): void {
  for (const analyte of new Set(reader.plan.analytes.map((column) => column.analyte))) {
    const columns = reader.plan.analytes.filter((column) => column.analyte === analyte);
    const [first, ...others] = columns;
    if (!first) continue;
    const chosen = draft.assayColumn(determinationName(first), first.unit, first.method);
    for (const other of others) {
      const { values, qualifiers } = draft.assayColumn(determinationName(other), other.unit, other.method);
      for (let i = 0; i < draft.rows; i++) {
        const isBetter = isPoor(chosen.qualifiers.view()[i]) && !isPoor(qualifiers.view()[i]);
        if (!isBetter) continue;
        chosen.values.set(i, values.at(i));
        chosen.qualifiers.set(i, QUALIFIER.measured);
      }
    }
    for (const column of columns) draft.assays.delete(determinationName(column));
    draft.assays.set(analyte, chosen);
  }
}
