import { afterEach, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import type { Session } from '../../shared/schemas/people';
import { AuditEntity, MailEntity } from '../../server/db/entities/record.entities';
import { demoSignIns, retireDemoPeople, seedDemoPeople } from '../../server/features/people/demo-people';
import { SessionStore } from '../../server/http/sessions';
import { type Agent, TEST_PASSWORD, type TestApp, startTestApp } from '../helpers/test-app';

const MINUTE = 60_000;
const HOUR = 60 * MINUTE;
const NEW_PASSWORD = 'another long password';

let app: TestApp;
let nowMs: number;
const pass = (ms: number) => {
  nowMs += ms;
};
async function start(options: Parameters<typeof startTestApp>[0] = {}): Promise<TestApp> {
  nowMs = Date.parse('2031-05-12T14:40:00Z');
  app = await startTestApp({ now: () => new Date(nowMs), ...options });
  return app;
}
afterEach(() => app.close());

const whoIs = async (agent: Agent): Promise<string | null> => ((await agent.get(apiPaths.session).expect(200)).body as Session).person?.email ?? null;
const tryIn = (email: string, password: string, agent = app.visitor()) => agent.post(apiPaths.signIn).send({ email, password });
const actions = async () => (await app.deps.db.read.find(AuditEntity, { order: { id: 'ASC' } })).map(({ action }) => action);
/** The token in the newest mail to an address. */
async function mailedToken(to: string): Promise<string> {
  const mails = await app.deps.db.read.find(MailEntity, { where: { to } });
  const token = mails.map(({ text }) => /\/set-password\/([\w-]+)/.exec(text)?.[1]).findLast(Boolean);
  expect(token).toBeDefined();
  return token!;
}

describe('signing in', () => {
  it('opens a session for the right e-mail and password, in whatever case the e-mail is typed', async () => {
    await start();
    const { email, name, id } = await app.addPerson({ roles: ['planner', 'engineer'], email: 'pat@example.org' });
    const agent = app.visitor();
    const { body, headers } = await tryIn(' Pat@Example.org ', TEST_PASSWORD, agent).expect(200);
    expect(body).toMatchObject({ person: { id, name, email, roles: ['planner', 'engineer'] }, isDemo: false, demoSignIns: [], utcOffset: '+00:00' });
    expect(String(headers['set-cookie'])).toMatch(/HttpOnly; SameSite=Lax/);
    expect(await whoIs(agent)).toBe(email);
    expect(await actions()).toEqual(['session.sign-in']);
  });

  it('answers a wrong password, an unknown address, a person without a password and a deactivated one alike', async () => {
    await start();
    await app.addPerson({ roles: ['planner'], email: 'known@example.org' });
    await app.addPerson({ roles: ['planner'], email: 'invited@example.org', passwordHash: null });
    await app.addPerson({ roles: ['planner'], email: 'gone@example.org', isActive: false });
    const answers = await Promise.all([tryIn('known@example.org', 'not the password'), tryIn('unknown@example.org', TEST_PASSWORD), tryIn('invited@example.org', TEST_PASSWORD), tryIn('gone@example.org', TEST_PASSWORD)]);
    for (const { status, body } of answers) expect({ status, ...body, instance: '' }).toEqual({ ...answers[0]!.body, status: 401, code: 'sign-in-failed', instance: '' });
    expect(await actions()).toEqual(Array(4).fill('session.refuse'));
  });

  it('takes as long for an unknown address as for a wrong password', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    const timed = async (address: string) => {
      const from = performance.now();
      await tryIn(address, 'not the password').expect(401);
      return performance.now() - from;
    };
    const known: number[] = [];
    const unknown: number[] = [];
    await timed('warm-up@example.org');
    for (let i = 0; i < 7; i++) {
      known.push(await timed(email));
      unknown.push(await timed(`nobody-${i}@example.org`));
    }
    // The hash takes tens of milliseconds and everything else a few: without it an unknown address would answer in a fraction of the time.
    expect(Math.min(...unknown)).toBeGreaterThan(0.5 * Math.min(...known));
  });

  it('names the field when the address is none or the password is missing', async () => {
    await start();
    const { body } = await tryIn('pat', '').expect(422);
    expect(body.errors).toEqual([{ path: 'email', message: 'Give an e-mail address such as name@example.org (got pat)' }, { path: 'password', message: 'Give your password' }]);
  });

  it('gives a new session id, so that one planted before is worth nothing', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    const agent = await app.signedIn(email);
    const cookieOf = (answer: { headers: Record<string, unknown> }) => String(answer.headers['set-cookie']).split(';')[0]!;
    const first = cookieOf(await agent.get(apiPaths.session));
    const second = cookieOf(await tryIn(email, TEST_PASSWORD, agent));
    expect(second).not.toBe(first);
    const { body } = await app.visitor().get(apiPaths.session).set('cookie', first);
    expect(body.person).toBeNull();
  });

  it('is refused from one place after eight wrong passwords for an account, and open again a quarter of an hour later', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    for (let i = 0; i < 8; i++) await tryIn(email, 'not the password').expect(401);
    pass(5 * MINUTE);
    const { body, headers } = await tryIn(email, TEST_PASSWORD).expect(429);
    expect(body).toMatchObject({ code: 'too-many-attempts', detail: 'Try again in 10 minutes' });
    expect(headers['retry-after']).toBe('600');
    pass(10 * MINUTE);
    await tryIn(email, TEST_PASSWORD).expect(200);
  });

  it('is not slowed by sign-ins that succeed', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    for (let i = 0; i < 12; i++) await tryIn(email, TEST_PASSWORD).expect(200);
  });

  it('is refused to an address that tries many accounts, and open to others', async () => {
    await start({ env: { DOWNREACH_BEHIND_PROXY: 'on' } });
    const { email } = await app.addPerson({ roles: ['planner'] });
    for (let i = 0; i < 30; i++) await tryIn(`nobody-${i}@example.org`, 'x').set('x-forwarded-for', '192.0.2.1').expect(401);
    await tryIn(email, TEST_PASSWORD).set('x-forwarded-for', '192.0.2.1').expect(429);
    await tryIn(email, TEST_PASSWORD).set('x-forwarded-for', '192.0.2.2').expect(200);
  });

  it('counts guesses that arrive at once', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    const statuses = await Promise.all(Array.from({ length: 20 }, async () => (await tryIn(email, 'not the password')).status));
    expect(statuses.filter((status) => status === 401)).toHaveLength(8);
    expect(statuses.filter((status) => status === 429)).toHaveLength(12);
  });
});

