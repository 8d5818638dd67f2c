import { createReadStream } from 'node:fs';
import { open } from 'node:fs/promises';
import { KernelError } from '#kernels/kernel-error.ts';

export type TextEncoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';

const HEAD_BYTES = 262_144;

/** The first bytes of a file, enough to tell its encoding, its separator and its columns. */
export async function readHead(path: string): Promise<Uint8Array> {
  const file = await open(path, 'r');
  try {
    const head = new Uint8Array(HEAD_BYTES);
    const { bytesRead } = await file.read(head, 0, HEAD_BYTES, 0);
    return head.subarray(0, bytesRead);
  } finally {
    await file.close();
  }
}

const startsWith = (bytes: Uint8Array, ...start: number[]): boolean => start.every((byte, i) => bytes[i] === byte);

/** Decodes as UTF-8 strictly; a character cut at the end of the head is no fault. */
function isUtf8(head: Uint8Array): boolean {
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(head, { stream: true });
    return true;
  } catch {
    return false;
  }
}

/**
 * Tells the encoding of a text file from its first bytes.
 *
 * @throws {KernelError} `not-text` for a workbook, an archive or other binary content.
 */
export function detectEncoding(head: Uint8Array): TextEncoding {
  if (startsWith(head, 0x50, 0x4b, 0x03, 0x04)) {
    throw new KernelError('not-text', 'expected CSV text, found a workbook or archive; save the sheet as CSV');
  }
  if (startsWith(head, 0xff, 0xfe)) return 'utf-16le';
  if (startsWith(head, 0xfe, 0xff)) return 'utf-16be';
  if (head.includes(0)) throw new KernelError('not-text', 'expected CSV text, found binary content');
  return isUtf8(head) ? 'utf-8' : 'windows-1252';
}

/**
 * Tells the encoding of a whole file: letters beyond ASCII may come late.
 *
 * @throws {KernelError} `not-text`; also for a file that starts as UTF-8 and goes on as something else.
 */
export async function encodingOfFile(path: string): Promise<TextEncoding> {
  const head = await readHead(path);
  const encoding = detectEncoding(head);
  if (encoding !== 'utf-8' || head.length < HEAD_BYTES || (await isUtf8File(path))) return encoding;
  if (head.some((byte) => byte > 127)) {
    throw new KernelError('not-text', 'expected one text encoding, found UTF-8 at the start of the file and another further on');
  }
  return 'windows-1252';
}

async function isUtf8File(path: string): Promise<boolean> {
  const decoder = new TextDecoder('utf-8', { fatal: true });
  const chunks: AsyncIterable<Uint8Array> = createReadStream(path, { highWaterMark: 1 << 20 });
  try {
    for await (const chunk of chunks) decoder.decode(chunk, { stream: true });
    decoder.decode();
    return true;
  } catch (error) {
    if (error instanceof TypeError) return false;
    throw error;
  }
}
