import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import type { ChangeEvent } from '../../shared/schemas/incidents';
import type { Person } from '../../shared/schemas/people';
import { AuditEntity, MailEntity } from '../../server/db/entities/record.entities';
import { type Agent, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let administrator: Agent;
beforeAll(async () => {
  app = await startTestApp({ now: () => new Date('2031-05-12T14:40:00Z'), env: { DOWNREACH_ORGANISATION: 'River office' } });
  administrator = await app.agentFor('administrator');
});
afterAll(() => app.close());

const invited = { name: 'Ada Newcomer', email: 'ada@example.org', roles: ['planner'], phone: 'ext. 12', licenceNumber: '' };
const create = (values: object = {}, agent = administrator) => agent.post(apiPaths.people).send({ ...invited, ...values });
const update = (person: Pick<Person, 'id' | 'name' | 'roles' | 'version'>, values: object = {}, agent = administrator) =>
  agent.put(apiPaths.person(person.id)).send({ name: person.name, roles: person.roles, version: person.version, isActive: true, ...values });
const auditOf = (subjectId: string, of = app) => of.deps.db.read.find(AuditEntity, { where: { subjectId }, order: { id: 'ASC' } });
const tokenTo = async (to: string, of = app) => (await of.deps.db.read.find(MailEntity, { where: { to } })).map(({ text }) => /set-password\/([\w-]+)/.exec(text)?.[1]).findLast(Boolean)!;
const setPassword = (token: string) => app.visitor().post(apiPaths.passwordSet).send({ token, newPassword: 'another long password' });

describe('inviting somebody', () => {
  it('takes them in, mails a link for 72 hours, leaves an audit entry and tells open pages', async () => {
    const told: ChangeEvent[] = [];
    const stop = app.deps.changes.subscribe((event) => told.push(event));
    const { body, headers } = await create({ roles: ['planner', 'engineer', 'planner'] }).expect(201);
    stop();
    expect(body).toEqual({ ...invited, id: body.id, roles: ['planner', 'engineer'], isActive: true, hasPassword: false, lastSignInAt: null, version: 1 });
    expect(headers.location).toBe(apiPaths.person(body.id));
    expect((await administrator.get(apiPaths.person(body.id)).expect(200)).body).toEqual(body);
    const mail = await app.deps.db.read.findOneByOrFail(MailEntity, { to: invited.email });
    expect(mail.text).toContain('Test administrator has given you access to Downreach at River office');
    expect(mail.text).toContain('until 2031-05-15 14:40 (UTC+00:00)');
    expect(await auditOf(body.id)).toMatchObject([{ action: 'person.create', personName: 'Test administrator', detail: { email: invited.email, roles: ['planner', 'engineer'] } }]);
    expect(told.map(({ topic }) => topic)).toEqual(['person', 'outbox']);
  });

  it('lets them in once they have set a password, which the list then shows', async () => {
    const { body } = await create({ email: 'ben@example.org' }).expect(201);
    await setPassword(await tokenTo('ben@example.org')).expect(200);
    const agent = await app.signedIn('ben@example.org', 'another long password');
    await agent.get(apiPaths.people).expect(403);
    const { body: after } = await administrator.get(apiPaths.person(body.id));
    expect(after).toMatchObject({ hasPassword: true, lastSignInAt: '2031-05-12T14:40:00.000Z', version: 1 });
    expect((await app.deps.db.read.findBy(MailEntity, { to: 'ben@example.org' })).map(({ subject }) => subject)).toEqual(['Your access to Downreach, River office']);
  });

  it('is refused for an e-mail that somebody has, naming who', async () => {
    await create({ email: 'cas@example.org', name: 'Cas First' }).expect(201);
    const { body } = await create({ email: 'CAS@example.org', name: 'Cas Second' }).expect(409);
    expect(body).toMatchObject({ code: 'duplicate', errors: [{ path: 'email', message: 'Belongs to Cas First already' }] });
    expect(await app.deps.db.read.countBy(MailEntity, { to: 'cas@example.org' })).toBe(1);
  });

  it('is refused field by field when the input cannot be used', async () => {
    const { body } = await create({ name: ' ', email: 'nobody', roles: [], phone: 'x'.repeat(61) }).expect(422);
    expect(body.errors.map(({ path }: { path: string }) => path).sort()).toEqual(['email', 'name', 'phone', 'roles']);
    expect((await create({ email: 'x@example.org', roles: ['admiral'] }).expect(422)).body.errors[0].path).toBe('roles.0');
  });

  it('is for administrators', async () => {
    await create({ email: 'eve@example.org' }, app.visitor()).expect(401);
    for (const role of ['planner', 'engineer', 'supervisor', 'coordinator'] as const) await create({ email: 'eve@example.org' }, await app.agentFor(role)).expect(403);
  });

  it('can be done again while there is no password; a link lasts 72 hours', async () => {
    let nowMs = Date.parse('2031-05-12T14:40:00Z');
    const own = await startTestApp({ now: () => new Date(nowMs) });
    const setThere = async () => own.visitor().post(apiPaths.passwordSet).send({ token: await tokenTo('dot@example.org', own), newPassword: 'another long password' });
    const { body } = await create({ email: 'dot@example.org' }, await own.agentFor('administrator')).expect(201);
    nowMs += 72 * 3_600_000;
    expect((await setThere()).status).toBe(410);
    await (await own.signedIn((await own.addPerson({ roles: ['administrator'] })).email)).post(apiPaths.personInvite(body.id)).expect(204);
    nowMs += 72 * 3_600_000 - 1;
    expect((await setThere()).status).toBe(200);
    expect((await auditOf(body.id, own)).map(({ action, detail }) => [action, detail.purpose])).toContainEqual(['person.invite', 'invitation']);
    await own.close();
  });

  it('again sends somebody who has a password a link for a new one, and nothing to the deactivated or unknown', async () => {
    const known = await app.addPerson({ roles: ['planner'] });
    await administrator.post(apiPaths.personInvite(known.id)).expect(204);
    expect(await app.deps.db.read.findOneByOrFail(MailEntity, { to: known.email })).toMatchObject({ subject: 'New password for Downreach, River office' });
    const gone = await app.addPerson({ roles: ['planner'], isActive: false });
    expect((await administrator.post(apiPaths.personInvite(gone.id)).expect(409)).body.code).toBe('wrong-state');
    await administrator.post(apiPaths.personInvite('nobody')).expect(404);
    await (await app.agentFor('supervisor')).post(apiPaths.personInvite(known.id)).expect(403);
  });

  it('leaves nothing behind when the mail cannot be queued', async () => {
    const broken = vi.spyOn(app.deps.mail, 'enqueue').mockRejectedValueOnce(new Error('disk full'));
    await create({ email: 'half@example.org' }).expect(500);
    broken.mockRestore();
    await create({ email: 'half@example.org' }).expect(201);
  });
});

describe('the list of people', () => {
  it('is sorted by name and holds no hashes', async () => {
    await app.addPerson({ roles: ['planner'], name: 'aaron lower' });
    await app.addPerson({ roles: ['planner'], name: 'Abel Upper' });
    const { body, text } = await (await app.agentFor('supervisor')).get(apiPaths.people).expect(200);
    const names = (body as Person[]).map(({ name }) => name);
    expect(names.indexOf('aaron lower')).toBeLessThan(names.indexOf('Abel Upper'));
    expect(text).not.toContain('argon2');
  });

  it('is not for planners, and says so when somebody is missing', async () => {
    await (await app.agentFor('planner')).get(apiPaths.people).expect(403);
    await app.visitor().get(apiPaths.people).expect(401);
    expect((await administrator.get(apiPaths.person('nobody')).expect(404)).body.detail).toBe('There is no person nobody');
  });
});

describe('changing somebody', () => {
  it('stores the change, raises the version and records old and new', async () => {
    const person = await app.addPerson({ roles: ['planner'], name: 'Old Name' });
    const { body } = await update(person, { name: 'New Name', roles: ['engineer'], phone: '112' }).expect(200);
    expect(body).toMatchObject({ name: 'New Name', roles: ['engineer'], phone: '112', email: person.email, version: 2 });
    expect(await auditOf(person.id)).toMatchObject([{ action: 'person.update', detail: { name: 'Old Name', changed: { name: { from: 'Old Name', to: 'New Name' }, roles: { from: ['planner'], to: ['engineer'] }, phone: { from: '', to: '112' } } } }]);
  });

  it('changes what they may do at the very next request', async () => {
    const person = await app.addPerson({ roles: ['planner'] });
    const agent = await app.signedIn(person.email);
    await agent.get(apiPaths.audit).expect(403);
    await update(person, { roles: ['supervisor'] }).expect(200);
    await agent.get(apiPaths.audit).expect(200);
  });

  it('is refused with an old version, and shows the present one', async () => {
    const person = await app.addPerson({ roles: ['planner'], name: 'Old Name' });
    await update(person, { name: 'First' }).expect(200);
    const { body } = await update(person, { name: 'Second' }).expect(409);
    expect(body).toMatchObject({ code: 'stale-version', current: { name: 'First', version: 2 } });
  });

  it('is stored for one of two who save at once', async () => {
    const person = await app.addPerson({ roles: ['planner'] });
    const statuses = (await Promise.all([update(person, { name: 'First' }), update(person, { name: 'Second' })])).map(({ status }) => status);
    expect(statuses.sort()).toEqual([200, 409]);
  });

  it('is refused when missing, unreadable or asked by somebody else', async () => {
    const person = await app.addPerson({ roles: ['planner'] });
    await update({ ...person, id: 'nobody' }).expect(404);
    expect((await update(person, { roles: [], isActive: 'perhaps' }).expect(422)).body.errors.map(({ path }: { path: string }) => path).sort()).toEqual(['isActive', 'roles']);
    await update(person, {}, app.visitor()).expect(401);
    await update(person, {}, await app.agentFor('supervisor')).expect(403);
  });

  it('to deactivated ends their sessions at once; activating lets them in again', async () => {
    const person = await app.addPerson({ roles: ['planner'] });
    const agent = await app.signedIn(person.email);
    await update(person, { isActive: false }).expect(200);
    await agent.get(apiPaths.incidents).expect(401);
    await agent.post(apiPaths.signIn).send({ email: person.email, password: 'a long test password' }).expect(401);
    await update({ ...person, version: 2 }).expect(200);
    await agent.get(apiPaths.incidents).expect(401);
    await (await app.signedIn(person.email)).get(apiPaths.incidents).expect(200);
  });
});

describe('the last administrator', () => {
  it('can neither give the role up nor be deactivated while nobody else who can sign in holds it', async () => {
    const own = await startTestApp();
    const only = await own.addPerson({ roles: ['administrator', 'planner'] });
    await own.addPerson({ roles: ['administrator'], passwordHash: null, name: 'Never came' });
    await own.addPerson({ roles: ['administrator'], isActive: false, name: 'Gone' });
    const agent = await own.signedIn(only.email);
    const { body } = await update(only, { roles: ['planner'] }, agent).expect(409);
    expect(body).toMatchObject({ code: 'wrong-state', errors: [{ path: 'roles', message: 'The last administrator stays: make somebody else administrator first' }] });
    expect((await update(only, { isActive: false }, agent).expect(409)).body.errors[0].path).toBe('isActive');
    const second = await own.addPerson({ roles: ['administrator'] });
    const statuses = (await Promise.all([update(only, { roles: ['planner'] }, agent), update(second, { roles: ['planner'] }, agent)])).map(({ status }) => status);
    expect(statuses.filter((status) => status === 200)).toHaveLength(1);
    await own.close();
  });
});
