import { z } from 'zod';
import { instantSchema, nameSchema, textSchema } from './basics';
import { estimateDocumentSchema } from './estimate';
import { estimateResultSchema } from './estimate-result';

export const markings = ['REAL', 'EXERCISE', 'PLANNING'] as const;
export const markingSchema = z.enum(markings);
export type Marking = z.infer<typeof markingSchema>;

/* ---------- incidents ---------- */

export const incidentCreateSchema = z.object({
  name: nameSchema,
  marking: markingSchema,
  summary: textSchema(2_000).default(''),
  /** UTC offset in which this incident's times are shown, for example "-08:00". */
  utcOffset: z.string().regex(/^[+-](0\d|1[0-4]):[0-5]\d$/, 'Give the offset as +hh:mm or -hh:mm').default('+00:00'),
});
export const incidentUpdateSchema = incidentCreateSchema.omit({ marking: true }).extend({ version: z.number().int().min(1) });
export const logEntryCreateSchema = z.object({ text: z.string().trim().min(1, 'Write something').max(4_000), occurredAt: instantSchema.nullable().default(null) });

export const logEntrySchema = z.object({ id: z.string(), at: z.string(), occurredAt: z.string().nullable(), by: z.string(), text: z.string(), kind: z.enum(['note', 'system']) });
export type LogEntry = z.infer<typeof logEntrySchema>;

/** One coming arrival, for the Watch page: clock times in ISO with offset. */
export const nextArrivalSchema = z.object({
  incidentId: z.string(),
  scenarioId: z.string(),
  scenarioName: z.string(),
  runId: z.string(),
  receptorCode: z.string(),
  receptorName: z.string(),
  verdict: z.string(),
  /** Rounded as everywhere (shared/format.ts): never later than reckoned. */
  earliestAt: z.string(),
  /** Null where only the high amount exceeds the action value. */
  likelyAt: z.string().nullable(),
  /** Latest time to begin closing: earliest arrival less the closing time; null where none is registered. */
  closeByAt: z.string().nullable(),
});
export type NextArrival = z.infer<typeof nextArrivalSchema>;

export const incidentSchema = z.object({
  id: z.string(),
  /** Running number with its year, for example 2031-004. */
  number: z.string(),
  name: z.string(),
  marking: markingSchema,
  state: z.enum(['open', 'closed']),
  summary: z.string(),
  utcOffset: z.string(),
  openedAt: z.string(),
  openedBy: z.string(),
  closedAt: z.string().nullable(),
  version: z.number().int(),
  scenarioCount: z.number().int(),
  nextArrivals: z.array(nextArrivalSchema),
  abilities: z.object({ update: z.boolean(), close: z.boolean(), addScenario: z.boolean(), log: z.boolean() }),
});
export type Incident = z.infer<typeof incidentSchema>;

/* ---------- scenarios ---------- */

/** A draft is kept as it is typed, so it may be unfinished: any JSON object up to the size limit. */
export const draftSchema = z.record(z.string(), z.unknown());
export const scenarioCreateSchema = z.object({ name: nameSchema, draft: draftSchema.default({}), copyOfScenarioId: z.string().max(64).nullable().default(null) });
export const scenarioRenameSchema = z.object({ name: nameSchema });
/** `draftVersion` is the one the editor started from; another one means somebody else has written since. */
export const draftSaveSchema = z.object({ draft: draftSchema, draftVersion: z.number().int().min(0) });
export const revisionCreateSchema = z.object({ document: estimateDocumentSchema, draftVersion: z.number().int().min(0), note: textSchema(500).default('') });

/** Answer of saving a revision: its number and the run that was queued with it. */
export const revisionCreatedSchema = z.object({ number: z.number().int(), runId: z.string() });
export type RevisionCreated = z.infer<typeof revisionCreatedSchema>;

export const revisionSchema = z.object({
  scenarioId: z.string(),
  number: z.number().int(),
  document: estimateDocumentSchema,
  /** SHA-256 of the document as canonical JSON, hexadecimal. */
  documentHash: z.string(),
  note: z.string(),
  savedAt: z.string(),
  savedBy: z.string(),
});
export type Revision = z.infer<typeof revisionSchema>;

