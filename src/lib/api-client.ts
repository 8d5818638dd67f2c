import type * as z from 'zod';
import type { Endpoint } from '#contract/endpoint.ts';
import { noNetwork, problemFrom, problemFromBody, unexpectedAnswer } from './api-problem.ts';
import { randomKey } from './random-key.ts';

/** Fields of a schema as the caller writes them: parsed types, with what has a default left optional. */
type Fields<Schema extends z.ZodObject> = {
  [Key in keyof z.input<Schema>]: Key extends keyof z.output<Schema>
    ? z.output<Schema>[Key]
    : never;
};

/** `NoFields` infers to a record of nothing, so its keys are all strings. */
type ParamsPart<Schema extends z.ZodObject> = string extends keyof z.output<Schema>
  ? { params?: undefined }
  : { params: z.output<Schema> };
type QueryPart<Schema extends z.ZodObject> = string extends keyof z.output<Schema>
  ? { query?: undefined }
  : { query?: Fields<Schema> };
type BodyPart<Schema extends z.ZodType> = [z.output<Schema>] extends [never]
  ? { body?: undefined }
  : { body: z.input<Schema> };

/** What one call sends besides the endpoint; each part is there only if the endpoint reads it. */
export type Given<
  Params extends z.ZodObject,
  Query extends z.ZodObject,
  Body extends z.ZodType,
> = ParamsPart<Params> &
  QueryPart<Query> &
  BodyPart<Body> & {
    /** Version last read, for endpoints with `ifMatch`. */
    ifMatch?: number;
    /** Set it to repeat a call safely; made afresh for each call otherwise. */
    idempotencyKey?: string;
  };

interface Sent {
  params?: object | undefined;
  query?: object | undefined;
  body?: unknown;
  ifMatch?: number;
  idempotencyKey?: string;
}

type AnyEndpoint = Pick<Endpoint, 'id' | 'method' | 'path' | 'ifMatch' | 'idempotent'>;

/** The address of an endpoint under `/api`, with its parameters and query filled in. */
export function endpointUrl(
  endpoint: Pick<Endpoint, 'path'>,
  sent: Pick<Sent, 'params' | 'query'>,
): string {
  const params = new Map<string, unknown>(Object.entries(sent.params ?? {}));
  const path = endpoint.path.replace(/:(\w+)/g, (_, name: string) =>
    encodeURIComponent(String(params.get(name))),
  );
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(sent.query ?? {})) appendQuery(search, name, value);
  const text = search.toString();
  return text === '' ? `/api${path}` : `/api${path}?${text}`;
}

function appendQuery(search: URLSearchParams, name: string, value: unknown): void {
  if (value === undefined || value === null) return;
  if (Array.isArray(value)) for (const item of value) appendQuery(search, name, item);
  else if (typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean')
    search.append(name, String(value));
  else throw new TypeError(`Expected text, a number or a flag for ${name} in a query`);
}

export function requestHeaders(endpoint: AnyEndpoint, sent: Sent): Headers {
  const headers = new Headers({ Accept: 'application/json, application/problem+json' });
  if (sent.body !== undefined) headers.set('Content-Type', 'application/json');
  if (sent.ifMatch !== undefined) headers.set('If-Match', `"${sent.ifMatch}"`);
  if (endpoint.idempotent) headers.set('Idempotency-Key', sent.idempotencyKey ?? randomKey());
  return headers;
}

async function send(endpoint: AnyEndpoint, sent: Sent, signal?: AbortSignal): Promise<Response> {
  const init: RequestInit = {
    method: endpoint.method.toUpperCase(),
    headers: requestHeaders(endpoint, sent),
    credentials: 'same-origin',
  };
  if (sent.body !== undefined) init.body = JSON.stringify(sent.body);
  if (signal) init.signal = signal;
  let response: Response;
  try {
    response = await fetch(endpointUrl(endpoint, sent), init);
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw noNetwork();
  }
  if (!response.ok) throw await problemFrom(response, endpoint.id);
  return response;
}

/** Checks an answer against the contract, so that what the pages hold is what its type says. */
export function readAnswer<Schema extends z.ZodType>(
  endpoint: { id: string; response: Schema },
  body: unknown,
  status: number,
): z.output<Schema> {
  const parsed = endpoint.response.safeParse(body);
  if (parsed.success) return parsed.data;
  const issue = parsed.error.issues[0];
  const found = issue
    ? `${issue.message} at ${issue.path.join('.') || 'the top'}`
    : 'another shape';
  throw unexpectedAnswer(status, endpoint.id, found);
}

/**
 * Calls an endpoint of the contract and gives its parsed answer.
 *
 * @throws {ApiProblem} for every refusal, a lost connection (status 0) and an answer out of contract.
 */
export async function call<
  Params extends z.ZodObject,
  Query extends z.ZodObject,
  Body extends z.ZodType,
  Answer extends z.ZodType,
>(
  endpoint: Endpoint<Params, Query, Body, Answer>,
  given: Given<Params, Query, Body>,
  signal?: AbortSignal,
): Promise<z.output<Answer>> {
  const response = await send(endpoint, given, signal);
  const body: unknown = await response.json().catch(() => null);
  return readAnswer(endpoint, body, response.status);
}

/** Like `call`, for answers that are no JSON: bytes, CSV, files. */
export async function callRaw<
  Params extends z.ZodObject,
  Query extends z.ZodObject,
  Body extends z.ZodType,
  Answer extends z.ZodType,
>(
  endpoint: Endpoint<Params, Query, Body, Answer>,
  given: Given<Params, Query, Body>,
  signal?: AbortSignal,
): Promise<Response> {
  return send(endpoint, given, signal);
}

/** Reads a path below `/api` that answers bytes. */
export function fetchBytes(path: string, signal?: AbortSignal): Promise<Response> {
  return send({ id: path, method: 'get', path, ifMatch: false, idempotent: false }, {}, signal);
}

interface UploadOptions {
  signal?: AbortSignal;
  onProgress?: (sentBytes: number, totalBytes: number) => void;
}

/** Sends a form with files; unlike `fetch`, it tells how many bytes have gone. */
export function upload<
  Params extends z.ZodObject,
  Query extends z.ZodObject,
  Body extends z.ZodType,
  Answer extends z.ZodType,
>(
  endpoint: Endpoint<Params, Query, Body, Answer>,
  given: ParamsPart<Params> & QueryPart<Query> & { form: FormData; idempotencyKey?: string },
  { signal, onProgress }: UploadOptions = {},
): Promise<z.output<Answer>> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest();
    request.open(endpoint.method.toUpperCase(), endpointUrl(endpoint, given));
    request.responseType = 'text';
    const { form, ...sent } = given;
    requestHeaders(endpoint, sent).forEach((value, name) => request.setRequestHeader(name, value));
    request.upload.onprogress = (event) => onProgress?.(event.loaded, event.total);
    request.onerror = () => reject(noNetwork());
    request.onabort = () => reject(new DOMException('Cancelled', 'AbortError'));
    request.onload = () => {
      const body = parseJson(request.responseText);
      if (request.status >= 400) return reject(problemFromBody(body, request.status, endpoint.id));
      try {
        resolve(readAnswer(endpoint, body, request.status));
      } catch (error) {
        reject(error instanceof Error ? error : noNetwork());
      }
    };
    signal?.addEventListener('abort', () => request.abort());
    request.send(form);
  });
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}
