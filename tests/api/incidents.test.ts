import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import type { Incident, LogEntry } from '../../shared/schemas/incidents';
import { AuditEntity } from '../../server/db/entities/record.entities';
import { type Agent, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let planner: Agent;
let supervisor: Agent;
let coordinator: Agent;

beforeAll(async () => {
  app = await startTestApp();
  planner = await app.agentFor('planner');
  supervisor = await app.agentFor('supervisor');
  coordinator = await app.agentFor('coordinator');
});
afterAll(() => app.close());

const create = async (fields: Partial<Record<string, unknown>> = {}): Promise<Incident> =>
  (await planner.post(apiPaths.incidents).send({ name: 'Tanker at the bridge', marking: 'EXERCISE', utcOffset: '-08:00', ...fields }).expect(201)).body;
const logOf = async (id: string): Promise<LogEntry[]> => (await planner.get(apiPaths.incidentLog(id)).expect(200)).body;
const auditOf = async (id: string) => (await app.deps.db.read.find(AuditEntity, { where: { subjectId: id }, order: { id: 'ASC' } })).map(({ action }) => action);

describe('opening an incident', () => {
  it('gives it the next number of its year and keeps who opened it', async () => {
    const first = await create();
    const second = await create();
    const [year, count] = first.number.split('-');
    expect(first.number).toMatch(/^\d{4}-\d{3}$/);
    expect(second.number).toBe(`${year}-${String(Number(count) + 1).padStart(3, '0')}`);
    expect(first).toMatchObject({ state: 'open', marking: 'EXERCISE', version: 1, scenarioCount: 0, nextArrivals: [], closedAt: null });
    expect(first.openedBy).not.toBe('');
  });

  it('gives 20 people who open one at the same moment 20 different numbers', async () => {
    const numbers = (await Promise.all(Array.from({ length: 20 }, () => create()))).map(({ number }) => number);
    expect(new Set(numbers).size).toBe(20);
  });

  it('writes a log entry of its own and an audit entry, and tells other pages', async () => {
    const told: string[] = [];
    const unsubscribe = app.deps.changes.subscribe((event) => told.push(`${event.topic} ${event.id}`));
    const { id, number } = await create({ marking: 'REAL' });
    unsubscribe();
    expect(await logOf(id)).toMatchObject([{ kind: 'system', text: `Incident ${number} opened as REAL` }]);
    expect(await auditOf(id)).toEqual(['incident.create']);
    expect(told).toContain(`incident ${id}`);
  });

  it('names every field that cannot be used', async () => {
    const { body } = await planner.post(apiPaths.incidents).send({ name: ' ', marking: 'DRILL', utcOffset: '8' }).expect(422).expect('content-type', /problem\+json/);
    expect(body.errors.map(({ path }: { path: string }) => path).sort()).toEqual(['marking', 'name', 'utcOffset']);
  });

  it('is refused to a visitor and to a coordinator', async () => {
    await app.visitor().post(apiPaths.incidents).send({ name: 'a', marking: 'REAL' }).expect(401);
    await coordinator.post(apiPaths.incidents).send({ name: 'a', marking: 'REAL' }).expect(403);
  });
});

describe('changing an incident', () => {
  it('keeps name, summary and time offset, and raises the version', async () => {
    const { id } = await create();
    const { body } = await planner.put(apiPaths.incident(id)).send({ name: 'Tanker at V2 bridge', summary: 'Valve torn off', utcOffset: '-07:00', version: 1 }).expect(200);
    expect(body).toMatchObject({ name: 'Tanker at V2 bridge', summary: 'Valve torn off', utcOffset: '-07:00', version: 2 });
    expect((await logOf(id)).at(-1)?.text).toContain('Renamed from "Tanker at the bridge"');
    expect(await auditOf(id)).toEqual(['incident.create', 'incident.update']);
  });

  it('never changes its marking', async () => {
    const { id } = await create({ marking: 'EXERCISE' });
    await planner.put(apiPaths.incident(id)).send({ name: 'a', marking: 'REAL', utcOffset: '-08:00', version: 1 }).expect(200);
    expect((await planner.get(apiPaths.incident(id))).body.marking).toBe('EXERCISE');
  });

  it('is refused with the present version when somebody else was faster', async () => {
    const { id } = await create();
    await planner.put(apiPaths.incident(id)).send({ name: 'first', version: 1 }).expect(200);
    const { body } = await supervisor.put(apiPaths.incident(id)).send({ name: 'second', version: 1 }).expect(409);
    expect(body).toMatchObject({ code: 'stale-version', current: { name: 'first', version: 2 } });
    expect((await planner.get(apiPaths.incident(id))).body.name).toBe('first');
  });

  it('answers that an unknown incident is not there', async () => {
    await planner.get(apiPaths.incident('unknown')).expect(404);
    await planner.put(apiPaths.incident('unknown')).send({ name: 'a', version: 1 }).expect(404);
    await planner.get(apiPaths.incidentLog('unknown')).expect(404);
  });
});

describe('closing an incident', () => {
  it('freezes it until it is opened again, and both are logged and audited', async () => {
    const { id } = await create();
    expect((await supervisor.post(apiPaths.incidentClose(id)).expect(200)).body).toMatchObject({ state: 'closed', abilities: { update: false, addScenario: false, log: false, close: true } });
    await planner.put(apiPaths.incident(id)).send({ name: 'a', version: 2 }).expect(409);
    await planner.post(apiPaths.incidentLog(id)).send({ text: 'late' }).expect(409);
    await planner.post(apiPaths.incidentScenarios(id)).send({ name: 'late' }).expect(409);
    await supervisor.post(apiPaths.incidentClose(id)).expect(409);
    expect((await supervisor.post(apiPaths.incidentReopen(id)).expect(200)).body).toMatchObject({ state: 'open', closedAt: null });
    expect((await logOf(id)).map(({ text }) => text).slice(1)).toEqual(['Incident closed', 'Incident reopened']);
    expect(await auditOf(id)).toEqual(['incident.create', 'incident.close', 'incident.reopen']);
  });

  it('is for supervisors', async () => {
    const { id } = await create();
    await planner.post(apiPaths.incidentClose(id)).expect(403);
    await app.visitor().post(apiPaths.incidentClose(id)).expect(401);
    await supervisor.post(apiPaths.incidentClose('unknown')).expect(404);
  });

  it('takes it off the list of open ones', async () => {
    const { id } = await create();
    await supervisor.post(apiPaths.incidentClose(id)).expect(200);
    const ids = async (state: string) => (await planner.get(`${apiPaths.incidents}?state=${state}`).expect(200)).body.map((incident: Incident) => incident.id);
    expect(await ids('open')).not.toContain(id);
    expect(await ids('closed')).toContain(id);
    await planner.get(`${apiPaths.incidents}?state=lost`).expect(422);
  });
});

describe('the log', () => {
  it('takes entries from the field with the time they tell of, and keeps their order', async () => {
    const { id } = await create();
    const entry = { text: 'Sheen at SP1, left bank', occurredAt: '2031-05-12T07:10:00-08:00' };
    const { body } = await coordinator.post(apiPaths.incidentLog(id)).send(entry).expect(201);
    expect(body).toMatchObject({ ...entry, kind: 'note' });
    await planner.post(apiPaths.incidentLog(id)).send({ text: 'Intake closed' }).expect(201);
    expect((await logOf(id)).map(({ text }) => text).slice(1)).toEqual([entry.text, 'Intake closed']);
    expect(await auditOf(id)).toEqual(['incident.create', 'incident.log', 'incident.log']);
  });

  it('refuses an empty entry and a time without its offset', async () => {
    const { id } = await create();
    await planner.post(apiPaths.incidentLog(id)).send({ text: '  ' }).expect(422);
    const { body } = await planner.post(apiPaths.incidentLog(id)).send({ text: 'a', occurredAt: '2031-05-12T07:10:00' }).expect(422);
    expect(body.errors[0]).toMatchObject({ path: 'occurredAt', message: expect.stringContaining('UTC offset') });
  });

  it('is append-only: no address changes or deletes an entry', async () => {
    const { id } = await create();
    const [entry] = await logOf(id);
    await planner.delete(`${apiPaths.incidentLog(id)}/${entry!.id}`).expect(404);
    await planner.put(`${apiPaths.incidentLog(id)}/${entry!.id}`).send({ text: 'other' }).expect(404);
    expect(await logOf(id)).toEqual([entry]);
  });
});
