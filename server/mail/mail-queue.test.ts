import { mkdtempSync, rmSync } from 'node:fs';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type ParsedMail, simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { afterEach, expect, it, describe, vi } from 'vitest';
import { readConfig } from '../config';
import { MailEntity, type MailRow } from '../db/entities/record.entities';
import type { Deps } from '../deps';
import { closeDeps, createDeps } from '../deps-create';
import { BACK_OFF_MS } from './mail-queue';

type Host = { port: number; received: ParsedMail[]; close: () => Promise<void> };
const closers: (() => Promise<void> | void)[] = [];
afterEach(async () => {
  for (const close of closers.splice(0).reverse()) await close();
});

/** A mail host on the loopback. `answer` gives the reply code to each message's receiver; 250 takes it. */
async function startMailHost(answer: (attempt: number) => number = () => 250, port = 0): Promise<Host> {
  const received: ParsedMail[] = [];
  let attempts = 0;
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onRcptTo(_address, _session, done) {
      const code = answer(++attempts);
      done(code === 250 ? null : Object.assign(new Error(code >= 500 ? 'No such mailbox' : 'Try later'), { responseCode: code }));
    },
    onData(stream, _session, done) {
      simpleParser(stream).then((mail) => {
        received.push(mail);
        done();
      }, done);
    },
  });
  await new Promise<void>((resolve) => server.listen(port, '127.0.0.1', resolve));
  const close = () => new Promise<void>((resolve) => server.close(() => resolve()));
  closers.push(close);
  return { port: (server.server.address() as AddressInfo).port, received, close };
}

/** A server's queue with a clock that the test moves. */
async function openQueue(smtpUrl: string | undefined, folder = mkdtempSync(join(tmpdir(), 'downreach-mail-'))) {
  let nowMs = Date.parse('2031-05-12T14:40:00Z');
  const deps = await createDeps(readConfig({ DOWNREACH_DATA: folder, DOWNREACH_LOG: 'silent', DOWNREACH_MAIL_FROM: 'Downreach <downreach@orlavane.example>', SMTP_URL: smtpUrl }), () => new Date(nowMs));
  let isOpen = true;
  const close = async () => {
    if (isOpen) await closeDeps(deps);
    isOpen = false;
  };
  closers.push(() => rmSync(folder, { recursive: true, force: true }), close);
  await deps.jobs.start();
  const passMs = (ms: number) => {
    nowMs += ms;
    deps.jobs.wake();
  };
  return { deps, folder, passMs, close };
}

const url = (port: number) => `smtp://127.0.0.1:${port}?ignoreTLS=true`;
const mailed = { to: 'ilse.marrow@orlavane.example', subject: 'Übung at the weir', text: 'Open http://localhost/set-password/abcDEF-123 once.\n' };
async function send(deps: Deps): Promise<string> {
  const id = await deps.db.write((tx) => deps.mail.enqueue(tx, mailed));
  deps.jobs.wake();
  return id;
}
const mailOf = (deps: Deps, id: string): Promise<MailRow> => deps.db.read.findOneByOrFail(MailEntity, { id });
const until = (deps: Deps, id: string, expected: Partial<MailRow>) => vi.waitFor(async () => expect(await mailOf(deps, id)).toMatchObject(expected), { timeout: 10_000 });

