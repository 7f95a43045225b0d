import { createTransport, type Transporter } from 'nodemailer';
import type { EntityManager } from 'typeorm';
import type { Config } from '../config';
import type { Database } from '../db/database';
import { MailEntity } from '../db/entities/record.entities';
import type { JobRunner } from '../jobs/job-runner';

type Options = { config: Config; db: Database; jobs: JobRunner; now: () => Date; newId: () => string };

const JOB_KIND = 'mail';
/** Waits before each further attempt, ms. */
const BACK_OFF_MS = [10_000, 60_000, 300_000, 1_800_000, 7_200_000];

/** Mails are queued in the transaction that causes them. Without SMTP settings they stay readable in the local outbox. */
export class MailQueue {
  private readonly transport: Transporter | null;

  constructor(private readonly options: Options) {
    const { smtpUrl } = options.config;
    this.transport = smtpUrl ? createTransport(smtpUrl, { from: options.config.mailFrom }) : null;
    options.jobs.register(JOB_KIND, (job) => this.deliver(job.subjectId));
  }

  async enqueue(tx: EntityManager, mail: { to: string; subject: string; text: string }): Promise<string> {
    const id = this.options.newId();
    const state = this.transport ? 'queued' : 'local';
    await tx.insert(MailEntity, { id, ...mail, state, attempts: 0, nextAttemptAt: null, lastError: '', createdAt: this.options.now().toISOString(), sentAt: null });
    if (this.transport) await this.options.jobs.enqueue(tx, JOB_KIND, id);
    return id;
  }

  private async deliver(id: string): Promise<void> {
    const mail = await this.options.db.read.findOneBy(MailEntity, { id });
    if (!mail || mail.state === 'sent' || !this.transport) return;
    try {
      await this.transport.sendMail({ to: mail.to, subject: mail.subject, text: mail.text, messageId: `<${mail.id}@downreach>` });
      await this.options.db.write(async (tx) => {
        await tx.update(MailEntity, { id }, { state: 'sent', sentAt: this.options.now().toISOString(), attempts: mail.attempts + 1, lastError: '' });
      });
    } catch (error) {
      await this.recordFailure(id, mail.attempts + 1, error as Error & { responseCode?: number });
    }
  }

  private async recordFailure(id: string, attempts: number, error: Error & { responseCode?: number }): Promise<void> {
    const isRefused = error.responseCode !== undefined && error.responseCode >= 500;
    const wait = BACK_OFF_MS[attempts - 1];
    const retryAt = isRefused || wait === undefined ? null : new Date(this.options.now().getTime() + wait);
    await this.options.db.write(async (tx) => {
      await tx.update(MailEntity, { id }, { state: retryAt ? 'queued' : 'failed', attempts, lastError: error.message.slice(0, 500), nextAttemptAt: retryAt?.toISOString() ?? null });
      if (retryAt) await this.options.jobs.enqueue(tx, JOB_KIND, id, retryAt);
    });
  }
}
