import type { EntityManager } from 'typeorm';
import type { Database } from '../../db/database';
import { RevisionEntity, type RevisionRow, ScenarioEntity, type ScenarioRow } from '../../db/entities/incident.entities';

export type RevisionHead = Pick<RevisionRow, 'scenarioId' | 'number' | 'savedAt' | 'savedBy' | 'note'> & { runId: string | null; runState: string | null };

export class ScenarioRepository {
  constructor(private readonly db: Database) {}

  find(id: string): Promise<ScenarioRow | null> {
    return this.db.read.findOneBy(ScenarioEntity, { id });
  }

  listOfIncident(incidentId: string): Promise<ScenarioRow[]> {
    return this.db.read.find(ScenarioEntity, { where: { incidentId }, order: { createdAt: 'ASC', id: 'ASC' } });
  }

  /** Drafts last typed by this person after the newest revision, in open incidents. */
  listUnsaved(savedBy: string): Promise<Pick<ScenarioRow, 'id' | 'name'>[]> {
    return this.db.read
      .createQueryBuilder(ScenarioEntity, 'scenario')
      .select(['scenario.id', 'scenario.name'])
      .where('scenario.draftSavedBy = :savedBy and scenario.draftVersion > 0', { savedBy })
      .andWhere('not exists (select 1 from revisions revision where revision."scenarioId" = scenario.id and revision."savedAt" >= scenario."draftSavedAt")')
      .andWhere(`exists (select 1 from incidents incident where incident.id = scenario."incidentId" and incident.state = 'open')`)
      .orderBy('scenario.draftSavedAt', 'DESC')
      .getMany();
  }

  async insert(tx: EntityManager, row: ScenarioRow): Promise<void> {
    await tx.insert(ScenarioEntity, row as object);
  }

  async rename(tx: EntityManager, id: string, name: string): Promise<void> {
    await tx.update(ScenarioEntity, { id }, { name });
  }

  /** Replaces the draft that is still at the version given, and raises the version; false where it is not. */
  async saveDraft(tx: EntityManager, id: string, draftVersion: number, patch: Pick<ScenarioRow, 'draft' | 'draftSavedAt' | 'draftSavedBy'>): Promise<boolean> {
    const { affected } = await tx.update(ScenarioEntity, { id, draftVersion }, { ...patch, draftVersion: draftVersion + 1 } as object);
    return affected === 1;
  }

  findRevision(scenarioId: string, number: number): Promise<RevisionRow | null> {
    return this.db.read.findOneBy(RevisionEntity, { scenarioId, number });
  }

  async countRevisions(scenarioIds: readonly string[]): Promise<Map<string, number>> {
    const rows = await this.db.read
      .createQueryBuilder(RevisionEntity, 'revision')
      .select(['revision.scenarioId as scenarioId', 'count(*) as count'])
      .where('revision.scenarioId in (:...scenarioIds)', { scenarioIds: ['', ...scenarioIds] })
      .groupBy('revision.scenarioId')
      .getRawMany<{ scenarioId: string; count: number }>();
    return new Map(rows.map((row) => [row.scenarioId, row.count]));
  }

  /** Revisions without their documents, the newest first, each with its latest run. */
  listRevisions(scenarioId: string): Promise<RevisionHead[]> {
    return this.db.read
      .createQueryBuilder(RevisionEntity, 'revision')
      .leftJoin('runs', 'run', 'run."revisionId" = revision.id and not exists (select 1 from runs later where later."revisionId" = run."revisionId" and later.rowid > run.rowid)')
      .select(['revision.scenarioId as scenarioId', 'revision.number as number', 'revision.savedAt as savedAt', 'revision.savedBy as savedBy', 'revision.note as note', 'run.id as runId', 'run.state as runState'])
      .where('revision.scenarioId = :scenarioId', { scenarioId })
      .orderBy('revision.number', 'DESC')
      .getRawMany<RevisionHead>();
  }

  async insertRevision(tx: EntityManager, row: RevisionRow): Promise<void> {
    await tx.insert(RevisionEntity, row as object);
  }

  /** Number for the next revision. Read inside the transaction that takes it. */
  async nextNumber(tx: EntityManager, scenarioId: string): Promise<number> {
    return (await tx.countBy(RevisionEntity, { scenarioId })) + 1;
  }
}
