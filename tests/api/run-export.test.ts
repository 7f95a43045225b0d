import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import { distanceM } from '../../shared/geo';
import type { LonLat } from '../../shared/schemas/basics';
import { registerRunJobs } from '../../server/features/runs/run.job';
import { closePool } from '../../server/workers/pool';
import { buildRiverDocument } from '../helpers/build-document';
import { eventually } from '../helpers/eventually';
import { type Agent, type TestApp, startTestApp } from '../helpers/test-app';

type Feature = { type: 'Feature'; properties: Record<string, unknown>; geometry: { type: string; coordinates: unknown } };
type Collection = { type: string; marking: string; run: string; startAt: string; note: string; features: Feature[] };

let app: TestApp;
let planner: Agent;
let runId: string;
let scenarioId: string;

beforeAll(async () => {
  app = await startTestApp();
  planner = await app.agentFor('planner');
  const { body: incident } = await planner.post(apiPaths.incidents).send({ name: 'Test', marking: 'EXERCISE', utcOffset: '-08:00' }).expect(201);
  scenarioId = (await planner.post(apiPaths.incidentScenarios(incident.id)).send({ name: 'Scenario 1' }).expect(201)).body.id;
  runId = (await planner.post(apiPaths.scenarioRevisions(scenarioId)).send({ document: buildRiverDocument(), draftVersion: 0 }).expect(201)).body.runId;
});
afterAll(async () => {
  await app.close();
  await closePool();
});

const exported = async (query = ''): Promise<Collection> => JSON.parse((await planner.get(`${apiPaths.runExport(runId)}${query}`).buffer(true).parse((res, done) => {
  const chunks: Buffer[] = [];
  res.on('data', (chunk: Buffer) => chunks.push(chunk));
  res.on('end', () => done(null, Buffer.concat(chunks).toString()));
}).expect(200).expect('content-type', /application\/geo\+json/).expect('content-disposition', /attachment; filename=".*\.geojson"/)).body as string) as Collection;

describe('the export of a run', () => {
  it('is refused before the run is solved, for one that is not there, and without sign-in', async () => {
    expect((await planner.get(apiPaths.runExport(runId)).expect(409)).body.detail).toMatch(/only a solved run/);
    await planner.get(apiPaths.runExport('unknown')).expect(404);
    await app.visitor().get(apiPaths.runExport(runId)).expect(401);
  });

  it('is one GeoJSON collection with its marking, places, outline, lines of first arrival and contours', async () => {
    registerRunJobs(app.deps);
    await app.deps.jobs.start();
    await eventually(async () => expect((await planner.get(apiPaths.run(runId))).body.state).toBe('done'));
    const { features, ...head } = await exported();
    expect(head).toMatchObject({ type: 'FeatureCollection', marking: 'EXERCISE', run: runId });
    const kinds = new Map<unknown, Feature[]>();
    for (const feature of features) kinds.set(feature.properties.kind, [...(kinds.get(feature.properties.kind) ?? []), feature]);
    expect(new Set(kinds.keys())).toEqual(new Set(['release', 'receptor', 'reached at any time', 'reached by', 'at or above']));
    expect(kinds.get('receptor')![0]!.properties.arrivals).toMatchObject([{ verdict: 'may exceed', likelyAt: expect.stringMatching(/[+-]\d\d:\d\d$/) }]);
    expect(kinds.get('reached by')!.length).toBeGreaterThan(2);
    for (const { geometry } of kinds.get('at or above')!)
      for (const polygon of geometry.coordinates as LonLat[][][])
        for (const ring of polygon) {
          expect(ring.length).toBeGreaterThanOrEqual(4);
          expect(ring[0]).toEqual(ring.at(-1));
          for (const [lon, lat] of ring) expect([lon, lat]).toEqual([Number(lon.toFixed(5)), Number(lat.toFixed(5))]);
        }
    const release = kinds.get('release')![0]!.geometry.coordinates as LonLat;
    const reached = (kinds.get('reached at any time')![0]!.geometry.coordinates as LonLat[][][]).flat(2);
    expect(Math.min(...reached.map((position) => distanceM(position, release)))).toBeLessThan(1_000);
  }, 60_000);

  it('holds the contours of one frame when it is named, and names the field where there is no such frame', async () => {
    const { features } = await exported('?frame=1');
    expect(new Set(features.filter(({ properties }) => properties.kind === 'at or above').map(({ properties }) => properties.frame))).toEqual(new Set([1]));
    for (const frame of ['240', '-1', 'x', String(buildRiverDocument().frameCount)]) {
      const { body } = await planner.get(`${apiPaths.runExport(runId)}?frame=${frame}`).expect(422);
      expect(body.errors[0].path).toBe('frame');
    }
  });
});