describe('a session', () => {
  it('ends when it is not used for the idle time, and lasts while it is', async () => {
    await start({ env: { DOWNREACH_IDLE_MINUTES: '30' } });
    const { email } = await app.addPerson({ roles: ['planner'] });
    const agent = await app.signedIn(email);
    for (let i = 0; i < 4; i++) {
      pass(29 * MINUTE);
      expect(await whoIs(agent)).toBe(email);
    }
    pass(30 * MINUTE);
    expect(await whoIs(agent)).toBeNull();
    await agent.post(apiPaths.signOut).expect(401);
  });

  it('ends after the absolute time however much it is used', async () => {
    await start({ env: { DOWNREACH_SESSION_HOURS: '3' } });
    const { email } = await app.addPerson({ roles: ['planner'] });
    const agent = await app.signedIn(email);
    for (let i = 0; i < 3; i++) {
      pass(HOUR);
      expect(await whoIs(agent)).toBe(email);
    }
    pass(1);
    expect(await whoIs(agent)).toBeNull();
  });

  it('ends at sign-out, and only that one', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['coordinator'] });
    const [here, there] = [await app.signedIn(email), await app.signedIn(email)];
    await here.post(apiPaths.signOut).expect(204);
    expect(await whoIs(here)).toBeNull();
    expect(await whoIs(there)).toBe(email);
    expect(await actions()).toContain('session.sign-out');
  });

  it('ends everywhere when asked to', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    const other = await app.agentFor('engineer');
    const [here, there] = [await app.signedIn(email), await app.signedIn(email)];
    await here.post(apiPaths.signOutEverywhere).expect(204);
    expect([await whoIs(here), await whoIs(there)]).toEqual([null, null]);
    expect(await whoIs(other)).not.toBeNull();
    expect(await actions()).toContain('session.sign-out-everywhere');
  });

  it('survives a restart, because it is kept on disk', async () => {
    await start();
    const { email, id } = await app.addPerson({ roles: ['planner'] });
    const cookie = String((await tryIn(email, TEST_PASSWORD)).headers['set-cookie']);
    const [, sid] = /=s:([^.]+)\./.exec(decodeURIComponent(cookie))!;
    const afterwards = new SessionStore(app.deps.config.sessionsFile, () => nowMs);
    const found = await new Promise((resolve) => afterwards.get(sid!, (_error, data) => resolve(data)));
    afterwards.close();
    expect(found).toMatchObject({ personId: id });
  });
});

