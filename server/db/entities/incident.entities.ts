import { EntitySchema } from 'typeorm';
import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { EstimateResult } from '../../../shared/schemas/estimate-result';
import type { Marking, RunState } from '../../../shared/schemas/incidents';

export type IncidentRow = {
  id: string;
  number: string;
  name: string;
  marking: Marking;
  state: 'open' | 'closed';
  summary: string;
  utcOffset: string;
  openedAt: string;
  openedBy: string;
  closedAt: string | null;
  version: number;
};

export const IncidentEntity = new EntitySchema<IncidentRow>({
  name: 'Incident',
  tableName: 'incidents',
  columns: {
    id: { type: 'text', primary: true },
    number: { type: 'text', unique: true },
    name: { type: 'text' },
    marking: { type: 'text' },
    state: { type: 'text' },
    summary: { type: 'text', default: '' },
    utcOffset: { type: 'text' },
    openedAt: { type: 'text' },
    openedBy: { type: 'text' },
    closedAt: { type: 'text', nullable: true },
    version: { type: 'integer', default: 1 },
  },
});

export type LogEntryRow = { id: string; incidentId: string; at: string; occurredAt: string | null; by: string; text: string; kind: 'note' | 'system' };

export const LogEntryEntity = new EntitySchema<LogEntryRow>({
  name: 'LogEntry',
  tableName: 'log_entries',
  columns: {
    id: { type: 'text', primary: true },
    incidentId: { type: 'text' },
    at: { type: 'text' },
    occurredAt: { type: 'text', nullable: true },
    by: { type: 'text', name: 'writtenBy' },
    text: { type: 'text' },
    kind: { type: 'text' },
  },
  indices: [{ columns: ['incidentId', 'at'] }],
  foreignKeys: [{ target: 'incidents', columnNames: ['incidentId'], referencedColumnNames: ['id'], onDelete: 'CASCADE' }],
});

export type ScenarioRow = { id: string; incidentId: string; name: string; draft: Record<string, unknown>; draftVersion: number; draftSavedAt: string; draftSavedBy: string; createdAt: string };

export const ScenarioEntity = new EntitySchema<ScenarioRow>({
  name: 'Scenario',
  tableName: 'scenarios',
  columns: {
    id: { type: 'text', primary: true },
    incidentId: { type: 'text' },
    name: { type: 'text' },
    draft: { type: 'simple-json' },
    draftVersion: { type: 'integer', default: 0 },
    draftSavedAt: { type: 'text' },
    draftSavedBy: { type: 'text' },
    createdAt: { type: 'text' },
  },
  indices: [{ columns: ['incidentId'] }],
  foreignKeys: [{ target: 'incidents', columnNames: ['incidentId'], referencedColumnNames: ['id'], onDelete: 'CASCADE' }],
});

/** A saved state of a scenario: numbered, never changed. */
export type RevisionRow = { id: string; scenarioId: string; number: number; document: EstimateDocument; documentHash: string; note: string; savedAt: string; savedBy: string };

export const RevisionEntity = new EntitySchema<RevisionRow>({
  name: 'Revision',
  tableName: 'revisions',
  columns: {
    id: { type: 'text', primary: true },
    scenarioId: { type: 'text' },
    number: { type: 'integer' },
    document: { type: 'simple-json' },
    documentHash: { type: 'text' },
    note: { type: 'text', default: '' },
    savedAt: { type: 'text' },
    savedBy: { type: 'text' },
  },
  uniques: [{ columns: ['scenarioId', 'number'] }],
  foreignKeys: [{ target: 'scenarios', columnNames: ['scenarioId'], referencedColumnNames: ['id'], onDelete: 'CASCADE' }],
});

export type RunRow = {
  id: string;
  scenarioId: string;
  revisionId: string;
  revisionNumber: number;
  state: RunState;
  engineVersion: string;
  seed: number;
  requestedBy: string;
  requestedAt: string;
  startedAt: string | null;
  finishedAt: string | null;
  progress: { stage: string; done: number; of: number } | null;
  failure: { code: string; detail: string; errors: { path: string; message: string }[] } | null;
  result: EstimateResult | null;
};

export const RunEntity = new EntitySchema<RunRow>({
  name: 'Run',
  tableName: 'runs',
  columns: {
    id: { type: 'text', primary: true },
    scenarioId: { type: 'text' },
    revisionId: { type: 'text' },
    revisionNumber: { type: 'integer' },
    state: { type: 'text' },
    engineVersion: { type: 'text' },
    seed: { type: 'integer' },
    requestedBy: { type: 'text' },
    requestedAt: { type: 'text' },
    startedAt: { type: 'text', nullable: true },
    finishedAt: { type: 'text', nullable: true },
    progress: { type: 'simple-json', nullable: true },
    failure: { type: 'simple-json', nullable: true },
    result: { type: 'simple-json', nullable: true },
  },
  indices: [{ columns: ['scenarioId'] }, { columns: ['state'] }],
  foreignKeys: [
    { target: 'scenarios', columnNames: ['scenarioId'], referencedColumnNames: ['id'], onDelete: 'CASCADE' },
    { target: 'revisions', columnNames: ['revisionId'], referencedColumnNames: ['id'], onDelete: 'RESTRICT' },
  ],
});

/** Messages of a run's stream that carry a payload (frames and the envelope), as they came. */
export type RunFrameRow = { id: number; runId: string; position: number; message: Buffer };

export const RunFrameEntity = new EntitySchema<RunFrameRow>({
  name: 'RunFrame',
  tableName: 'run_frames',
  columns: {
    id: { type: 'integer', primary: true, generated: 'increment' },
    runId: { type: 'text' },
    position: { type: 'integer' },
    message: { type: 'blob' },
  },
  uniques: [{ columns: ['runId', 'position'] }],
  foreignKeys: [{ target: 'runs', columnNames: ['runId'], referencedColumnNames: ['id'], onDelete: 'CASCADE' }],
});
