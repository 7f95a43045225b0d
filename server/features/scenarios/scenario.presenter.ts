import { allows } from '../../../shared/permissions';
import type { Revision, Scenario, ScenarioSummary } from '../../../shared/schemas/incidents';
import type { IncidentRow, RevisionRow, ScenarioRow } from '../../db/entities/incident.entities';
import type { Actor } from '../../http/routes';
import type { RevisionHead } from './scenario.repository';

export const presentScenario = (scenario: ScenarioRow, incident: IncidentRow, revisions: readonly RevisionHead[], actor: Actor): Scenario => ({
  id: scenario.id,
  incidentId: incident.id,
  incidentName: incident.name,
  incidentNumber: incident.number,
  marking: incident.marking,
  utcOffset: incident.utcOffset,
  name: scenario.name,
  ...presentDraft(scenario),
  revisions: revisions.map(({ number, savedAt, savedBy, note, runId, runState }) => ({ number, savedAt, savedBy, note, runId, runState })),
  abilities: {
    edit: incident.state === 'open' && allows(actor.roles, 'scenario:write'),
    run: incident.state === 'open' && allows(actor.roles, 'run:create'),
  },
});

export const presentDraft = (scenario: ScenarioRow): Pick<Scenario, 'draft' | 'draftVersion' | 'draftSavedAt' | 'draftSavedBy'> => ({
  draft: scenario.draft,
  draftVersion: scenario.draftVersion,
  draftSavedAt: scenario.draftSavedAt,
  draftSavedBy: scenario.draftSavedBy,
});

export const presentScenarioSummary = (scenario: ScenarioRow, revisionCount: number, latestRun: { id: string; state: string } | undefined): ScenarioSummary => ({
  id: scenario.id,
  incidentId: scenario.incidentId,
  name: scenario.name,
  draftSavedAt: scenario.draftSavedAt,
  draftSavedBy: scenario.draftSavedBy,
  revisionCount,
  latestRunId: latestRun?.id ?? null,
  latestRunState: latestRun?.state ?? null,
});

export const presentRevision = (revision: RevisionRow): Revision => ({
  scenarioId: revision.scenarioId,
  number: revision.number,
  document: revision.document,
  documentHash: revision.documentHash,
  note: revision.note,
  savedAt: revision.savedAt,
  savedBy: revision.savedBy,
});
