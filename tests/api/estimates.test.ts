import { setTimeout as pause } from 'node:timers/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import { RevisionEntity, RunEntity } from '../../server/db/entities/incident.entities';
import { JobEntity } from '../../server/db/entities/record.entities';
import { closePool } from '../../server/workers/pool';
import { buildLakeDocument, buildRiverDocument } from '../helpers/build-document';
import { readHeads } from '../helpers/stream-client';
import { type Fetch, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let planner: Fetch;

beforeAll(async () => {
  app = await startTestApp();
  planner = await app.fetchAs('planner');
});
afterAll(async () => {
  await app.close();
  await closePool();
});

const post = (body: unknown, init: RequestInit = {}, fetchAs: Fetch = planner) =>
  fetchAs(apiPaths.estimates, { method: 'POST', headers: { 'content-type': 'application/json' }, body: typeof body === 'string' ? body : JSON.stringify(body), ...init });
const refused = async (document: unknown) => {
  const response = await post(document);
  expect(response.status).toBe(422);
  expect(response.headers.get('content-type')).toContain('application/problem+json');
  const { errors } = (await response.json()) as { errors: { path: string; message: string }[] };
  return errors;
};

describe('a preview', () => {
  it.each([['river', buildRiverDocument()], ['lake', buildLakeDocument()]])('of a %s streams start, frames, receptors and result', async (_water, document) => {
    const response = await post(document);
    expect(response.status).toBe(200);
    expect(response.headers.get('content-type')).toBe('application/octet-stream');
    expect(response.headers.get('cache-control')).toBe('no-store');
    const types = (await readHeads(response)).map(({ type }) => type);
    expect(types[0]).toBe('start');
    expect(types).toEqual(expect.arrayContaining(['frame', 'receptor', 'result']));
    expect(types).not.toContain('failed');
  });

  it('stores nothing', async () => {
    await readHeads(await post(buildRiverDocument()));
    const counts = await Promise.all([RevisionEntity, RunEntity, JobEntity].map((entity) => app.deps.db.read.count<object>(entity)));
    expect(counts).toEqual([0, 0, 0]);
  });

  it('that nobody waits for any more makes way for the next one', async () => {
    for (let i = 0; i < 20; i++) {
      const leaving = new AbortController();
      const asked = post({ ...buildLakeDocument(), frameCount: 240, horizonS: 20 * 86_400 }, { signal: leaving.signal }).catch(() => undefined);
      await pause(5);
      leaving.abort();
      await asked;
    }
    const from = performance.now();
    const types = (await readHeads(await post(buildRiverDocument()))).map(({ type }) => type);
    expect(types).toContain('result');
    // Twenty such lakes one after the other would take far longer than one river and the last lake's last step.
    expect(performance.now() - from).toBeLessThan(5_000);
  }, 30_000);

  it('is for those who may preview', async () => {
    expect((await post(buildRiverDocument(), {}, app.fetchVisitor)).status).toBe(401);
    expect((await post(buildRiverDocument(), {}, await app.fetchAs('coordinator'))).status).toBe(403);
  });
});

describe('a document that cannot be estimated names the field, the value and the remedy', () => {
  const river = () => structuredClone(buildRiverDocument()) as ReturnType<typeof buildRiverDocument> & { water: { kind: 'river' } };
  const lake = () => structuredClone(buildLakeDocument()) as ReturnType<typeof buildLakeDocument> & { water: { kind: 'open' } };

  it.each<[string, () => unknown, string, RegExp]>([
    ['a depth of zero', () => { const d = river(); d.water.reaches[0]!.hydraulics[0]!.depthM = 0; return d; }, 'water.reaches.0.hydraulics.0.depthM', /above 0 m.*got 0/],
    ['a negative depth', () => { const d = lake(); d.water.depthM = -4; return d; }, 'water.depthM', /above 0 m.*got -4/],
    ['a depth too small to be meant', () => { const d = lake(); d.water.depthM = 5e-324; return d; }, 'water.depthM', /Too small.*got 5e-324/],
    ['mixing below that of molecules', () => { const d = lake(); d.water.mixing = { kind: 'constant', alongM2s: 1e-100, acrossM2s: 1 }; return d; }, 'water.mixing.alongM2s', /above 1e-9 m2\/s.*got 1e-100/],
    ['an action value too small to be meant', () => { const d = lake(); d.receptors![0]!.actionValues![0]!.value = 5e-324; return d; }, 'receptors.0.actionValues.0.value', /got 5e-324/],
    ['a number that is none', () => ({ ...river(), horizonS: Number.NaN }), 'horizonS', /number in s/],
    ['a date without its offset', () => ({ ...river(), startAt: '2031-05-12T06:40:00' }), 'startAt', /UTC offset.*2031-05-12T06:40:00/],
    ['a day that does not exist', () => ({ ...river(), startAt: '2031-02-30T06:40:00Z' }), 'startAt', /2031-02-30/],
    ['an end before the start', () => ({ ...river(), horizonS: -3_600 }), 'horizonS', /above 0 s.*got -3600/],
    ['a receptor far off the water', () => { const d = lake(); d.receptors![0]!.position = [-110, -44.05]; return d; }, 'receptors.0.position', /-110.*outside Square lake.*move/],
    ['a release after the end', () => { const d = river(); d.releases[0]!.timing = { kind: 'instantaneous', atS: 90_000 }; return d; }, 'releases.0.timing', /90000 s.*lengthen/],
    ['a table of rates out of order', () => { const d = river(); d.releases[0]!.timing = { kind: 'table', rows: [{ atS: 60, rate: 1 }, { atS: 0, rate: 2 }] }; return d; }, 'releases.0.timing.rows.1.atS', /ascend/],
    ['a release on land', () => { const d = lake(); d.releases[0]!.position = [-116.5, -44.05]; return d; }, 'releases.0.position', /-116\.5.*on land.*move/],
    ['a chainage past the end', () => { const d = river(); d.releases[0]!.channel!.chainageKm = 31; return d; }, 'releases.0.channel.chainageKm', /km 31 is past the end.*km 30 down to km 0/],
    ['an unknown reach', () => { const d = river(); d.releases[0]!.channel!.reachId = 'r9'; return d; }, 'releases.0.channel.reachId', /no reach r9/],
    ['an unknown way of giving the amount', () => { const d = river() as { releases: { amount: unknown }[] }; d.releases[0]!.amount = { how: 'barrels', barrels: 3 }; return d; }, 'releases.0.amount.how', /./],
    ['low above likely', () => { const d = river(); d.releases[0]!.amount = { how: 'mass', massKg: { low: 5, likely: 4 } }; return d; }, 'releases.0.amount.massKg.low', /Low \(5\).*likely \(4\)/],
    ['a mixing depth above the depth', () => { const d = lake(); d.water.mixingDepthM = 30; return d; }, 'water.mixingDepthM', /30 m.*20 m.*lower/],
    ['another format', () => ({ ...river(), format: 'other/2' }), 'format', /downreach-estimate\/1/],
    ['no release', () => ({ ...river(), releases: [] }), 'releases', /at least one/],
  ])('%s', async (_name, build, path, message) => {
    const errors = await refused(build());
    expect(errors).toContainEqual({ path, message: expect.stringMatching(message) });
  });

  it('20,000 receptors', async () => {
    const [receptor] = buildRiverDocument().receptors!;
    const many = Array.from({ length: 20_000 }, (_none, i) => ({ id: `r${i}`, name: 'Intake', kind: receptor!.kind, position: [-118, -44.1] }));
    const errors = await refused({ ...buildRiverDocument(), receptors: many });
    expect(errors).toContainEqual({ path: 'receptors', message: expect.stringMatching(/At most 500 receptors/) });
  });

  it('a body that is no JSON or of another type', async () => {
    expect((await post('{"format":')).status).toBe(400);
    expect((await post(buildRiverDocument(), { headers: { 'content-type': 'text/plain' } })).status).toBe(415);
  });
});
