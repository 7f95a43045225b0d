import type { NextArrival } from '../../../shared/schemas/incidents';
import type { IncidentRow } from '../../db/entities/incident.entities';
import type { RunService } from '../runs/run.service';
import { type RunArrivals, arrivalsOf, nextArrivals } from './arrivals';

const KEPT_RUNS = 500;
const known = new Map<string, RunArrivals>();

/** The coming arrivals of incidents, out of the newest finished run of each scenario. */
export async function arrivalsByIncident(runs: RunService, incidents: readonly Pick<IncidentRow, 'id' | 'utcOffset'>[], scenarios: readonly { id: string; incidentId: string; name: string }[], now: Date): Promise<Map<string, NextArrival[]>> {
  const scenarioOf = new Map(scenarios.map((scenario) => [scenario.id, scenario]));
  const byIncident = new Map<string, (RunArrivals & { scenarioName: string })[]>();
  for (const { id, scenarioId } of await runs.latestOf([...scenarioOf.keys()], true)) {
    const { incidentId, name } = scenarioOf.get(scenarioId)!;
    byIncident.set(incidentId, [...(byIncident.get(incidentId) ?? []), { ...(await arrivalsOfRun(runs, id)), scenarioName: name }]);
  }
  return new Map(incidents.map(({ id, utcOffset }) => [id, nextArrivals(id, utcOffset, byIncident.get(id) ?? [], now.getTime())]));
}

/** A finished run never changes: its result, which may be large, is read once. */
async function arrivalsOfRun(runs: RunService, runId: string): Promise<RunArrivals> {
  const kept = known.get(runId);
  if (kept) return kept;
  const { run, document } = await runs.getWithDocument(runId);
  const arrivals = run.result ? arrivalsOf(runId, run.scenarioId, document, run.result) : { runId, scenarioId: run.scenarioId, startMs: 0, arrivals: [] };
  if (known.size >= KEPT_RUNS) known.delete(known.keys().next().value!);
  known.set(runId, arrivals);
  return arrivals;
}
