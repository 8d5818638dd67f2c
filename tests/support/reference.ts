import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parse } from 'csv-parse/sync';
import * as z from 'zod';

/** A value of a check: numbers in lists, lists of rows, or named fields; null = not defined. */
export type ReferenceValue = number | null | ReferenceValue[] | { [name: string]: ReferenceValue };

const Value: z.ZodType<ReferenceValue> = z.lazy(() =>
  z.union([z.number(), z.null(), z.array(Value), z.record(z.string(), Value)]),
);

const Filter = z.object({
  column: z.string(),
  op: z.enum(['==', '>', '>=', '<', '<=', '!=']),
  value: z.union([z.string(), z.number()]),
});

const Inputs = z.looseObject({
  column: z.string().optional(),
  columns: z.array(z.string()).optional(),
  /** Rows are chosen by `filter` only. */
  rows: z.literal('all').optional(),
  filter: z.array(Filter).optional(),
  transform: z.string().optional(),
  components: z.number().optional(),
  k: z.number().optional(),
  labels_from: z.string().optional(),
  report_rows: z.array(z.number()).optional(),
  report_positions: z.array(z.number()).optional(),
  probabilities: z.array(z.number()).optional(),
});

const Tolerance = z.object({
  compare: z.enum([
    'close',
    'exact',
    'close_up_to_column_sign',
    'at_most',
    'at_least',
    'mixture_loglik',
    'partition',
    'partition_ari_at_least',
    'partition_core_points',
  ]),
  abs: z.number().default(0),
  rel: z.number().default(0),
  min_ari: z.number().optional(),
});

const Check = z.object({
  id: z.string(),
  group: z.string(),
  function: z.string(),
  inputs: Inputs,
  method: z.string(),
  software: z.string(),
  value: Value,
  tolerance: Tolerance,
  labels: z.record(z.string(), z.array(z.union([z.string(), z.number()]))).optional(),
  note: z.string().optional(),
  best_known: z.number().nullish(),
  fragile: z.boolean().optional(),
  collapsed: z.boolean().optional(),
});

const SetFile = z.object({
  layout: z.literal('reference-values/1'),
  dataset: z.string(),
  data_file: z.string().nullable(),
  source: z.string(),
  checks: z.array(z.unknown()),
});

/** One expected value with how it was computed; see tests/fixtures/reference/README.md. */
export type ReferenceCheck = z.infer<typeof Check>;

/** A check that cannot be run as it is written. */
export interface UnreadableCheck {
  id: string;
  message: string;
}

/** A published data set and the values established libraries computed from it. */
export interface ReferenceSet {
  name: string;
  /** Path of the JSON file. */
  file: string;
  source: string;
  /** Rows of the CSV as text, in file order; empty when the set has no data file. */
  rows: Record<string, string>[];
  checks: ReferenceCheck[];
  /** Checks that do not keep to the layout, and why. */
  unreadable: UnreadableCheck[];
  /** The check with this id; throws when there is none. */
  check(id: string): ReferenceCheck;
  /** Checks of a group, optionally only those of one function; throws when there is none. */
  checksOf(group: string, functionName?: string): ReferenceCheck[];
}

/** The sets that come with the project; their sources and layout are in the README there. */
export const REFERENCE_FOLDER = fileURLToPath(new URL('../fixtures/reference', import.meta.url));

const loaded = new Map<string, ReferenceSet>();

/** Names of all reference sets of a folder: its JSON files. */
export function referenceNames(folder = REFERENCE_FOLDER): string[] {
  return readdirSync(folder)
    .filter((file) => file.endsWith('.json'))
    .map((file) => file.slice(0, -'.json'.length))
    .sort();
}

/** Reads a data set of the project and its checks, once per process. */
export function loadReference(name: string): ReferenceSet {
  return readReference(REFERENCE_FOLDER, name);
}

/** Reads a data set of any folder and its checks, once per process. */
export function readReference(folder: string, name: string): ReferenceSet {
  const file = join(folder, `${name}.json`);
  const known = loaded.get(file);
  if (known) return known;
  const { dataset, source, data_file, ...written } = SetFile.parse(
    JSON.parse(readFileSync(file, 'utf8')),
  );
  const { checks, unreadable } = readChecks(written.checks);
  const set: ReferenceSet = {
    name: dataset,
    file,
    source,
    rows: data_file === null ? [] : readRows(join(folder, data_file)),
    checks,
    unreadable,
    check: (id) => {
      const found = checks.find((check) => check.id === id);
      if (!found) throw new Error(`${dataset} has no check ${id}`);
      return found;
    },
    checksOf: (group, functionName) => {
      const found = checks.filter(
        (check) => check.group === group && (functionName ?? check.function) === check.function,
      );
      if (found.length === 0)
        throw new Error(`${dataset} has no check of ${group} ${functionName ?? ''}`);
      return found;
    },
  };
  loaded.set(file, set);
  return set;
}

