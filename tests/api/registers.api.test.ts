import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import { type Role, registerWriteActions, roles, allows } from '../../shared/permissions';
import type { Problem } from '../../shared/problem';
import type { ChangeEvent } from '../../shared/schemas/incidents';
import { type ReceptorData, type RegisterHistoryEntry, type RegisterItem, type RegisterList, type RegisterName, type RiverData, type SubstanceData, registerNames, staleAfterDays } from '../../shared/schemas/registers';
import { AuditEntity } from '../../server/db/entities/record.entities';
import { type Agent, startTestApp, type TestApp } from '../helpers/test-app';

const NOW = '2031-05-12T20:00:00Z';
let app: TestApp;
let engineer: Agent;
let planner: Agent;

beforeAll(async () => {
  app = await startTestApp({ data: 'full', now: () => new Date(NOW) });
  engineer = await app.agentFor('engineer');
  planner = await app.agentFor('planner');
});
afterAll(() => app.close());

const read = async <R extends RegisterName>(register: R, id: string): Promise<RegisterItem<R>> => (await planner.get(apiPaths.registerItem(register, id)).expect(200)).body as RegisterItem<R>;
const list = async (register: RegisterName, query = ''): Promise<RegisterList> => (await planner.get(`${apiPaths.register(register)}${query}`).expect(200)).body as RegisterList;
/** The body that writes an entry back as it is, with changes. */
const bodyOf = (item: RegisterItem, changes: Record<string, unknown> = {}) => ({ code: item.code, name: item.name, ownerName: item.ownerName, lastCheckedOn: item.lastCheckedOn, data: item.data, version: item.version, ...changes });
const receptorOnOllemar = (code: string, data: Partial<ReceptorData> = {}) => ({
  code,
  name: `Intake ${code}`,
  data: { kind: 'intake', position: [-116.8016, -44.449], waterId: 'river-ollemar', channel: { reachId: 'ol-upper', chainageKm: 42, bank: 'right' }, contact: {}, ...data },
});
const create = (body: object, register: RegisterName = 'receptors', agent = planner) => agent.post(apiPaths.register(register)).send(body);
const errorAt = (problem: Problem, path: string): string | undefined => problem.errors?.find((error) => error.path === path)?.message;

describe('reading a register', () => {
  it('lists entries by code, counting as people do', async () => {
    await create(receptorOnOllemar('INT-10')).expect(201);
    const codes = (await list('receptors', '?search=int-')).items.map(({ code }) => code);
    expect(codes.indexOf('INT-2')).toBeGreaterThan(-1);
    expect(codes.indexOf('INT-10')).toBeGreaterThan(codes.indexOf('INT-4'));
  });

  it('finds by name, owner, other name and CAS number, whatever the capitals, and needs every word', async () => {
    expect((await list('receptors', '?search=DUNNAVETH')).items.map(({ id }) => id)).toContain('int-1');
    expect((await list('receptors', '?search=trout+quillock')).items.map(({ id }) => id)).toEqual(['hat-1']);
    expect((await list('receptors', '?search=trout+harbour')).total).toBe(0);
    const phenol = await read('substances', 'phenol');
    const { cas, otherNames } = phenol.data as SubstanceData;
    expect((await list('substances', `?search=${cas}`)).items.map(({ id }) => id)).toContain('phenol');
    expect((await list('substances', `?search=${encodeURIComponent(otherNames[0]!)}`)).items.map(({ id }) => id)).toContain('phenol');
  });

  it('pages, and says how many there are', async () => {
    const all = await list('stations');
    const second = await list('stations', '?page=2&pageSize=4');
    expect(second.total).toBe(all.total);
    expect(second.items.map(({ id }) => id)).toEqual(all.items.slice(4, 8).map(({ id }) => id));
  });

  it('refuses a page before the first one, naming field and value', async () => {
    const { body } = await planner.get(`${apiPaths.register('waters')}?page=0`).expect(422);
    expect(errorAt(body as Problem, 'page')).toContain('from 1');
  });

  it('answers 404 for an entry of another register', async () => {
    await planner.get(apiPaths.registerItem('sources', 'int-1')).expect(404);
  });

  it('is open to every role that is signed in and closed to visitors', async () => {
    await app.visitor().get(apiPaths.register('waters')).expect(401);
    for (const role of roles) await (await app.agentFor(role)).get(apiPaths.register('waters')).expect(200);
  });
});