describe('changing the own password', () => {
  const change = (agent: Agent, currentPassword: string, newPassword: string) => agent.post(apiPaths.passwordChange).send({ currentPassword, newPassword });

  it('works with the present one, keeps this session under a new id, ends the others and tells by mail', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    const [here, there] = [await app.signedIn(email), await app.signedIn(email)];
    await change(here, TEST_PASSWORD, NEW_PASSWORD).expect(204);
    expect([await whoIs(here), await whoIs(there)]).toEqual([email, null]);
    await tryIn(email, TEST_PASSWORD).expect(401);
    await tryIn(email, NEW_PASSWORD).expect(200);
    expect(await app.deps.db.read.findOneByOrFail(MailEntity, { to: email })).toMatchObject({ state: 'local', subject: expect.stringContaining('was changed') });
    expect(await actions()).toContain('session.password-change');
  });

  it('does not put off the absolute end of the session', async () => {
    await start({ env: { DOWNREACH_SESSION_HOURS: '3' } });
    const { email } = await app.addPerson({ roles: ['planner'] });
    const agent = await app.signedIn(email);
    pass(2 * HOUR);
    await change(agent, TEST_PASSWORD, NEW_PASSWORD).expect(204);
    pass(HOUR + 1);
    expect(await whoIs(agent)).toBeNull();
  });

  it('is refused with a wrong present one, a short new one, and one that everybody would try', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'], email: 'pat.planner@example.org' });
    const agent = await app.signedIn(email);
    const refusal = async (current: string, next: string) => (await change(agent, current, next).expect(422)).body.errors;
    expect(await refusal('not the password', NEW_PASSWORD)).toEqual([{ path: 'currentPassword', message: 'This is not your present password' }]);
    expect(await refusal(TEST_PASSWORD, 'short')).toMatchObject([{ path: 'newPassword', message: expect.stringContaining('At least 12 characters') }]);
    expect(await refusal(TEST_PASSWORD, 'aaaaaaaaaaaaaaab')).toMatchObject([{ path: 'newPassword', message: 'Only 2 different characters: use at least 5' }]);
    expect(await refusal(TEST_PASSWORD, 'Pat.Planner@example.org')).toMatchObject([{ path: 'newPassword', message: expect.stringContaining('own name or address') }]);
    await tryIn(email, TEST_PASSWORD).expect(200);
  });

  it('never shows the typed password in the answer', async () => {
    await start();
    const { text } = await change(await app.agentFor('planner'), TEST_PASSWORD, 'tooshort').expect(422);
    expect(text).not.toContain('tooshort');
  });

  it('is refused to visitors, and after ten wrong guesses', async () => {
    await start();
    await change(app.visitor(), TEST_PASSWORD, NEW_PASSWORD).expect(401);
    const agent = await app.agentFor('planner');
    for (let i = 0; i < 10; i++) await change(agent, 'not the password', NEW_PASSWORD).expect(422);
    const { headers } = await change(agent, TEST_PASSWORD, NEW_PASSWORD).expect(429);
    expect(Number(headers['retry-after'])).toBe(900);
  });
});

