import { Problem } from '#contract/problem.ts';

/** A refused or failed request: what was expected, what was found, where (RFC 9457). */
export class ApiProblem extends Error {
  override readonly name = 'ApiProblem';
  readonly problem: Problem;

  constructor(problem: Problem) {
    super(problem.detail);
    this.problem = problem;
  }

  get status(): number {
    return this.problem.status;
  }

  get code(): string {
    return this.problem.code;
  }
}

const clientProblem = (code: string, status: number, title: string, detail: string): ApiProblem =>
  new ApiProblem({ type: `/problems/${code}`, code, status, title, detail, requestId: '' });

export const noNetwork = (): ApiProblem =>
  clientProblem(
    'no-network',
    0,
    'No answer from the server',
    'Expected an answer, found no connection. What you typed is kept; try again when the network is back.',
  );

export const unexpectedAnswer = (status: number, where: string, found: string): ApiProblem =>
  clientProblem(
    'unexpected-answer',
    status,
    'The server answered in another form than agreed',
    `Expected the answer of ${where}, found ${found}. Load the page again; if it stays, tell the administrator.`,
  );

/** The problem inside an error answer, whatever its body turns out to be. */
export async function problemFrom(response: Response, where: string): Promise<ApiProblem> {
  const body: unknown = await response.json().catch(() => null);
  return problemFromBody(body, response.status, where);
}

export function problemFromBody(body: unknown, status: number, where: string): ApiProblem {
  const parsed = Problem.safeParse(body);
  if (parsed.success) return new ApiProblem(parsed.data);
  return unexpectedAnswer(status, where, `status ${status} without a description`);
}

/** True when asking again may help: no network, or a server that is starting or overloaded. */
export const isPassing = (error: unknown): boolean =>
  error instanceof ApiProblem && [0, 502, 503, 504].includes(error.status);

export const hasStatus = (error: unknown, status: number): boolean =>
  error instanceof ApiProblem && error.status === status;
