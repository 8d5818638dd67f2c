import { COMMON_ASSAY_CODES, type AssayCode, type AssayCodes } from './assay-codes.ts';
import { normaliseCell, readNumber, type DecimalMark } from './number-text.ts';

/** What is known of the column a cell stands in; grades and limits in the file's own unit. */
export interface AssayCellContext {
  decimalMark: DecimalMark;
  /** Detection limits seen in this column (see `columnLimits`): what makes `-0.5` mean `<0.5`. */
  knownLimits?: readonly number[];
  /** Limit meant by words such as `BDL` and by a reported zero; null when none is known. */
  columnLimit?: number | null;
  /** Upper limit meant by words such as `OVR`; null when none is known. */
  columnUpperLimit?: number | null;
  codes?: AssayCodes;
}

/** A cell that could be read. Only `none` has a value; `below` and `above` have a bound. */
export interface AssayReading {
  value: number | null;
  censoring: 'none' | 'below' | 'above' | 'missing' | 'not-analysed';
  /** Detection limit passed, in the file's unit. */
  bound: number | null;
  /** Why there is no value, or a warning; null when there is nothing to say. */
  reason: string | null;
  /** Mark written behind a number (`0.5*`, `0.5 H`), kept as written. */
  qualifier: string | null;
}

/** A cell that could not be read, with what was expected. */
export interface UnparsedCell {
  value: null;
  censoring: 'unparsed';
  bound: null;
  reason: string;
  qualifier: null;
}

/**
 * Turns the text of an assay cell into a value or a censoring bound. Codes such as `-99` win over
 * the reading of negative numbers as limits; a negative number that is no known limit is refused
 * rather than guessed.
 *
 * @param text Cell as written.
 * @returns A reading, or an unparsed cell with the reason; never a changed number.
 */
export function parseAssayCell(
  text: string,
  context: AssayCellContext,
): AssayReading | UnparsedCell {
  const plain = readCommonNumber(text, context);
  if (plain) return plain;
  const cell = normaliseCell(text);
  const code = findCode(cell, context);
  if (code) return readCode(code, context);
  const compared = /^([<>≤≥])=?\s*(.*)$/.exec(cell);
  if (compared) {
    const [, sign = '', limitText = ''] = compared;
    return readLimit(sign === '<' || sign === '≤' ? 'below' : 'above', limitText, cell, context);
  }
  if (/\d\s*\+$/.test(cell)) return readLimit('above', cell.slice(0, -1), cell, context);
  const number = readNumber(cell, context.decimalMark);
  return number === null ? readQualified(cell, context) : readPlain(number, null, context);
}

/** Most cells of a table: digits with a decimal point. Tables have tens of millions of them. */
function readCommonNumber(
  text: string,
  { decimalMark, codes = COMMON_ASSAY_CODES }: AssayCellContext,
): AssayReading | null {
  if (decimalMark !== '.' || !/^\d+(\.\d+)?$/.test(text)) return null;
  const value = Number(text);
  if (!(value > 0 && value < Infinity) || codes.has(text)) return null;
  return { value, censoring: 'none', bound: null, reason: null, qualifier: null };
}

function reading(
  censoring: 'below' | 'above' | 'missing' | 'not-analysed',
  bound: number | null,
  reason: string | null,
): AssayReading {
  return { value: null, censoring, bound, reason, qualifier: null };
}

function unparsed(reason: string): UnparsedCell {
  return { value: null, censoring: 'unparsed', bound: null, reason, qualifier: null };
}

/** A code as written, or a number equal to a numeric code: `-99.00` is `-99`. */
function findCode(
  cell: string,
  { codes = COMMON_ASSAY_CODES, decimalMark }: AssayCellContext,
): AssayCode | null {
  const exact = codes.get(cell.toUpperCase());
  if (exact) return exact;
  const number = cell.startsWith('-') ? readNumber(cell, decimalMark) : null;
  return number === null ? null : (codes.get(String(number)) ?? null);
}

function readCode({ meaning, reason }: AssayCode, context: AssayCellContext): AssayReading {
  if (meaning === 'missing' || meaning === 'not-analysed') return reading(meaning, null, reason);
  const bound = (meaning === 'below' ? context.columnLimit : context.columnUpperLimit) ?? null;
  if (bound === null)
    return reading('missing', null, `${reason}, but no limit of this column is known`);
  return reading(meaning, bound, null);
}

function readLimit(
  censoring: 'below' | 'above',
  limitText: string,
  cell: string,
  context: AssayCellContext,
): AssayReading | UnparsedCell {
  const bound = readNumber(limitText, context.decimalMark);
  if (bound === null || bound <= 0) return unparsed(`expected a limit such as <0.5, found ${cell}`);
  return reading(censoring, bound, null);
}

function readPlain(
  number: number,
  qualifier: string | null,
  context: AssayCellContext,
): AssayReading | UnparsedCell {
  if (number > 0) return { value: number, censoring: 'none', bound: null, reason: null, qualifier };
  if (number === 0) {
    const bound = context.columnLimit ?? null;
    return bound === null
      ? reading('missing', null, 'reported as zero, but no limit of this column is known')
      : reading('below', bound, 'reported as zero, read as below the limit');
  }
  const bound = -number;
  if (isKnownLimit(bound, context.knownLimits ?? [])) return reading('below', bound, null);
  return unparsed(`expected a grade, found ${number}: ${bound} is no known limit of this column`);
}

function isKnownLimit(bound: number, limits: readonly number[]): boolean {
  return limits.some((limit) => Math.abs(limit - bound) <= 1e-9 * limit);
}

/** A positive number with a mark behind it: stars, `#`, `?`, or one or two letters. */
function readQualified(cell: string, context: AssayCellContext): AssayReading | UnparsedCell {
  const [, numberText = '', mark = ''] = /^(.*?\d\.?)\s*([*#?!]+|[A-Za-z]{1,2})$/.exec(cell) ?? [];
  const number = readNumber(numberText, context.decimalMark);
  // k and M behind a number would be a thousand or a million, e an unfinished exponent.
  if (number === null || number <= 0 || /^([kme]|oz|gt)$/i.test(mark)) {
    return unparsed(`expected a grade, a limit or a code, found ${shown(cell)}`);
  }
  return readPlain(number, mark, context);
}

function shown(cell: string): string {
  return cell.length > 40 ? `${cell.slice(0, 40)}…` : cell;
}
