import { randomBytes } from 'node:crypto';
import { mkdir } from 'node:fs/promises';
import multer from 'multer';
import { AppError } from '#server/lib/errors.ts';

const MIB = 1_048_576;
export const TABLE_BYTES = 512 * MIB;
export const FILES_AT_ONCE = 20;
const TEXT_NAME = /\.(csv|tsv|txt)$/i;
// Control characters and marks that turn the direction of text have no place in a name.
const UNPRINTABLE = /[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]/gu;

/** A file's own name as data only: last part of any path, printable, at most 200 characters. */
export function cleanFileName(name: string): string {
  const last = name.split(/[\\/]/).at(-1) ?? '';
  const clean = last.replaceAll(UNPRINTABLE, '').trim().slice(0, 200);
  return clean === '' || /^\.+$/.test(clean) ? 'unnamed.csv' : clean;
}

/**
 * Reads the multipart field `files` to disk under random names; every limit is set, the parser's own
 * are unbounded.
 */
export function receiveFiles(incomingDir: string) {
  const storage = multer.diskStorage({
    destination: (_req, _file, done) => {
      mkdir(incomingDir, { recursive: true }).then(() => done(null, incomingDir), (error: unknown) => done(error instanceof Error ? error : new Error(String(error)), ''));
    },
    filename: (_req, _file, done) => done(null, randomBytes(16).toString('hex')),
  });
  const limits = {
    fileSize: TABLE_BYTES, files: FILES_AT_ONCE, fields: 10, parts: FILES_AT_ONCE + 10, fieldNameSize: 100, fieldSize: 64 * 1024, headerPairs: 50,
    fieldNestingDepth: 0, fieldArrayIndexLimit: 0,
  };
  const fileFilter: multer.Options['fileFilter'] = (_req, file, done) => {
    if (TEXT_NAME.test(file.originalname)) done(null, true);
    else done(new AppError(415, 'not-csv', `“${cleanFileName(file.originalname)}”: expected a file ending in .csv, .tsv or .txt`));
  };
  return multer({ storage, limits, fileFilter, defParamCharset: 'utf8' }).array('files', FILES_AT_ONCE);
}
