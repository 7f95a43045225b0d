import { allows } from '../../../shared/permissions';
import type { Incident, LogEntry, NextArrival } from '../../../shared/schemas/incidents';
import type { IncidentRow, LogEntryRow } from '../../db/entities/incident.entities';
import type { Actor } from '../../http/routes';

export const presentIncident = (incident: IncidentRow, extra: { scenarioCount: number; nextArrivals: NextArrival[] }, actor: Actor): Incident => {
  const isOpen = incident.state === 'open';
  return {
    id: incident.id,
    number: incident.number,
    name: incident.name,
    marking: incident.marking,
    state: incident.state,
    summary: incident.summary,
    utcOffset: incident.utcOffset,
    openedAt: incident.openedAt,
    openedBy: incident.openedBy,
    closedAt: incident.closedAt,
    version: incident.version,
    scenarioCount: extra.scenarioCount,
    nextArrivals: extra.nextArrivals,
    abilities: {
      update: isOpen && allows(actor.roles, 'incident:update'),
      /** Closing an open incident and reopening a closed one. */
      close: allows(actor.roles, 'incident:close'),
      addScenario: isOpen && allows(actor.roles, 'scenario:write'),
      log: isOpen && allows(actor.roles, 'log:write'),
    },
  };
};

export const presentLogEntry = (entry: LogEntryRow): LogEntry => ({ id: entry.id, at: entry.at, occurredAt: entry.occurredAt, by: entry.by, text: entry.text, kind: entry.kind });
