import { KernelError } from '#kernels/kernel-error.ts';
import { checkCategory, NOT_LOGGED, type Category } from './category.ts';

/** Two label columns crossed: counts for tests, metres for display. */
export interface CrossTabulation {
  rowLevels: string[];
  colLevels: string[];
  /** Row-major, shape (rowLevels, colLevels): numbers of intervals with both labels. */
  counts: Float64Array;
  /** Same shape: metres of those intervals. */
  metres: Float64Array;
  /** Per row level: intervals and metres whose column label is not logged; outside the table. */
  rowNotLogged: { counts: Float64Array; metres: Float64Array };
  /** Per column level: the same where the row label is not logged. */
  colNotLogged: { counts: Float64Array; metres: Float64Array };
  nUsed: number;
  /** Intervals with a label missing on one side or both. */
  nDropped: number;
  /** Levels left out because no interval carries both labels. */
  notes: string[];
}

/**
 * Crosses two label columns of the same intervals. A null label is "not logged": shown beside the
 * table, never tested. Levels without any counted interval are removed and named in `notes`.
 *
 * Tests need intervals of equal support (composites): chi-square scales with the number of rows.
 *
 * @param rows, cols Label columns, n codes each.
 * @param lengthsM Interval lengths in metres, n values >= 0.
 * @throws {KernelError} `shape`; `bad-parameter` at a code without level or a length < 0 or NaN.
 */
export function crossTabulate(
  rows: Category,
  cols: Category,
  lengthsM: Float64Array,
): CrossTabulation {
  const n = lengthsM.length;
  checkCategory(rows, n, 'row label');
  checkCategory(cols, n, 'column label');
  const nCols = cols.levels.length;
  const counts = new Float64Array(rows.levels.length * nCols);
  const metres = new Float64Array(counts.length);
  const rowSide = side(rows.levels.length);
  const colSide = side(nCols);
  let nUsed = 0;
  for (let i = 0; i < n; i++) {
    const r = rows.codes[i]!;
    const c = cols.codes[i]!;
    const length = checkedLength(lengthsM[i]!, i);
    if (r !== NOT_LOGGED && c !== NOT_LOGGED) {
      counts[r * nCols + c]! += 1;
      metres[r * nCols + c]! += length;
      nUsed++;
    } else if (r !== NOT_LOGGED) add(rowSide, r, length);
    else if (c !== NOT_LOGGED) add(colSide, c, length);
  }
  const full = { rowLevels: [...rows.levels], colLevels: [...cols.levels], counts, metres };
  const sides = { rowNotLogged: rowSide, colNotLogged: colSide };
  return { ...withoutEmptyLevels({ ...full, ...sides }), nUsed, nDropped: n - nUsed };
}

type Side = CrossTabulation['rowNotLogged'];

const side = (size: number): Side => ({
  counts: new Float64Array(size),
  metres: new Float64Array(size),
});

function add(to: Side, level: number, length: number): void {
  to.counts[level]! += 1;
  to.metres[level]! += length;
}

function checkedLength(length: number, row: number): number {
  if (length >= 0 && length < Infinity) return length;
  const message = `expected a length >= 0 m, found ${length} in row ${row}`;
  throw new KernelError('bad-parameter', message, { row });
}

type FullTable = Omit<CrossTabulation, 'nUsed' | 'nDropped' | 'notes'>;

function withoutEmptyLevels(table: FullTable): FullTable & { notes: string[] } {
  const nCols = table.colLevels.length;
  const rowKept = table.rowLevels.map((_, r) =>
    table.counts.subarray(r * nCols, (r + 1) * nCols).some(Boolean),
  );
  const colKept = table.colLevels.map((_, c) =>
    table.rowLevels.some((_row, r) => table.counts[r * nCols + c]! > 0),
  );
  const notes = [
    ...table.rowLevels
      .filter((_, r) => !rowKept[r])
      .map((level) => `row ${level} removed: no interval`),
    ...table.colLevels
      .filter((_, c) => !colKept[c])
      .map((level) => `column ${level} removed: no interval`),
  ];
  const cells = (values: Float64Array) =>
    values.filter((_, i) => rowKept[Math.floor(i / nCols)] && colKept[i % nCols]);
  return {
    rowLevels: table.rowLevels.filter((_, r) => rowKept[r]),
    colLevels: table.colLevels.filter((_, c) => colKept[c]),
    counts: cells(table.counts),
    metres: cells(table.metres),
    rowNotLogged: keep(table.rowNotLogged, rowKept),
    colNotLogged: keep(table.colNotLogged, colKept),
    notes,
  };
}

const keep = ({ counts, metres }: Side, kept: boolean[]): Side => ({
  counts: counts.filter((_, i) => kept[i]),
  metres: metres.filter((_, i) => kept[i]),
});
