import type { z } from 'zod';
import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { Revision, RevisionCreated, Scenario, ScenarioSummary, draftSaveSchema, revisionCreateSchema, scenarioCreateSchema } from '../../../shared/schemas/incidents';
import type { RevisionRow, ScenarioRow } from '../../db/entities/incident.entities';
import type { Deps } from '../../deps';
import { AppError } from '../../http/problems';
import type { Actor } from '../../http/routes';
import { checkDoor } from '../../solver/door';
import { SolverInputError } from '../../solver/errors';
import { IncidentService } from '../incidents/incident.service';
import { RunService } from '../runs/run.service';
import { documentHash } from './canonical-json';
import { presentDraft, presentRevision, presentScenario, presentScenarioSummary } from './scenario.presenter';
import { ScenarioRepository } from './scenario.repository';

export type DraftState = Pick<Scenario, 'draft' | 'draftVersion' | 'draftSavedAt' | 'draftSavedBy'>;

export class ScenarioService {
  private readonly repository: ScenarioRepository;
  private readonly incidents: IncidentService;
  private readonly runs: RunService;

  constructor(private readonly deps: Deps) {
    this.repository = new ScenarioRepository(deps.db);
    this.incidents = new IncidentService(deps);
    this.runs = new RunService(deps);
  }

  async create(actor: Actor, incidentId: string, input: z.output<typeof scenarioCreateSchema>): Promise<Scenario> {
    const now = this.deps.now().toISOString();
    const id = await this.deps.db.write(async (tx) => {
      await this.incidents.getOpen(incidentId);
      const draft = input.copyOfScenarioId === null ? input.draft : await this.draftToCopy(input.copyOfScenarioId);
      const row: ScenarioRow = { id: this.deps.newId(), incidentId, name: input.name, draft, draftVersion: 0, draftSavedAt: now, draftSavedBy: actor.name, createdAt: now };
      await this.repository.insert(tx, row);
      await this.incidents.logSystem(tx, incidentId, actor, `Scenario "${row.name}" added`);
      await this.deps.audit.record(tx, actor, 'scenario.create', { kind: 'scenario', id: row.id }, { incidentId, copyOfScenarioId: input.copyOfScenarioId });
      return row.id;
    });
    this.incidents.announce(actor, incidentId);
    return this.get(actor, id);
  }

  private async draftToCopy(scenarioId: string): Promise<ScenarioRow['draft']> {
    const scenario = await this.repository.find(scenarioId);
    if (scenario) return scenario.draft;
    const message = `There is no scenario ${scenarioId}: choose one of the list, or leave this empty`;
    throw new AppError('bad-input', message, { errors: [{ path: 'copyOfScenarioId', message }] });
  }

  async listOfIncident(incidentId: string): Promise<ScenarioSummary[]> {
    await this.incidents.getRow(incidentId);
    const scenarios = await this.repository.listOfIncident(incidentId);
    const ids = scenarios.map(({ id }) => id);
    const [counts, latest] = [await this.repository.countRevisions(ids), await this.runs.latestOf(ids)];
    return scenarios.map((scenario) => presentScenarioSummary(scenario, counts.get(scenario.id) ?? 0, latest.find(({ scenarioId }) => scenarioId === scenario.id)));
  }

  async get(actor: Actor, id: string): Promise<Scenario> {
    const scenario = await this.getRow(id);
    return presentScenario(scenario, await this.incidents.getRow(scenario.incidentId), await this.repository.listRevisions(id), actor);
  }

  async rename(actor: Actor, id: string, name: string): Promise<Scenario> {
    const scenario = await this.deps.db.write(async (tx) => {
      const before = await this.getEditable(id);
      await this.repository.rename(tx, id, name);
      await this.incidents.logSystem(tx, before.incidentId, actor, `Scenario "${before.name}" renamed to "${name}"`);
      await this.deps.audit.record(tx, actor, 'scenario.rename', { kind: 'scenario', id }, { from: before.name, to: name });
      return before;
    });
    this.announce(actor, scenario);
    return this.get(actor, id);
  }

