import type { FieldProblem } from '#contract/problem.ts';

interface Extras {
  fields?: FieldProblem[];
  /** With 412: the version now current. */
  currentVersion?: number;
  /** With 429 and 503: seconds to wait. */
  retryAfterS?: number;
}

/**
 * A failure we expect and explain. `code` is stable and kebab-case, for programs; the message says
 * what was expected, what was found and where, and is shown to people as it is.
 */
export class AppError extends Error {
  readonly status: number;
  readonly code: string;
  readonly extras: Extras;

  constructor(status: number, code: string, message: string, extras: Extras = {}) {
    super(message);
    this.name = 'AppError';
    this.status = status;
    this.code = code;
    this.extras = extras;
  }
}

/**
 * An id that does not exist here. The text never repeats the id, so that the id of another deposit
 * and one that never existed are answered alike.
 *
 * @param what The thing in words: `deposit`, `API token`.
 */
export const notFound = (what: string): AppError =>
  new AppError(
    404,
    `no-such-${what.toLowerCase().replaceAll(' ', '-')}`,
    `There is no such ${what} here.`,
  );

export const staleVersion = (currentVersion: number): AppError =>
  new AppError(
    412,
    'stale-version',
    `Somebody changed this meanwhile: it is now version ${currentVersion}. Read it again, then repeat your change.`,
    { currentVersion },
  );

/** The row when there is one; else 404 for what it is in words. */
export function orNotFound<Row>(row: Row | null | undefined, what: string): Row {
  if (row === null || row === undefined) throw notFound(what);
  return row;
}
