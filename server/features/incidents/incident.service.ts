import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import { toOffsetIso } from '../../../shared/clock-time';
import type { Incident, LogEntry, incidentCreateSchema, incidentUpdateSchema, logEntryCreateSchema } from '../../../shared/schemas/incidents';
import type { IncidentRow, LogEntryRow } from '../../db/entities/incident.entities';
import type { Deps } from '../../deps';
import { AppError } from '../../http/problems';
import type { Actor } from '../../http/routes';
import { RunService } from '../runs/run.service';
import { arrivalsByIncident } from './arrival-book';
import { presentIncident, presentLogEntry } from './incident.presenter';
import { IncidentRepository } from './incident.repository';

export class IncidentService {
  private readonly repository: IncidentRepository;
  private readonly runs: RunService;

  constructor(private readonly deps: Deps) {
    this.repository = new IncidentRepository(deps.db);
    this.runs = new RunService(deps);
  }

  async create(actor: Actor, input: z.output<typeof incidentCreateSchema>): Promise<Incident> {
    const now = this.deps.now();
    const incident = await this.deps.db.write(async (tx) => {
      const year = toOffsetIso(now.getTime(), input.utcOffset).slice(0, 4);
      const row: IncidentRow = { id: this.deps.newId(), number: await this.repository.nextNumber(tx, year), ...input, state: 'open', openedAt: now.toISOString(), openedBy: actor.name, closedAt: null, version: 1 };
      await this.repository.insert(tx, row);
      await this.logSystem(tx, row.id, actor, `Incident ${row.number} opened as ${row.marking}`);
      await this.deps.audit.record(tx, actor, 'incident.create', { kind: 'incident', id: row.id }, { number: row.number, marking: row.marking });
      return row;
    });
    this.announce(actor, incident.id);
    return this.present(actor, incident);
  }

  async list(actor: Actor, state?: IncidentRow['state']): Promise<Incident[]> {
    return this.presentAll(actor, await this.repository.list(state));
  }

  async get(actor: Actor, id: string): Promise<Incident> {
    return this.present(actor, await this.getRow(id));
  }

  async update(actor: Actor, id: string, { version, ...input }: z.output<typeof incidentUpdateSchema>): Promise<Incident> {
    await this.deps.db.write(async (tx) => {
      const before = await this.getOpen(id);
      await this.change(tx, actor, before, version, input);
      const changed = (Object.keys(input) as (keyof typeof input)[]).filter((field) => before[field] !== input[field]);
      if (changed.includes('name')) await this.logSystem(tx, id, actor, `Renamed from "${before.name}" to "${input.name}"`);
      await this.deps.audit.record(tx, actor, 'incident.update', { kind: 'incident', id }, { changed });
    });
    this.announce(actor, id);
    return this.get(actor, id);
  }

  close(actor: Actor, id: string): Promise<Incident> {
    return this.moveTo(actor, id, 'closed', { text: 'Incident closed', action: 'incident.close' });
  }

  reopen(actor: Actor, id: string): Promise<Incident> {
    return this.moveTo(actor, id, 'open', { text: 'Incident reopened', action: 'incident.reopen' });
  }

  async log(id: string): Promise<LogEntry[]> {
    await this.getRow(id);
    return (await this.repository.listLog(id)).map(presentLogEntry);
  }

  async addLogEntry(actor: Actor, id: string, input: z.output<typeof logEntryCreateSchema>): Promise<LogEntry> {
    const entry: LogEntryRow = { id: this.deps.newId(), incidentId: id, at: this.deps.now().toISOString(), occurredAt: input.occurredAt, by: actor.name, text: input.text, kind: 'note' };
    await this.deps.db.write(async (tx) => {
      await this.getOpen(id);
      await this.repository.addLogEntry(tx, entry);
      await this.deps.audit.record(tx, actor, 'incident.log', { kind: 'incident', id }, { entryId: entry.id });
    });
    this.announce(actor, id);
    return presentLogEntry(entry);
  }

  /** An entry the product writes itself, in the transaction of what it tells. */
  async logSystem(tx: EntityManager, incidentId: string, actor: Pick<Actor, 'name'>, text: string): Promise<void> {
    await this.repository.addLogEntry(tx, { id: this.deps.newId(), incidentId, at: this.deps.now().toISOString(), occurredAt: null, by: actor.name, text, kind: 'system' });
  }

  async getRow(id: string): Promise<IncidentRow> {
    const incident = await this.repository.find(id);
    if (!incident) throw new AppError('not-found', `There is no incident ${id}`);
    return incident;
  }

  /** The incident, refused when it is closed: a closed incident does not change. */
  async getOpen(id: string): Promise<IncidentRow> {
    const incident = await this.getRow(id);
    if (incident.state === 'closed') throw new AppError('wrong-state', `Incident ${incident.number} is closed: reopen it before changing it`);
    return incident;
  }

  announce(actor: Actor, id: string): void {
    this.deps.changes.announce({ topic: 'incident', id, incidentId: id, by: actor.name });
  }

  private async moveTo(actor: Actor, id: string, state: IncidentRow['state'], record: { text: string; action: string }): Promise<Incident> {
    await this.deps.db.write(async (tx) => {
      const before = await this.getRow(id);
      if (before.state === state) throw new AppError('wrong-state', `Incident ${before.number} is ${state} already`);
      await this.change(tx, actor, before, before.version, { state, closedAt: state === 'closed' ? this.deps.now().toISOString() : null });
      await this.logSystem(tx, id, actor, record.text);
      await this.deps.audit.record(tx, actor, record.action, { kind: 'incident', id });
    });
    this.announce(actor, id);
    return this.get(actor, id);
  }

  private async change(tx: EntityManager, actor: Actor, before: IncidentRow, version: number, patch: Partial<IncidentRow>): Promise<void> {
    if (await this.repository.update(tx, before.id, version, patch)) return;
    throw new AppError('stale-version', `Incident ${before.number} has been changed to version ${before.version} since you read version ${version}`, { current: await this.present(actor, before) });
  }

  private async present(actor: Actor, incident: IncidentRow): Promise<Incident> {
    return (await this.presentAll(actor, [incident]))[0]!;
  }

  private async presentAll(actor: Actor, incidents: readonly IncidentRow[]): Promise<Incident[]> {
    const scenarios = await this.repository.scenarioNamesOf(incidents.map(({ id }) => id));
    const open = incidents.filter(({ state }) => state === 'open');
    const openIds = new Set(open.map(({ id }) => id));
    const arrivals = await arrivalsByIncident(this.runs, open, scenarios.filter(({ incidentId }) => openIds.has(incidentId)), this.deps.now());
    return incidents.map((incident) =>
      presentIncident(incident, { scenarioCount: scenarios.filter(({ incidentId }) => incidentId === incident.id).length, nextArrivals: arrivals.get(incident.id) ?? [] }, actor),
    );
  }
}