describe('a forgotten password', () => {
  const forget = (email: string) => app.visitor().post(apiPaths.passwordForgotten).send({ email });
  const set = (token: string, newPassword: string) => app.visitor().post(apiPaths.passwordSet).send({ token, newPassword });

  it('is replaced through a mailed link that works once, and every session ends', async () => {
    await start({ env: { DOWNREACH_URL: 'https://downreach.example.org' } });
    const { email, name } = await app.addPerson({ roles: ['planner'] });
    const agent = await app.signedIn(email);
    await forget(email).expect(204);
    expect((await app.deps.db.read.findOneByOrFail(MailEntity, { to: email })).text).toContain('https://downreach.example.org/set-password/');
    const token = await mailedToken(email);
    const { body } = await app.visitor().post(apiPaths.passwordLink).send({ token }).expect(200);
    expect(body).toEqual({ purpose: 'reset', name, email, expiresAt: '2031-05-12T15:40:00.000Z' });
    expect((await set(token, NEW_PASSWORD).expect(200)).body).toEqual({ email });
    expect(await whoIs(agent)).toBeNull();
    await tryIn(email, NEW_PASSWORD).expect(200);
    expect((await set(token, 'a third long password').expect(410)).body.code).toBe('link-used-or-expired');
    await tryIn(email, NEW_PASSWORD).expect(200);
    expect(await actions()).toEqual(expect.arrayContaining(['session.password-forgotten', 'session.password-set']));
  });

  it('gets the same answer for an unknown or deactivated person, and no mail', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    const { email: gone } = await app.addPerson({ roles: ['planner'], isActive: false });
    const answers = [await forget(email), await forget('unknown@example.org'), await forget(gone)];
    expect(answers.map(({ status, text }) => ({ status, text }))).toEqual(Array(3).fill({ status: 204, text: '' }));
    expect((await app.deps.db.read.find(MailEntity)).map(({ to }) => to)).toEqual([email]);
  });

  it('keeps only the hash of the link', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    await forget(email).expect(204);
    const token = await mailedToken(email);
    const rows = await app.deps.db.read.query('select * from one_time_links');
    expect(rows).toHaveLength(1);
    expect(JSON.stringify(rows)).not.toContain(token);
  });

  it('has a link for an hour, and only the newest one works', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    await forget(email);
    const first = await mailedToken(email);
    await forget(email);
    const second = await mailedToken(email);
    await set(first, NEW_PASSWORD).expect(410);
    pass(HOUR);
    await set(second, NEW_PASSWORD).expect(410);
    await forget(email);
    pass(HOUR - 1);
    await set(await mailedToken(email), NEW_PASSWORD).expect(200);
  });

  it('refuses a made-up link, and a bad password without using the link up', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    await set('x'.repeat(43), NEW_PASSWORD).expect(410);
    await app.visitor().post(apiPaths.passwordLink).send({ token: 'x'.repeat(43) }).expect(410);
    await forget(email);
    const token = await mailedToken(email);
    await set(token, 'short').expect(422);
    await set(token, 'aaaaaaaaaaaaaa').expect(422);
    await set(token, NEW_PASSWORD).expect(200);
  });

  it('is set by one of two that come at once', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    await forget(email);
    const token = await mailedToken(email);
    const statuses = (await Promise.all([set(token, NEW_PASSWORD), set(token, 'a third long password')])).map(({ status }) => status);
    expect(statuses.sort()).toEqual([200, 410]);
  });

  it('is dead once its person is deactivated', async () => {
    await start();
    const { email, id, name } = await app.addPerson({ roles: ['planner'] });
    await forget(email);
    const token = await mailedToken(email);
    const administrator = await app.agentFor('administrator');
    const change = (isActive: boolean, version: number) => administrator.put(apiPaths.person(id)).send({ name, roles: ['planner'], isActive, version }).expect(200);
    await change(false, 1);
    await set(token, NEW_PASSWORD).expect(410);
    await change(true, 2);
    await set(token, NEW_PASSWORD).expect(410);
  });

  it('sends no flood of mails to one person', async () => {
    await start();
    const { email } = await app.addPerson({ roles: ['planner'] });
    for (let i = 0; i < 4; i++) await forget(email).expect(204);
    expect((await forget(email).expect(429)).headers['retry-after']).toBe('3600');
    expect(await app.deps.db.read.countBy(MailEntity, { to: email })).toBe(4);
  });
});

describe('demonstration sign-ins', () => {
  it('are offered to visitors in demonstration mode, one for each role and one with two, and work', async () => {
    await start({ demo: true });
    await seedDemoPeople(app.deps);
    const { body } = (await app.visitor().get(apiPaths.session).expect(200)) as { body: Session };
    expect(body.isDemo).toBe(true);
    expect(body.demoSignIns.map(({ roles }) => roles)).toEqual([['planner'], ['engineer'], ['supervisor'], ['coordinator'], ['administrator'], ['planner', 'engineer']]);
    for (const { email, password } of body.demoSignIns) expect(await whoIs(await app.signedIn(email, password))).toBe(email);
  });

  it('are no longer offered when somebody has changed the password', async () => {
    await start({ demo: true });
    await seedDemoPeople(app.deps);
    const [first] = demoSignIns;
    const agent = await app.signedIn(first!.email, first!.password);
    await agent.post(apiPaths.passwordChange).send({ currentPassword: first!.password, newPassword: NEW_PASSWORD }).expect(204);
    const { body } = (await app.visitor().get(apiPaths.session)) as { body: Session };
    expect(body.demoSignIns).toHaveLength(demoSignIns.length - 1);
    expect(body.demoSignIns.map(({ email }) => email)).not.toContain(first!.email);
  });

  it('are closed for good when the folder is used without demonstration mode', async () => {
    await start({ demo: true });
    await seedDemoPeople(app.deps);
    const [first] = demoSignIns;
    const agent = await app.signedIn(first!.email, first!.password);
    await retireDemoPeople(app.deps);
    expect(await whoIs(agent)).toBeNull();
    for (const { email, password } of demoSignIns) await tryIn(email, password).expect(401);
    await seedDemoPeople(app.deps);
    await tryIn(first!.email, first!.password).expect(401);
  });
});
