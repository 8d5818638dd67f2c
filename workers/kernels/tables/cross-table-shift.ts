import { checkCategory, NOT_LOGGED, type Category } from './category.ts';
import { checkHoleStarts, holeShiftTest, type HoleShiftOptions } from './hole-shift.ts';

/** Permutation p of a cross-tabulation's chi-square. */
export interface CrossTableShift {
  p: number;
  chiSquare: number;
  /** Smallest p this table can give. */
  floor: number;
  shifts: number;
  enumerated: boolean;
  nUsed: number;
}

/**
 * P value of the chi-square of two label columns by circular shifts within holes, which respects
 * that neighbouring intervals are alike. Rows not logged on either side are left out first, so the
 * table's margins are the same in every shift.
 *
 * @param rows, cols Label columns of n intervals in order down each hole.
 * @param holeStarts First row of each hole, then n.
 * @returns Null when a column keeps fewer than two levels among rows logged on both sides.
 * @throws {KernelError} `shape`; `bad-parameter`.
 */
export function crossTableShiftTest(
  rows: Category,
  cols: Category,
  holeStarts: Int32Array,
  options: HoleShiftOptions,
): CrossTableShift | null {
  const n = checkHoleStarts(holeStarts);
  checkCategory(rows, n, 'row label');
  checkCategory(cols, n, 'column label');
  const { rowCodes, colCodes, starts } = loggedOnly(rows.codes, cols.codes, holeStarts);
  const nUsed = rowCodes.length;
  if (new Set(rowCodes).size < 2 || new Set(colCodes).size < 2) return null;
  const weights = cellWeights(rowCodes, colCodes, rows.levels.length, cols.levels.length);
  const nCols = cols.levels.length;
  const cells = new Int32Array(rows.levels.length * nCols);
  const rowBase = rowCodes.map((code) => code * nCols);
  const chiSquare = new Float64Array(1);
  const statistics = (source: Int32Array): Float64Array => {
    cells.fill(0);
    for (let i = 0; i < nUsed; i++) cells[rowBase[i]! + colCodes[source[i]!]!]! += 1;
    let sum = 0;
    for (let cell = 0; cell < cells.length; cell++)
      sum += cells[cell]! * cells[cell]! * weights[cell]!;
    chiSquare[0] = nUsed * (sum - 1);
    return chiSquare;
  };
  const { p, observed, shifts, enumerated } = holeShiftTest(starts, statistics, options);
  const floor = enumerated ? 1 / shifts : 1 / (shifts + 1);
  return { p: p[0]!, chiSquare: Math.max(0, observed[0]!), floor, shifts, enumerated, nUsed };
}

/** 1 / (row total x column total) per cell: chi-square = n (sum of counts^2 x weights - 1). */
function cellWeights(
  rowCodes: Int32Array,
  colCodes: Int32Array,
  nRows: number,
  nCols: number,
): Float64Array {
  const rowTotals = new Float64Array(nRows);
  const colTotals = new Float64Array(nCols);
  for (const code of rowCodes) rowTotals[code]! += 1;
  for (const code of colCodes) colTotals[code]! += 1;
  return Float64Array.from({ length: nRows * nCols }, (_, cell) => {
    const product = rowTotals[Math.floor(cell / nCols)]! * colTotals[cell % nCols]!;
    return product > 0 ? 1 / product : 0;
  });
}

function loggedOnly(rows: Int32Array, cols: Int32Array, holeStarts: Int32Array) {
  const kept = Int32Array.from(rows.keys()).filter(
    (i) => rows[i] !== NOT_LOGGED && cols[i] !== NOT_LOGGED,
  );
  const starts = new Int32Array(holeStarts.length);
  for (let hole = 0, row = 0; hole < holeStarts.length; hole++) {
    while (row < kept.length && kept[row]! < holeStarts[hole]!) row++;
    starts[hole] = row;
  }
  return { rowCodes: kept.map((i) => rows[i]!), colCodes: kept.map((i) => cols[i]!), starts };
}
