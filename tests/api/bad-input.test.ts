import { once } from 'node:events';
import { request } from 'node:http';
import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import { type Problem, problemCodes, problemSchema } from '../../shared/problem';
import { allRoutes } from '../../server/features';
import { STREAM_TYPE } from '../../server/http/message-stream';
import type { Route } from '../../server/http/routes';
import { closePool } from '../../server/workers/pool';
import { nasty, spoiled } from '../helpers/bad-documents';
import { buildLakeDocument, buildRiverDocument } from '../helpers/build-document';
import { readHeads } from '../helpers/stream-client';
import { addressOf, requestOf, writes } from '../helpers/route-probe';
import { type Fetch, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let everybody: Record<string, Fetch>;
let routes: Route[];

beforeAll(async () => {
  app = await startTestApp();
  routes = allRoutes(app.deps).filter(({ path }) => !path.includes('sign-out') && path !== apiPaths.events);
  everybody = { planner: await app.fetchAs('planner'), engineer: await app.fetchAs('engineer'), supervisor: await app.fetchAs('supervisor'), administrator: await app.fetchAs('administrator') };
});
afterAll(async () => {
  await app.close();
  await closePool();
});

const nameOf = ({ method, path }: Route) => `${method.toUpperCase()} ${path}`;
/** What would tell a stranger how the server is made. */
const inside = /node_modules|\.ts:\d|\.js:\d|\n\s+at |SQLITE|QueryFailed|TypeError|RangeError/;

/** Asks and holds the answer to the rules for bad input; gives back the problem where there was one. */
async function probe(fetchAs: Fetch, address: string, init: RequestInit, label: string): Promise<Problem | null> {
  const leaving = new AbortController();
  const patience = setTimeout(() => leaving.abort(), 20_000);
  const response = await fetchAs(address, { ...init, signal: leaving.signal }).catch(() => null);
  clearTimeout(patience);
  if (!response) throw new Error(`No answer within 20 s: ${label}`);
  expect(response.status, label).toBeLessThan(500);
  if (response.status < 400) {
    // An answer under way can still fail; what takes long is left, which cancels it.
    const leave = setTimeout(() => leaving.abort(), 1_500);
    const heads = response.headers.get('content-type') === STREAM_TYPE ? await readHeads(response).catch(() => []) : [];
    clearTimeout(leave);
    leaving.abort();
    expect(heads.filter((head) => head.type === 'failed' && head.code === 'internal'), label).toEqual([]);
    return null;
  }
  const text = await response.text();
  expect(response.headers.get('content-type'), label).toContain('application/problem+json');
  expect(text, label).not.toMatch(inside);
  const problem = problemSchema.parse(JSON.parse(text));
  expect(Object.keys(problemCodes), label).toContain(problem.code);
  expect(problem.status, label).toBe(response.status);
  if (problem.code === 'bad-input' || problem.code === 'cannot-be-estimated') {
    expect(problem.errors?.length, label).toBeGreaterThan(0);
    for (const error of problem.errors ?? []) expect(error.message.length, label).toBeGreaterThan(3);
  }
  return problem;
}
/** The first person allowed to call a route, so that bad input gets past the permission. */
async function probeAsAllowed(route: Route, address: string, body: unknown): Promise<void> {
  for (const fetchAs of Object.values(everybody)) {
    const problem = await probe(fetchAs, address, requestOf(route, body), `${nameOf(route)} ${address} ${JSON.stringify(body)?.slice(0, 300)}`);
    if (problem?.code !== 'not-allowed') return;
  }
}

describe('whatever is sent to any route', () => {
  const segment = fc.oneof(fc.constantFrom('none', '..', '%', '\u0000', '0', '-1', '1e9', 'x'.repeat(3_000), "'--", '__proto__', 'constructor', '🏞️'), fc.string({ minLength: 1, maxLength: 40 }));
  const encoded = segment.map(encodeURIComponent);

  it('as a body is answered below 500, as a problem that says what to mend', async () => {
    for (const route of routes.filter(writes)) {
      await fc.assert(fc.asyncProperty(nasty, (body) => probeAsAllowed(route, addressOf(route.path), body === undefined ? null : body)), { numRuns: 25, endOnFailure: true });
    }
  }, 120_000);

  it('as part of the address is answered below 500', async () => {
    for (const route of routes.filter(({ path }) => path.includes(':'))) {
      await fc.assert(
        fc.asyncProperty(encoded, (value) => probeAsAllowed(route, route.path.replace(/:(\w+)/g, () => value), route.body ? {} : undefined)),
        { numRuns: 15, endOnFailure: true },
      );
    }
  }, 120_000);

  it('as a query is answered below 500', async () => {
    const query = fc.dictionary(fc.constantFrom('state', 'q', 'page', 'limit', 'from', 'stale', 'state[]', '__proto__', 'a[b]'), segment);
    for (const route of routes.filter((item) => !writes(item))) {
      await fc.assert(
        fc.asyncProperty(query, (fields) => probeAsAllowed(route, `${addressOf(route.path)}?${new URLSearchParams(Object.entries(fields))}`, undefined)),
        { numRuns: 10, endOnFailure: true },
      );
    }
  }, 120_000);

  it('as an address that cannot be decoded is answered below 500', async () => {
    for (const address of ['/api/runs/%', '/api/runs/%E0%A4%A', '/api/%', '/api/incidents?state=%E0%A4']) await probe(everybody.planner!, address, {}, address);
  });

  it('as text that is no JSON, as nothing, or as another type is refused', async () => {
    for (const route of routes.filter((item) => item.body)) {
      for (const [type, body] of [['application/json', '{"a":'], ['application/json', 'NaN'], ['application/json', ''], ['text/plain', 'a=1'], ['application/json; charset=utf-99', '{}'], ['multipart/form-data; boundary=x', '--x--']] as const) {
        const init = { method: route.method.toUpperCase(), headers: { 'content-type': type }, body };
        expect(await probe(everybody.planner!, addressOf(route.path), init, `${nameOf(route)} ${type} ${body}`)).not.toBeNull();
      }
    }
  });
});

describe('a spoiled estimate document', () => {
  it.each([['river', buildRiverDocument()], ['lake', buildLakeDocument()]])('of a %s is estimated or refused with the fields to mend, never an error of ours', async (_water, good) => {
    await fc.assert(
      fc.asyncProperty(spoiled(good), async (document) => {
        const problem = await probe(everybody.planner!, apiPaths.estimates, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(document) }, JSON.stringify(document)?.slice(0, 2_000) ?? '');
        for (const { path } of problem?.errors ?? []) expect(path).not.toBe('');
      }),
      { numRuns: 150, endOnFailure: true },
    );
  }, 120_000);

  it('is refused as a revision in the same way, and stores nothing', async () => {
    const planner = everybody.planner!;
    const send = async (path: string, body: unknown) => (await (await planner(path, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) })).json()) as { id: string };
    const { id: incidentId } = await send(apiPaths.incidents, { name: 'Test', marking: 'PLANNING' });
    const { id } = await send(apiPaths.incidentScenarios(incidentId), { name: 'Test' });
    let saved = 0;
    await fc.assert(
      fc.asyncProperty(spoiled(buildRiverDocument()), async (document) => {
        const problem = await probe(planner, apiPaths.scenarioRevisions(id), { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify({ document, draftVersion: 0 }) }, JSON.stringify(document)?.slice(0, 2_000) ?? '');
        if (!problem) saved += 1;
        for (const { path } of problem?.errors ?? []) expect(path).toMatch(/^document/);
      }),
      { numRuns: 100, endOnFailure: true },
    );
    const scenario = (await (await planner(apiPaths.scenario(id))).json()) as { revisions: unknown[] };
    expect(scenario.revisions).toHaveLength(saved);
  }, 120_000);
});

