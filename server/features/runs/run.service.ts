import type { EntityManager } from 'typeorm';
import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { Run, RunSummary } from '../../../shared/schemas/incidents';
import type { RevisionRow, RunRow } from '../../db/entities/incident.entities';
import type { Deps } from '../../deps';
import { AppError } from '../../http/problems';
import type { Actor } from '../../http/routes';
import { ENGINE_VERSION } from '../../solver/engine-version';
import type { ExportInput } from './run-export';
import { isActive, presentRun, presentRunSummary } from './run.presenter';
import { type RunHead, RunRepository, type RunScope } from './run.repository';

export const RUN_JOB = 'run';

export class RunService {
  readonly repository: RunRepository;

  constructor(private readonly deps: Deps) {
    this.repository = new RunRepository(deps.db);
  }

  /** Stores a run and its job in the caller's transaction; call `announce` once that has committed. */
  async queue(tx: EntityManager, actor: Actor, revision: Pick<RevisionRow, 'id' | 'scenarioId' | 'number' | 'document'>): Promise<RunRow> {
    const run: RunRow = {
      id: this.deps.newId(),
      scenarioId: revision.scenarioId,
      revisionId: revision.id,
      revisionNumber: revision.number,
      state: 'queued',
      engineVersion: ENGINE_VERSION,
      seed: revision.document.seed,
      requestedBy: actor.name,
      requestedAt: this.deps.now().toISOString(),
      startedAt: null,
      finishedAt: null,
      progress: null,
      failure: null,
      result: null,
    };
    await this.repository.insert(tx, run);
    await this.deps.jobs.enqueue(tx, RUN_JOB, run.id);
    await this.deps.audit.record(tx, actor, 'run.create', { kind: 'run', id: run.id }, { scenarioId: run.scenarioId, revisionNumber: run.revisionNumber });
    return run;
  }

  announce(run: RunHead, incidentId: string): void {
    this.deps.changes.announce({ topic: 'run', id: run.id, scenarioId: run.scenarioId, incidentId, state: run.state, progress: run.progress });
  }

  /** Solves a saved revision again. */
  async create(actor: Actor, scenarioId: string, revisionNumber: number): Promise<RunSummary> {
    const { run, incidentId } = await this.deps.db.write(async (tx) => {
      const { incident } = await this.getScope(scenarioId);
      if (incident.state === 'closed') throw new AppError('wrong-state', 'The incident is closed: reopen it before running its scenarios');
      const revision = await this.repository.findRevision({ scenarioId, number: revisionNumber });
      if (!revision) throw new AppError('not-found', `This scenario has no revision ${revisionNumber}`);
      return { run: await this.queue(tx, actor, revision), incidentId: incident.id };
    });
    this.announce(run, incidentId);
    this.deps.jobs.wake();
    return presentRunSummary(run, actor);
  }

  async get(actor: Actor, id: string): Promise<Run> {
    const { run, document } = await this.getWithDocument(id);
    return presentRun(run, document, actor);
  }

  async getWithDocument(id: string): Promise<{ run: RunRow; document: EstimateDocument }> {
    const run = await this.repository.find(id);
    if (!run) throw missing(id);
    return { run, document: await this.getDocument(run) };
  }

  async getHead(id: string): Promise<RunHead> {
    const run = await this.repository.findHead(id);
    if (!run) throw missing(id);
    return run;
  }

  async getDocument(run: RunHead): Promise<EstimateDocument> {
    const revision = await this.repository.findRevision({ id: run.revisionId });
    if (!revision) throw new Error(`Run ${run.id} has lost its revision`);
    return revision.document;
  }

  /** A solved run with what an export needs. */
  async getSolved(id: string): Promise<ExportInput> {
    const { run, document } = await this.getWithDocument(id);
    if (!run.result) throw new AppError('wrong-state', `This run is ${run.state}: only a solved run can be exported`);
    const { incident } = await this.getScope(run.scenarioId);
    return { id, revisionNumber: run.revisionNumber, marking: incident.marking, document, result: run.result };
  }

  async list(actor: Actor, scenarioId: string): Promise<RunSummary[]> {
    await this.getScope(scenarioId);
    return (await this.repository.listOfScenario(scenarioId)).map((run) => presentRunSummary(run, actor));
  }

  /** The latest run of each scenario; `onlyDone` leaves out all others. */
  latestOf(scenarioIds: readonly string[], onlyDone = false): ReturnType<RunRepository['latestOf']> {
    return this.repository.latestOf(scenarioIds, onlyDone);
  }

  /** Runs that wait or are being solved. */
  listActive(): Promise<RunHead[]> {
    return this.repository.listInState(['queued', 'running']);
  }

  /** Failed runs of this person after which nobody has run the scenario again. */
  listFailedOf(actor: Actor): Promise<RunHead[]> {
    return this.repository.listFailedLast(actor.name);
  }

  /** Ends a run that waits or is being solved. What it had stored so far is dropped. */
  async cancel(actor: Actor, id: string): Promise<RunSummary> {
    const run = await this.deps.db.write(async (tx) => {
      const head = await this.getHead(id);
      if (!isActive(head.state)) throw new AppError('wrong-state', `This run is ${head.state}: only a run that waits or is being solved can be cancelled`);
      const patch = { state: 'cancelled' as const, finishedAt: this.deps.now().toISOString(), progress: null };
      await this.repository.move(tx, id, ['queued', 'running'], patch);
      await this.repository.deleteMessages(tx, id);
      await this.deps.audit.record(tx, actor, 'run.cancel', { kind: 'run', id }, { scenarioId: head.scenarioId, revisionNumber: head.revisionNumber });
      return { ...head, ...patch };
    });
    this.announce(run, (await this.getScope(run.scenarioId)).incident.id);
    return presentRunSummary(run, actor);
  }

  async getScope(scenarioId: string): Promise<RunScope> {
    const scope = await this.repository.scopeOf(scenarioId);
    if (!scope) throw new AppError('not-found', `There is no scenario ${scenarioId}`);
    return scope;
  }
}

const missing = (id: string): AppError => new AppError('not-found', `There is no run ${id}`);
