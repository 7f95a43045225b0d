import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import type { Incident, ScenarioSummary } from '../../shared/schemas/incidents';
import { registerRunJobs } from '../../server/features/runs/run.job';
import { closePool } from '../../server/workers/pool';
import { districtIncidents } from '../../server/db/seed/district/scenarios';
import { startTestApp, type TestApp } from '../helpers/test-app';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp({ data: 'full' });
});
afterAll(async () => {
  await app.close();
  await closePool();
});

const library = async (): Promise<ScenarioSummary[]> => {
  const planner = await app.agentFor('planner');
  const { body: incidents } = await planner.get(apiPaths.incidents).expect(200);
  const { id } = (incidents as Incident[]).find(({ name }) => name === 'Library of the district')!;
  const { body } = await planner.get(apiPaths.incidentScenarios(id)).expect(200);
  return body as ScenarioSummary[];
};

describe('the library of a demonstration', () => {
  it('holds every case as a planning scenario with one revision and a queued run', async () => {
    const wanted = districtIncidents.find(({ name }) => name === 'Library of the district')!.scenarios.map(({ name }) => name);
    const scenarios = await library();
    expect(scenarios.map(({ name }) => name).sort()).toEqual([...wanted].sort());
    for (const { latestRunState, revisionCount, name } of scenarios) expect([revisionCount, latestRunState], name).toEqual([1, 'queued']);
  });

  it('is solved in the background, every case of it', { timeout: 180_000 }, async () => {
    registerRunJobs(app.deps);
    await app.deps.jobs.start();
    await vi.waitFor(async () => expect((await library()).every(({ latestRunState }) => latestRunState === 'done' || latestRunState === 'failed')).toBe(true), { timeout: 170_000, interval: 250 });
    expect((await library()).filter(({ latestRunState }) => latestRunState !== 'done').map(({ name }) => name)).toEqual([]);
  });
});
