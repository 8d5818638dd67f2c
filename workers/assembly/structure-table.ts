import type { ColumnStore } from '#server/db/column-store.ts';
import type { PlacedStructure } from './structures.ts';

const categoryOf = (texts: readonly string[]): { codes: Float64Array; dictionary: string[] } => {
  const dictionary = [...new Set(texts)].sort();
  const placeOf = new Map(dictionary.map((text, place) => [text, place]));
  return { codes: Float64Array.from(texts, (text) => placeOf.get(text) ?? Number.NaN), dictionary };
};

/** Structures as a column table of planes, for orientation statistics by domain. */
export function writeStructures(store: ColumnStore, depositId: number, jobId: number, structures: readonly PlacedStructure[]): number {
  const tableId = store.createTable({ depositId, nRows: structures.length, purpose: 'structures of a snapshot', jobId });
  const category = (name: string, texts: readonly string[]): void => {
    const { codes, dictionary } = categoryOf(texts);
    store.writeCategory(tableId, { name }, codes, dictionary);
  };
  const number = (name: string, unit: string, valueOf: (structure: PlacedStructure) => number | null): void =>
    store.writeNumbers(tableId, { name, unit }, Float64Array.from(structures, (structure) => valueOf(structure) ?? Number.NaN));
  category('hole', structures.map(({ hole }) => hole));
  category('structure type', structures.map(({ type }) => type));
  category('confidence', structures.map(({ confidence }) => confidence));
  number('depth', 'm', ({ depthM }) => depthM);
  number('dip', '°', ({ dip }) => dip);
  number('dip direction', '°', ({ dipDirection }) => dipDirection);
  return tableId;
}
