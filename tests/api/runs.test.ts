import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import { MessageReader, type StreamHead } from '../../shared/frames';
import type { Run, RunSummary } from '../../shared/schemas/incidents';
import { AuditEntity } from '../../server/db/entities/record.entities';
import { registerRunJobs } from '../../server/features/runs/run.job';
import { closePool } from '../../server/workers/pool';
import { buildRiverDocument } from '../helpers/build-document';
import { eventually } from '../helpers/eventually';
import { type Agent, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let planner: Agent;
let coordinator: Agent;
let incidentId: string;
let scenarioId: string;
let runId: string;

beforeAll(async () => {
  app = await startTestApp();
  planner = await app.agentFor('planner');
  coordinator = await app.agentFor('coordinator');
  incidentId = (await planner.post(apiPaths.incidents).send({ name: 'Test', marking: 'REAL', utcOffset: '-08:00' }).expect(201)).body.id;
  scenarioId = (await planner.post(apiPaths.incidentScenarios(incidentId)).send({ name: 'Scenario 1' }).expect(201)).body.id;
  runId = (await planner.post(apiPaths.scenarioRevisions(scenarioId)).send({ document: buildRiverDocument(), draftVersion: 0 }).expect(201)).body.runId;
});
afterAll(async () => {
  await app.close();
  await closePool();
});

const get = async (id: string): Promise<Run> => (await planner.get(apiPaths.run(id)).expect(200)).body;

describe('a queued run', () => {
  it('is there with its document before anything is solved', async () => {
    expect(await get(runId)).toMatchObject({ state: 'queued', revisionNumber: 1, seed: 1, result: null, document: { title: 'Straight river' }, abilities: { cancel: true } });
  });

  it('shows a coordinator no way to cancel it, and refuses the attempt', async () => {
    expect((await coordinator.get(apiPaths.run(runId)).expect(200)).body.abilities.cancel).toBe(false);
    await coordinator.post(apiPaths.runCancel(runId)).expect(403);
  });

  it('can be cancelled once, which is audited and told', async () => {
    const { body: extra } = await planner.post(apiPaths.scenarioRuns(scenarioId)).send({ revisionNumber: 1 }).expect(202);
    const told: unknown[] = [];
    const unsubscribe = app.deps.changes.subscribe((event) => told.push(event));
    expect((await planner.post(apiPaths.runCancel(extra.id)).expect(200)).body).toMatchObject({ state: 'cancelled', abilities: { cancel: false } });
    unsubscribe();
    expect(told).toMatchObject([{ topic: 'run', id: extra.id, scenarioId, incidentId, state: 'cancelled' }]);
    expect((await planner.post(apiPaths.runCancel(extra.id)).expect(409)).body.code).toBe('wrong-state');
    expect(await app.deps.db.read.countBy(AuditEntity, { action: 'run.cancel', subjectId: extra.id })).toBe(1);
  });

  it('is refused of a revision, scenario or run that is not there, and without sign-in', async () => {
    await planner.post(apiPaths.scenarioRuns(scenarioId)).send({ revisionNumber: 9 }).expect(404);
    await planner.post(apiPaths.scenarioRuns('unknown')).send({ revisionNumber: 1 }).expect(404);
    await planner.post(apiPaths.scenarioRuns(scenarioId)).send({ revisionNumber: 0 }).expect(422);
    await coordinator.post(apiPaths.scenarioRuns(scenarioId)).send({ revisionNumber: 1 }).expect(403);
    for (const path of [apiPaths.run('unknown'), apiPaths.runFrames('unknown'), apiPaths.scenarioRuns('unknown')]) await planner.get(path).expect(404);
    await planner.post(apiPaths.runCancel('unknown')).expect(404);
    await app.visitor().get(apiPaths.run(runId)).expect(401);
  });
});

describe('a solved run', () => {
  beforeAll(async () => {
    registerRunJobs(app.deps);
    await app.deps.jobs.start();
    await eventually(async () => expect((await get(runId)).state).toBe('done'));
  }, 60_000);

  it('holds its result and shows up in the lists', async () => {
    expect((await get(runId)).result?.receptors).toHaveLength(1);
    const runs: RunSummary[] = (await planner.get(apiPaths.scenarioRuns(scenarioId)).expect(200)).body;
    expect(runs.map(({ state }) => state)).toEqual(['cancelled', 'done']);
    expect(Object.keys(runs[0]!)).not.toContain('result');
    await planner.post(apiPaths.runCancel(runId)).expect(409);
  });

  it('streams its frames and then its result, to be kept for good', async () => {
    const { body, headers } = await planner.get(apiPaths.runFrames(runId)).buffer(true).parse((res, done) => {
      const chunks: Buffer[] = [];
      res.on('data', (chunk: Buffer) => chunks.push(chunk));
      res.on('end', () => done(null, Buffer.concat(chunks)));
    }).expect(200);
    expect(headers).toMatchObject({ 'content-type': 'application/octet-stream', 'cache-control': expect.stringContaining('immutable') });
    const heads: StreamHead[] = new MessageReader().push(body as Buffer).map(({ head }) => head);
    expect(heads[0]?.type).toBe('start');
    expect(heads.at(-1)).toMatchObject({ type: 'result', result: { solver: expect.any(String) } });
    expect(heads.filter(({ type }) => type === 'frame').length).toBeGreaterThan(1);
  });

  it('gives the incident its next arrivals, when they are still to come', async () => {
    const document = { ...buildRiverDocument(), startAt: new Date(app.deps.now().getTime()).toISOString() };
    const { body } = await planner.post(apiPaths.scenarioRevisions(scenarioId)).send({ document, draftVersion: 0 }).expect(201);
    await eventually(async () => expect((await get(body.runId)).state).toBe('done'));
    const { body: incident } = await planner.get(apiPaths.incident(incidentId)).expect(200);
    expect(incident.nextArrivals).toMatchObject([{ scenarioId, runId: body.runId, receptorCode: 'INT-1', verdict: 'may exceed' }]);
    const [arrival] = incident.nextArrivals;
    expect(arrival.earliestAt).toMatch(/-08:00$/);
    expect(Date.parse(arrival.closeByAt)).toBeLessThan(Date.parse(arrival.earliestAt));
  }, 60_000);
});
