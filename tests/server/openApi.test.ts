import { afterAll, beforeAll, expect, test } from 'vitest';
import { routes } from '../../server/routes/index';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';

let server: TestServer;
// eslint-disable-next-line @typescript-eslint/no-explicit-any -- a document read as a reader without our types would
let document: any;
beforeAll(async () => {
  server = await startServer();
  document = (await createApiClient(server.url).get('/api/openapi.json')).body;
});
afterAll(() => server.stop());
const METHODS = ['get', 'post', 'delete'];

test('the document is OpenAPI 3.1 with title and version', () => {
  expect(document.openapi).toMatch(/^3\.1\.\d+$/);
  expect(document.info).toMatchObject({ title: expect.any(String), version: expect.any(String) });
});

test('it lists every route and no other', () => {
  const listed = Object.entries(document.paths as object).flatMap(([path, item]) =>
    Object.keys(item as object).map((method) => `${method} ${path}`),
  );
  expect(listed.sort()).toEqual(
    routes.map(({ method, path }) => `${method} ${path.replace(/:(\w+)/g, '{$1}')}`).sort(),
  );
});

test('every operation has a summary, an id of its own, an answer, an error, and each path parameter', () => {
  const ids: string[] = [];
  for (const [path, item] of Object.entries(document.paths as Record<string, Record<string, never>>)) {
    // eslint-disable-next-line @typescript-eslint/no-explicit-any
    for (const [method, operation] of Object.entries(item) as [string, any][]) {
      expect(METHODS).toContain(method);
      expect(operation.summary.length).toBeGreaterThan(5);
      ids.push(operation.operationId);
      expect(operation.responses['200'].content['application/json'].schema.type ?? 'union').toBeTruthy();
      expect(operation.responses.default.content['application/json'].schema.properties.error).toBeDefined();
      const named = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name);
      const parameters = (operation.parameters ?? []).filter((each: { in: string }) => each.in === 'path');
      expect(parameters.map(({ name }: { name: string }) => name)).toEqual(named);
      expect(parameters.every(({ required }: { required: boolean }) => required)).toBe(true);
    }
  }
  expect(new Set(ids).size).toBe(ids.length);
});

test('bodies are described by the schemas that check them: limits, formats and no unknown fields', () => {
  const schemaOf = (path: string) => document.paths[path].post.requestBody.content['application/json'].schema;
  const sync = schemaOf('/api/sync');
  expect(sync).toMatchObject({ type: 'object', additionalProperties: false });
  expect(sync.required.sort()).toEqual(['device_id', 'items', 'protocol', 'sent_wall_ms']);
  expect(sync.properties.items.maxItems).toBe(50);
  expect(schemaOf('/api/sign-in').required.sort()).toEqual(['email', 'password']);
  expect(schemaOf('/api/join').properties.bench).toMatchObject({ type: 'integer', minimum: 1, maximum: 40 });
});

test('what may be asked by nobody needs no security, the board its pass, all else a session', () => {
  const security = (path: string, method: string) => document.paths[path][method].security;
  expect(security('/api/health', 'get')).toEqual([]);
  expect(security('/api/board', 'get')).toEqual([{ boardPass: [] }]);
  expect(security('/api/sync', 'post')).toEqual([{ session: [] }]);
});
