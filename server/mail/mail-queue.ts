import { createTransport, type Transporter } from 'nodemailer';
import type { EntityManager } from 'typeorm';
import type { Config } from '../config';
import type { Database } from '../db/database';
import { MailEntity, type MailRow } from '../db/entities/record.entities';
import type { ChangeBus } from '../jobs/change-bus';
import type { JobRunner } from '../jobs/job-runner';
import { withoutLinkTokens } from './link-mails';

type Options = { config: Config; db: Database; jobs: JobRunner; changes: ChangeBus; now: () => Date; newId: () => string };
type SmtpError = Error & { responseCode?: number; code?: string };

const JOB_KIND = 'mail';
/** Waits before each further attempt, ms. */
export const BACK_OFF_MS = [10_000, 60_000, 300_000, 1_800_000, 7_200_000] as const;
/** A mail host that says nothing must not hold the queue or the end of the server, ms. */
const timeouts = { connectionTimeout: 15_000, greetingTimeout: 15_000, socketTimeout: 30_000 };

/**
 * Mails are queued in the transaction that causes them and sent by a job. A crash between sending and noting it sends
 * again, under the same Message-ID. Without SMTP settings mails stay readable in the local outbox.
 */
export class MailQueue {
  private readonly transport: Transporter | null;

  constructor(private readonly options: Options) {
    const { smtpUrl, mailFrom } = options.config;
    this.transport = smtpUrl ? createTransport({ url: smtpUrl, ...timeouts }, { from: mailFrom }) : null;
    options.jobs.register(JOB_KIND, {
      handle: (job, { signal }) => this.deliver(job.subjectId, signal),
      onGivenUp: (job, reason) => this.noteFailure(job.subjectId, new Error(`The attempt was ${reason === 'failed' ? 'ended by an error' : 'interrupted'}`)),
    });
  }

  async enqueue(tx: EntityManager, mail: { to: string; subject: string; text: string }): Promise<string> {
    const id = this.options.newId();
    const state = this.transport ? 'queued' : 'local';
    await tx.insert(MailEntity, { id, ...mail, state, attempts: 0, nextAttemptAt: null, lastError: '', createdAt: this.options.now().toISOString(), sentAt: null });
    if (this.transport) await this.options.jobs.enqueue(tx, JOB_KIND, id);
    return id;
  }

  private async deliver(id: string, signal: AbortSignal): Promise<void> {
    const mail = await this.options.db.read.findOneBy(MailEntity, { id });
    if (!mail || mail.state !== 'queued') return;
    if (!this.transport) return this.change(id, { state: 'local' });
    try {
      await orAborted(this.send(this.transport, mail), signal);
    } catch (error) {
      if (signal.aborted) throw error;
      return this.noteFailure(id, error as SmtpError);
    }
    await this.change(id, { state: 'sent', sentAt: this.options.now().toISOString(), attempts: mail.attempts + 1, nextAttemptAt: null, lastError: '', text: withoutLinkTokens(mail.text) });
  }

  private send(transport: Transporter, { id, to, subject, text }: MailRow): Promise<unknown> {
    return transport.sendMail({ to, subject, text, messageId: `<${id}@downreach>`, headers: { 'auto-submitted': 'auto-generated' } });
  }

  /** Plans the next attempt, or gives the mail up when it was refused for good or tried often enough. */
  private async noteFailure(id: string, error: SmtpError): Promise<void> {
    await this.options.db.write(async (tx) => {
      const mail = await tx.findOneByOrFail(MailEntity, { id });
      const attempts = mail.attempts + 1;
      const wait = isRefusedForGood(error) ? undefined : BACK_OFF_MS[attempts - 1];
      const retryAt = wait === undefined ? null : new Date(this.options.now().getTime() + wait);
      const lastError = error.message.slice(0, 500);
      if (retryAt) {
        await tx.update(MailEntity, { id }, { attempts, lastError, nextAttemptAt: retryAt.toISOString() });
        await this.options.jobs.enqueue(tx, JOB_KIND, id, retryAt);
      } else await tx.update(MailEntity, { id }, { state: 'failed', attempts, lastError, nextAttemptAt: null, text: withoutLinkTokens(mail.text) });
    });
    this.announce(id);
  }

  private async change(id: string, patch: Partial<MailRow>): Promise<void> {
    await this.options.db.write(async (tx) => {
      await tx.update(MailEntity, { id }, patch);
    });
    this.announce(id);
  }

  private announce(id: string): void {
    this.options.changes.announce({ topic: 'outbox', id });
  }
}

/** A 5xx answer about the receiver or the message stays so. About signing in to the mail host it does not: settings get mended. */
const isRefusedForGood = ({ responseCode, code }: SmtpError): boolean => responseCode !== undefined && responseCode >= 500 && (code === 'EENVELOPE' || code === 'EMESSAGE');

function orAborted<T>(work: Promise<T>, signal: AbortSignal): Promise<T> {
  return new Promise<T>((resolve, reject) => {
    const abort = () => reject(new Error('The server is stopping'));
    if (signal.aborted) return abort();
    signal.addEventListener('abort', abort, { once: true });
    work.then(resolve, reject).finally(() => signal.removeEventListener('abort', abort));
  });
}