describe('staleness', () => {
  const daysBefore = (days: number) => new Date(Date.parse(NOW) - days * 86_400_000).toISOString().slice(0, 10);

  it('starts the day after the age set for the register', async () => {
    const limit = staleAfterDays.receptors;
    const fresh = (await create({ ...receptorOnOllemar('AGE-1'), lastCheckedOn: daysBefore(limit) }).expect(201)).body as RegisterItem;
    const old = (await create({ ...receptorOnOllemar('AGE-2'), lastCheckedOn: daysBefore(limit + 1) }).expect(201)).body as RegisterItem;
    const never = (await create(receptorOnOllemar('AGE-3')).expect(201)).body as RegisterItem;
    expect([fresh.isStale, old.isStale, never.isStale]).toEqual([false, true, true]);
    const stale = await list('receptors', '?stale=1');
    expect(stale.items.map(({ id }) => id)).toEqual(expect.arrayContaining([old.id, never.id]));
    expect(stale.items.every(({ isStale }) => isStale)).toBe(true);
    expect(stale.total).toBe(stale.staleCount);
  });

  it('ends when somebody marks the entry as checked, which is today in the offset of the organisation', async () => {
    const item = (await create(receptorOnOllemar('AGE-4')).expect(201)).body as RegisterItem;
    const { body } = await planner.post(apiPaths.registerChecked('receptors', item.id)).send({ version: 1 }).expect(200);
    expect(body).toMatchObject({ lastCheckedOn: '2031-05-12', isStale: false, version: 2 });
  });

  it('cannot be mended with a day still to come', async () => {
    const { body } = await create({ ...receptorOnOllemar('AGE-5'), lastCheckedOn: '2031-05-13' }).expect(422);
    expect(errorAt(body as Problem, 'lastCheckedOn')).toContain('2031-05-13 is still to come');
  });
});

describe('adding an entry', () => {
  it('gives it an id made of its code, a place to find it, a first version, an audit entry and an event', async () => {
    const events: ChangeEvent[] = [];
    const stop = app.deps.changes.subscribe((event) => events.push(event));
    const answer = await create({ ...receptorOnOllemar('ÉCL 7/b'), reason: 'New sluice' }).expect(201);
    stop();
    const item = answer.body as RegisterItem;
    expect(item).toMatchObject({ id: 'ecl-7-b', version: 1, isArchived: false, updatedBy: 'Test planner', abilities: { update: true } });
    expect(answer.get('location')).toBe(apiPaths.registerItem('receptors', 'ecl-7-b'));
    expect(events).toEqual([{ topic: 'register', id: 'ecl-7-b', by: 'Test planner' }]);
    const { body: history } = await planner.get(apiPaths.registerHistory('receptors', item.id)).expect(200);
    expect(history).toMatchObject([{ version: 1, by: 'Test planner', reason: 'New sluice', changedPaths: [] }]);
    const audit = await app.deps.db.read.findOneByOrFail(AuditEntity, { subjectKind: 'register', subjectId: item.id });
    expect(audit).toMatchObject({ action: 'register.create', personName: 'Test planner', detail: { register: 'receptors', code: 'ÉCL 7/b' } });
  });

  it('keeps ids apart when codes of two registers make the same one', async () => {
    const first = (await create(receptorOnOllemar('TWIN')).expect(201)).body as RegisterItem;
    const second = (await create({ code: 'TWIN', name: 'Twin', data: { kind: 'gauge', position: [-116.8016, -44.449], waterId: 'river-ollemar', channel: { reachId: 'ol-upper', chainageKm: 42, bank: 'mid' } } }, 'stations').expect(201)).body as RegisterItem;
    expect([first.id, second.id]).toEqual(['twin', 'twin-2']);
  });

  it('never takes the id that stands for an entry yet to be written', async () => {
    expect(((await create(receptorOnOllemar('New')).expect(201)).body as RegisterItem).id).toBe('new-2');
  });

  it('refuses a code that is taken, in whatever capitals, and names who has it', async () => {
    const { body } = await create(receptorOnOllemar('int-1')).expect(409);
    expect(body).toMatchObject({ code: 'duplicate' });
    expect(errorAt(body as Problem, 'code')).toContain('Dunnaveth intake');
  });

  it('is refused to roles that may not write to the register, and the right is named', async () => {
    for (const register of registerNames)
      for (const role of roles.filter((held) => !allows([held], registerWriteActions[register]))) {
        const { body } = await create({}, register, await app.agentFor(role as Role)).expect(403);
        expect((body as Problem).detail).toContain(registerWriteActions[register]);
      }
  });
});

