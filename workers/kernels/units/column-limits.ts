import { COMMON_ASSAY_CODES, type AssayCodes } from './assay-codes.ts';
import { parseAssayCell } from './assay-cell.ts';
import { normaliseCell, readNumber, type DecimalMark } from './number-text.ts';

/** Detection limits one column shows, in the file's unit. */
export interface ColumnLimits {
  /** All lower limits, ascending: written as `<0.5`, or as a repeated negative number. */
  knownLimits: number[];
  /** The most frequent of them, the larger of equals; null when the column shows none. */
  columnLimit: number | null;
  /** The most frequent upper limit written as `>10000`; null when the column shows none. */
  columnUpperLimit: number | null;
}

/**
 * Finds the detection limits a column of assay cells shows. A negative number counts as a limit when
 * it also stands as `<x` in the column or is repeated; several limits in one column are normal.
 *
 * @param cells Texts of one column, all of them or the first thousands.
 * @param options.minRepeats How often a negative number must occur to count as a limit, >= 2.
 */
export function columnLimits(
  cells: Iterable<string>,
  options: { decimalMark: DecimalMark; codes?: AssayCodes; minRepeats?: number },
): ColumnLimits {
  const { decimalMark, codes = COMMON_ASSAY_CODES, minRepeats = 2 } = options;
  const below = new Map<number, number>();
  const above = new Map<number, number>();
  const negative = new Map<number, number>();
  for (const text of cells) {
    const cell = parseAssayCell(text, { decimalMark, codes });
    if (cell.censoring === 'below' && cell.bound !== null) count(below, cell.bound);
    if (cell.censoring === 'above' && cell.bound !== null) count(above, cell.bound);
    if (cell.censoring !== 'unparsed') continue;
    const number = readNumber(normaliseCell(text), decimalMark);
    if (number !== null && number < 0) count(negative, -number);
  }
  for (const [limit, times] of negative) {
    if (below.has(limit) || times >= minRepeats) below.set(limit, (below.get(limit) ?? 0) + times);
  }
  return {
    knownLimits: [...below.keys()].sort((a, b) => a - b),
    columnLimit: mostFrequent(below),
    columnUpperLimit: mostFrequent(above),
  };
}

function count(counts: Map<number, number>, key: number): void {
  counts.set(key, (counts.get(key) ?? 0) + 1);
}

function mostFrequent(counts: ReadonlyMap<number, number>): number | null {
  let best: number | null = null;
  let bestCount = 0;
  for (const [limit, times] of counts) {
    if (times > bestCount || (times === bestCount && limit > (best ?? -Infinity))) {
      best = limit;
      bestCount = times;
    }
  }
  return best;
}
