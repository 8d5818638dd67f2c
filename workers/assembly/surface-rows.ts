import type { LoadedTable } from './read-rows.ts';

/** Surface samples as rows of the frame: points without a length. */
export interface SurfaceRows {
  nRows: number;
  sample: string[];
  x: Float64Array;
  y: Float64Array;
  z: Float64Array;
  code: string[];
}

export function surfaceRows(table: LoadedTable | null): SurfaceRows {
  if (!table) return { nRows: 0, sample: [], x: new Float64Array(0), y: new Float64Array(0), z: new Float64Array(0), code: [] };
  const { nRows } = table;
  const named = table.texts('sample');
  return {
    nRows, x: table.numbers('x'), y: table.numbers('y'), z: table.numbers('z'), code: table.texts('code'),
    // A sample without a name is known by its row of the file.
    sample: Array.from(table.numbers('row'), (row, i) => named[i] || `row ${row}`),
  };
}