describe('the mail queue', () => {
  it('delivers a mail, notes when, tells the pages, and forgets the one-time link', async () => {
    const host = await startMailHost();
    const { deps } = await openQueue(url(host.port));
    const told: unknown[] = [];
    deps.changes.subscribe((event) => told.push(event));
    const id = await send(deps);
    await until(deps, id, { state: 'sent', attempts: 1, sentAt: '2031-05-12T14:40:00.000Z', text: 'Open http://localhost/set-password/(taken out) once.\n' });
    expect(host.received).toHaveLength(1);
    expect(host.received[0]).toMatchObject({ subject: mailed.subject, text: mailed.text, messageId: `<${id}@downreach>`, from: { text: '"Downreach" <downreach@orlavane.example>' }, to: { text: mailed.to } });
    expect(told).toContainEqual({ topic: 'outbox', id });
  });

  it('tries again after a wait when the host says later', async () => {
    const host = await startMailHost((attempt) => (attempt === 1 ? 451 : 250));
    const { deps, passMs } = await openQueue(url(host.port));
    const id = await send(deps);
    await until(deps, id, { state: 'queued', attempts: 1, nextAttemptAt: '2031-05-12T14:40:10.000Z' });
    expect((await mailOf(deps, id)).lastError).toContain('451');
    expect(host.received).toHaveLength(0);
    passMs(BACK_OFF_MS[0]);
    await until(deps, id, { state: 'sent', attempts: 2, lastError: '', nextAttemptAt: null });
    expect(host.received).toHaveLength(1);
  });

  it('does not try again when the host refuses for good, and says why', async () => {
    const host = await startMailHost(() => 550);
    const { deps } = await openQueue(url(host.port));
    const id = await send(deps);
    await until(deps, id, { state: 'failed', attempts: 1, nextAttemptAt: null });
    expect((await mailOf(deps, id)).lastError).toContain('550 No such mailbox');
  });

  it('waits for a host that is down', async () => {
    const { port, close } = await startMailHost();
    await close();
    const { deps, passMs } = await openQueue(url(port));
    const id = await send(deps);
    await until(deps, id, { state: 'queued', attempts: 1 });
    expect((await mailOf(deps, id)).lastError).toContain('ECONNREFUSED');
    const host = await startMailHost(undefined, port);
    passMs(BACK_OFF_MS[0]);
    await until(deps, id, { state: 'sent', attempts: 2 });
    expect(host.received).toHaveLength(1);
  });

  it('gives up after the last wait', async () => {
    const host = await startMailHost(() => 451);
    const { deps, passMs } = await openQueue(url(host.port));
    const id = await send(deps);
    for (const [i, wait] of BACK_OFF_MS.entries()) {
      await until(deps, id, { state: 'queued', attempts: i + 1 });
      passMs(wait);
    }
    await until(deps, id, { state: 'failed', attempts: BACK_OFF_MS.length + 1, nextAttemptAt: null });
  });

  it('sends after a restart what was queued before it', async () => {
    const { port, close: stopHost } = await startMailHost();
    await stopHost();
    const before = await openQueue(url(port));
    const id = await send(before.deps);
    await until(before.deps, id, { attempts: 1 });
    await before.close();
    const host = await startMailHost(undefined, port);
    const after = await openQueue(url(port), before.folder);
    after.passMs(BACK_OFF_MS[0]);
    await until(after.deps, id, { state: 'sent' });
    expect(host.received).toHaveLength(1);
  });

  it('keeps a mail whose transaction is undone from leaving', async () => {
    const host = await startMailHost();
    const { deps } = await openQueue(url(host.port));
    await expect(
      deps.db.write(async (tx) => {
        await deps.mail.enqueue(tx, mailed);
        throw new Error('undone');
      }),
    ).rejects.toThrow('undone');
    const id = await send(deps);
    await until(deps, id, { state: 'sent' });
    expect(await deps.db.read.count(MailEntity)).toBe(1);
    expect(host.received).toHaveLength(1);
  });

  it('keeps mails readable here when no host is set, also those queued when there was one', async () => {
    const { port, close: stopHost } = await startMailHost();
    await stopHost();
    const before = await openQueue(url(port));
    const queued = await send(before.deps);
    await until(before.deps, queued, { attempts: 1 });
    await before.close();
    const { deps, passMs } = await openQueue(undefined, before.folder);
    passMs(BACK_OFF_MS[0]);
    await until(deps, queued, { state: 'local', text: mailed.text });
    expect(await mailOf(deps, await send(deps))).toMatchObject({ state: 'local', text: mailed.text });
  });
});
