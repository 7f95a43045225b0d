import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type EstimateDocumentInput, estimateDocumentSchema } from '../../shared/schemas/estimate';
import { readConfig } from '../../server/config';
import type { Deps } from '../../server/deps';
import { createDeps } from '../../server/deps-create';
import { IncidentService } from '../../server/features/incidents/incident.service';
import { ScenarioService } from '../../server/features/scenarios/scenario.service';
import type { Actor } from '../../server/http/routes';

/** The server without its HTTP door, for tests of work behind requests. */
export const testFolder = (): { folder: string; remove: () => void } => {
  const folder = mkdtempSync(join(tmpdir(), 'downreach-deps-'));
  return { folder, remove: () => rmSync(folder, { recursive: true, force: true }) };
};

export const openDeps = (folder: string): Promise<Deps> => createDeps(readConfig({ DOWNREACH_DATA: folder, DOWNREACH_DEMO: 'off', DOWNREACH_LOG: 'silent' }));

export const somePlanner: Actor = { id: 'planner-1', name: 'Pat Planner', email: 'pat@example.org', roles: ['planner', 'supervisor'] };

/** An incident with one scenario and its first revision; its run is queued. */
export async function saveRevision(deps: Deps, document: EstimateDocumentInput): Promise<{ incidentId: string; scenarioId: string; runId: string }> {
  const { id: incidentId } = await new IncidentService(deps).create(somePlanner, { name: 'Test incident', marking: 'EXERCISE', summary: '', utcOffset: '-08:00' });
  const scenarios = new ScenarioService(deps);
  const { id: scenarioId } = await scenarios.create(somePlanner, incidentId, { name: 'Scenario 1', draft: {}, copyOfScenarioId: null });
  const { runId } = await scenarios.saveRevision(somePlanner, scenarioId, { document: estimateDocumentSchema.parse(document), draftVersion: 0, note: '' });
  return { incidentId, scenarioId, runId };
}
