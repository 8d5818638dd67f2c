import type { Application, Request, RequestHandler, Response, Router } from 'express';
import type * as z from 'zod';
import type { Endpoint } from '#contract/endpoint.ts';
import type { Actor, Member } from './actor.ts';
import type { AccessRule, Grant, Guard } from './guard.ts';
import { type Answer, type Idempotency, readIdempotencyKey } from './idempotency.ts';
import { jsonReader, parsePart, runMiddleware } from './read-request.ts';
import { requestFacts } from './request-facts.ts';
import type { StreamWatch } from './stream-watch.ts';
import { etagOf, readIfMatch } from './versions.ts';

/** What every mounted endpoint needs of the app it runs in. */
export interface Gate {
  guard: Guard;
  idempotency: Idempotency;
  streams: StreamWatch;
  /** Hears of each change that went through: the deposit and the resource, the path part after it. */
  changed(depositId: number, resource: string): void;
}

const gates = new WeakMap<Application, Gate>();

/** Gives an app its gate; without one every endpoint fails. */
export const attachGate = (app: Application, gate: Gate): void => void gates.set(app, gate);

function gateOf(app: Application): Gate {
  const gate = gates.get(app);
  if (!gate) throw new Error('the app has no gate: call attachGate before serving');
  return gate;
}

/** A parsed request. `actor`, `member` and `expectedVersion` exist where the endpoint's rules make them exist. */
export interface Context<
  Params extends z.ZodObject,
  Query extends z.ZodObject,
  Body extends z.ZodType,
> {
  params: z.output<Params>;
  query: z.output<Query>;
  body: z.output<Body>;
  /** Who calls; not on public endpoints. */
  readonly actor: Actor;
  /** The caller's role on `params.depositId`; on deposit endpoints only. */
  readonly member: Member;
  /** The version of `If-Match`; on endpoints with `ifMatch` only. */
  readonly expectedVersion: number;
  req: Request;
  res: Response;
}

export interface MountOptions {
  /** Refuse API tokens of every right. */
  sessionOnly?: boolean;
  /** With `consumes: 'multipart'`: reads the parts; runs only once the caller is admitted. */
  upload?: RequestHandler;
  /** A bulk route's own limit on its JSON body. */
  maxBodyBytes?: number;
}

export interface Mounted {
  endpoint: Endpoint;
  sessionOnly: boolean;
}

const mounted = new WeakMap<Router, Mounted[]>();

/** The endpoints mounted on a router, in order. */
export const mountedOn = (router: Router): readonly Mounted[] => mounted.get(router) ?? [];

/**
 * Mounts an endpoint of the contract: guard, parsing by its schemas, `If-Match`, `Idempotency-Key`,
 * and the answer stripped to the contract's fields with status and `ETag`. For anything but JSON
 * the handler writes the answer itself.
 */
export function mount<
  Params extends z.ZodObject,
  Query extends z.ZodObject,
  Body extends z.ZodType,
  Answered extends z.ZodType,
>(
  router: Router,
  endpoint: Endpoint<Params, Query, Body, Answered>,
  handler: (
    context: Context<Params, Query, Body>,
  ) => Promise<z.input<Answered> | void> | z.input<Answered> | void,
  options: MountOptions = {},
): void {
  const sessionOnly = options.sessionOnly ?? false;
  mounted.set(router, [...mountedOn(router), { endpoint, sessionOnly }]);
  const rule: AccessRule = { access: endpoint.access, method: endpoint.method, sessionOnly };
  const readBody = bodyReader(endpoint, options);

  router[endpoint.method](endpoint.path, async (req: Request, res: Response) => {
    const gate = gateOf(req.app);
    requestFacts(req).route = endpoint.path;
    res.setHeader('Cache-Control', 'no-store');
    const admit = (): Promise<Grant> =>
      gate.guard.admit(req, rule, () => depositIdOf(endpoint, req));
    const grant = await admit();
    const params = parsePart(endpoint.params, req.params, 'params');
    const query = parsePart(endpoint.query, req.query, 'query');
    const expected = endpoint.ifMatch ? readIfMatch(req.get('if-match')) : null;
    const body = await readBody(req, res);
    const context: Context<Params, Query, Body> = {
      params,
      query,
      body,
      req,
      res,
      get actor() {
        return proved(grant.actor, endpoint.id, 'actor');
      },
      get member() {
        return proved(grant.member, endpoint.id, 'member');
      },
      get expectedVersion() {
        return proved(expected, endpoint.id, 'expected version');
      },
    };
    if (endpoint.produces !== 'json') {
      if (endpoint.produces === 'events') gate.streams.watch(res, admit);
      await handler(context);
      return;
    }
    const work = async (): Promise<Answer> => {
      const body = endpoint.response.parse(await handler(context));
      tellOfChange(gate, endpoint, depositIdOf(endpoint, req));
      return { status: res.statusCode === 200 ? endpoint.status : res.statusCode, body };
    };
    sendJson(res, await onceIfKeyed(gate, endpoint, grant, req, { params, query, body }, work));
  });
}

/** A handler that reads what its endpoint's rules do not give is a bug, found at the first call. */
function proved<Value>(value: Value | null, endpointId: string, what: string): Value {
  if (value === null) throw new Error(`${endpointId} has no ${what} by its contract`);
  return value;
}

function depositIdOf(endpoint: Endpoint, req: Request): number | null {
  if (endpoint.access.kind !== 'deposit') return null;
  const { depositId } = parsePart(endpoint.params, req.params, 'params');
  return typeof depositId === 'number' ? depositId : null;
}

/** Long work tells of itself when it ends; all else that is no reading has changed something. */
function tellOfChange(gate: Gate, { method, path, status }: Endpoint, depositId: number | null): void {
  if (method === 'get' || status === 202 || depositId === null) return;
  const resource = path.split('/')[3];
  if (resource) gate.changed(depositId, resource);
}

function bodyReader<Body extends z.ZodType>(
  endpoint: Pick<Endpoint, 'consumes'> & { body: Body | null },
  options: MountOptions,
): (req: Request, res: Response) => Promise<z.output<Body>>;
function bodyReader(endpoint: Pick<Endpoint, 'consumes' | 'body'>, options: MountOptions) {
  const readJson = jsonReader(options.maxBodyBytes);
  return async (req: Request, res: Response): Promise<unknown> => {
    if (endpoint.consumes === 'multipart') {
      if (options.upload) await runMiddleware(options.upload, req, res);
      const fields: unknown = req.body;
      return endpoint.body && parsePart(endpoint.body, fields, 'body');
    }
    return endpoint.body && parsePart(endpoint.body, await readJson(req, res), 'body');
  };
}

async function onceIfKeyed(
  gate: Gate,
  endpoint: Endpoint,
  grant: Grant,
  req: Request,
  request: unknown,
  work: () => Promise<Answer>,
): Promise<Answer> {
  const key = endpoint.idempotent ? readIdempotencyKey(req.get('idempotency-key')) : null;
  if (key === null || grant.actor === null) return work();
  return gate.idempotency.once(
    { userId: grant.actor.id, endpoint: endpoint.id, key, request },
    work,
  );
}

function sendJson(res: Response, { status, body }: Answer): void {
  if (
    typeof body === 'object' &&
    body !== null &&
    'version' in body &&
    typeof body.version === 'number'
  ) {
    res.setHeader('ETag', etagOf(body.version));
  }
  res.status(status).json(body);
}