describe('an unknown unit', () => {
  it('is refused with the units there are', async () => {
    const actionValue = { substanceId: 'tracer', value: 5, unit: 'grains/gallon', source: 'invented' };
    const receptor = { code: 'INT-9', name: 'Intake', data: { kind: 'intake', position: [-118, -44], waterId: 'river', contact: {}, actionValues: [actionValue] } };
    const problem = await probe(everybody.planner!, apiPaths.register('receptors'), { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(receptor) }, 'unit');
    expect(problem?.errors).toContainEqual({ path: 'data.actionValues.0.unit', message: expect.stringMatching(/ug\/l.*mg\/l.*counts\/100ml.*got grains\/gallon/) });
  });
});

describe('a body of 100 MB', () => {
  const SIZE = 100 * 1024 * 1024;
  const open = (headers: Record<string, string>) => request(new URL(apiPaths.estimates, app.url), { method: 'POST', headers: { 'content-type': 'application/json', ...headers } });

  it('is refused by its announced length before any of it is sent', async () => {
    const asking = open({ 'content-length': String(SIZE) });
    asking.on('error', () => undefined);
    asking.flushHeaders();
    const [answer] = await once(asking, 'response');
    expect(answer.statusCode).toBe(413);
    asking.destroy();
  });

  it('that hides its length is refused after little more than the limit', async () => {
    const asking = open({ 'transfer-encoding': 'chunked' });
    asking.on('error', () => undefined);
    let isAnswered = false;
    const answered = once(asking, 'response').then(([answer]) => ((isAnswered = true), answer));
    const chunk = Buffer.alloc(256 * 1024, 32);
    let sent = 0;
    while (!isAnswered && sent < SIZE) {
      if (!asking.write(chunk)) await Promise.race([once(asking, 'drain'), answered]);
      else await new Promise(setImmediate);
      sent += chunk.length;
    }
    expect((await answered).statusCode).toBe(413);
    expect(sent).toBeLessThan(SIZE / 2);
    asking.destroy();
  });
});
