import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { allows, permissions, roles } from '../../shared/permissions';
import { problemSchema } from '../../shared/problem';
import { allRoutes } from '../../server/features';
import type { Route } from '../../server/http/routes';
import { closePool } from '../../server/workers/pool';
import { addressOf, requestOf } from '../helpers/route-probe';
import { type Fetch, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let routes: Route[];

beforeAll(async () => {
  app = await startTestApp();
  routes = allRoutes(app.deps);
});
afterAll(async () => {
  await app.close();
  await closePool();
});

/** The status, without waiting for the end of an answer that never ends. */
async function ask(fetchAs: Fetch, route: Route): Promise<{ status: number; problem: unknown }> {
  const leaving = new AbortController();
  const response = await fetchAs(addressOf(route.path), { ...requestOf(route, route.body ? {} : undefined), signal: leaving.signal });
  const problem = response.headers.get('content-type')?.includes('problem+json') ? await response.json() : null;
  leaving.abort();
  return { status: response.status, problem };
}
const nameOf = ({ method, path }: Route) => `${method.toUpperCase()} ${path}`;
/** These end the session they are called in, so each gets one of its own. */
const endsSession = ({ path }: Route) => path.includes('sign-out');

describe('every route of the API', () => {
  it('is in the list once', () => {
    const names = routes.map(nameOf);
    expect(names.length).toBeGreaterThan(20);
    expect(new Set(names).size).toBe(names.length);
  });

  it('is closed to visitors unless it is public', async () => {
    for (const route of routes) {
      const { status, problem } = await ask(app.fetchVisitor, route);
      if (route.action !== 'public') expect({ status, problem }, nameOf(route)).toMatchObject({ status: 401, problem: { code: 'not-signed-in' } });
      else expect(problem, nameOf(route)).not.toMatchObject({ code: 'not-signed-in' });
    }
  });

  it.each(roles)('lets a person who is only %s do what the table says and nothing else', async (role) => {
    const fetchAs = await app.fetchAs(role);
    for (const route of routes) {
      const { status, problem } = await ask(endsSession(route) ? await app.fetchAs(role) : fetchAs, route);
      if (route.action === 'public' || allows([role], route.action)) expect([401, 403], `${role}: ${nameOf(route)}`).not.toContain(status);
      else expect({ status, problem }, `${role}: ${nameOf(route)}`).toMatchObject({ status: 403, problem: { code: 'not-allowed' } });
    }
  });

  it('together use every action of the table but those that only the pages ask for', () => {
    const used = new Set(routes.map(({ action }) => action));
    const unused = Object.keys(permissions).filter((action) => !used.has(action as keyof typeof permissions));
    expect(unused).toEqual(['map:read']);
  });

  it('refuses a write that another site has started', async () => {
    const fetchAs = await app.fetchAs('supervisor');
    for (const route of routes.filter(({ method }) => method !== 'get')) {
      const init = requestOf(route, route.body ? {} : undefined);
      const response = await fetchAs(addressOf(route.path), { ...init, headers: { ...init.headers, 'sec-fetch-site': 'cross-site' } });
      expect({ route: nameOf(route), ...problemSchema.parse(await response.json()) }).toMatchObject({ route: nameOf(route), status: 403, code: 'foreign-request' });
    }
  });

  it('that does not exist is answered as such, never with a page', async () => {
    for (const path of ['/api', '/api/nothing', '/api/incidents/none/nothing']) {
      const response = await app.fetchVisitor(path);
      expect(response.status, path).toBe(404);
      expect(response.headers.get('content-type'), path).toContain('application/problem+json');
    }
  });
});
