import { z } from 'zod';
import { type ZodOpenApiOperationObject, type ZodOpenApiPathsObject, type ZodOpenApiResponseObject, createDocument } from 'zod-openapi';
import { SESSION_COOKIE } from '../../http/sessions';
import type { Route } from '../../http/routes';
import { type ProblemCode, problemCodes, problemSchema } from '../../../shared/problem';
import { estimateDocumentSchema } from '../../../shared/schemas/estimate';
import { estimateResultSchema } from '../../../shared/schemas/estimate-result';
import { incidentSchema, runSchema, scenarioSchema } from '../../../shared/schemas/incidents';

const components = { EstimateDocument: estimateDocumentSchema, EstimateResult: estimateResultSchema, Incident: incidentSchema, Scenario: scenarioSchema, Run: runSchema, Problem: problemSchema };

/** OpenAPI 3.1 of every route, out of the same definitions that the server mounts. */
export function describeRoutes(routes: readonly Route[], version: string): object {
  const paths: ZodOpenApiPathsObject = {};
  for (const item of routes) {
    const path = item.path.replace(/:(\w+)/g, '{$1}');
    paths[path] = { ...paths[path], [item.method]: operationOf(item) };
  }
  return createDocument({
    openapi: '3.1.0',
    info: { title: 'Downreach', version, description: 'SI units throughout: kg, m, s, kg/m3. Times in ISO 8601 with offset. Errors are application/problem+json (RFC 9457). Estimates are for qualified people; local rules and licensed review come first.', license: { name: 'MIT', identifier: 'MIT' } },
    tags: [...new Set(routes.map(({ tag }) => tag))].map((name) => ({ name })),
    paths,
    components: { schemas: components, securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: SESSION_COOKIE } } },
  });
}

function operationOf(item: Route): ZodOpenApiOperationObject {
  return {
    operationId: operationId(item),
    summary: item.summary,
    tags: [item.tag],
    'x-permission': item.action,
    security: item.action === 'public' ? [] : [{ session: [] }],
    requestParams: { ...pathParams(item), ...(item.query ? { query: item.query as z.ZodObject } : {}) },
    ...(item.body ? { requestBody: { required: true, content: { 'application/json': { schema: item.body } } } } : {}),
    responses: { [`${item.status ?? (item.response || item.produces ? 200 : 204)}` as '200']: goodAnswer(item), ...Object.fromEntries(problemsOf(item)) },
  };
}

const operationId = ({ method, path }: Route): string => [method, ...path.split('/').slice(2)].map((part) => part.replace(/[:.](\w)/g, (_all, letter: string) => letter.toUpperCase()).replace(/-/g, '_')).join('_');

function pathParams(item: Route): { path?: z.ZodObject } {
  const names = [...item.path.matchAll(/:(\w+)/g)].map(([, name]) => name!);
  if (names.length === 0) return {};
  return { path: (item.params as z.ZodObject | undefined) ?? z.object(Object.fromEntries(names.map((name) => [name, z.string()]))) };
}

function goodAnswer({ response, produces }: Route): ZodOpenApiResponseObject {
  if (produces) return { description: 'The answer, as it comes', content: { [produces]: { schema: { type: 'string', format: 'binary' } } } };
  return response ? { description: 'The answer', content: { 'application/json': { schema: response } } } : { description: 'Done, nothing to say' };
}

function problemsOf(item: Route): [`4${string}` | `5${string}`, ZodOpenApiResponseObject][] {
  const codes: ProblemCode[] = ['internal'];
  if (item.body) codes.push('bad-json', 'bad-input', 'too-large', 'unsupported-type');
  else if (item.query || item.params) codes.push('bad-input');
  if (item.action !== 'public') codes.push('not-signed-in', 'not-allowed');
  if (item.path.includes(':')) codes.push('not-found');
  if (item.method !== 'get') codes.push('stale-version');
  return codes.map((code) => [`${problemCodes[code].status}` as `4${string}`, { description: problemCodes[code].title, content: { 'application/problem+json': { schema: problemSchema } } }]);
}
