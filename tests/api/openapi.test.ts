import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import { permissions } from '../../shared/permissions';
import { allRoutes } from '../../server/features';
import { type TestApp, startTestApp } from '../helpers/test-app';

type Operation = { operationId: string; summary: string; 'x-permission': string; security: object[]; parameters?: { in: string; name: string; required?: boolean }[]; requestBody?: { content: Record<string, { schema: object }> }; responses: Record<string, { content?: Record<string, { schema: object }> }> };
type Document = { openapi: string; info: { title: string; version: string }; paths: Record<string, Record<string, Operation>>; components: { schemas: Record<string, object> } };

let app: TestApp;
let document: Document;
let operations: [key: string, operation: Operation][];

beforeAll(async () => {
  app = await startTestApp();
  document = (await app.visitor().get(apiPaths.openApi).expect(200).expect('content-type', /application\/json/)).body;
  operations = Object.entries(document.paths).flatMap(([path, methods]) => Object.entries(methods).map(([method, operation]) => [`${method} ${path}`, operation] as [string, Operation]));
});
afterAll(() => app.close());

/** Every `$ref` anywhere inside. */
const refsIn = (value: unknown): string[] => {
  if (value === null || typeof value !== 'object') return [];
  return Object.entries(value).flatMap(([key, item]) => (key === '$ref' && typeof item === 'string' ? [item] : refsIn(item)));
};

describe('the description of the API', () => {
  it('is OpenAPI 3.1 with the version of the product', () => {
    expect(document.openapi).toMatch(/^3\.1\./);
    expect(document.info).toMatchObject({ title: 'Downreach', version: expect.stringMatching(/^\d+\.\d+\.\d+$/) });
  });

  it('holds exactly the routes that the server mounts', () => {
    const mounted = allRoutes(app.deps).map(({ method, path }) => `${method} ${path.replace(/:(\w+)/g, '{$1}')}`);
    expect(operations.map(([key]) => key).sort()).toEqual(mounted.sort());
  });

  it('tells for each route its permission, out of the table', () => {
    const known = [...Object.keys(permissions), 'public'];
    for (const [key, operation] of operations) {
      expect(known, key).toContain(operation['x-permission']);
      expect(operation.security, key).toHaveLength(operation['x-permission'] === 'public' ? 0 : 1);
    }
  });

  it('names each operation once and says what it does', () => {
    const ids = operations.map(([, { operationId }]) => operationId);
    expect(new Set(ids).size).toBe(ids.length);
    for (const [key, { summary }] of operations) expect(summary.length, key).toBeGreaterThan(8);
  });

  it('describes every parameter in the address, as required', () => {
    for (const [key, operation] of operations) {
      const inPath = [...key.matchAll(/\{(\w+)\}/g)].map(([, name]) => name).sort();
      const described = (operation.parameters ?? []).filter((parameter) => parameter.in === 'path');
      expect(described.map(({ name }) => name).sort(), key).toEqual(inPath);
      for (const parameter of described) expect(parameter.required, key).toBe(true);
    }
  });

  it('gives every operation one good answer, and every error as problem+json', () => {
    for (const [key, { responses }] of operations) {
      const statuses = Object.keys(responses);
      expect(statuses.filter((status) => status.startsWith('2')), key).toHaveLength(1);
      for (const status of statuses.filter((code) => /^[45]/.test(code))) expect(Object.keys(responses[status]!.content ?? {}), `${key} ${status}`).toEqual(['application/problem+json']);
      expect(statuses, key).toContain('500');
    }
  });

  it('describes the estimate document once, by name, with its parts', () => {
    const posted = document.paths[apiPaths.estimates]!.post!.requestBody!.content['application/json']!.schema;
    expect(posted).toEqual({ $ref: '#/components/schemas/EstimateDocument' });
    expect(document.components.schemas.EstimateDocument).toMatchObject({ type: 'object', properties: { startAt: {}, horizonS: {}, water: {}, releases: {} }, required: expect.arrayContaining(['format', 'water', 'releases']) });
  });

  it('refers only to what it holds', () => {
    const refs = new Set(refsIn(document));
    expect(refs.size).toBeGreaterThan(3);
    for (const ref of refs) {
      const found = ref.split('/').slice(1).reduce<unknown>((at, key) => (at as Record<string, unknown> | undefined)?.[key], document);
      expect(found, ref).toBeDefined();
    }
  });
});

describe('the health page', () => {
  it('answers anybody with the version', async () => {
    const { body } = await app.visitor().get(apiPaths.health).expect(200);
    expect(body).toEqual({ ok: true, version: document.info.version });
  });
});
