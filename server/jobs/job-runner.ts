import type { EntityManager } from 'typeorm';
import type { Database } from '../db/database';
import { JobEntity, type JobRow } from '../db/entities/record.entities';

export type JobHandler = (job: JobRow, renewLease: () => Promise<void>) => Promise<void>;
type Options = { db: Database; now: () => Date; newId: () => string; log: (line: string) => void };

const LEASE_MS = 60_000;
const POLL_MS = 2_000;
const MAX_ATTEMPTS = 2;

/**
 * Work outside requests. A job is claimed by one conditional update with a lease; a lease that ran out (a crash)
 * puts the job back, once. Handlers must be safe to run twice.
 */
export class JobRunner {
  private readonly handlers = new Map<string, { handle: JobHandler; onGivenUp: (job: JobRow) => Promise<void> }>();
  private readonly active = new Map<string, Promise<void>>();
  private timer: NodeJS.Timeout | null = null;
  private isStopped = true;

  constructor(private readonly options: Options) {}

  register(kind: string, handle: JobHandler, onGivenUp: (job: JobRow) => Promise<void> = async () => undefined): void {
    this.handlers.set(kind, { handle, onGivenUp });
  }

  /** Queues a job in the caller's transaction; `wake` after it has committed. */
  async enqueue(tx: EntityManager, kind: string, subjectId: string, runAfter: Date = this.options.now()): Promise<void> {
    await tx.insert(JobEntity, { id: this.options.newId(), kind, subjectId, state: 'queued', attempts: 0, leaseUntil: null, runAfter: runAfter.toISOString(), createdAt: this.options.now().toISOString(), lastError: '' });
  }

  /** Starts the loop. Jobs left running by a process that ended are put back at once: one process owns the database. */
  async start(): Promise<void> {
    this.isStopped = false;
    await this.options.db.write(async (tx) => {
      await tx.update(JobEntity, { state: 'running' }, { leaseUntil: new Date(0).toISOString() });
    });
    this.wake();
  }

  wake(): void {
    if (this.isStopped) return;
    if (this.timer) clearTimeout(this.timer);
    this.timer = setTimeout(() => void this.tick(), 0);
  }

  /** Stops claiming and waits for what runs. */
  async stop(): Promise<void> {
    this.isStopped = true;
    if (this.timer) clearTimeout(this.timer);
    await Promise.allSettled(this.active.values());
  }

  private async tick(): Promise<void> {
    try {
      for (let job = await this.claim(); job && !this.isStopped; job = await this.claim()) this.launch(job);
    } catch (error) {
      this.options.log(`job loop: ${error instanceof Error ? error.message : String(error)}`);
    }
    if (!this.isStopped) this.timer = setTimeout(() => void this.tick(), POLL_MS);
  }

  private launch(job: JobRow): void {
    const work = this.run(job).finally(() => {
      this.active.delete(job.id);
      this.wake();
    });
    this.active.set(job.id, work);
  }

  private claim(): Promise<JobRow | null> {
    const kinds = [...this.handlers.keys()];
    const now = this.options.now();
    return this.options.db.write(async (tx) => {
      const job = await tx
        .createQueryBuilder(JobEntity, 'job')
        .where('job.kind in (:...kinds)', { kinds: kinds.length ? kinds : [''] })
        .andWhere("((job.state = 'queued' and job.runAfter <= :now) or (job.state = 'running' and job.leaseUntil <= :now))", { now: now.toISOString() })
        .orderBy('job.runAfter', 'ASC')
        .addOrderBy('job.createdAt', 'ASC')
        .getOne();
      if (!job) return null;
      if (this.active.has(job.id)) return null;
      job.state = 'running';
      job.attempts += 1;
      job.leaseUntil = new Date(now.getTime() + LEASE_MS).toISOString();
      await tx.save(JobEntity, job);
      return job;
    });
  }

  private async run(job: JobRow): Promise<void> {
    const handler = this.handlers.get(job.kind)!;
    const renewLease = () =>
      this.options.db.write(async (tx) => {
        await tx.update(JobEntity, { id: job.id }, { leaseUntil: new Date(this.options.now().getTime() + LEASE_MS).toISOString() });
      });
    try {
      if (job.attempts > MAX_ATTEMPTS) throw new Error('interrupted twice');
      await handler.handle(job, renewLease);
      await this.finish(job, 'done', '');
    } catch (error) {
      const text = error instanceof Error ? error.message : String(error);
      this.options.log(`job ${job.kind} ${job.subjectId}: ${text}`);
      await this.finish(job, 'failed', text);
      await handler.onGivenUp(job);
    }
  }

  private finish(job: JobRow, state: 'done' | 'failed', lastError: string): Promise<void> {
    return this.options.db.write(async (tx) => {
      await tx.update(JobEntity, { id: job.id }, { state, lastError, leaseUntil: null });
    });
  }
}