export const revisionSummarySchema = z.object({ number: z.number().int(), savedAt: z.string(), savedBy: z.string(), note: z.string(), runId: z.string().nullable(), runState: z.string().nullable() });
export const scenarioSchema = z.object({
  id: z.string(),
  incidentId: z.string(),
  incidentName: z.string(),
  incidentNumber: z.string(),
  marking: markingSchema,
  utcOffset: z.string(),
  name: z.string(),
  draft: draftSchema,
  draftVersion: z.number().int(),
  draftSavedAt: z.string(),
  draftSavedBy: z.string(),
  revisions: z.array(revisionSummarySchema),
  abilities: z.object({ edit: z.boolean(), run: z.boolean() }),
});
export type Scenario = z.infer<typeof scenarioSchema>;
export const scenarioSummarySchema = scenarioSchema.pick({ id: true, incidentId: true, name: true, draftSavedAt: true, draftSavedBy: true }).extend({ revisionCount: z.number().int(), latestRunId: z.string().nullable(), latestRunState: z.string().nullable() });
export type ScenarioSummary = z.infer<typeof scenarioSummarySchema>;

/* ---------- runs ---------- */

export const runStates = ['queued', 'running', 'done', 'failed', 'cancelled'] as const;
export const runStateSchema = z.enum(runStates);
export type RunState = z.infer<typeof runStateSchema>;
/** Allowed moves; anything else is refused with wrong-state. */
export const runMoves: Record<RunState, readonly RunState[]> = {
  queued: ['running', 'cancelled', 'failed'],
  running: ['done', 'failed', 'cancelled', 'queued'],
  done: [],
  failed: [],
  cancelled: [],
};

export const runSchema = z.object({
  id: z.string(),
  scenarioId: z.string(),
  revisionNumber: z.number().int(),
  state: runStateSchema,
  engineVersion: z.string(),
  seed: z.number().int(),
  requestedBy: z.string(),
  requestedAt: z.string(),
  startedAt: z.string().nullable(),
  finishedAt: z.string().nullable(),
  progress: z.object({ stage: z.string(), done: z.number(), of: z.number() }).nullable(),
  failure: z.object({ code: z.string(), detail: z.string(), errors: z.array(z.object({ path: z.string(), message: z.string() })) }).nullable(),
  document: estimateDocumentSchema,
  result: estimateResultSchema.nullable(),
  abilities: z.object({ cancel: z.boolean() }),
});
export type Run = z.infer<typeof runSchema>;

/** A run as it stands in lists. */
export const runSummarySchema = runSchema.omit({ document: true, result: true });
export type RunSummary = z.infer<typeof runSummarySchema>;

/** POST /api/scenarios/:id/runs: solve a saved revision again. */
export const runCreateSchema = z.object({ revisionNumber: z.number().int().min(1, 'Revisions are numbered from 1') });

/* ---------- what waits, what changes ---------- */

export const watchSchema = z.object({
  incidents: z.array(incidentSchema),
  /** What waits for this person. */
  waiting: z.array(z.object({ kind: z.enum(['stale-register', 'unsaved-draft', 'failed-run', 'failed-mail']), text: z.string(), href: z.string(), count: z.number().int() })),
  runningRuns: z.array(z.object({ runId: z.string(), scenarioId: z.string(), scenarioName: z.string(), state: runStateSchema, done: z.number(), of: z.number() })),
  serverTime: z.string(),
});
export type Watch = z.infer<typeof watchSchema>;

/** Server-sent events on /api/events: what changed, so that pages ask again. */
export type ChangeEvent =
  | { topic: 'incident' | 'scenario' | 'register' | 'person' | 'outbox'; id: string; incidentId?: string; by?: string }
  | { topic: 'run'; id: string; scenarioId: string; incidentId: string; state: RunState; progress: { stage: string; done: number; of: number } | null };
