import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import { PersonEntity } from '../../server/db/entities/person.entity';
import { readEvents } from '../helpers/stream-client';
import { eventually } from '../helpers/eventually';
import { type Fetch, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;

beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const open = async (fetchAs: Fetch) => {
  const leaving = new AbortController();
  const response = await fetchAs(apiPaths.events, { signal: leaving.signal });
  const stream = readEvents(response);
  await eventually(() => expect(stream.text()).toContain(': connected'));
  return { response, ...stream, leave: () => leaving.abort() };
};

describe('the stream of changes', () => {
  it('tells what changed, as server-sent events that no proxy may hold back', async () => {
    const { response, events, leave } = await open(await app.fetchAs('planner'));
    expect(response.headers.get('content-type')).toContain('text/event-stream');
    expect(response.headers.get('cache-control')).toBe('no-cache, no-transform');
    const planner = await app.agentFor('planner');
    const { body } = await planner.post(apiPaths.incidents).send({ name: 'Test', marking: 'REAL' }).expect(201);
    await eventually(() => expect(events).toMatchObject([{ topic: 'incident', id: body.id }]));
    leave();
  });

  it('tells each person only of what that person may read', async () => {
    const planner = await open(await app.fetchAs('planner'));
    const administrator = await open(await app.fetchAs('administrator'));
    app.deps.changes.announce({ topic: 'incident', id: 'i1', incidentId: 'i1' });
    app.deps.changes.announce({ topic: 'run', id: 'r1', scenarioId: 's1', incidentId: 'i1', state: 'done', progress: null });
    app.deps.changes.announce({ topic: 'outbox', id: 'm1' });
    app.deps.changes.announce({ topic: 'person', id: 'p1' });
    app.deps.changes.announce({ topic: 'register', id: 'w1' });
    await eventually(() => expect([planner.events.length, administrator.events.length]).toEqual([3, 3]));
    expect(planner.events.map(({ topic }) => topic)).toEqual(['incident', 'run', 'register']);
    expect(administrator.events.map(({ topic }) => topic)).toEqual(['outbox', 'person', 'register']);
    planner.leave();
    administrator.leave();
  });

  it('follows a change of roles', async () => {
    const { id, email } = await app.addPerson({ roles: ['planner'] });
    const agent = await app.signedIn(email);
    const cookie = (await agent.get(apiPaths.session).expect(200)).headers['set-cookie']?.[0]?.split(';')[0] ?? '';
    const stream = await open((path, init = {}) => app.fetchVisitor(path, { ...init, headers: { cookie } }));
    await app.deps.db.write((tx) => tx.update(PersonEntity, { id }, { roles: ['administrator'] }));
    app.deps.changes.announce({ topic: 'person', id });
    await eventually(() => {
      app.deps.changes.announce({ topic: 'outbox', id: 'm1' });
      expect(stream.events.map(({ topic }) => topic)).toContain('outbox');
    });
    app.deps.changes.announce({ topic: 'incident', id: 'i1', incidentId: 'i1' });
    app.deps.changes.announce({ topic: 'register', id: 'w1' });
    await eventually(() => expect(stream.events.map(({ topic }) => topic)).toContain('register'));
    expect(stream.events.map(({ topic }) => topic)).not.toContain('incident');
    stream.leave();
  });

  it('says every 20 s that it is still there', async () => {
    vi.useFakeTimers({ toFake: ['setInterval', 'clearInterval'] });
    try {
      const stream = await open(await app.fetchAs('planner'));
      vi.advanceTimersByTime(20_000);
      await eventually(() => expect(stream.text()).toContain(': still here'));
      stream.leave();
    } finally {
      vi.useRealTimers();
    }
  });

  it('ends when the person signs out', async () => {
    const fetchAs = await app.fetchAs('planner');
    const { ended } = await open(fetchAs);
    expect((await fetchAs(apiPaths.signOut, { method: 'POST' })).ok).toBe(true);
    await ended;
  });

  it('ends when the person is no longer active', async () => {
    const fetchAs = await app.fetchAs('coordinator');
    const { ended } = await open(fetchAs);
    const { person } = (await (await fetchAs(apiPaths.session)).json()) as { person: { id: string } };
    app.deps.sessions.destroyAllOf(person.id);
    await ended;
  });

  it('ends with a session that was idle too long, and its end does not bring the session back', async () => {
    let later = 0;
    const clocked = await startTestApp({ now: () => new Date(Date.now() + later) });
    vi.useFakeTimers({ toFake: ['setInterval', 'clearInterval'] });
    try {
      const fetchAs = await clocked.fetchAs('planner');
      const { ended } = await open(fetchAs);
      later = clocked.deps.config.idleMs + 1_000;
      vi.advanceTimersByTime(20_000);
      await ended;
      expect((await fetchAs(apiPaths.watch)).status).toBe(401);
    } finally {
      vi.useRealTimers();
      await clocked.close();
    }
  });

  it('is closed to visitors', async () => {
    expect((await app.fetchVisitor(apiPaths.events)).status).toBe(401);
  });
});