/** The set a check was read with; undefined for a check made up by a test. */
export function ownerOf(check: ReferenceCheck): ReferenceSet | undefined {
  return [...loaded.values()].find((set) => set.checks.includes(check));
}

/** One check that breaks the layout does not keep the others from being run. */
function readChecks(written: unknown[]): Pick<ReferenceSet, 'checks' | 'unreadable'> {
  const unreadable: UnreadableCheck[] = [];
  const checks = written.flatMap((item, i) => {
    const read = Check.safeParse(item);
    if (read.success) return [read.data];
    const named = z.looseObject({ id: z.string() }).safeParse(item);
    const id = named.success ? named.data.id : `check ${i + 1}`;
    unreadable.push({ id, message: z.prettifyError(read.error).replaceAll('\n', ' ') });
    return [];
  });
  return { checks, unreadable };
}

function readRows(file: string): Record<string, string>[] {
  return z
    .array(z.record(z.string(), z.string()))
    .parse(parse(readFileSync(file, 'utf8'), { columns: true, bom: true }));
}

/** Every column a check names: `column`, `columns` and keys such as `group_column`. */
function columnsOf(check: ReferenceCheck): string[] {
  const named = Object.entries(check.inputs).flatMap(([key, value]) =>
    /(^|_)columns?$/.test(key) && key !== 'censor_column' ? [value].flat() : [],
  );
  return z.array(z.string()).parse(named);
}

const isMissing = (cell: string | undefined): boolean => cell === '' || cell === 'NA';

/** Text is compared as text, a number as a number; a missing cell meets no condition. */
function holds(cell: string | undefined, { op, value }: z.infer<typeof Filter>): boolean {
  if (cell === undefined || isMissing(cell)) return false;
  const found = typeof value === 'number' ? Number(cell) : cell;
  switch (op) {
    case '==':
      return found === value;
    case '!=':
      return found !== value;
    case '<':
      return found < value;
    case '<=':
      return found <= value;
    case '>':
      return found > value;
    case '>=':
      return found >= value;
  }
}

/** Rows a check uses: its filter, then without rows missing a listed column. */
export function rowsOf(set: ReferenceSet, check: ReferenceCheck): Record<string, string>[] {
  const needed = columnsOf(check);
  return set.rows.filter(
    (row) =>
      (check.inputs.filter ?? []).every((condition) => holds(row[condition.column], condition)) &&
      needed.every((column) => !isMissing(row[column])),
  );
}

/** One column of the check's rows as numbers; by default the check's own `column`. */
export function numbersOf(
  set: ReferenceSet,
  check: ReferenceCheck,
  column = check.inputs.column ?? '',
): Float64Array {
  return Float64Array.from(rowsOf(set, check), (row) => {
    const value = Number(row[column]);
    if (!Number.isFinite(value)) throw new Error(`${check.id}: ${column} is not numeric`);
    return value;
  });
}

/** One column of the check's rows as text (a class column such as Rock). */
export function textsOf(set: ReferenceSet, check: ReferenceCheck, column: string): string[] {
  return rowsOf(set, check).map((row) => {
    const text = row[column];
    if (text === undefined) throw new Error(`${check.id}: no column ${column}`);
    return text;
  });
}

/** The labels a check takes as given, from the check its `labels_from` names. */
export function givenLabels(set: ReferenceSet, check: ReferenceCheck): number[] {
  return z.array(z.number()).parse(set.check(check.inputs.labels_from ?? '').value);
}

/** Given labels beside a text column of the same rows; rows without the text are left out. */
export function labelsBesideTexts(
  set: ReferenceSet,
  check: ReferenceCheck,
  column: string,
): { labels: number[]; texts: string[] } {
  const given = givenLabels(set, check);
  const rows = rowsOf(set, set.check(check.inputs.labels_from ?? ''));
  if (rows.length !== given.length)
    throw new Error(`${check.id}: expected ${rows.length} labels, found ${given.length}`);
  const kept = given.flatMap((label, row) => {
    const text = rows[row]?.[column];
    if (text === undefined) throw new Error(`${check.id}: no column ${column}`);
    return isMissing(text) ? [] : [{ label, text }];
  });
  return { labels: kept.map(({ label }) => label), texts: kept.map(({ text }) => text) };
}
