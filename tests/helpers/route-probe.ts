import type { Route } from '../../server/http/routes';

/** Values that make each address of the API a real one; the things named are not there. */
const stands: Record<string, string> = { register: 'receptors', number: '1' };

export const addressOf = (path: string, values: Record<string, string> = {}): string =>
  path.replace(/:(\w+)/g, (_all, name: string) => encodeURIComponent(values[name] ?? stands[name] ?? 'none'));

export const writes = (route: Route): boolean => route.method !== 'get';

/** A request to a route with the body given; JSON where there is one. */
export const requestOf = (route: Route, body?: unknown): RequestInit => ({
  method: route.method.toUpperCase(),
  ...(writes(route) && body !== undefined ? { headers: { 'content-type': 'application/json' }, body: typeof body === 'string' ? body : JSON.stringify(body) } : {}),
});
