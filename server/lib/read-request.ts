import express, { type Request, type RequestHandler, type Response } from 'express';
import type * as z from 'zod';
import { AppError } from './errors.ts';
import { fieldProblems } from './problems.ts';

const MAX_JSON_BYTES = 1024 * 1024;
const MAX_JSON_DEPTH = 20;

/**
 * Parses one part of a request by its schema.
 *
 * @throws {AppError} 400 with every field that was refused.
 */
export function parsePart<Schema extends z.ZodType>(
  schema: Schema,
  value: unknown,
  where: string,
): z.output<Schema> {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const fields = fieldProblems(where, parsed.error.issues);
  const first = fields[0];
  throw new AppError(
    400,
    'invalid',
    `The request was refused at ${first?.path ?? where}: ${first?.message ?? 'not as expected'}.`,
    { fields },
  );
}

/** Runs an Express middleware as a promise. */
export const runMiddleware = (
  middleware: RequestHandler,
  req: Request,
  res: Response,
): Promise<void> =>
  new Promise((resolve, reject) => {
    const next = (error?: unknown): void => {
      if (error === undefined || error === null) resolve();
      else
        reject(error instanceof Error ? error : new Error('middleware failed', { cause: error }));
    };
    void middleware(req, res, next);
  });

/** Deeper nesting than any contract needs could exhaust the stack of whatever walks it. */
function isTooDeep(value: unknown, left = MAX_JSON_DEPTH): boolean {
  if (typeof value !== 'object' || value === null) return false;
  if (left === 0) return true;
  return Object.values(value).some((inner) => isTooDeep(inner, left - 1));
}

/** A reader of JSON bodies of at most `limitBytes`, nested at most 20 levels. */
export function jsonReader(
  limitBytes = MAX_JSON_BYTES,
): (req: Request, res: Response) => Promise<unknown> {
  const parser = express.json({ limit: limitBytes, strict: true });
  return async (req, res) => {
    if (!req.is('application/json')) {
      throw new AppError(415, 'json-needed', 'Expected a body of type application/json.');
    }
    await runMiddleware(parser, req, res);
    const body: unknown = req.body;
    if (isTooDeep(body))
      throw new AppError(
        400,
        'too-deep',
        `The body is nested deeper than ${MAX_JSON_DEPTH} levels.`,
      );
    return body;
  };
}
