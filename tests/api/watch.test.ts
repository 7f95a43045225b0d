import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import type { Watch } from '../../shared/schemas/incidents';
import { MailEntity, type MailRow } from '../../server/db/entities/record.entities';
import { RegisterItemEntity, type RegisterItemRow } from '../../server/db/entities/register.entities';
import { RunEntity } from '../../server/db/entities/incident.entities';
import { buildRiverDocument } from '../helpers/build-document';
import { type Agent, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let planner: Agent;
let engineer: Agent;
let administrator: Agent;

beforeAll(async () => {
  app = await startTestApp();
  planner = await app.agentFor('planner');
  engineer = await app.agentFor('engineer');
  administrator = await app.agentFor('administrator');
});
afterAll(() => app.close());

const watch = async (agent: Agent): Promise<Watch> => (await agent.get(apiPaths.watch).expect(200)).body;
const waitingKinds = async (agent: Agent) => (await watch(agent)).waiting.map(({ kind }) => kind);
const openIncident = async (marking: string): Promise<string> => (await planner.post(apiPaths.incidents).send({ name: marking, marking }).expect(201)).body.id;
const addScenario = async (name: string): Promise<string> => (await planner.post(apiPaths.incidentScenarios(await openIncident('EXERCISE'))).send({ name }).expect(201)).body.id;

describe('the Watch', () => {
  it('shows open incidents, real ones before exercises before planning', async () => {
    for (const marking of ['PLANNING', 'EXERCISE', 'REAL']) await openIncident(marking);
    const markings = (await watch(planner)).incidents.map(({ marking }) => marking);
    expect(markings.slice(0, 1)).toEqual(['REAL']);
    expect(markings.at(-1)).toBe('PLANNING');
  });

  it('leaves out closed incidents', async () => {
    const id = await openIncident('REAL');
    const supervisor = await app.agentFor('supervisor');
    await supervisor.post(apiPaths.incidentClose(id)).expect(200);
    expect((await watch(planner)).incidents.map((incident) => incident.id)).not.toContain(id);
  });

  it('tells an administrator nothing of incidents and runs', async () => {
    await openIncident('REAL');
    expect(await watch(administrator)).toMatchObject({ incidents: [], runningRuns: [] });
  });

  it('reminds of a draft that no revision holds, only the person who typed it, until it is saved', async () => {
    const id = await addScenario('Half typed');
    const reminders = async (agent: Agent) => (await watch(agent)).waiting.filter(({ href }) => href === `/scenarios/${id}`);
    expect(await reminders(planner)).toEqual([]);
    await planner.put(apiPaths.scenarioDraft(id)).send({ draft: { title: 'half' }, draftVersion: 0 }).expect(200);
    expect(await reminders(planner)).toMatchObject([{ kind: 'unsaved-draft', text: expect.stringContaining('Half typed') }]);
    expect(await reminders(engineer)).toEqual([]);
    await planner.post(apiPaths.scenarioRevisions(id)).send({ document: buildRiverDocument(), draftVersion: 1 }).expect(201);
    expect(await reminders(planner)).toEqual([]);
  });

  it('shows runs that wait or are being solved', async () => {
    const id = await addScenario('Waiting');
    const { body } = await planner.post(apiPaths.scenarioRevisions(id)).send({ document: buildRiverDocument(), draftVersion: 0 }).expect(201);
    expect((await watch(engineer)).runningRuns).toContainEqual({ runId: body.runId, scenarioId: id, scenarioName: 'Waiting', state: 'queued', done: 0, of: 0 });
  });

  it('tells a person of a run of theirs that failed, until the scenario is run again', async () => {
    const id = await addScenario('Failing');
    const { body } = await planner.post(apiPaths.scenarioRevisions(id)).send({ document: buildRiverDocument(), draftVersion: 0 }).expect(201);
    await app.deps.db.write((tx) => tx.update(RunEntity, { id: body.runId }, { state: 'failed', failure: { code: 'interrupted', detail: 'The server stopped twice', errors: [] } } as object));
    const failed = async (agent: Agent) => (await watch(agent)).waiting.filter(({ kind }) => kind === 'failed-run');
    expect(await failed(planner)).toMatchObject([{ text: expect.stringMatching(/Failing.*revision 1.*stopped twice/), href: `/scenarios/${id}?run=${body.runId}` }]);
    expect(await failed(engineer)).toEqual([]);
    await planner.post(apiPaths.scenarioRuns(id)).send({ revisionNumber: 1 }).expect(202);
    expect(await failed(planner)).toEqual([]);
  });

  it('counts stale register entries for those who may mend them', async () => {
    const entry = (id: string, lastCheckedOn: string | null, isArchived = false): RegisterItemRow => ({ id, register: 'substances', code: id, name: id, ownerName: '', lastCheckedOn, data: {} as never, version: 1, isArchived, updatedAt: '2031-01-01T00:00:00Z', updatedBy: 'x' });
    const today = app.deps.now().toISOString().slice(0, 10);
    const before = (await watch(engineer)).waiting.find(({ text }) => text.includes('substance'))?.count ?? 0;
    await app.deps.db.write((tx) => tx.insert(RegisterItemEntity, [entry('stale-a', '2001-01-01'), entry('stale-b', null), entry('fresh', today), entry('gone', null, true)] as object[]));
    expect((await watch(engineer)).waiting).toContainEqual({ kind: 'stale-register', text: expect.stringMatching(/substances not checked within 3 years/), href: '/substances?stale=1', count: before + 2 });
    expect((await watch(planner)).waiting.filter(({ text }) => text.includes('substance'))).toEqual([]);
  });

  it('tells administrators alone of mails that could not be delivered', async () => {
    const mail: MailRow = { id: 'm1', to: 'a@example.org', subject: 's', text: 't', state: 'failed', attempts: 6, nextAttemptAt: null, lastError: '550', createdAt: '2031-01-01T00:00:00Z', sentAt: null };
    await app.deps.db.write((tx) => tx.insert(MailEntity, mail));
    expect((await watch(administrator)).waiting).toContainEqual({ kind: 'failed-mail', text: '1 mail could not be delivered', href: '/office/outbox', count: 1 });
    expect(await waitingKinds(planner)).not.toContain('failed-mail');
  });

  it('says the time of the server and is closed to visitors', async () => {
    expect(Date.parse((await watch(planner)).serverTime)).not.toBeNaN();
    await app.visitor().get(apiPaths.watch).expect(401);
  });
});
