import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import type { Outbox } from '../../shared/schemas/office';
import { type Agent, type TestApp, startTestApp } from '../helpers/test-app';

let app: TestApp;
let administrator: Agent;
let nowMs = Date.parse('2031-05-12T14:40:00Z');
beforeAll(async () => {
  app = await startTestApp({ now: () => new Date(nowMs) });
  administrator = await app.agentFor('administrator');
  for (let i = 1; i <= 5; i++) {
    nowMs += 60_000;
    await app.deps.db.write((tx) => app.deps.mail.enqueue(tx, { to: `person-${i}@example.org`, subject: `Mail ${i}`, text: `Open http://localhost/set-password/token-${i}` }));
  }
});
afterAll(() => app.close());

const list = async (query: object = {}) => (await administrator.get(apiPaths.outbox).query(query).expect(200)).body as Outbox;

describe('the outbox', () => {
  it('lists mails with their state, the newest first, without their texts', async () => {
    const { mails, total, hasMailServer } = await list();
    expect({ total, hasMailServer }).toEqual({ total: 5, hasMailServer: false });
    expect(mails.map(({ subject }) => subject)).toEqual(['Mail 5', 'Mail 4', 'Mail 3', 'Mail 2', 'Mail 1']);
    expect(mails[0]).toEqual({ id: mails[0]!.id, to: 'person-5@example.org', subject: 'Mail 5', state: 'local', attempts: 0, nextAttemptAt: null, lastError: '', createdAt: '2031-05-12T14:45:00.000Z', sentAt: null });
  });

  it('gives page by page and by state', async () => {
    const page = await list({ offset: 2, limit: 2 });
    expect(page.mails.map(({ subject }) => subject)).toEqual(['Mail 3', 'Mail 2']);
    expect(page.total).toBe(5);
    expect(await list({ state: 'failed' })).toMatchObject({ mails: [], total: 0 });
  });

  it('shows one mail with its one-time link where no mail server is set', async () => {
    const { mails } = await list();
    const { body } = await administrator.get(apiPaths.outboxMail(mails[0]!.id)).expect(200);
    expect(body).toEqual({ ...mails[0], text: 'Open http://localhost/set-password/token-5' });
  });

  it('hides the one-time link of a mail on its way through a mail server', async () => {
    const own = await startTestApp({ env: { SMTP_URL: 'smtp://127.0.0.1:9' } });
    const id = await own.deps.db.write((tx) => own.deps.mail.enqueue(tx, { to: 'a@example.org', subject: 'Link', text: 'Open http://localhost/set-password/token-9' }));
    const { body } = await (await own.agentFor('administrator')).get(apiPaths.outboxMail(id)).expect(200);
    expect(body).toMatchObject({ state: 'queued', text: 'Open http://localhost/set-password/(taken out)' });
    await own.close();
  });

  it('refuses what cannot be used, and says when a mail is missing', async () => {
    const { body } = await administrator.get(apiPaths.outbox).query({ state: 'lost', limit: 0, offset: -1 }).expect(422);
    expect(body.errors.map(({ path }: { path: string }) => path).sort()).toEqual(['limit', 'offset', 'state']);
    await administrator.get(apiPaths.outboxMail('nothing')).expect(404);
  });

  it('is for administrators', async () => {
    for (const path of [apiPaths.outbox, apiPaths.outboxMail('any')]) {
      await app.visitor().get(path).expect(401);
      for (const role of ['planner', 'engineer', 'supervisor', 'coordinator'] as const) await (await app.agentFor(role)).get(path).expect(403);
    }
  });
});
