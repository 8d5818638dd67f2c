import { createReadStream } from 'node:fs';
import { stat } from 'node:fs/promises';
import { Transform, type Readable } from 'node:stream';
import { CsvError, parse, type Options } from 'csv-parse';
import { KernelError } from '#kernels/kernel-error.ts';
import type { TextEncoding } from './text-encoding.ts';

export interface RowSource {
  path: string;
  delimiter: string;
  /** As found when the file came in: telling it takes a look at every byte. */
  encoding: TextEncoding;
}

/** One record may hold a mebibyte; more is a quote that never closes. */
const MAX_RECORD_BYTES = 1_048_576;

/** Headers are data (`columns: false`), so doubled or odd names lose nothing. */
export const csvOptions = (delimiter: string): Options => ({
  delimiter,
  bom: true,
  columns: false,
  // Told, not found out from the first line: files put together from several have both.
  record_delimiter: ['\r\n', '\n', '\r'],
  relax_column_count: true,
  relax_quotes: true,
  skip_empty_lines: false,
  max_record_size: MAX_RECORD_BYTES,
});

/** A fault of the parser with the row it is in. */
export function csvFault(error: CsvError): KernelError {
  // Records read before it; the one that fails is the next.
  const row = typeof error['records'] === 'number' ? error['records'] + 1 : null;
  const where = row === null ? '' : `row ${row}: `;
  const found = error.code === 'CSV_MAX_RECORD_SIZE' || error.code === 'CSV_QUOTE_NOT_CLOSED'
    ? 'a quotation mark opens and is not closed'
    : error.message;
  return new KernelError('bad-csv', `${where}expected one CSV record, found that ${found}`, { row });
}

function textStream(path: string, encoding: TextEncoding, onBytes: (count: number) => void): Readable {
  const bytes = createReadStream(path, { highWaterMark: 1 << 18 });
  bytes.on('data', (chunk) => onBytes(chunk.length));
  if (encoding === 'utf-8') return bytes;
  return bytes.pipe(Transform.from(async function* (source: AsyncIterable<Uint8Array>) {
    const decoder = new TextDecoder(encoding);
    for await (const chunk of source) yield decoder.decode(chunk, { stream: true });
    yield decoder.decode();
  }));
}

/**
 * Calls `onRow` with each record of a file in order; the header is row 1. A blank line is passed
 * as a record with one empty cell. Stops at the first error `onRow` throws.
 *
 * @throws {KernelError} `bad-csv` with the row; `not-text`.
 */
export async function eachRow(
  { path, delimiter, encoding }: RowSource,
  onRow: (row: number, cells: string[]) => void,
  onProgress: (share: number) => void = () => undefined,
): Promise<void> {
  const { size } = await stat(path);
  let bytesRead = 0;
  const source = textStream(path, encoding, (count) => (bytesRead += count));
  const parser = source.pipe(parse(csvOptions(delimiter)));
  source.on('error', (error) => parser.destroy(error));
  let row = 0;
  try {
    const records: AsyncIterable<string[]> = parser;
    for await (const cells of records) {
      row += 1;
      onRow(row, cells);
      if (row % 2048 === 0) onProgress(size === 0 ? 1 : bytesRead / size);
    }
  } catch (error) {
    throw error instanceof CsvError ? csvFault(error) : error;
  } finally {
    source.destroy();
  }
}
