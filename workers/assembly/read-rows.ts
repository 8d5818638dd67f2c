import type { ColumnStore } from '#server/db/column-store.ts';

/** One loaded table, read whole: what assembly joins by hole. */
export interface LoadedTable {
  nRows: number;
  numbers(name: string): Float64Array;
  /** Texts of a category; '' where empty. */
  texts(name: string): string[];
  has(name: string): boolean;
  analytes(): { name: string; originalUnit: string; method: string | null }[];
}

export function loadedTable(store: ColumnStore, tableId: number): LoadedTable {
  const { nRows, columns } = store.describe(tableId);
  const has = (name: string): boolean => columns.some((column) => column.name === name);
  return {
    nRows,
    has,
    numbers: (name) => (has(name) ? store.readNumbers(tableId, name) : new Float64Array(nRows).fill(Number.NaN)),
    texts(name) {
      const column = columns.find((candidate) => candidate.name === name);
      if (column?.kind === 'text') return store.readText(tableId, name);
      if (column?.kind !== 'category') return new Array<string>(nRows).fill('');
      const { codes, dictionary } = store.readCategory(tableId, name);
      return Array.from(codes, (code) => dictionary[code] ?? '');
    },
    analytes: () =>
      columns.filter(({ kind }) => kind === 'assay').map(({ name, meta }) => ({
        name,
        originalUnit: typeof meta?.['originalUnit'] === 'string' ? meta['originalUnit'] : 'ppm',
        method: typeof meta?.['method'] === 'string' ? meta['method'] : null,
      })),
  };
}

/** First row and number of rows of each hole; loaded tables are sorted by hole. */
export function rowsByHole(holes: readonly string[]): Map<string, { first: number; count: number }> {
  const runs = new Map<string, { first: number; count: number }>();
  holes.forEach((hole, row) => {
    const run = runs.get(hole);
    if (run) run.count += 1;
    else runs.set(hole, { first: row, count: 1 });
  });
  return runs;
}
