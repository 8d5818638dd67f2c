import { readFileSync } from 'node:fs';
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
  abs: z.number(),
  rel: z.number(),
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
  labels: z.record(z.string(), z.array(z.string())).optional(),
  note: z.string().optional(),
  best_known: z.number().nullish(),
  fragile: z.boolean().optional(),
  collapsed: z.boolean().optional(),
});

const SetFile = z.object({
  dataset: z.string(),
  data_file: z.string().nullable(),
  source: z.string(),
  checks: z.array(Check),
});

/** One expected value with how it was computed; see tests/fixtures/reference/README.md. */
export type ReferenceCheck = z.infer<typeof Check>;

/** A published data set and the values established libraries computed from it. */
export interface ReferenceSet {
  name: string;
  source: string;
  /** Rows of the CSV as text, in file order; empty when the set has no data file. */
  rows: Record<string, string>[];
  checks: ReferenceCheck[];
  /** The check with this id; throws when there is none. */
  check(id: string): ReferenceCheck;
  /** Checks of a group, optionally only those of one function; throws when there is none. */
  checksOf(group: string, functionName?: string): ReferenceCheck[];
}

const loaded = new Map<string, ReferenceSet>();
const folder = new URL('../fixtures/reference/', import.meta.url);

/** Names of all reference sets. */
export const REFERENCE_SETS = [
  'jura_prediction',
  'meuse',
  'skye_afm',
  'galaxies',
  'geyser',
  'magnetic_remanence',
  'islay_azimuths',
  'crossbed_azimuths',
  'desurvey',
  'structure_geometry',
] as const;

/** Reads a data set and its checks from tests/fixtures/reference, once per process. */
export function loadReference(name: (typeof REFERENCE_SETS)[number]): ReferenceSet {
  const known = loaded.get(name);
  if (known) return known;
  const file = SetFile.parse(JSON.parse(readFileSync(new URL(`${name}.json`, folder), 'utf8')));
  const rows = file.data_file === null ? [] : readRows(file.data_file);
  const set: ReferenceSet = {
    name,
    source: file.source,
    rows,
    checks: file.checks,
    check: (id) => {
      const found = file.checks.find((check) => check.id === id);
      if (!found) throw new Error(`${name} has no check ${id}`);
      return found;
    },
    checksOf: (group, functionName) => {
      const found = file.checks.filter(
        (check) => check.group === group && (functionName ?? check.function) === check.function,
      );
      if (found.length === 0)
        throw new Error(`${name} has no check of ${group} ${functionName ?? ''}`);
      return found;
    },
  };
  loaded.set(name, set);
  return set;
}

function readRows(file: string): Record<string, string>[] {
  return z
    .array(z.record(z.string(), z.string()))
    .parse(parse(readFileSync(new URL(file, folder), 'utf8'), { columns: true }));
}

/** Every column a check names: `column`, `columns` and keys such as `group_column`. */
function columnsOf(check: ReferenceCheck): string[] {
  const named = Object.entries(check.inputs).flatMap(([key, value]) =>
    /(^|_)columns?$/.test(key) && key !== 'censor_column' ? [value].flat() : [],
  );
  return z.array(z.string()).parse(named);
}

/** Text is compared as text, a number as a number; a missing cell meets no condition. */
function holds(cell: string | undefined, { op, value }: z.infer<typeof Filter>): boolean {
  if (cell === undefined || cell === '') return false;
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
      needed.every((column) => row[column] !== '' && row[column] !== 'NA'),
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
