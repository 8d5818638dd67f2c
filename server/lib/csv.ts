import { stringify } from 'csv-stringify/sync';

export type CsvCell = string | number | boolean | null;

/** A spreadsheet may take a text that starts with one of these for a formula. */
const FORMULA_STARTS = new Set(['=', '+', '-', '@', '\t', '\r', '\0']);
const MARK = "'";

const firstAfterMarks = (text: string): string => {
  let at = 0;
  while (text[at] === MARK) at++;
  return text[at] ?? '';
};

/**
 * Text as it is written to a file people open in a spreadsheet: a leading `'` disarms a formula.
 * Texts that already begin `'=` get one more, so that reading back is exact.
 */
export const escapeCsvText = (text: string): string =>
  FORMULA_STARTS.has(firstAfterMarks(text)) ? MARK + text : text;

/** Undoes `escapeCsvText`. */
export const unescapeCsvText = (text: string): string =>
  text.startsWith(MARK) && FORMULA_STARTS.has(firstAfterMarks(text)) ? text.slice(1) : text;

/**
 * CSV by RFC 4180: header first, CRLF, quotes where needed. Texts are escaped; numbers never are,
 * and an absent value is an empty cell.
 */
export function toCsv(header: readonly string[], rows: readonly (readonly CsvCell[])[]): string {
  const written = rows.map((row) =>
    row.map((cell) => (typeof cell === 'string' ? escapeCsvText(cell) : cell)),
  );
  return stringify([header.map(escapeCsvText), ...written], {
    record_delimiter: '\r\n',
    cast: { boolean: (value) => (value ? 'true' : 'false'), number: (value) => String(value) },
  });
}

/** `Content-Disposition` of a download by RFC 6266: an ASCII fallback and the name in UTF-8. */
export function attachment(fileName: string): string {
  const plain = fileName.replaceAll(/[^\w.\- ]/g, '_');
  const encoded = encodeURIComponent(fileName).replaceAll(
    /['()*]/g,
    (mark) => `%${mark.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}
