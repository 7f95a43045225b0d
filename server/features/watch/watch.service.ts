import { allows, registerWriteActions } from '../../../shared/permissions';
import { type Incident, type Watch, markings } from '../../../shared/schemas/incidents';
import { type RegisterName, registerNames, staleAfterDays, staleAfterWords } from '../../../shared/schemas/registers';
import type { Deps } from '../../deps';
import type { Actor } from '../../http/routes';
import { IncidentService } from '../incidents/incident.service';
import { RunService } from '../runs/run.service';
import { ScenarioService } from '../scenarios/scenario.service';
import { WatchRepository } from './watch.repository';

type Waiting = Watch['waiting'][number];

const entryWords: Record<RegisterName, [one: string, many: string]> = {
  waters: ['water', 'waters'],
  receptors: ['receptor', 'receptors'],
  sources: ['source', 'sources'],
  substances: ['substance', 'substances'],
  stations: ['station', 'stations'],
};

export class WatchService {
  private readonly repository: WatchRepository;
  private readonly incidents: IncidentService;
  private readonly scenarios: ScenarioService;
  private readonly runs: RunService;

  constructor(private readonly deps: Deps) {
    this.repository = new WatchRepository(deps.db);
    this.incidents = new IncidentService(deps);
    this.scenarios = new ScenarioService(deps);
    this.runs = new RunService(deps);
  }

  async get(actor: Actor): Promise<Watch> {
    const canRead = allows(actor.roles, 'incident:read');
    return {
      incidents: canRead ? byUrgency(await this.incidents.list(actor, 'open')) : [],
      waiting: [...(canRead ? [...(await this.failedRuns(actor)), ...(await this.unsavedDrafts(actor))] : []), ...(await this.failedMails(actor)), ...(await this.staleEntries(actor))],
      runningRuns: canRead ? await this.activeRuns() : [],
      serverTime: this.deps.now().toISOString(),
    };
  }

  private async failedRuns(actor: Actor): Promise<Waiting[]> {
    return Promise.all(
      (await this.runs.listFailedOf(actor)).map(async (run) => {
        const { scenario } = await this.runs.getScope(run.scenarioId);
        return { kind: 'failed-run' as const, text: `The run of "${scenario.name}", revision ${run.revisionNumber}, failed: ${run.failure?.detail ?? 'no reason given'}`, href: `/scenarios/${scenario.id}?run=${run.id}`, count: 1 };
      }),
    );
  }

  private async unsavedDrafts(actor: Actor): Promise<Waiting[]> {
    if (!allows(actor.roles, 'scenario:write')) return [];
    return (await this.scenarios.listUnsavedOf(actor)).map(({ id, name }) => ({ kind: 'unsaved-draft', text: `"${name}" has changes of yours that no revision holds`, href: `/scenarios/${id}`, count: 1 }));
  }

  private async failedMails(actor: Actor): Promise<Waiting[]> {
    const count = allows(actor.roles, 'outbox:read') ? await this.repository.countFailedMails() : 0;
    return count === 0 ? [] : [{ kind: 'failed-mail', text: count === 1 ? '1 mail could not be delivered' : `${count} mails could not be delivered`, href: '/office/outbox', count }];
  }

  private async staleEntries(actor: Actor): Promise<Waiting[]> {
    const registers = registerNames.filter((register) => allows(actor.roles, registerWriteActions[register]));
    const counts = await Promise.all(registers.map((register) => this.repository.countStale(register, this.dayBefore(staleAfterDays[register]))));
    return registers.flatMap((register, i): Waiting[] => {
      const count = counts[i]!;
      const [one, many] = entryWords[register];
      return count === 0 ? [] : [{ kind: 'stale-register', text: `${count} ${count === 1 ? one : many} not checked within ${staleAfterWords(register)}`, href: `/${register}?stale=1`, count }];
    });
  }

  private dayBefore(days: number): string {
    return new Date(this.deps.now().getTime() - days * 86_400_000).toISOString().slice(0, 10);
  }

  private async activeRuns(): Promise<Watch['runningRuns']> {
    return Promise.all(
      (await this.runs.listActive()).map(async (run) => {
        const { scenario } = await this.runs.getScope(run.scenarioId);
        return { runId: run.id, scenarioId: scenario.id, scenarioName: scenario.name, state: run.state, done: run.progress?.done ?? 0, of: run.progress?.of ?? 0 };
      }),
    );
  }
}

/** Real incidents before exercises before planning; within each, the next arrival first. */
const byUrgency = (incidents: readonly Incident[]): Incident[] => {
  const next = (incident: Incident) => Date.parse(incident.nextArrivals[0]?.earliestAt ?? '') || Number.POSITIVE_INFINITY;
  const compare = (a: number, b: number) => (a === b ? 0 : a < b ? -1 : 1);
  return incidents.toSorted((a, b) => compare(markings.indexOf(a.marking), markings.indexOf(b.marking)) || compare(next(a), next(b)));
};
