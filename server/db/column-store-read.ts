import { KernelError } from '#kernels/kernel-error.ts';
import { CHUNK_ROWS, chunkCount, type RowRange } from './column-store-format.ts';
import type { ColumnStoreStatements } from './column-store-statements.ts';

/** Which bytes of a column to read: the store's own numbering of the column, rows and byte width. */
export interface Slice {
  columnId: number;
  nRows: number;
  range: RowRange;
  part: 'values' | 'qualifiers';
}

const bytesPerRow = (part: Slice['part']): number => (part === 'values' ? Float64Array.BYTES_PER_ELEMENT : 1);

interface Piece<Bytes> {
  bytes: Bytes;
  /** Rows of this chunk that the range wants, counted from the chunk's first. */
  from: number;
  to: number;
}

function* pieces(statements: ColumnStoreStatements, slice: Slice): Generator<Piece<Buffer>> {
  const { start, end } = slice.range;
  if (start === end) return;
  const first = Math.floor(start / CHUNK_ROWS);
  const last = chunkCount(end) - 1;
  let chunkNo = first;
  for (const bytes of statements[slice.part].iterate(slice.columnId, first, last)) {
    if (bytes === null) throw new KernelError('bad-kind', 'this column keeps no qualifiers');
    const firstRow = chunkNo * CHUNK_ROWS;
    yield { bytes, from: Math.max(start - firstRow, 0), to: Math.min(end - firstRow, CHUNK_ROWS) };
    chunkNo += 1;
  }
  if (chunkNo !== last + 1) {
    throw new KernelError('incomplete', `expected ${last + 1 - first} chunks, found ${chunkNo - first}`);
  }
}

/** The wanted bytes chunk by chunk, as the database gave them: for sending on without a copy. */
export function* readBytes(statements: ColumnStoreStatements, slice: Slice): Generator<Uint8Array> {
  const width = bytesPerRow(slice.part);
  for (const { bytes, from, to } of pieces(statements, slice)) {
    yield bytes.subarray(from * width, to * width);
  }
}

/** Fills `target` with the wanted rows: one copy from the database's buffer, none besides. */
export function readInto(statements: ColumnStoreStatements, slice: Slice, target: Uint8Array): void {
  let at = 0;
  for (const bytes of readBytes(statements, slice)) {
    target.set(bytes, at);
    at += bytes.byteLength;
  }
}

const isTextList = (value: unknown): value is string[] => Array.isArray(value);

function textOf(bytes: Buffer): string[] {
  const texts: unknown = JSON.parse(bytes.toString('utf8'));
  if (!isTextList(texts)) throw new KernelError('incomplete', 'expected a chunk of texts');
  return texts;
}

export function readTexts(statements: ColumnStoreStatements, slice: Slice): string[] {
  const texts: string[] = [];
  for (const { bytes, from, to } of pieces(statements, slice)) {
    for (const text of textOf(bytes).slice(from, to)) texts.push(text);
  }
  return texts;
}

const isWholeChunk = (piece: Piece<Buffer>, nRowsLeft: number): boolean =>
  piece.from === 0 && piece.to === Math.min(CHUNK_ROWS, nRowsLeft);

/**
 * The texts as pieces of one JSON array. Whole chunks are JSON already and pass as bytes, so that a
 * million texts do not hold up the thread.
 */
export function* readTextJson(statements: ColumnStoreStatements, slice: Slice): Generator<Uint8Array> {
  const comma = Buffer.from(',');
  let chunkNo = Math.floor(slice.range.start / CHUNK_ROWS);
  let isFirst = true;
  yield Buffer.from('[');
  for (const piece of pieces(statements, slice)) {
    if (!isFirst) yield comma;
    const isWhole = isWholeChunk(piece, slice.nRows - chunkNo * CHUNK_ROWS);
    const json = isWhole
      ? piece.bytes
      : Buffer.from(JSON.stringify(textOf(piece.bytes).slice(piece.from, piece.to)));
    yield json.subarray(1, -1);
    isFirst = false;
    chunkNo += 1;
  }
  yield Buffer.from(']');
}
