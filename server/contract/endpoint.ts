import * as z from 'zod';
import type { Role } from './roles.ts';
import './wording.ts';

/**
 * Who may call an endpoint. `deposit` lists roles on the deposit named by `params.depositId`; a
 * person who is no member gets 404. `codes: true` lets a codes-only API token in as well.
 */
export type Access =
  | { kind: 'public' }
  | { kind: 'signed-in' }
  | { kind: 'administrator' }
  | { kind: 'deposit'; roles: readonly Role[]; codes?: boolean };

export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete';

/** How the answer's body is written. Anything but `json` is sent by the handler itself. */
export type Produces = 'json' | 'csv' | 'binary' | 'events' | 'none';

export interface Endpoint<
  Params extends z.ZodObject = z.ZodObject,
  Query extends z.ZodObject = z.ZodObject,
  Body extends z.ZodType = z.ZodType,
  Response extends z.ZodType = z.ZodType,
> {
  /** Unique, used as the OpenAPI operationId. */
  id: string;
  method: Method;
  /** Express path below `/api`, for example `/deposits/:depositId/holes`. */
  path: string;
  summary: string;
  tag: string;
  access: Access;
  params: Params;
  query: Query;
  /** `null`: no body is read. */
  body: Body | null;
  response: Response;
  status: number;
  produces: Produces;
  /** `multipart`: the file parts are read by the route's own upload handler. */
  consumes: 'json' | 'multipart';
  /** The caller must send `If-Match` with the version it last read (428 absent, 412 stale). */
  ifMatch: boolean;
  /** `Idempotency-Key` is honoured: the same key and body get the same answer for 24 hours. */
  idempotent: boolean;
}

type Defaults = 'params' | 'query' | 'body' | 'status' | 'produces' | 'consumes' | 'ifMatch' | 'idempotent';

interface Given<
  Params extends z.ZodObject,
  Query extends z.ZodObject,
  Body extends z.ZodType,
  Response extends z.ZodType,
> extends Omit<Endpoint<Params, Query, Body, Response>, Defaults> {
  params?: Params;
  query?: Query;
  body?: Body;
  status?: number;
  produces?: Produces;
  consumes?: 'json' | 'multipart';
  ifMatch?: boolean;
  idempotent?: boolean;
}

export const NoFields = z.strictObject({});

/** A JSON endpoint with neither query nor body; `endpoint` fills in these defaults. */
const DEFAULTS = {
  params: NoFields,
  query: NoFields,
  body: null,
  status: 200,
  produces: 'json',
  consumes: 'json',
  ifMatch: false,
  idempotent: false,
} as const;

/**
 * Completes an endpoint with the defaults: JSON in and out, 200, no parameters. The overload lets
 * an absent `params` or `query` have the type of `NoFields`.
 */
export function endpoint<
  Response extends z.ZodType,
  Params extends z.ZodObject = typeof NoFields,
  Query extends z.ZodObject = typeof NoFields,
  Body extends z.ZodType = z.ZodNever,
>(given: Given<Params, Query, Body, Response>): Endpoint<Params, Query, Body, Response>;
export function endpoint(given: Given<z.ZodObject, z.ZodObject, z.ZodType, z.ZodType>): Endpoint {
  return { ...DEFAULTS, ...given };
}
