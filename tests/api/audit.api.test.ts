import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import type { AuditPage } from '../../shared/schemas/office';
import { type Agent, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let supervisor: Agent;
const record = (action: string, kind: 'incident' | 'person', id: string, personId: string) =>
  app.deps.db.write((tx) => app.deps.audit.record(tx, { id: personId, name: `Person ${personId}` }, action, { kind, id }, { note: action }));
beforeAll(async () => {
  app = await startTestApp({ now: () => new Date('2031-05-12T14:40:00Z') });
  supervisor = await app.agentFor('supervisor');
  for (let i = 1; i <= 5; i++) await record(`incident.step-${i}`, 'incident', 'i1', 'p1');
  await record('person.step', 'person', 'x1', 'p2');
});
afterAll(() => app.close());

const read = async (query: object = {}) => (await supervisor.get(apiPaths.audit).query(query).expect(200)).body as AuditPage;
const actionsOf = ({ entries }: AuditPage) => entries.map(({ action }) => action);

describe('the audit trail', () => {
  it('tells who did what to what, and when, the newest first', async () => {
    const page = await read();
    expect(actionsOf(page)).toEqual(['person.step', 'incident.step-5', 'incident.step-4', 'incident.step-3', 'incident.step-2', 'incident.step-1', 'session.sign-in']);
    expect(page.entries[0]).toEqual({ id: page.entries[0]!.id, at: '2031-05-12T14:40:00.000Z', personId: 'p2', personName: 'Person p2', action: 'person.step', subjectKind: 'person', subjectId: 'x1', detail: { note: 'person.step' } });
    expect(page.nextBefore).toBeNull();
  });

  it('gives page after page without gap or overlap while new entries arrive', async () => {
    const first = await read({ limit: 3, kind: 'incident' });
    await record('incident.late', 'incident', 'i2', 'p1');
    const second = await read({ limit: 3, kind: 'incident', before: first.nextBefore! });
    expect([...actionsOf(first), ...actionsOf(second)]).toEqual(['incident.step-5', 'incident.step-4', 'incident.step-3', 'incident.step-2', 'incident.step-1']);
    expect(second.nextBefore).toBeNull();
  });

  it('can be narrowed to a kind, a thing or a person', async () => {
    expect(actionsOf(await read({ kind: 'person' }))).toEqual(['person.step']);
    expect(actionsOf(await read({ subjectId: 'x1' }))).toEqual(['person.step']);
    expect(actionsOf(await read({ personId: 'p2' }))).toEqual(['person.step']);
  });

  it('refuses what cannot be used', async () => {
    const { body } = await supervisor.get(apiPaths.audit).query({ before: 'x', kind: 'weather', limit: 1_000 }).expect(422);
    expect(body.errors.map(({ path }: { path: string }) => path).sort()).toEqual(['before', 'kind', 'limit']);
  });

  it('is for administrators and supervisors', async () => {
    await app.visitor().get(apiPaths.audit).expect(401);
    for (const role of ['planner', 'engineer', 'coordinator'] as const) await (await app.agentFor(role)).get(apiPaths.audit).expect(403);
    await (await app.agentFor('administrator')).get(apiPaths.audit).expect(200);
  });

  it('cannot be changed by any route', async () => {
    for (const method of ['post', 'put', 'delete'] as const) await supervisor[method](apiPaths.audit).send({}).expect(404);
  });
});
