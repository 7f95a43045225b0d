import type { EntityManager } from 'typeorm';
import type { RunState } from '../../../shared/schemas/incidents';
import type { Database } from '../../db/database';
import { IncidentEntity, type IncidentRow, RevisionEntity, type RevisionRow, RunEntity, RunFrameEntity, type RunFrameRow, type RunRow, ScenarioEntity, type ScenarioRow } from '../../db/entities/incident.entities';

/** A run without its result, which may be megabytes. */
export type RunHead = Omit<RunRow, 'result'>;
const headColumns = {
  id: true, scenarioId: true, revisionId: true, revisionNumber: true, state: true, engineVersion: true, seed: true,
  requestedBy: true, requestedAt: true, startedAt: true, finishedAt: true, progress: true, failure: true,
} as const;

/** The scenario and incident a run belongs to. */
export type RunScope = { scenario: Pick<ScenarioRow, 'id' | 'name' | 'incidentId'>; incident: Pick<IncidentRow, 'id' | 'state' | 'utcOffset' | 'marking'> };

export class RunRepository {
  constructor(private readonly db: Database) {}

  find(id: string): Promise<RunRow | null> {
    return this.db.read.findOneBy(RunEntity, { id });
  }

  findHead(id: string): Promise<RunHead | null> {
    return this.db.read.findOne(RunEntity, { where: { id }, select: headColumns });
  }

  listOfScenario(scenarioId: string): Promise<RunHead[]> {
    return this.db.read.find(RunEntity, { where: { scenarioId }, select: headColumns, order: { requestedAt: 'DESC', id: 'DESC' } });
  }

  listInState(states: readonly RunState[]): Promise<RunHead[]> {
    return this.heads().where('run.state in (:...states)', { states: ['', ...states] }).getMany();
  }

  /** Runs of these people that failed and have no later run of the same scenario. */
  listFailedLast(requestedBy: string): Promise<RunHead[]> {
    return this.heads()
      .where("run.state = 'failed' and run.requestedBy = :requestedBy", { requestedBy })
      .andWhere('not exists (select 1 from runs later where later."scenarioId" = run."scenarioId" and later."requestedAt" > run."requestedAt")')
      .getMany();
  }

  /** The latest run of each scenario; `onlyDone` leaves out all others. */
  async latestOf(scenarioIds: readonly string[], onlyDone = false): Promise<{ id: string; scenarioId: string; state: RunState; revisionNumber: number }[]> {
    const query = this.db.read
      .createQueryBuilder(RunEntity, 'run')
      .select(['run.id as id', 'run.scenarioId as scenarioId', 'run.state as state', 'run.revisionNumber as revisionNumber'])
      // SQLite takes the plain columns from the row that holds the maximum.
      .addSelect('max(run.requestedAt)', 'latest')
      .where('run.scenarioId in (:...scenarioIds)', { scenarioIds: ['', ...scenarioIds] })
      .groupBy('run.scenarioId');
    if (onlyDone) query.andWhere("run.state = 'done'");
    return query.getRawMany();
  }

  async scopeOf(scenarioId: string): Promise<RunScope | null> {
    const scenario = await this.db.read.findOne(ScenarioEntity, { where: { id: scenarioId }, select: { id: true, name: true, incidentId: true } });
    const incident = scenario && (await this.db.read.findOneBy(IncidentEntity, { id: scenario.incidentId }));
    return scenario && incident ? { scenario, incident } : null;
  }

  findRevision(where: { id: string } | { scenarioId: string; number: number }): Promise<RevisionRow | null> {
    return this.db.read.findOneBy(RevisionEntity, where);
  }

  async insert(tx: EntityManager, row: RunRow): Promise<void> {
    await tx.insert(RunEntity, row as object);
  }

  /** Moves a run on if it still is in one of the states given; false where somebody else was faster. */
  async move(tx: EntityManager, id: string, from: readonly RunState[], patch: Partial<RunRow>): Promise<boolean> {
    const { affected } = await tx
      .createQueryBuilder()
      .update(RunEntity)
      .set(patch as object)
      .where('id = :id and state in (:...from)', { id, from })
      .execute();
    return affected === 1;
  }

  async addMessages(tx: EntityManager, runId: string, firstPosition: number, messages: readonly Uint8Array[]): Promise<void> {
    await tx.insert(RunFrameEntity, messages.map((message, i) => ({ runId, position: firstPosition + i, message: Buffer.from(message.buffer, message.byteOffset, message.byteLength) })));
  }

  async deleteMessages(tx: EntityManager, runId: string, positions?: readonly number[]): Promise<void> {
    const query = tx.createQueryBuilder().delete().from(RunFrameEntity).where('runId = :runId', { runId });
    if (positions) query.andWhere('position in (:...positions)', { positions: [-1, ...positions] });
    await query.execute();
  }

  messagesAfter(runId: string, position: number, count: number): Promise<RunFrameRow[]> {
    return this.db.read.createQueryBuilder(RunFrameEntity, 'frame').where('frame.runId = :runId and frame.position > :position', { runId, position }).orderBy('frame.position').take(count).getMany();
  }

  private heads() {
    return this.db.read.createQueryBuilder(RunEntity, 'run').select(Object.keys(headColumns).map((column) => `run.${column}`)).orderBy('run.requestedAt', 'DESC');
  }
}
