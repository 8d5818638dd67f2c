import {
  REQUIRED_ROLES, ROLES_OF_KIND, type AssayUnit, type ColumnGuess, type ColumnMapping, type ColumnRole, type FileMapping, type TableKind,
} from '#contract/files.ts';
import { Analyte } from '#contract/common.ts';
import { ELEMENT_BY_SYMBOL } from '#kernels/units/atomic-weights.ts';
import { parseHeader } from '#kernels/units/header.ts';
import { OXIDE_BY_LOWER_CASE } from '#kernels/units/oxides.ts';
import { KIND_NAMES, ROLE_NAMES } from './kinds.ts';

/** Why a mapping cannot be read; `index` names the column, null the file as a whole. */
export interface MappingProblem {
  index: number | null;
  message: string;
}

type ColumnChange = Partial<Pick<ColumnMapping, 'role' | 'analyte' | 'unit' | 'oxide' | 'method'>>;

const BARE = { analyte: null, unit: null, oxide: null, method: null } as const;

/** What stands in the way of reading a file by this mapping; empty when nothing does. */
export function mappingProblems({ kind, columns }: FileMapping): MappingProblem[] {
  const missing = REQUIRED_ROLES[kind].filter((roles) => !columns.some(({ role }) => roles.includes(role)));
  const lack = missing.map((roles) => roles.map((role) => role.replaceAll('-', ' ')).join(' or ')).join(', ');
  const whole = missing.length === 0 ? [] : [{ index: null, message: `${KIND_NAMES[kind]} still need ${missing.length === 1 ? 'a column' : 'columns'} for ${lack}` }];
  return [...whole, ...columns.flatMap((column) => columnProblem(column, columns) ?? [])];
}

function columnProblem(column: ColumnMapping, columns: readonly ColumnMapping[]): MappingProblem | null {
  const { index, role, analyte, unit } = column;
  if (role === 'skip') return null;
  if (role === 'analyte') {
    if (analyte === null) return { index, message: 'say which analyte it is' };
    return unit === null ? { index, message: 'say in which unit it is' } : null;
  }
  const first = columns.find((other) => other.role === role);
  return first && first.index !== index ? { index, message: `“${first.header}” is ${ROLE_NAMES[role]} already` } : null;
}

/** One column changed; what no longer applies to it is dropped. */
export function withColumn(mapping: FileMapping, index: number, change: ColumnChange): FileMapping {
  const changed = (column: ColumnMapping): ColumnMapping => {
    const next = { ...column, ...change };
    return next.role === 'analyte' ? next : { ...next, ...BARE };
  };
  return { ...mapping, columns: mapping.columns.map((column) => (column.index === index ? changed(column) : column)) };
}

/** A column that becomes an analyte takes what its header says of it. */
export function withRole(mapping: FileMapping, index: number, role: ColumnRole, firstValue: string): FileMapping {
  const column = mapping.columns.find((candidate) => candidate.index === index);
  if (role !== 'analyte' || !column || column.role === 'analyte') return withColumn(mapping, index, { role });
  const reading = parseHeader(column.header, firstValue === '' ? [] : [firstValue]);
  const { element: analyte, unit, oxide, method } = reading;
  return withColumn(mapping, index, { role, analyte, unit, oxide, method: method?.slice(0, 80) ?? null });
}

/** Analyte columns without a unit, all in one. */
export const withUnitForAll = (mapping: FileMapping, unit: AssayUnit): FileMapping => ({
  ...mapping,
  columns: mapping.columns.map((column) => (column.role === 'analyte' && column.unit === null ? { ...column, unit } : column)),
});

export const columnsWithoutUnit = ({ columns }: FileMapping): number =>
  columns.filter(({ role, unit }) => role === 'analyte' && unit === null).length;

/** The same file read as another kind: roles that fit stay, the others are read anew from the headers. */
export function withKind(mapping: FileMapping, kind: TableKind, guess: readonly ColumnGuess[]): FileMapping {
  const used = new Set<ColumnRole>();
  const columns = mapping.columns.map((column): ColumnMapping => {
    const fits = (role: ColumnRole): boolean => ROLES_OF_KIND[kind].includes(role) && (role === 'analyte' || !used.has(role));
    const firstValue = guess.find(({ index }) => index === column.index)?.firstValue ?? '';
    const kept = column.role !== 'skip' && fits(column.role) ? column : readAnew(column, firstValue);
    if (!fits(kept.role)) return { ...column, role: 'skip', ...BARE };
    used.add(kept.role);
    return kept;
  });
  return { ...mapping, kind, columns };
}

const isRole = (role: string): role is ColumnRole => Object.hasOwn(ROLE_NAMES, role);

function readAnew({ index, header }: Pick<ColumnMapping, 'index' | 'header'>, firstValue: string): ColumnMapping {
  const { role, element, unit, oxide, method } = parseHeader(header, firstValue === '' ? [] : [firstValue]);
  if (role === 'analyte') return { index, header, role, analyte: element, unit, oxide, method: method?.slice(0, 80) ?? null };
  return { index, header, role: isRole(role) ? role : 'skip', ...BARE };
}

/** The header divided by another separator, each name read anew. */
export function withDelimiter(mapping: FileMapping, delimiter: FileMapping['delimiter']): FileMapping {
  const header = mapping.columns.map((column) => column.header).join(mapping.delimiter);
  const columns = header.split(delimiter).map((name, index) => readAnew({ index, header: name.trim() }, ''));
  return withKind({ ...mapping, delimiter, columns }, mapping.kind, []);
}

/** Reads an analyte as typed: `cu`, `Al2O3`, `LOI`. Null where it is none. */
export function readAnalyteText(text: string): { analyte: string; oxide: string | null } | null {
  const typed = text.trim();
  const oxide = OXIDE_BY_LOWER_CASE.get(typed.toLowerCase());
  if (oxide) return { analyte: oxide.element, oxide: oxide.formula };
  const symbol = typed.charAt(0).toUpperCase() + typed.slice(1).toLowerCase();
  if (ELEMENT_BY_SYMBOL.has(symbol)) return { analyte: symbol, oxide: null };
  return Analyte.safeParse(typed).success ? { analyte: typed, oxide: null } : null;
}

export const analyteText = ({ analyte, oxide }: Pick<ColumnMapping, 'analyte' | 'oxide'>): string => oxide ?? analyte ?? '';

export const sameMapping = (a: FileMapping, b: FileMapping): boolean => JSON.stringify(a) === JSON.stringify(b);
