import { CsvError, parse } from 'csv-parse/sync';
import type { ColumnGuess, FileMapping, TableKind } from '#contract/files.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { csvFault, csvOptions } from './csv-rows.ts';
import { guessColumns, guessKind } from './guess-columns.ts';
import { encodingOfFile, readHead, type TextEncoding } from './text-encoding.ts';

export interface Inspection {
  encoding: TextEncoding;
  guess: ColumnGuess[];
  mapping: FileMapping;
  /** The header as one text: the same header is the same source. */
  headerSignature: string;
}

const DELIMITERS = [',', ';', '\t', '|'] as const;
type Delimiter = (typeof DELIMITERS)[number];
const SAMPLE_ROWS = 200;

/** The separator that divides the first lines into the most columns, the same number in each. */
function detectDelimiter(text: string): Delimiter {
  const scores = DELIMITERS.map((delimiter) => {
    const widths = headRecords(text, delimiter).records.slice(0, 30).filter((cells) => cells.length > 1 || cells[0] !== '').map((cells) => cells.length);
    const width = widths[0] ?? 1;
    const steady = widths.filter((other) => other === width).length / Math.max(1, widths.length);
    return { delimiter, score: width > 1 ? width * steady * steady : 0 };
  });
  return scores.reduce((best, next) => (next.score > best.score ? next : best)).delimiter;
}

/** Records up to the first that does not parse, and what was wrong there. */
function headRecords(text: string, delimiter: string): { records: string[][]; fault: CsvError | null } {
  const records: string[][] = [];
  const keep = (cells: string[]): null => {
    records.push(cells);
    return null;
  };
  try {
    parse(text, { ...csvOptions(delimiter), to: SAMPLE_ROWS + 1, on_record: keep });
    return { records, fault: null };
  } catch (error) {
    if (error instanceof CsvError) return { records, fault: error };
    throw error;
  }
}

const COMMA_DECIMAL = /^-?\d+,\d+$/;

function detectDecimalMark(rows: readonly string[][], delimiter: Delimiter): '.' | ',' {
  if (delimiter === ',') return '.';
  const cells = rows.flat().map((cell) => cell.trim());
  const commas = cells.filter((cell) => COMMA_DECIMAL.test(cell)).length;
  const points = cells.filter((cell) => /^-?\d+\.\d+$/.test(cell)).length;
  return commas > points ? ',' : '.';
}

/** Drops the last line of a head that the file goes on after: it may be cut. */
const wholeLines = (text: string, isCut: boolean): string => (isCut ? text.slice(0, text.lastIndexOf('\n') + 1) : text);

/**
 * Looks at the first part of a file and guesses separator, table kind and what each column is.
 *
 * @throws {KernelError} `not-text`, `no-header`, `no-rows`; `bad-csv` when no row below the column names
 *   parses, or row 2 does not end in the part looked at.
 */
export async function inspectFile(path: string, fileName: string, sizeBytes: number): Promise<Inspection> {
  const head = await readHead(path);
  const encoding = await encodingOfFile(path);
  const isCut = head.length < sizeBytes;
  const text = wholeLines(new TextDecoder(encoding).decode(head), isCut);
  const delimiter = detectDelimiter(text);
  const { records, fault } = headRecords(text, delimiter);
  const [header, ...rows] = records;
  if (!header && fault) throw csvFault(fault);
  if (!header || header.every((cell) => cell.trim() === '')) {
    throw new KernelError('no-header', 'row 1: expected column names, found an empty line');
  }
  const filled = rows.filter((cells) => cells.some((cell) => cell.trim() !== ''));
  if (filled.length === 0 && isCut) {
    throw new KernelError('bad-csv', `row 2: expected one CSV record, found no end of it in ${Math.round(head.length / 1024)} KiB; is a quotation mark not closed?`, { row: 2 });
  }
  if (filled.length === 0 && fault) throw csvFault(fault);
  if (filled.length === 0) throw new KernelError('no-rows', 'expected rows below the column names, found none');
  const kind: TableKind = guessKind(header, fileName, filled);
  const guess = guessColumns(header, filled, kind);
  const decimalMark = detectDecimalMark(filled, delimiter);
  const columns = guess.map(({ index, header: name, role, analyte, unit, oxide, method }) => ({ index, header: name, role, analyte, unit, oxide, method }));
  const downIs = kind === 'survey' && mostlyPositiveDips(guess, filled) ? 'positive' : 'negative';
  return { encoding, guess, headerSignature: header.map((cell) => cell.trim()).join('\u001f'), mapping: { kind, delimiter, decimalMark, downIs, referenceLine: 'bottom', columns } };
}

function mostlyPositiveDips(guess: readonly ColumnGuess[], rows: readonly string[][]): boolean {
  const column = guess.find(({ role }) => role === 'dip');
  if (!column) return false;
  const dips = rows.map((cells) => Number(cells[column.index])).filter((dip) => Number.isFinite(dip) && dip !== 0);
  return dips.filter((dip) => dip > 0).length > dips.length / 2;
}
