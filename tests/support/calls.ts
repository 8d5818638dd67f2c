import type { Endpoint } from '#contract/endpoint.ts';

export interface Called {
  status: number;
  /** `code` of the problem document; null for any other answer. */
  code: string | null;
  /** The answer without its request id; null for an event stream, which is left at once. */
  body: unknown;
  headers: Headers;
}

/** Parameters that a plain large number does not fit. */
const NEVER_THERE: Readonly<Record<string, string>> = {
  token: 'x'.repeat(43),
  sessionId: 'x'.repeat(43),
  label: '1',
};

/** Path with its parameters filled in; those not given are ids that never existed. */
export function pathOf(
  endpoint: Pick<Endpoint, 'path'>,
  given: Readonly<Record<string, string | number>>,
): string {
  return `/api${endpoint.path.replaceAll(/:(\w+)/g, (_all, name: string) => String(given[name] ?? NEVER_THERE[name] ?? 987_654_321))}`;
}

/** Calls an endpoint by plain HTTP; good for streams, which are left once their headers are there. */
export async function callEndpoint(
  url: string,
  endpoint: Pick<Endpoint, 'path' | 'method' | 'body' | 'consumes' | 'ifMatch'>,
  given: {
    params?: Readonly<Record<string, string | number>>;
    headers?: Readonly<Record<string, string>>;
    body?: string;
  } = {},
): Promise<Called> {
  const leave = new AbortController();
  const readsJson = endpoint.body !== null && endpoint.consumes === 'json';
  const res = await fetch(url + pathOf(endpoint, given.params ?? {}), {
    method: endpoint.method.toUpperCase(),
    headers: {
      ...(readsJson && { 'Content-Type': 'application/json' }),
      ...(endpoint.ifMatch && { 'If-Match': '"987654"' }),
      ...given.headers,
    },
    ...(readsJson && { body: given.body ?? '{}' }),
    signal: leave.signal,
  });
  const type = res.headers.get('content-type') ?? '';
  if (type.startsWith('text/event-stream')) {
    leave.abort();
    return { status: res.status, code: null, body: null, headers: res.headers };
  }
  const text = await res.text();
  const body: unknown = type.includes('json') && text !== '' ? JSON.parse(text) : text;
  const isProblem = type.startsWith('application/problem+json');
  if (!isProblem) return { status: res.status, code: null, body, headers: res.headers };
  const problem = { ...(body as Record<string, unknown>) };
  delete problem['requestId'];
  return { status: res.status, code: String(problem['code']), body: problem, headers: res.headers };
}
