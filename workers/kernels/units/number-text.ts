/** Mark between whole and decimal digits in a file. */
export type DecimalMark = '.' | ',';

const ASCII = /^[\x20-\x7e]*$/;
const PLAIN = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d{1,3})?$/i;
const GROUPED = /^[+-]?[1-9]\d{0,2}(,\d{3})+(\.\d+)?$/;

/**
 * Brings typographic variants together without changing what a cell says: full-width characters
 * become plain and all dashes become `-`. Superscripts stay: `10²` is not 102.
 */
export function normaliseCell(text: string): string {
  if (ASCII.test(text)) return text.trim();
  return text
    .replace(/[\uff01-\uff5e]/g, (wide) => String.fromCharCode(wide.charCodeAt(0) - 0xfee0))
    .replace(/[\u2010-\u2015\u2212]/g, '-')
    .replace(/[\u200b\ufeff]/g, '')
    .trim();
}

/**
 * Reads a number as written. Thousands commas (`1,234`) count only when the decimal mark is a point
 * and the groups are whole; anything doubtful (`1,5` with a decimal point) is no number.
 *
 * @param text Cell text; surrounding space is ignored.
 * @returns The finite number, or null when the text is not one.
 */
export function readNumber(text: string, decimalMark: DecimalMark): number | null {
  const cell = normaliseCell(text);
  const plain = decimalMark === '.' ? pointNumber(cell) : commaNumber(cell);
  if (plain === null) return null;
  const value = Number(plain);
  return Number.isFinite(value) ? value : null;
}

function pointNumber(cell: string): string | null {
  if (PLAIN.test(cell)) return cell;
  return GROUPED.test(cell) ? cell.replaceAll(',', '') : null;
}

function commaNumber(cell: string): string | null {
  if (cell.includes('.')) return null;
  const pointed = cell.replace(',', '.');
  return PLAIN.test(pointed) ? pointed : null;
}
