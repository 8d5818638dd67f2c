import { randomBytes } from 'node:crypto';
import { mkdir } from 'node:fs/promises';
import type { RequestHandler } from 'express';
import multer, { MulterError } from 'multer';
import { AppError } from '#server/lib/errors.ts';

const MIB = 1_048_576;
export const TABLE_BYTES = 512 * MIB;
export const FILES_AT_ONCE = 20;
const FIELD = 'files';
const TEXT_NAME = /\.(csv|tsv|txt)$/i;
// Control characters and marks that turn the direction of text have no place in a name.
const UNPRINTABLE = /[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]/gu;

/** A file's own name as data only: last part of any path, printable, at most 200 characters. */
export function cleanFileName(name: string): string {
  const last = name.split(/[\\/]/).at(-1) ?? '';
  const clean = last.replaceAll(UNPRINTABLE, '').trim().slice(0, 200);
  return clean === '' || /^\.+$/.test(clean) ? 'unnamed.csv' : clean;
}

/** What the multipart parser says, as plain errors, of a body that is no whole form. */
const BROKEN_FORM = /^(unexpected end of (form|file)|malformed (part header|content type|multipart form)|multipart: boundary not found)/i;

/** A refusal of the multipart parser in the words of the person who sent the files. */
function refusal(error: unknown, fileBytes: number): unknown {
  if (error instanceof Error && BROKEN_FORM.test(error.message)) {
    return new AppError(400, 'bad-form', 'Expected a whole multipart form, found one that is broken off or malformed; nothing was kept.');
  }
  if (!(error instanceof MulterError)) return error;
  switch (error.code) {
    case 'LIMIT_FILE_SIZE':
      return new AppError(413, 'upload-refused', `Expected files of at most ${fileBytes / MIB} MiB each, found a larger one; nothing was kept.`);
    case 'LIMIT_FILE_COUNT':
      return new AppError(400, 'upload-refused', `Expected at most ${FILES_AT_ONCE} files at once, found more; nothing was kept.`);
    case 'LIMIT_UNEXPECTED_FILE':
      // The parser answers so for one file too many as well.
      return error.field === FIELD
        ? new AppError(400, 'upload-refused', `Expected at most ${FILES_AT_ONCE} files at once, found more; nothing was kept.`)
        : new AppError(400, 'upload-refused', `Expected files in the field “${FIELD}”, found the field “${error.field ?? ''}”; nothing was kept.`);
    default:
      return error;
  }
}

/**
 * Reads the multipart field `files` to disk under random names; every limit is set, the parser's own
 * are unbounded.
 */
export function receiveFiles(incomingDir: string, fileBytes = TABLE_BYTES): RequestHandler {
  const storage = multer.diskStorage({
    destination: (_req, _file, done) => {
      mkdir(incomingDir, { recursive: true }).then(() => done(null, incomingDir), (error: unknown) => done(error instanceof Error ? error : new Error(String(error)), ''));
    },
    filename: (_req, _file, done) => done(null, randomBytes(16).toString('hex')),
  });
  const limits = {
    fileSize: fileBytes, files: FILES_AT_ONCE, fields: 10, parts: FILES_AT_ONCE + 10, fieldNameSize: 100, fieldSize: 64 * 1024, headerPairs: 50,
    fieldNestingDepth: 0, fieldArrayIndexLimit: 0,
  };
  const fileFilter: multer.Options['fileFilter'] = (_req, file, done) => {
    if (TEXT_NAME.test(file.originalname)) done(null, true);
    else done(new AppError(415, 'not-csv', `“${cleanFileName(file.originalname)}”: expected a file ending in .csv, .tsv or .txt`));
  };
  const receive = multer({ storage, limits, fileFilter, defParamCharset: 'utf8' }).array(FIELD, FILES_AT_ONCE);
  return (req, res, next) => receive(req, res, (error: unknown) => next(refusal(error, fileBytes)));
}
