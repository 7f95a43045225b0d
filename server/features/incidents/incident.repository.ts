import type { EntityManager } from 'typeorm';
import type { Database } from '../../db/database';
import { IncidentEntity, type IncidentRow, LogEntryEntity, type LogEntryRow, ScenarioEntity } from '../../db/entities/incident.entities';

export class IncidentRepository {
  constructor(private readonly db: Database) {}

  find(id: string): Promise<IncidentRow | null> {
    return this.db.read.findOneBy(IncidentEntity, { id });
  }

  list(state?: IncidentRow['state']): Promise<IncidentRow[]> {
    return this.db.read.find(IncidentEntity, { where: state ? { state } : {}, order: { openedAt: 'DESC', number: 'DESC' } });
  }

  /** The next number of a year. Read inside the transaction that takes it: units of work never overlap. */
  async nextNumber(tx: EntityManager, year: string): Promise<string> {
    const row = await tx
      .createQueryBuilder(IncidentEntity, 'incident')
      .select('max(cast(substr(incident.number, 6) as integer))', 'last')
      .where('incident.number like :pattern', { pattern: `${year}-%` })
      .getRawOne<{ last: number | null }>();
    return `${year}-${String((row?.last ?? 0) + 1).padStart(3, '0')}`;
  }

  async insert(tx: EntityManager, row: IncidentRow): Promise<void> {
    await tx.insert(IncidentEntity, row);
  }

  /** Changes an incident that is still at the version given, and raises the version; false where it is not. */
  async update(tx: EntityManager, id: string, version: number, patch: Partial<IncidentRow>): Promise<boolean> {
    const { affected } = await tx.update(IncidentEntity, { id, version }, { ...patch, version: version + 1 });
    return affected === 1;
  }

  async addLogEntry(tx: EntityManager, row: LogEntryRow): Promise<void> {
    await tx.insert(LogEntryEntity, row);
  }

  listLog(incidentId: string): Promise<LogEntryRow[]> {
    return this.db.read.createQueryBuilder(LogEntryEntity, 'entry').where('entry.incidentId = :incidentId', { incidentId }).orderBy('entry.at').addOrderBy('entry.rowid').getMany();
  }

  async scenarioNamesOf(incidentIds: readonly string[]): Promise<{ id: string; incidentId: string; name: string }[]> {
    return this.db.read
      .createQueryBuilder(ScenarioEntity, 'scenario')
      .select(['scenario.id', 'scenario.incidentId', 'scenario.name'])
      .where('scenario.incidentId in (:...incidentIds)', { incidentIds: ['', ...incidentIds] })
      .getMany();
  }
}
