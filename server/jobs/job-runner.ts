import type { EntityManager } from 'typeorm';
import type { Database } from '../db/database';
import { JobEntity, type JobRow } from '../db/entities/record.entities';

/** `signal` is raised when the server stops: the handler ends soon and the job is put back. */
export type JobHandler = (job: JobRow, control: { renewLease: () => Promise<void>; signal: AbortSignal }) => Promise<void>;
export type JobKind = {
  handle: JobHandler;
  /** How many of this kind run at once; other kinds never wait for them. */
  atOnce?: number;
  /** Called when a job is given up after having been interrupted too often, or when its handler threw. */
  onGivenUp?: (job: JobRow, reason: 'interrupted' | 'failed') => Promise<void>;
};
type Options = { db: Database; now: () => Date; newId: () => string; log: (line: string) => void };

export const LEASE_MS = 60_000;
const POLL_MS = 2_000;
const MAX_ATTEMPTS = 2;

/**
 * Work outside requests. A job is claimed by one conditional update with a lease; a lease that ran out (a crash)
 * puts the job back, once. Handlers must be safe to run twice.
 */
export class JobRunner {
  private readonly kinds = new Map<string, JobKind>();
  private readonly active = new Map<string, { kind: string; work: Promise<void> }>();
  private readonly stopping = new AbortController();
  private timer: NodeJS.Timeout | null = null;
  private round: Promise<void> | null = null;
  private isWoken = false;
  private isRunning = false;

  constructor(private readonly options: Options) {}

  register(kind: string, handler: JobHandler | JobKind): void {
    this.kinds.set(kind, typeof handler === 'function' ? { handle: handler } : handler);
  }

  /** Queues a job in the caller's transaction; `wake` after it has committed. */
  async enqueue(tx: EntityManager, kind: string, subjectId: string, runAfter: Date = this.options.now()): Promise<void> {
    await tx.insert(JobEntity, { id: this.options.newId(), kind, subjectId, state: 'queued', attempts: 0, leaseUntil: null, runAfter: runAfter.toISOString(), createdAt: this.options.now().toISOString(), lastError: '' });
  }

  /** Starts the loop. Jobs left running by a process that ended are put back at once: one process owns the database. */
  async start(): Promise<void> {
    this.isRunning = true;
    await this.options.db.write(async (tx) => {
      await tx.update(JobEntity, { state: 'running' }, { leaseUntil: new Date(0).toISOString() });
    });
    this.wake();
  }

  /** Looks for work now. During a round it asks for another one. */
  wake(): void {
    if (!this.isRunning) return;
    this.isWoken = true;
    if (this.round) return;
    this.schedule(0);
  }

  /** Stops claiming, tells the handlers to end, waits for them and puts their jobs back. */
  async stop(): Promise<void> {
    this.isRunning = false;
    if (this.timer) clearTimeout(this.timer);
    this.stopping.abort();
    await this.round;
    await Promise.allSettled([...this.active.values()].map(({ work }) => work));
  }

  private schedule(delayMs: number): void {
    if (this.timer) clearTimeout(this.timer);
    this.timer = setTimeout(() => {
      this.round = this.lookForWork().finally(() => {
        this.round = null;
        if (this.isRunning) this.schedule(this.isWoken ? 0 : POLL_MS);
      });
    }, delayMs);
  }

  private async lookForWork(): Promise<void> {
    this.isWoken = false;
    try {
      while (this.isRunning && (await this.isAnyDue())) {
        const job = await this.options.db.write((tx) => this.claim(tx));
        if (!job) return;
        const work = this.run(job)
          .catch((error: unknown) => this.options.log(`job ${job.kind} ${job.subjectId}: ${messageOf(error)}`))
          .finally(() => {
            this.active.delete(job.id);
            this.wake();
          });
        this.active.set(job.id, { kind: job.kind, work });
      }
    } catch (error) {
      this.options.log(`job loop: ${messageOf(error)}`);
    }
  }

  /** A look without a transaction, so that an idle server writes nothing. */
  private isAnyDue(): Promise<boolean> {
    return this.due(this.options.db.read).getExists();
  }

  /** Jobs that may be claimed now, of kinds with room, the oldest first. */
  private due(manager: EntityManager) {
    const kinds = [...this.kinds].filter(([kind, { atOnce = 4 }]) => [...this.active.values()].filter((job) => job.kind === kind).length < atOnce).map(([kind]) => kind);
    return manager
      .createQueryBuilder(JobEntity, 'job')
      .where('job.kind in (:...kinds)', { kinds: ['', ...kinds] })
      .andWhere('job.id not in (:...active)', { active: ['', ...this.active.keys()] })
      .andWhere("((job.state = 'queued' and job.runAfter <= :now) or (job.state = 'running' and job.leaseUntil <= :now))", { now: this.options.now().toISOString() })
      .orderBy('job.runAfter', 'ASC')
      .addOrderBy('job.createdAt', 'ASC');
  }

  private async claim(tx: EntityManager): Promise<JobRow | null> {
    const job = await this.due(tx).getOne();
    if (!job) return null;
    const claimed = { state: 'running' as const, attempts: job.attempts + 1, leaseUntil: this.leaseEnd() };
    await tx.update(JobEntity, { id: job.id }, claimed);
    return { ...job, ...claimed };
  }

  private leaseEnd = (): string => new Date(this.options.now().getTime() + LEASE_MS).toISOString();

  private async run(job: JobRow): Promise<void> {
    const kind = this.kinds.get(job.kind)!;
    const { signal } = this.stopping;
    const renewLease = () => this.change(job, { leaseUntil: this.leaseEnd() });
    try {
      if (job.attempts > MAX_ATTEMPTS) return await this.giveUp(job, kind, 'interrupted');
      await kind.handle(job, { renewLease, signal });
      await this.change(job, { state: 'done', lastError: '', leaseUntil: null });
    } catch (error) {
      if (signal.aborted) return this.change(job, { state: 'queued', attempts: job.attempts - 1, leaseUntil: null });
      this.options.log(`job ${job.kind} ${job.subjectId}: ${messageOf(error)}`);
      await this.giveUp(job, kind, 'failed', messageOf(error));
    }
  }

  private async giveUp(job: JobRow, kind: JobKind, reason: 'interrupted' | 'failed', lastError: string = reason): Promise<void> {
    await this.change(job, { state: 'failed', lastError, leaseUntil: null });
    await kind.onGivenUp?.(job, reason);
  }

  private change(job: JobRow, patch: Partial<JobRow>): Promise<void> {
    return this.options.db.write(async (tx) => {
      await tx.update(JobEntity, { id: job.id }, patch);
    });
  }
}

const messageOf = (error: unknown): string => (error instanceof Error ? error.message : String(error));
