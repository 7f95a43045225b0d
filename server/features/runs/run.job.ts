import { performance } from 'node:perf_hooks';
import type { EstimateResult } from '../../../shared/schemas/estimate-result';
import type { RunState } from '../../../shared/schemas/incidents';
import type { RunRow } from '../../db/entities/incident.entities';
import type { Deps } from '../../deps';
import type { JobHandler } from '../../jobs/job-runner';
import { ENGINE_VERSION } from '../../solver/engine-version';
import { SolverInputError } from '../../solver/errors';
import { solveInWorker } from '../../workers/pool';
import { type RunProgress, RunRecorder } from './run-recorder';
import type { RunHead } from './run.repository';
import { RUN_JOB, RunService } from './run.service';

/** Runs take this many workers at once; previews and mail do not wait for them. */
const RUNS_AT_ONCE = 1;
const RENEW_EVERY_MS = 15_000;
/** A solve that sends nothing for so long is ended: it would hold up every run behind it. */
const SILENCE_LIMIT_MS = 300_000;
const SYSTEM = { id: null, name: 'Downreach' };

type Failure = NonNullable<RunRow['failure']>;
const interrupted: Failure = { code: 'interrupted', detail: 'The server stopped twice while this run was being solved. Run the revision again', errors: [] };
const silent: Failure = { code: 'silent', detail: 'The solver gave no sign for a long time and was stopped. Shorten the estimate, take fewer releases or receptors, and save another revision', errors: [] };
const internal = (id: string): Failure => ({ code: 'internal', detail: `Something went wrong on our side while this was being solved. Quote run ${id} when you report it`, errors: [] });

type Solve = typeof solveInWorker;

/** Solves queued runs in worker threads. */
export function registerRunJobs(deps: Deps, solve: Solve = solveInWorker, silenceLimitMs = SILENCE_LIMIT_MS): void {
  const work = new RunWork(deps, solve, silenceLimitMs);
  deps.jobs.register(RUN_JOB, {
    atOnce: RUNS_AT_ONCE,
    handle: (job, control) => work.solve(job.subjectId, control),
    onGivenUp: (job, reason) => work.giveUp(job.subjectId, reason === 'interrupted' ? interrupted : internal(job.subjectId)),
  });
}

class RunWork {
  private readonly runs: RunService;

  constructor(
    private readonly deps: Deps,
    private readonly solveDocument: Solve,
    private readonly silenceLimitMs: number,
  ) {
    this.runs = new RunService(deps);
  }

  async solve(id: string, { renewLease, signal: stopping }: Parameters<JobHandler>[1]): Promise<void> {
    const cancel = new AbortController();
    const unsubscribe = this.deps.changes.subscribe((event) => {
      if (event.topic === 'run' && event.id === id && event.state === 'cancelled') cancel.abort();
    });
    try {
      const run = await this.begin(id);
      if (!run) return;
      const { incident } = await this.runs.getScope(run.scenarioId);
      const outcome = await this.solveAndStore(run, incident.id, AbortSignal.any([cancel.signal, stopping]), renewLease);
      if (stopping.aborted) return await this.putBack(run);
      if (cancel.signal.aborted) return;
      await this.end(run, incident.id, outcome);
    } finally {
      unsubscribe();
    }
  }

  /** Takes the run; what an interrupted attempt had stored is dropped. Null when there is nothing to do any more. */
  private begin(id: string): Promise<RunHead | null> {
    const patch = { state: 'running' as const, startedAt: this.deps.now().toISOString(), progress: null, engineVersion: ENGINE_VERSION };
    return this.deps.db.write(async (tx) => {
      if (!(await this.runs.repository.move(tx, id, ['queued', 'running'], patch))) return null;
      await this.runs.repository.deleteMessages(tx, id);
      return this.runs.getHead(id);
    });
  }

  private async solveAndStore(run: RunHead, incidentId: string, signal: AbortSignal, renewLease: () => Promise<void>): Promise<{ result: EstimateResult; passing: number[] } | Failure> {
    this.runs.announce(run, incidentId);
    const lost = new AbortController();
    let renewedAt = performance.now();
    const recorder = new RunRecorder(
      async ({ firstPosition, messages, progress }) => {
        const isTaken = await this.store(run.id, firstPosition, messages, progress);
        if (isTaken) this.runs.announce({ ...run, progress }, incidentId);
        if (performance.now() - renewedAt > RENEW_EVERY_MS) {
          renewedAt = performance.now();
          await renewLease();
        }
        return isTaken;
      },
      (error) => lost.abort(error),
    );
    const silence = setTimeout(() => lost.abort(silent), this.silenceLimitMs);
    try {
      const onMessage: RunRecorder['add'] = (head, payload) => {
        silence.refresh();
        recorder.add(head, payload);
      };
      const result = await this.solveDocument(await this.runs.getDocument(run), { preview: false, onMessage, signal: AbortSignal.any([signal, lost.signal]) });
      await recorder.finish();
      lost.signal.throwIfAborted();
      return { result, passing: recorder.passing };
    } catch (error) {
      await recorder.finish();
      return this.failureOf(run, lost.signal.aborted ? lost.signal.reason : error, signal);
    } finally {
      clearTimeout(silence);
    }
  }

  private store(id: string, firstPosition: number, messages: Uint8Array[], progress: RunProgress | null): Promise<boolean> {
    return this.deps.db.write(async (tx) => {
      if (!(await this.runs.repository.move(tx, id, ['running'], { progress }))) return false;
      if (messages.length > 0) await this.runs.repository.addMessages(tx, id, firstPosition, messages);
      return true;
    });
  }

  private failureOf(run: RunHead, error: unknown, signal: AbortSignal): Failure {
    if (error === silent) return silent;
    if (error instanceof SolverInputError) return { code: 'cannot-be-estimated', detail: error.message, errors: error.errors };
    if (!signal.aborted) this.deps.log(`run ${run.id}: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`);
    return internal(run.id);
  }

  private async end(run: RunHead, incidentId: string, outcome: { result: EstimateResult; passing: number[] } | Failure): Promise<void> {
    const isDone = 'result' in outcome;
    const state: RunState = isDone ? 'done' : 'failed';
    const patch = { state, finishedAt: this.deps.now().toISOString(), progress: null, ...(isDone ? { result: outcome.result } : { failure: outcome }) };
    const isEnded = await this.deps.db.write(async (tx) => {
      if (!(await this.runs.repository.move(tx, run.id, ['queued', 'running'], patch))) return false;
      await this.runs.repository.deleteMessages(tx, run.id, isDone ? outcome.passing : undefined);
      await this.deps.audit.record(tx, SYSTEM, isDone ? 'run.done' : 'run.fail', { kind: 'run', id: run.id }, { scenarioId: run.scenarioId, revisionNumber: run.revisionNumber, ...(isDone ? {} : { code: outcome.code }) });
      return true;
    });
    if (isEnded) this.runs.announce({ ...run, ...patch }, incidentId);
  }

  async giveUp(id: string, failure: Failure): Promise<void> {
    const run = await this.runs.getHead(id);
    await this.end(run, (await this.runs.getScope(run.scenarioId)).incident.id, failure);
  }

  /** The server stops: the run waits again and is solved after the next start. */
  private async putBack(run: RunHead): Promise<never> {
    await this.deps.db.write(async (tx) => {
      await this.runs.repository.move(tx, run.id, ['running'], { state: 'queued', startedAt: null, progress: null });
    });
    throw new Error(`Run ${run.id} was put back because the server stops`);
  }
}
