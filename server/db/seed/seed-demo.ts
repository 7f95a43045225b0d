import { civilFromDays, daysFromCivil, isoWithOffset } from '../../../shared/civil';
import type { Role } from '../../../shared/permissions';
import { registerNames } from '../../../shared/schemas/registers';
import type { Deps } from '../../deps';
import { IncidentService } from '../../features/incidents/incident.service';
import { demoSignIns, seedDemoPeople } from '../../features/people/demo-people';
import { RegisterService } from '../../features/registers/register.service';
import { ScenarioService } from '../../features/scenarios/scenario.service';
import type { Actor } from '../../http/routes';
import { IncidentEntity } from '../entities/incident.entities';
import { PersonEntity } from '../entities/person.entity';
import { RegisterItemEntity } from '../entities/register.entities';
import { districtRegisters } from './district';
import { districtIncidents, type SeedIncident } from './district/scenarios';

/** Days in the district's files are counted from this one; seeding moves them to the day at hand, so that some are always overdue. */
const WRITTEN_ON = '2026-12-01';
const DAY_MS = 86_400_000;

/**
 * Fills an installation that has nobody in it with the invented district, its people and its incidents, and takes up again
 * where an earlier start was cut off. An installation of other people is left alone.
 */
export async function seedDemo(deps: Deps): Promise<void> {
  const demoIds = new Set(demoSignIns.map(({ id }) => id));
  const people = await deps.db.read.find(PersonEntity);
  if (people.length > 0 && !people.some(({ id }) => demoIds.has(id))) return;
  await seedDemoPeople(deps);
  if (!(await deps.db.read.existsBy(RegisterItemEntity, {}))) await seedRegisters(deps, await seedActor(deps, 'engineer'));
  if (await deps.db.read.existsBy(IncidentEntity, {})) return;
  const planner = await seedActor(deps, 'planner');
  for (const incident of districtIncidents) await seedIncident(deps, planner, incident);
}

/** One of the demonstration people, in whose name the district is set up. */
async function seedActor(deps: Deps, role: Role): Promise<Actor> {
  const demo = demoSignIns.find((candidate) => candidate.role === role)!;
  const person = await deps.db.read.findOneByOrFail(PersonEntity, { id: demo.id });
  return { id: person.id, name: person.name, email: person.email, roles: person.roles };
}

async function seedRegisters(deps: Deps, actor: Actor): Promise<void> {
  const registers = new RegisterService(deps);
  const shiftDays = Math.floor(deps.now().getTime() / DAY_MS) - dayNumber(WRITTEN_ON);
  const inOrder = registerNames.toSorted((a, b) => rank(a) - rank(b));
  await deps.db.write(async () => {
    for (const register of inOrder) {
      const entries = districtRegisters[register].map((entry) => ({ ...entry, lastCheckedOn: entry.lastCheckedOn && shifted(entry.lastCheckedOn, shiftDays) }));
      await registers.importAll(actor, register, entries);
    }
  });
}

/** Waters and substances first: the others refer to them. */
const rank = (register: (typeof registerNames)[number]): number => (register === 'waters' || register === 'substances' ? 0 : 1);

async function seedIncident(deps: Deps, actor: Actor, { scenarios, startedMinutesAgo, ...incident }: SeedIncident): Promise<void> {
  const { id } = await new IncidentService(deps).create(actor, incident);
  const service = new ScenarioService(deps);
  for (const scenario of scenarios) {
    const { name, note } = scenario;
    const document = startedMinutesAgo === undefined ? scenario.document : { ...scenario.document, startAt: startedAgo(deps, startedMinutesAgo, incident.utcOffset) };
    const made = await service.create(actor, id, { name, draft: document, copyOfScenarioId: null });
    await service.saveRevision(actor, made.id, { document, draftVersion: made.draftVersion, note });
  }
}

/** An instant some minutes ago, on a full five minutes, so that the exercise runs while somebody looks at it. */
const startedAgo = (deps: Deps, minutes: number, utcOffset: string): string => {
  const ms = deps.now().getTime() - minutes * 60_000;
  return isoWithOffset(ms - (ms % 300_000), utcOffset);
};

const dayNumber = (day: string): number => {
  const [year, month, date] = day.split('-').map(Number) as [number, number, number];
  return daysFromCivil({ year, month, day: date });
};

function shifted(day: string, byDays: number): string {
  const { year, month, day: date } = civilFromDays(dayNumber(day) + byDays);
  return [String(year).padStart(4, '0'), String(month).padStart(2, '0'), String(date).padStart(2, '0')].join('-');
}