describe('bad input', () => {
  const refused = async (body: object, path: string, register: RegisterName = 'receptors') => {
    const answer = await create(body, register, register === 'waters' || register === 'substances' ? engineer : planner).expect(422);
    expect(answer.type).toBe('application/problem+json');
    return errorAt(answer.body as Problem, path);
  };

  it('names the chainage, the reach and where it runs when a place is past its end', async () => {
    const message = await refused(receptorOnOllemar('X1', { channel: { reachId: 'ol-upper', chainageKm: 99, bank: 'left' } }), 'data.channel.chainageKm');
    expect(message).toBe('km 99 is outside Ollemar, km 54.0 to Evarrow, which runs from km 54 down to km 33.5');
  });

  it('names the reaches there are when one does not exist', async () => {
    expect(await refused(receptorOnOllemar('X1', { channel: { reachId: 'r9', chainageKm: 42, bank: 'left' } }), 'data.channel.reachId')).toMatch(/has no reach "r9": choose one of ol-upper, ol-middle/);
  });

  it('asks for reach, chainage and bank on a river, and for none on a lake', async () => {
    expect(await refused(receptorOnOllemar('X1', { channel: null }), 'data.channel')).toContain('is a river: give reach, chainage and bank');
    expect(await refused(receptorOnOllemar('X1', { waterId: 'lake-thessaby', position: [-116.8765, -44.561] }), 'data.channel')).toContain('has no reaches');
  });

  it('refuses a water and a substance that are not registered', async () => {
    expect(await refused(receptorOnOllemar('X1', { waterId: 'styx' }), 'data.waterId')).toContain('no water "styx"');
    const actionValues = [{ substanceId: 'kryptonite', value: 1, unit: 'mg/l' as const, basis: '', averagingMinutes: 0, source: '' }];
    expect(await refused(receptorOnOllemar('X1', { actionValues }), 'data.actionValues.0.substanceId')).toContain('no substance "kryptonite"');
  });

  it('refuses a lake intake two kilometres off the shore and says how far it is', async () => {
    const inland = { waterId: 'lake-thessaby', channel: null, position: [-116.9, -44.553] as [number, number] };
    expect(await refused(receptorOnOllemar('X1', inland), 'data.position')).toMatch(/is \d\.\d km from Lake Thessaby: at most 500 m/);
  });

  it('refuses a river intake whose position lies far from its chainage', async () => {
    expect(await refused(receptorOnOllemar('X1', { position: [-116.8016, -44.6] }), 'data.position')).toMatch(/km from Ollemar, km 54\.0 to Evarrow at km 42/);
  });

  it('refuses milligrams of what is counted and counts of what is weighed', async () => {
    const value = (substanceId: string, unit: 'mg/l' | 'counts/100ml') => [{ substanceId, value: 1, unit, basis: '', averagingMinutes: 0, source: 's' }];
    expect(await refused(receptorOnOllemar('X1', { actionValues: value('e-coli', 'mg/l') }), 'data.actionValues.0.unit')).toContain('is counted, so its values are in counts/100 ml, not mg/l');
    expect(await refused(receptorOnOllemar('X1', { actionValues: value('phenol', 'counts/100ml') }), 'data.actionValues.0.unit')).toContain('is weighed');
  });

  it('refuses a published value without its source, and a CAS number whose check digit is wrong', async () => {
    const substance = (data: object) => ({ code: 'SUB', name: 'Substance', data: { measure: 'mass', ...data } });
    expect(await refused(substance({ publishedValues: [{ use: 'drinking', value: 1, unit: 'ug/l', source: '' }] }), 'data.publishedValues.0.source', 'substances')).toContain('Name where the value is published');
    expect(await refused(substance({ cas: '108-95-3' }), 'data.cas', 'substances')).toContain('108-95-3 is no CAS number');
  });

  it('refuses rivers that run in a circle, lack a flow, rise downstream or have no depth', async () => {
    const river = await read('waters', 'river-ollemar');
    const data = river.data as RiverData;
    const withReach = (index: number, patch: object, more: object = {}) => ({ code: 'RX', name: 'River X', data: { ...data, ...more, reaches: data.reaches.map((reach, i) => (i === index ? { ...reach, ...patch } : reach)) } });
    expect(await refused(withReach(3, { downstreamReachId: 'ol-upper' }), 'data.reaches.3.downstreamReachId', 'waters')).toContain('run in a circle');
    expect(await refused(withReach(0, {}, { flowNames: ['Q50', 'flood'] }), 'data.reaches.0.hydraulics', 'waters')).toContain('no figures for the flow "flood"');
    expect(await refused(withReach(0, { centreline: [[-116.6, -44.4, 1], [-116.7, -44.4, 2]] }), 'data.reaches.0.centreline.1.2', 'waters')).toContain('Chainage must fall downstream');
    expect(await refused(withReach(0, { hydraulics: [{ ...data.reaches[0]!.hydraulics[0], depthM: 0 }] }), 'data.reaches.0.hydraulics.0.depthM', 'waters')).toBe('Must be above 0 m (got 0)');
  });

  it('refuses a mixing depth below the bottom and an unknown kind of water', async () => {
    const lake = await read('waters', 'lake-thessaby');
    expect(await refused({ code: 'LX', name: 'Lake X', data: { ...lake.data, mixingDepthM: 40 } }, 'data.mixingDepthM', 'waters')).toContain('mixing depth (40 m) is above the water depth (11 m)');
    expect(await refused({ code: 'LX', name: 'Lake X', data: { ...lake.data, kind: 'swamp' } }, 'data.kind', 'waters')).toBeDefined();
  });
});

