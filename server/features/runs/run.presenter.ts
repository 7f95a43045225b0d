import { allows } from '../../../shared/permissions';
import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { Run, RunState, RunSummary } from '../../../shared/schemas/incidents';
import type { RunRow } from '../../db/entities/incident.entities';
import type { Actor } from '../../http/routes';
import type { RunHead } from './run.repository';

export const isActive = (state: RunState): boolean => state === 'queued' || state === 'running';

export const presentRunSummary = (run: RunHead, actor: Actor): RunSummary => ({
  id: run.id,
  scenarioId: run.scenarioId,
  revisionNumber: run.revisionNumber,
  state: run.state,
  engineVersion: run.engineVersion,
  seed: run.seed,
  requestedBy: run.requestedBy,
  requestedAt: run.requestedAt,
  startedAt: run.startedAt,
  finishedAt: run.finishedAt,
  progress: run.progress,
  failure: run.failure,
  abilities: { cancel: isActive(run.state) && allows(actor.roles, 'run:cancel') },
});

export const presentRun = (run: RunRow, document: EstimateDocument, actor: Actor): Run => ({ ...presentRunSummary(run, actor), document, result: run.result });
