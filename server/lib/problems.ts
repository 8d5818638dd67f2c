import { STATUS_CODES } from 'node:http';
import type { ErrorRequestHandler, Response } from 'express';
import { MulterError } from 'multer';
import type { FieldProblem, Problem } from '#contract/problem.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { ComputeError } from '#workers/task-types.ts';
import { AppError } from './errors.ts';
import type { Log } from './log.ts';
import { requestFacts } from './request-facts.ts';

/** A zod issue in the words of the contract: `body.grid.code`, expected and found. */
export const fieldProblems = (
  where: string,
  issues: readonly { path: readonly PropertyKey[]; message: string }[],
): FieldProblem[] =>
  issues
    .slice(0, 50)
    .map((issue) => ({
      path: [where, ...issue.path.map(String)].join('.'),
      message: issue.message,
    }));

const textOf = (value: unknown, key: string): string | null => {
  if (typeof value !== 'object' || value === null) return null;
  const found: unknown = Reflect.get(value, key);
  return typeof found === 'string' ? found : null;
};

const numberOf = (value: unknown, key: string): number | null => {
  if (typeof value !== 'object' || value === null) return null;
  const found: unknown = Reflect.get(value, key);
  return typeof found === 'number' ? found : null;
};

/** Failures of the database that are no bugs of ours. */
function ofDatabase(error: unknown): AppError | null {
  const code = textOf(error, 'code') ?? '';
  if (code === 'SQLITE_FULL' || code === 'ENOSPC') {
    return new AppError(
      507,
      'disk-full',
      'The disk of this instance is full: nothing was changed. Reading still works.',
    );
  }
  if (code.startsWith('SQLITE_BUSY')) {
    return new AppError(
      503,
      'busy',
      'The database is busy: nothing was changed. Try again in a moment.',
      { retryAfterS: 1 },
    );
  }
  return null;
}

/** Failures the HTTP libraries raise while reading a request. */
function ofRequest(error: unknown): AppError | null {
  if (error instanceof MulterError) {
    const status = error.code === 'LIMIT_FILE_SIZE' ? 413 : 400;
    return new AppError(
      status,
      'upload-refused',
      `The upload was refused: ${error.message.toLowerCase()}.`,
    );
  }
  if (error instanceof URIError)
    return new AppError(400, 'bad-address', 'The address holds a broken % escape.');
  const status = numberOf(error, 'status');
  switch (textOf(error, 'type')) {
    case 'entity.too.large':
      return new AppError(
        413,
        'body-too-large',
        `The body is too large: expected at most ${numberOf(error, 'limit') ?? 0} bytes.`,
      );
    case 'entity.parse.failed':
      return new AppError(400, 'bad-json', 'The body is not valid JSON: expected an object.');
    case null:
      break;
    default:
      if (status !== null && status >= 400 && status < 500)
        return new AppError(status, 'bad-body', 'The body could not be read.');
  }
  if (status === 404)
    return new AppError(404, 'no-such-address', 'There is nothing at this address.');
  if (status !== null && status >= 400 && status < 500)
    return new AppError(status, 'bad-request', 'The request could not be read.');
  return null;
}

/** What a failure is to the caller; `null` for a bug of ours. */
export function expectedFailure(error: unknown): AppError | null {
  if (error instanceof AppError) return error;
  if (error instanceof KernelError) return new AppError(422, error.code, error.message);
  if (error instanceof ComputeError)
    return new AppError(503, error.code, error.message, { retryAfterS: 5 });
  return ofDatabase(error) ?? ofRequest(error);
}

const BUG = new AppError(
  500,
  'internal',
  'Something went wrong on our side; nothing you sent was wrong. Quote the request id when you report it.',
);

/** What a status means to a person; others go by their standard name. */
const TITLES: Record<number, string> = {
  400: 'Not as expected', 401: 'Not signed in', 403: 'Not allowed', 404: 'Not found', 409: 'Something stands in the way', 412: 'Changed in the meantime', 413: 'Too large',
  422: 'Cannot be read', 428: 'Not as expected', 429: 'Too many at once', 500: 'Something went wrong', 503: 'Not ready', 507: 'No room left',
};

export function sendProblem(res: Response, failure: AppError, requestId: string): void {
  const { fields, currentVersion, retryAfterS } = failure.extras;
  const problem: Problem = {
    type: `/problems/${failure.code}`,
    title: TITLES[failure.status] ?? STATUS_CODES[failure.status] ?? 'Error',
    status: failure.status,
    code: failure.code,
    detail: failure.message,
    requestId,
    ...(fields && { fields }),
    ...(currentVersion !== undefined && { currentVersion }),
  };
  if (retryAfterS !== undefined)
    res.setHeader('Retry-After', String(Math.max(1, Math.ceil(retryAfterS))));
  if (failure.status === 401) res.setHeader('WWW-Authenticate', 'Bearer');
  res.setHeader('Cache-Control', 'no-store');
  res.status(failure.status).type('application/problem+json').send(JSON.stringify(problem));
}

/** The last handler: every failure becomes a problem document; bugs are logged and told without internals. */
export function problemHandler(log: Log): ErrorRequestHandler {
  return (error: unknown, req, res, next) => {
    const { requestId, route } = requestFacts(req);
    const expected = expectedFailure(error);
    if (!expected) log.error({ event: 'bug', requestId, route, err: error }, 'unexpected failure');
    if (res.headersSent) return next(error);
    sendProblem(res, expected ?? BUG, requestId);
  };
}
