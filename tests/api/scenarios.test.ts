import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import type { Revision, Scenario, ScenarioSummary } from '../../shared/schemas/incidents';
import { AuditEntity, JobEntity } from '../../server/db/entities/record.entities';
import { buildLakeDocument, buildRiverDocument } from '../helpers/build-document';
import { type Agent, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let planner: Agent;
let engineer: Agent;
let supervisor: Agent;
let incidentId: string;
let scenario: Scenario;

beforeAll(async () => {
  app = await startTestApp();
  planner = await app.agentFor('planner');
  engineer = await app.agentFor('engineer');
  supervisor = await app.agentFor('supervisor');
});
afterAll(() => app.close());
beforeEach(async () => {
  incidentId = (await planner.post(apiPaths.incidents).send({ name: 'Test', marking: 'PLANNING', utcOffset: '-08:00' }).expect(201)).body.id;
  scenario = await add({ name: 'Scenario 1' });
});

const add = async (fields: object): Promise<Scenario> => (await planner.post(apiPaths.incidentScenarios(incidentId)).send(fields).expect(201)).body;
const get = async (id = scenario.id): Promise<Scenario> => (await planner.get(apiPaths.scenario(id)).expect(200)).body;
const saveDraft = (agent: Agent, draft: object, draftVersion: number) => agent.put(apiPaths.scenarioDraft(scenario.id)).send({ draft, draftVersion });
const save = (document: object = buildRiverDocument(), draftVersion = 0) => planner.post(apiPaths.scenarioRevisions(scenario.id)).send({ document, draftVersion, note: 'first look' });
const actionsOf = async (subjectId: string) => (await app.deps.db.read.find(AuditEntity, { where: { subjectId }, order: { id: 'ASC' } })).map(({ action }) => action);

describe('a new scenario', () => {
  it('is empty and carries the marking of its incident', async () => {
    expect(scenario).toMatchObject({ incidentId, marking: 'PLANNING', utcOffset: '-08:00', draft: {}, draftVersion: 0, revisions: [], abilities: { edit: true, run: true } });
    expect(await actionsOf(scenario.id)).toEqual(['scenario.create']);
    const { body } = await planner.get(apiPaths.incidentScenarios(incidentId)).expect(200);
    expect(body).toMatchObject([{ id: scenario.id, revisionCount: 0, latestRunId: null }] satisfies Partial<ScenarioSummary>[]);
  });

  it('can be a copy, after which each goes its own way', async () => {
    await saveDraft(planner, { title: 'original' }, 0).expect(200);
    const copy = await add({ name: 'Copy', copyOfScenarioId: scenario.id });
    expect(copy).toMatchObject({ draft: { title: 'original' }, draftVersion: 0, revisions: [] });
    await planner.put(apiPaths.scenarioDraft(copy.id)).send({ draft: { title: 'changed' }, draftVersion: 0 }).expect(200);
    expect((await get()).draft).toEqual({ title: 'original' });
  });

  it('is refused as a copy of one that is not there', async () => {
    const { body } = await planner.post(apiPaths.incidentScenarios(incidentId)).send({ name: 'Copy', copyOfScenarioId: 'unknown' }).expect(422);
    expect(body.errors).toMatchObject([{ path: 'copyOfScenarioId' }]);
  });

  it('is refused without a name, to a visitor, to a supervisor, and in an unknown incident', async () => {
    await planner.post(apiPaths.incidentScenarios(incidentId)).send({ name: '' }).expect(422);
    await app.visitor().post(apiPaths.incidentScenarios(incidentId)).send({ name: 'a' }).expect(401);
    await supervisor.post(apiPaths.incidentScenarios(incidentId)).send({ name: 'a' }).expect(403);
    await planner.post(apiPaths.incidentScenarios('unknown')).send({ name: 'a' }).expect(404);
  });

  it('can be renamed, which the log tells', async () => {
    expect((await planner.put(apiPaths.scenario(scenario.id)).send({ name: 'Night case' }).expect(200)).body.name).toBe('Night case');
    expect((await planner.get(apiPaths.incidentLog(incidentId))).body.at(-1).text).toBe('Scenario "Scenario 1" renamed to "Night case"');
    await planner.put(apiPaths.scenario('unknown')).send({ name: 'a' }).expect(404);
    await supervisor.put(apiPaths.scenario(scenario.id)).send({ name: 'a' }).expect(403);
  });
});

describe('a draft', () => {
  it('is kept as it is typed, finished or not', async () => {
    const draft = { title: 'half', releases: [{ massKg: 'about 4' }], odd: null };
    expect((await saveDraft(planner, draft, 0).expect(200)).body).toMatchObject({ draft, draftVersion: 1 });
    expect(await get()).toMatchObject({ draft, draftVersion: 1 });
  });

  it('is not overwritten by somebody who started from an older one: both are there to compare', async () => {
    await saveDraft(planner, { title: 'mine' }, 0).expect(200);
    const { body } = await saveDraft(engineer, { title: 'theirs' }, 0).expect(409);
    expect(body).toMatchObject({ code: 'stale-version', current: { draft: { title: 'mine' }, draftVersion: 1 } });
    expect(body.current.draftSavedBy).not.toBe('');
    expect(body.current.draftSavedAt).toMatch(/^\d{4}-/);
    await saveDraft(engineer, { title: 'both' }, 1).expect(200);
    expect((await get()).draft).toEqual({ title: 'both' });
  });

  it('written by ten people at once is kept from one of them and refused to nine', async () => {
    const answers = await Promise.all(Array.from({ length: 10 }, (_none, i) => saveDraft(planner, { i }, 0)));
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(1);
    expect(answers.filter(({ status }) => status === 409)).toHaveLength(9);
    const winner = answers.findIndex(({ status }) => status === 200);
    expect(await get()).toMatchObject({ draft: { i: winner }, draftVersion: 1 });
  });

  it('is audited when a person takes it up, not at every stroke', async () => {
    for (let version = 0; version < 5; version++) await saveDraft(planner, { version }, version).expect(200);
    await saveDraft(engineer, {}, 5).expect(200);
    expect(await actionsOf(scenario.id)).toEqual(['scenario.create', 'scenario.draft', 'scenario.draft']);
  });

  it('is refused when it is no object, too large, too deep, or of an unknown scenario', async () => {
    await saveDraft(planner, [] as object, 0).expect(422);
    await saveDraft(planner, { text: 'x'.repeat(5_000_000) }, 0).expect(413);
    const deep = `{"draft":${'{"a":'.repeat(50_000)}1${'}'.repeat(50_000)},"draftVersion":0}`;
    await planner.put(apiPaths.scenarioDraft(scenario.id)).set('content-type', 'application/json').send(deep).expect(400);
    await planner.put(apiPaths.scenarioDraft('unknown')).send({ draft: {}, draftVersion: 0 }).expect(404);
    await supervisor.put(apiPaths.scenarioDraft(scenario.id)).send({ draft: {}, draftVersion: 0 }).expect(403);
    expect(await get()).toMatchObject({ draft: {}, draftVersion: 0 });
  });
});

describe('a revision', () => {
  it('is numbered, hashed, kept whole, and queues its run at once', async () => {
    const { body } = await save().expect(201);
    expect(body).toEqual({ number: 1, runId: expect.any(String) });
    expect((await save(buildLakeDocument()).expect(201)).body.number).toBe(2);
    const revision: Revision = (await planner.get(apiPaths.scenarioRevision(scenario.id, 1)).expect(200)).body;
    expect(revision).toMatchObject({ number: 1, note: 'first look', document: { title: 'Straight river', seed: 1 } });
    expect(revision.documentHash).toMatch(/^[0-9a-f]{64}$/);
    expect((await get()).revisions).toMatchObject([{ number: 2 }, { number: 1, runId: body.runId, note: 'first look' }]);
    expect(await app.deps.db.read.countBy(JobEntity, { kind: 'run', subjectId: body.runId })).toBe(1);
    expect(await actionsOf(body.runId)).toContain('run.create');
  });

  it('has the same hash for the same document, however its keys are ordered', async () => {
    const document = buildRiverDocument();
    await save(document).expect(201);
    await save(Object.fromEntries(Object.entries(document).reverse())).expect(201);
    const hashes = await Promise.all([1, 2].map(async (number) => (await planner.get(apiPaths.scenarioRevision(scenario.id, number))).body.documentHash));
    expect(hashes[0]).toBe(hashes[1]);
  });

  it('numbers ten that are saved at once without a gap', async () => {
    const numbers = (await Promise.all(Array.from({ length: 10 }, () => save()))).map(({ body }) => body.number);
    expect(numbers.sort((a, b) => a - b)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10]);
  });

  it('never changes: no address takes a change', async () => {
    await save().expect(201);
    await planner.put(apiPaths.scenarioRevision(scenario.id, 1)).send({ document: buildLakeDocument() }).expect(404);
    await planner.delete(apiPaths.scenarioRevision(scenario.id, 1)).expect(404);
  });

  it('is refused on a draft that somebody else has changed since', async () => {
    await saveDraft(engineer, { title: 'theirs' }, 0).expect(200);
    expect((await save(buildRiverDocument(), 0).expect(409)).body).toMatchObject({ code: 'stale-version', current: { draft: { title: 'theirs' }, draftVersion: 1 } });
    expect((await get()).revisions).toEqual([]);
  });

  it('is refused unless its document can be estimated, and nothing is stored or queued', async () => {
    const jobs = await app.deps.db.read.count(JobEntity);
    const onLand = buildLakeDocument();
    onLand.releases[0]!.position = [-116.9, -44.05];
    const { body } = await save(onLand).expect(422);
    expect(body.errors).toMatchObject([{ path: 'document.releases.0.position', message: expect.stringMatching(/-116\.9.*on land.*move/) }]);
    const farReceptor = buildLakeDocument();
    farReceptor.receptors![0]!.position = [-110, -44.05];
    expect((await save(farReceptor).expect(422)).body).toMatchObject({ code: 'cannot-be-estimated', errors: [{ path: 'document.receptors.0.position', message: expect.stringMatching(/-110.*outside Square lake.*move/) }] });
    expect((await get()).revisions).toEqual([]);
    expect(await app.deps.db.read.count(JobEntity)).toBe(jobs);
  });

  it('is refused to a visitor, to a supervisor, and where there is none', async () => {
    await app.visitor().post(apiPaths.scenarioRevisions(scenario.id)).send({}).expect(401);
    await supervisor.post(apiPaths.scenarioRevisions(scenario.id)).send({}).expect(403);
    await planner.get(apiPaths.scenarioRevision(scenario.id, 7)).expect(404);
    await planner.get(`${apiPaths.scenario(scenario.id)}/revisions/first`).expect(422);
    await planner.post(apiPaths.scenarioRevisions('unknown')).send({ document: buildRiverDocument(), draftVersion: 0 }).expect(404);
  });
});