describe('changing an entry', () => {
  it('keeps every version whole and says what changed, by whom and why', async () => {
    const item = (await create(receptorOnOllemar('HIS-1', { closingMinutes: 20 })).expect(201)).body as RegisterItem<'receptors'>;
    const changed = bodyOf(item, { name: 'Renamed intake', data: { ...item.data, closingMinutes: 35 }, reason: 'New valve drive' });
    const after = (await engineer.put(apiPaths.registerItem('receptors', item.id)).send(changed).expect(200)).body as RegisterItem;
    expect(after).toMatchObject({ version: 2, name: 'Renamed intake', updatedBy: 'Test engineer' });
    const history = (await planner.get(apiPaths.registerHistory('receptors', item.id)).expect(200)).body as RegisterHistoryEntry[];
    expect(history[0]).toMatchObject({ version: 2, by: 'Test engineer', reason: 'New valve drive', changedPaths: ['name', 'data.closingMinutes'], changes: [{ from: 'Intake HIS-1', to: 'Renamed intake' }, { from: '20', to: '35' }] });
    const { body: first } = await planner.get(apiPaths.registerVersion('receptors', item.id, 1)).expect(200);
    expect(first).toMatchObject({ version: 1, name: 'Intake HIS-1', data: { closingMinutes: 20 } });
    const { body: missing } = await planner.get(apiPaths.registerVersion('receptors', item.id, 3)).expect(404);
    expect((missing as Problem).detail).toBe('HIS-1 has no version 3: versions run from 1 to 2');
  });

  it('that says the same makes no version', async () => {
    const item = await read('receptors', 'bch-1');
    const { body } = await planner.put(apiPaths.registerItem('receptors', 'bch-1')).send(bodyOf(item)).expect(200);
    expect(body).toMatchObject({ version: item.version });
  });

  it('answers a second writer with 409 and the present entry, and changes nothing', async () => {
    const item = (await create(receptorOnOllemar('TWO-1')).expect(201)).body as RegisterItem;
    await engineer.put(apiPaths.registerItem('receptors', item.id)).send(bodyOf(item, { name: 'By the engineer' })).expect(200);
    const { body } = await planner.put(apiPaths.registerItem('receptors', item.id)).send(bodyOf(item, { name: 'By the planner' })).expect(409);
    const problem = body as Problem;
    expect(problem).toMatchObject({ code: 'stale-version', current: { version: 2, name: 'By the engineer' } });
    expect(problem.detail).toBe('Test engineer has changed TWO-1 to version 2 since you read version 1');
    expect((await read('receptors', item.id)).name).toBe('By the engineer');
  });

  it('lets one of twenty writers at once through', async () => {
    const item = (await create(receptorOnOllemar('MANY-1')).expect(201)).body as RegisterItem;
    const answers = await Promise.all(Array.from({ length: 20 }, (_, i) => planner.put(apiPaths.registerItem('receptors', item.id)).send(bodyOf(item, { name: `Writer ${i}` }))));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, ...Array.from({ length: 19 }, () => 409)]);
    expect((await planner.get(apiPaths.registerHistory('receptors', item.id))).body).toHaveLength(2);
  });

  it('of a water is refused when a place on it would no longer fit, and names the place', async () => {
    const river = await read('waters', 'river-ollemar');
    const data = river.data as RiverData;
    const shortened = { ...data, reaches: data.reaches.map((reach) => (reach.id === 'ol-upper' ? { ...reach, centreline: reach.centreline.filter(([, , km]) => km >= 45) } : reach)) };
    const { body } = await engineer.put(apiPaths.registerItem('waters', river.id)).send(bodyOf(river, { data: shortened })).expect(422);
    expect(errorAt(body as Problem, 'data.reaches')).toMatch(/would no longer fit: km \d/);
    expect((await read('waters', 'river-ollemar')).version).toBe(river.version);
  });
});

