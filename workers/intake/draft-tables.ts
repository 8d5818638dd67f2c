import { QUALIFIER } from '#contract/tables.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { compareCodePoints } from './row-order.ts';
import { TableDraft } from './table-draft.ts';

const ROW_COLUMN = 'row';

/** A loaded table as a draft again, so that further rows can be added to it; its rows count as row 0. */
export function draftOfTable(store: ColumnStore, tableId: number): TableDraft {
  const draft = new TableDraft();
  const { nRows, columns } = store.describe(tableId);
  for (let i = 0; i < nRows; i++) draft.sourceRow.push(0);
  for (const { name, kind, unit, meta } of columns) {
    if (name === ROW_COLUMN) continue;
    if (kind === 'number') for (const value of store.readNumbers(tableId, name)) draft.numberColumn(name).push(value);
    if (kind === 'text') draft.textColumn(name).push(...store.readText(tableId, name));
    if (kind === 'category') {
      const { codes, dictionary } = store.readCategory(tableId, name);
      for (const code of codes) draft.categoryColumn(name).push(dictionary[code] ?? '');
    }
    if (kind === 'assay') {
      const method = typeof meta?.['method'] === 'string' ? meta['method'] : null;
      const originalUnit = typeof meta?.['originalUnit'] === 'string' ? meta['originalUnit'] : (unit ?? 'ppm');
      const column = draft.assayColumn(name, originalUnit, method);
      for (const value of store.readNumbers(tableId, name)) column.values.push(value);
      for (const qualifier of store.readQualifiers(tableId, name)) column.qualifiers.push(qualifier);
    }
  }
  return draft;
}

const unionOf = <Value>(a: Map<string, Value>, b: Map<string, Value>): string[] => [...new Set([...a.keys(), ...b.keys()])];

/** The rows of `second` after those of `first`; a column one of them lacks is empty there. */
export function joinDrafts(first: TableDraft, second: TableDraft): TableDraft {
  const joined = new TableDraft();
  for (const draft of [first, second]) for (const row of draft.sourceRow.view()) joined.sourceRow.push(row);
  for (const draft of [first, second]) {
    for (const name of unionOf(first.numbers, second.numbers)) {
      const column = joined.numberColumn(name);
      for (let i = 0; i < draft.rows; i++) column.push(draft.numbers.get(name)?.at(i) ?? Number.NaN);
    }
    for (const name of unionOf(first.categories, second.categories)) {
      const from = draft.categories.get(name);
      const texts = from?.texts() ?? [];
      const column = joined.categoryColumn(name);
      for (let i = 0; i < draft.rows; i++) column.push(from ? (texts[from.codes.at(i)] ?? '') : '');
    }
    for (const name of unionOf(first.texts, second.texts)) {
      const column = joined.textColumn(name);
      for (let i = 0; i < draft.rows; i++) column.push(draft.texts.get(name)?.[i] ?? '');
    }
    for (const name of unionOf(first.assays, second.assays)) {
      const from = draft.assays.get(name);
      const like = first.assays.get(name) ?? second.assays.get(name);
      const column = joined.assayColumn(name, like?.unit ?? 'ppm', like?.method ?? null);
      const qualifiers = from?.qualifiers.view();
      for (let i = 0; i < draft.rows; i++) {
        column.values.push(from?.values.at(i) ?? Number.NaN);
        column.qualifiers.push(qualifiers?.[i] ?? QUALIFIER.notAnalysed);
      }
    }
  }
  return joined;
}

/** Values of the rows named by `order`, into `out`; loops, because tables have millions of cells. */
function picked<Values extends Float64Array | Uint8Array>(values: Values, order: Int32Array, out: Values): Values {
  for (let place = 0; place < order.length; place++) out[place] = values[order[place]!]!;
  return out;
}

/** Writes the rows named by `order` into a pending table, column by column. */
export function writeDraft(store: ColumnStore, tableId: number, draft: TableDraft, order: Int32Array): void {
  const pick = (values: Float64Array): Float64Array => picked(values, order, new Float64Array(order.length));
  for (const [name, column] of draft.categories) {
    const texts = column.texts();
    const dictionary = [...texts].sort(compareCodePoints);
    const placeOf = new Map(dictionary.map((text, place) => [text, place]));
    const codes = column.codes.view();
    store.writeCategory(tableId, { name }, Float64Array.from(order, (i) => placeOf.get(texts[codes[i] ?? Number.NaN] ?? '') ?? Number.NaN), dictionary);
  }
  for (const [name, column] of draft.numbers) store.writeNumbers(tableId, { name }, pick(column.view()));
  for (const [name, texts] of draft.texts) store.writeText(tableId, { name }, Array.from(order, (i) => texts[i] ?? ''));
  for (const [name, { unit, method, values, qualifiers }] of draft.assays) {
    const meta = { originalUnit: unit, method };
    store.writeAssay(tableId, { name, unit: 'ppm', meta }, pick(values.view()), picked(qualifiers.view(), order, new Uint8Array(order.length)));
  }
  store.writeNumbers(tableId, { name: ROW_COLUMN }, pick(draft.sourceRow.view()));
}
