import {
  OpenAPIRegistry,
  OpenApiGeneratorV31,
  type RouteConfig,
} from '@asteasolutions/zod-to-openapi';
import * as z from 'zod';
import type { Access, Endpoint } from '#contract/endpoint.ts';
import { Problem } from '#contract/problem.ts';
import type { Mounted } from './mount.ts';

const MEDIA_TYPES: Record<Endpoint['produces'], string | null> = {
  json: 'application/json',
  csv: 'text/csv',
  binary: 'application/octet-stream',
  events: 'text/event-stream',
  none: null,
};

/** Who may call, for people and for the test of rights. */
const rolesOf = (access: Access): readonly string[] =>
  access.kind === 'deposit' ? access.roles : [access.kind];

function securityOf({ endpoint: { access }, sessionOnly }: Mounted): Record<string, string[]>[] {
  if (access.kind === 'public') return [];
  return access.kind === 'deposit' && !sessionOnly
    ? [{ session: [] }, { token: [] }]
    : [{ session: [] }];
}

function headersOf(endpoint: Endpoint): z.ZodObject | undefined {
  const headers = {
    ...(endpoint.ifMatch && { 'If-Match': z.string() }),
    ...(endpoint.idempotent && { 'Idempotency-Key': z.string().min(8).max(200).optional() }),
  };
  return Object.keys(headers).length > 0 ? z.object(headers) : undefined;
}

function operation(mounted: Mounted): RouteConfig {
  const { endpoint } = mounted;
  const mediaType = MEDIA_TYPES[endpoint.produces];
  const headers = headersOf(endpoint);
  const bodyType = endpoint.consumes === 'multipart' ? 'multipart/form-data' : 'application/json';
  return {
    method: endpoint.method,
    path: `/api${endpoint.path.replaceAll(/:(\w+)/g, '{$1}')}`,
    operationId: endpoint.id,
    summary: endpoint.summary,
    tags: [endpoint.tag],
    security: securityOf(mounted),
    'x-roles': rolesOf(endpoint.access),
    request: {
      params: endpoint.params,
      query: endpoint.query,
      ...(headers && { headers }),
      ...(endpoint.body && {
        body: { required: true, content: { [bodyType]: { schema: endpoint.body } } },
      }),
    },
    responses: {
      [endpoint.status]: {
        description: endpoint.summary,
        ...(mediaType && { content: { [mediaType]: { schema: endpoint.response } } }),
      },
      default: {
        description: 'The request was refused',
        content: { 'application/problem+json': { schema: Problem } },
      },
    },
  };
}

/** The OpenAPI 3.1 description of the endpoints mounted. */
export function describeApi(mounted: readonly Mounted[], session: { cookieName: string }) {
  const registry = new OpenAPIRegistry();
  registry.registerComponent('securitySchemes', 'session', {
    type: 'apiKey',
    in: 'cookie',
    name: session.cookieName,
  });
  registry.registerComponent('securitySchemes', 'token', { type: 'http', scheme: 'bearer' });
  for (const one of mounted) registry.registerPath(operation(one));
  return new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Selvage',
      version: '1',
      description: 'From drill-hole geochemistry to estimation domains.',
    },
  });
}
