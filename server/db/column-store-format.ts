import { endianness } from 'node:os';
import { QUALIFIER, type ColumnKind } from '#contract/tables.ts';
import { KernelError } from '#kernels/kernel-error.ts';

/** Rows of one chunk: 512 KiB of float64, 64 KiB of qualifiers. */
export const CHUNK_ROWS = 65_536;

if (endianness() !== 'LE') {
  throw new Error('The column store keeps little-endian numbers: expected a little-endian machine');
}

/** Rows `start` up to, not including, `end`. */
export interface RowRange {
  start: number;
  end: number;
}

export interface ChunkBytes {
  values: Uint8Array;
  qualifiers: Uint8Array | null;
}

export const chunkCount = (nRows: number): number => Math.ceil(nRows / CHUNK_ROWS);

/** The memory of a typed array as bytes, without a copy. */
export const bytesOf = (array: Float64Array | Uint8Array): Uint8Array =>
  new Uint8Array(array.buffer, array.byteOffset, array.byteLength);

/** @throws {KernelError} `range` unless 0 <= start <= end <= nRows, whole numbers. */
export function checkRange(range: RowRange, nRows: number): void {
  const { start, end } = range;
  const isWhole = Number.isInteger(start) && Number.isInteger(end);
  if (!isWhole || start < 0 || end < start || end > nRows) {
    throw new KernelError(
      'range',
      `expected rows between 0 and ${nRows}, found ${start} to ${end}`,
      { start, end, nRows },
    );
  }
}

/** @throws {KernelError} `shape` when a column has not one value per row of its table. */
export function checkLength(name: string, length: number, nRows: number): void {
  if (length === nRows) return;
  throw new KernelError(
    'shape',
    `column ${name}: expected ${nRows} values, found ${length}`,
    { expected: nRows, found: length },
  );
}

/** @throws {KernelError} `bad-kind` when a read does not suit the column. */
export function checkKind(name: string, kind: ColumnKind, expected: readonly ColumnKind[]): void {
  if (expected.includes(kind)) return;
  throw new KernelError('bad-kind', `column ${name}: expected ${expected.join(' or ')}, found ${kind}`);
}

const keepsANumber = (qualifier: number): boolean =>
  qualifier === QUALIFIER.measured || qualifier === QUALIFIER.below || qualifier === QUALIFIER.above;

/**
 * Holds the rule between values and qualifiers: a finite number when measured, below or above; NaN
 * when missing or not analysed.
 *
 * @throws {KernelError} `bad-qualifier` with { row } at the first row that breaks it.
 */
export function checkAssay(name: string, values: Float64Array, qualifiers: Uint8Array): void {
  for (let row = 0; row < values.length; row++) {
    const qualifier = qualifiers[row]!;
    const holds = keepsANumber(qualifier)
      ? Number.isFinite(values[row])
      : qualifier <= QUALIFIER.notAnalysed && Number.isNaN(values[row]);
    if (holds) continue;
    const found = `value ${values[row]} with qualifier ${qualifier}`;
    const rule = 'expected a finite number when measured, below or above and none otherwise';
    throw new KernelError('bad-qualifier', `column ${name}, row ${row}: ${rule}, found ${found}`, { row });
  }
}

/** @throws {KernelError} `bad-code` with { row } unless each code is NaN or a place in the dictionary. */
export function checkCodes(name: string, codes: Float64Array, nWords: number): void {
  for (let row = 0; row < codes.length; row++) {
    const code = codes[row]!;
    if (Number.isNaN(code) || (Number.isInteger(code) && code >= 0 && code < nWords)) continue;
    const expected = `expected a code from 0 to ${nWords - 1} or none`;
    throw new KernelError('bad-code', `column ${name}, row ${row}: ${expected}, found ${code}`, { row });
  }
}
