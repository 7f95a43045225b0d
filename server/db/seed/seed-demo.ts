import { daysFromCivil, civilFromDays } from '../../../shared/civil';
import type { Role } from '../../../shared/permissions';
import { registerNames } from '../../../shared/schemas/registers';
import type { Deps } from '../../deps';
import { IncidentService } from '../../features/incidents/incident.service';
import { seedDemoPeople } from '../../features/people/demo-people';
import { RegisterService } from '../../features/registers/register.service';
import { ScenarioService } from '../../features/scenarios/scenario.service';
import type { Actor } from '../../http/routes';
import { PersonEntity } from '../entities/person.entity';
import { districtRegisters } from './district';
import { districtIncidents, type SeedIncident } from './district/scenarios';

/** Days in the district's files are counted from this one; seeding moves them to the day at hand, so that some are always overdue. */
const WRITTEN_ON = '2026-12-01';
const DAY_MS = 86_400_000;

/** Fills an installation that has nobody in it with the invented district, its people and its incidents. Otherwise does nothing. */
export async function seedDemo(deps: Deps): Promise<void> {
  if (await deps.db.read.existsBy(PersonEntity, {})) return;
  await seedDemoPeople(deps);
  await seedRegisters(deps, await seedActor(deps, 'engineer'));
  const planner = await seedActor(deps, 'planner');
  for (const incident of districtIncidents) await seedIncident(deps, planner, incident);
}

/** One of the demonstration people, in whose name the district is set up. */
async function seedActor(deps: Deps, role: Role): Promise<Actor> {
  const people = await deps.db.read.find(PersonEntity, { order: { name: 'ASC' } });
  const person = people.find(({ roles }) => roles.includes(role));
  if (!person) throw new Error(`No demonstration person is ${role}`);
  return { id: person.id, name: person.name, email: person.email, roles: person.roles };
}

async function seedRegisters(deps: Deps, actor: Actor): Promise<void> {
  const registers = new RegisterService(deps);
  const shiftDays = Math.floor(deps.now().getTime() / DAY_MS) - dayNumber(WRITTEN_ON);
  const inOrder = registerNames.toSorted((a, b) => rank(a) - rank(b));
  for (const register of inOrder) {
    const entries = districtRegisters[register].map((entry) => ({ ...entry, lastCheckedOn: entry.lastCheckedOn && shifted(entry.lastCheckedOn, shiftDays) }));
    await registers.importAll(actor, register, entries);
  }
}

/** Waters and substances first: the others refer to them. */
const rank = (register: (typeof registerNames)[number]): number => (register === 'waters' || register === 'substances' ? 0 : 1);

async function seedIncident(deps: Deps, actor: Actor, { scenarios, ...incident }: SeedIncident): Promise<void> {
  const { id } = await new IncidentService(deps).create(actor, incident);
  const service = new ScenarioService(deps);
  for (const { name, note, document } of scenarios) {
    const scenario = await service.create(actor, id, { name, draft: document, copyOfScenarioId: null });
    await service.saveRevision(actor, scenario.id, { document, draftVersion: scenario.draftVersion, note });
  }
}

const dayNumber = (day: string): number => {
  const [year, month, date] = day.split('-').map(Number) as [number, number, number];
  return daysFromCivil({ year, month, day: date });
};

function shifted(day: string, byDays: number): string {
  const { year, month, day: date } = civilFromDays(dayNumber(day) + byDays);
  return [String(year).padStart(4, '0'), String(month).padStart(2, '0'), String(date).padStart(2, '0')].join('-');
}
