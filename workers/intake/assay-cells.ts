import { QUALIFIER } from '#contract/tables.ts';
import { parseAssayCell } from '#kernels/units/assay-cell.ts';
import { readNumber, type DecimalMark } from '#kernels/units/number-text.ts';

/** One cell of an analyte column, in the file's own unit. `pending` needs the whole column to be told. */
export type AssayCell =
  | { kind: 'told'; value: number; qualifier: number }
  | { kind: 'pending'; magnitude: number | null }
  | { kind: 'refused'; message: string };

const NOT_ANALYSED: AssayCell = { kind: 'told', value: Number.NaN, qualifier: QUALIFIER.notAnalysed };
const told = (value: number, qualifier: number): AssayCell => ({ kind: 'told', value, qualifier });
/** Stands for "the column's limit, whatever it turns out to be": a word such as BDL or a zero comes back with it. */
const LIMIT_TO_COME = Number.NaN;
const PLAIN_POINT_NUMBER = /^\d+(?:\.\d+)?$/;

/** The short way for what nearly all cells are. */
function plainNumber(text: string, decimalMark: DecimalMark): number | null {
  return decimalMark === '.' && PLAIN_POINT_NUMBER.test(text) ? Number(text) : readNumber(text, decimalMark);
}

/**
 * Reads one cell. A negative number, a zero and a word such as BDL mean "below a limit" only once the
 * column's limits are known, so they come back as pending.
 */
export function readAssayCell(text: string, decimalMark: DecimalMark): AssayCell {
  if (text === '') return NOT_ANALYSED;
  const number = plainNumber(text, decimalMark);
  if (number !== null && number > 0) return told(number, QUALIFIER.measured);
  return remembered(decimalMark, text) ?? remember(decimalMark, text, readMarkedCell(text, decimalMark, number));
}

/** Marked cells of a table are few different ones, such as `<0.5`, many times over. */
const MOST_REMEMBERED = 1000;
const readBefore = { '.': new Map<string, AssayCell>(), ',': new Map<string, AssayCell>() };

const remembered = (decimalMark: DecimalMark, text: string): AssayCell | undefined => readBefore[decimalMark].get(text);

function remember(decimalMark: DecimalMark, text: string, cell: AssayCell): AssayCell {
  const cells = readBefore[decimalMark];
  if (cells.size >= MOST_REMEMBERED) cells.clear();
  cells.set(text, cell);
  return cell;
}

/** A cell that is no plain number > 0. */
function readMarkedCell(text: string, decimalMark: DecimalMark, number: number | null): AssayCell {
  const cell = parseAssayCell(text, { decimalMark, columnLimit: LIMIT_TO_COME });
  switch (cell.censoring) {
    case 'none':
      return told(cell.value ?? Number.NaN, QUALIFIER.measured);
    case 'below':
      return Number.isNaN(cell.bound) ? { kind: 'pending', magnitude: null } : told(cell.bound ?? Number.NaN, QUALIFIER.below);
    case 'above':
      return told(cell.bound ?? Number.NaN, QUALIFIER.above);
    case 'missing':
      return told(Number.NaN, QUALIFIER.missing);
    case 'not-analysed':
      return NOT_ANALYSED;
    case 'unparsed':
      return number !== null && number < 0 ? { kind: 'pending', magnitude: -number } : { kind: 'refused', message: cell.reason };
  }
}

/** Limits of one column as they turn up, to settle what its pending cells mean. */
export class ColumnLimits {
  readonly #explicit = new Map<number, number>();
  readonly #negatives = new Map<number, number>();
  #smallest = Number.POSITIVE_INFINITY;

  see(cell: AssayCell): void {
    if (cell.kind === 'pending' && cell.magnitude !== null) count(this.#negatives, cell.magnitude);
    if (cell.kind !== 'told') return;
    if (cell.qualifier === QUALIFIER.below) count(this.#explicit, cell.value);
    if (cell.qualifier === QUALIFIER.measured && cell.value < this.#smallest) this.#smallest = cell.value;
  }

  /** A negative number stands for a limit when that limit is written elsewhere or comes again. */
  isLimit(magnitude: number): boolean {
    return this.#explicit.has(magnitude) || (this.#negatives.get(magnitude) ?? 0) >= 2;
  }

  /** The limit for cells that name none: the commonest, else the smallest measured value, else null. */
  usual(): number | null {
    const all = new Map(this.#explicit);
    for (const [limit, times] of this.#negatives) if (this.isLimit(limit)) all.set(limit, (all.get(limit) ?? 0) + times);
    const commonest = [...all].sort(([a, times], [b, otherTimes]) => otherTimes - times || a - b)[0];
    if (commonest) return commonest[0];
    return Number.isFinite(this.#smallest) ? this.#smallest : null;
  }
}

const count = (map: Map<number, number>, key: number): void => void map.set(key, (map.get(key) ?? 0) + 1);