  /** Keeps work in progress. Typing is not audited stroke by stroke; that another person took up the draft is. */
  async saveDraft(actor: Actor, id: string, { draft, draftVersion }: z.output<typeof draftSaveSchema>): Promise<DraftState> {
    const patch = { draft, draftSavedAt: this.deps.now().toISOString(), draftSavedBy: actor.name };
    const before = await this.deps.db.write(async (tx) => {
      const scenario = await this.getEditable(id);
      if (!(await this.repository.saveDraft(tx, id, draftVersion, patch))) throw staleDraft(scenario, draftVersion);
      if (scenario.draftVersion === 0 || scenario.draftSavedBy !== actor.name) await this.deps.audit.record(tx, actor, 'scenario.draft', { kind: 'scenario', id }, { from: scenario.draftSavedBy });
      return scenario;
    });
    this.announce(actor, before);
    return presentDraft({ ...before, ...patch, draftVersion: draftVersion + 1 });
  }

  /** Saves a numbered revision for good and queues its run. */
  async saveRevision(actor: Actor, id: string, input: z.output<typeof revisionCreateSchema>): Promise<RevisionCreated> {
    assertEstimable(input.document);
    const { scenario, revision, run } = await this.deps.db.write(async (tx) => {
      const scenario = await this.getEditable(id);
      if (scenario.draftVersion !== input.draftVersion) throw staleDraft(scenario, input.draftVersion);
      const number = await this.repository.nextNumber(tx, id);
      const revision: RevisionRow = { id: this.deps.newId(), scenarioId: id, number, document: input.document, documentHash: documentHash(input.document), note: input.note, savedAt: this.deps.now().toISOString(), savedBy: actor.name };
      await this.repository.insertRevision(tx, revision);
      const run = await this.runs.queue(tx, actor, revision);
      await this.incidents.logSystem(tx, scenario.incidentId, actor, `Revision ${number} of scenario "${scenario.name}" saved`);
      await this.deps.audit.record(tx, actor, 'revision.create', { kind: 'revision', id: revision.id }, { scenarioId: id, number, documentHash: revision.documentHash });
      return { scenario, revision, run };
    });
    this.announce(actor, scenario);
    this.runs.announce(run, scenario.incidentId);
    this.deps.jobs.wake();
    return { number: revision.number, runId: run.id };
  }

  async getRevision(scenarioId: string, number: number): Promise<Revision> {
    await this.getRow(scenarioId);
    const revision = await this.repository.findRevision(scenarioId, number);
    if (!revision) throw new AppError('not-found', `This scenario has no revision ${number}`);
    return presentRevision(revision);
  }

  listUnsavedOf(actor: Actor): Promise<Pick<ScenarioRow, 'id' | 'name'>[]> {
    return this.repository.listUnsaved(actor.name);
  }

  async getRow(id: string): Promise<ScenarioRow> {
    const scenario = await this.repository.find(id);
    if (!scenario) throw new AppError('not-found', `There is no scenario ${id}`);
    return scenario;
  }

  private async getEditable(id: string): Promise<ScenarioRow> {
    const scenario = await this.getRow(id);
    await this.incidents.getOpen(scenario.incidentId);
    return scenario;
  }

  private announce(actor: Actor, scenario: ScenarioRow): void {
    this.deps.changes.announce({ topic: 'scenario', id: scenario.id, incidentId: scenario.incidentId, by: actor.name });
  }
}

/** A revision is for good, so it is held to the solver's door before it is stored. */
function assertEstimable(document: EstimateDocument): void {
  try {
    checkDoor(document);
  } catch (error) {
    if (!(error instanceof SolverInputError)) throw error;
    throw new AppError('cannot-be-estimated', error.message, { errors: error.errors.map(({ path, message }) => ({ path: `document.${path}`, message })) });
  }
}

const staleDraft = (scenario: ScenarioRow, startedFrom: number): AppError =>
  new AppError('stale-version', `${scenario.draftSavedBy} has changed this scenario since (version ${scenario.draftVersion}, yours started from ${startedFrom}): compare both, then keep one`, { current: presentDraft(scenario) });
