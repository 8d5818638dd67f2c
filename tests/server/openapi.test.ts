import { beforeAll, expect, test } from 'vitest';
import { ALL_ENDPOINTS } from '#contract/all-endpoints.ts';
import { type TestClient, testClient } from '#tests/support/test-client.ts';

interface Operation {
  operationId: string;
  'x-roles': string[];
  security: Record<string, string[]>[];
  requestBody?: unknown;
  parameters?: { name: string; in: string }[];
  responses: Record<string, unknown>;
}
interface Document {
  openapi: string;
  paths: Record<string, Record<string, Operation>>;
  components: { securitySchemes: Record<string, unknown> };
}

let client: TestClient;
let document: Document;
beforeAll(async () => {
  client = await testClient();
  document = (await client.bare().get('/api/openapi.json')).body as Document;
});

const operations = () =>
  Object.entries(document.paths).flatMap(([path, methods]) =>
    Object.entries(methods).map(([method, operation]) => ({ path, method, ...operation })),
  );

test('the API document is OpenAPI 3.1 and lists exactly what is mounted', () => {
  expect(document.openapi).toBe('3.1.0');
  const listed = operations().map(
    ({ method, path, operationId }) => `${method} ${path} ${operationId}`,
  );
  const mounted = client.app.mounted.map(
    ({ endpoint }) =>
      `${endpoint.method} /api${endpoint.path.replaceAll(/:(\w+)/g, '{$1}')} ${endpoint.id}`,
  );
  expect(listed.sort()).toEqual(mounted.sort());
});

test('every endpoint mounted is promised by the contract, ids and addresses are unique', () => {
  for (const { endpoint } of client.app.mounted) expect(ALL_ENDPOINTS).toContain(endpoint);
  expect(new Set(ALL_ENDPOINTS.map(({ id }) => id)).size).toBe(ALL_ENDPOINTS.length);
  expect(new Set(ALL_ENDPOINTS.map(({ method, path }) => `${method} ${path}`)).size).toBe(
    ALL_ENDPOINTS.length,
  );
});

test('each operation tells who may call it and how they prove it', () => {
  for (const operation of operations()) {
    expect(operation['x-roles'].length, operation.operationId).toBeGreaterThan(0);
    expect(operation.security.length > 0, operation.operationId).toBe(
      !operation['x-roles'].includes('public'),
    );
    expect(operation.responses).toHaveProperty('default');
  }
  const update = document.paths['/api/deposits/{depositId}']?.['put'];
  expect(update?.['x-roles']).toEqual(['lead']);
  expect(update?.parameters?.map(({ name }) => name)).toEqual(
    expect.arrayContaining(['depositId', 'If-Match']),
  );
  expect(Object.keys(document.components.securitySchemes).sort()).toEqual(['session', 'token']);
});