describe('archiving', () => {
  it('takes an entry out of lists until it is restored, and keeps both in the history', async () => {
    const item = (await create(receptorOnOllemar('ARC-1')).expect(201)).body as RegisterItem;
    await planner.post(apiPaths.registerArchive('receptors', item.id)).send({ version: 1, reason: 'Closed down' }).expect(200);
    expect((await list('receptors', '?search=arc-1')).total).toBe(0);
    expect((await list('receptors', '?search=arc-1&archived=1')).items).toMatchObject([{ isArchived: true, version: 2 }]);
    await planner.post(apiPaths.registerArchive('receptors', item.id)).send({ version: 2 }).expect(409);
    await planner.post(apiPaths.registerRestore('receptors', item.id)).send({ version: 2 }).expect(200);
    const history = (await planner.get(apiPaths.registerHistory('receptors', item.id))).body as RegisterHistoryEntry[];
    expect(history.map(({ reason, changedPaths }) => [reason, changedPaths])).toEqual([['', ['isArchived']], ['Closed down', ['isArchived']], ['', []]]);
  });

  it('is refused while others refer to the entry, and names them', async () => {
    const lake = await read('waters', 'lake-thessaby');
    const { body } = await engineer.post(apiPaths.registerArchive('waters', lake.id)).send({ version: lake.version }).expect(409);
    expect((body as Problem).detail).toMatch(/INT-3.* still refer to Lake Thessaby: move or archive them first/);
  });
});

describe('the demonstration', () => {
  it('fills every register, with some entries overdue', async () => {
    const totals = await Promise.all(registerNames.map((register) => list(register)));
    expect(totals.every(({ total }) => total > 4)).toBe(true);
    expect(totals.some(({ staleCount }) => staleCount > 0)).toBe(true);
  });

  it('is laid out once: a second start adds nothing', async () => {
    const before = (await list('waters')).items.map(({ version }) => version);
    await (await import('../../server/db/seed/seed-demo')).seedDemo(app.deps);
    expect((await list('waters')).items.map(({ version }) => version)).toEqual(before);
  });

  it('is not laid over the work of others', async () => {
    const other = await startTestApp();
    await other.addPerson({ roles: ['engineer'] });
    await (await import('../../server/db/seed/seed-demo')).seedDemo(other.deps);
    expect(((await (await other.agentFor('engineer')).get(apiPaths.register('waters'))).body as RegisterList).total).toBe(0);
    await other.close();
  });
});
