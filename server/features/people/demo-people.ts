import type { Role } from '../../../shared/permissions';
import type { PersonRow } from '../../db/entities/person.entity';
import type { Deps } from '../../deps';
import { hashPassword, passwordFits } from './password';
import { PersonRepository } from './person.repository';

type DemoPerson = { id: string; name: string; email: string; password: string; role: Role; roles: readonly Role[]; phone: string; licenceNumber: string };

const person = (role: Role, name: string, password: string, more: Partial<DemoPerson> = {}): DemoPerson => ({
  id: `demo-${name.toLowerCase().replace(/\W+/g, '-')}`,
  name,
  email: `${name.toLowerCase().replace(/\W+/g, '.')}@orlavane.example`,
  password,
  role,
  roles: [role],
  phone: '',
  licenceNumber: '',
  ...more,
});

/** Invented people of the invented district. Their passwords are printed: they exist in demonstration mode only. */
export const demoSignIns: readonly DemoPerson[] = [
  person('planner', 'Ilse Marrow', 'reeds along the weir', { phone: 'ext. 21 (invented)' }),
  person('engineer', 'Tobin Achterberg', 'nine gauges at dawn', { phone: 'ext. 34 (invented)', licenceNumber: 'PE 40-117 (invented)' }),
  person('supervisor', 'Ruth Okonjo-Vale', 'ink dries by morning', { phone: 'ext. 10 (invented)' }),
  person('coordinator', 'Mattis Quill', 'boots wet since six', { phone: 'ext. 52 (invented)' }),
  person('administrator', 'Noor Hallam', 'keys to every drawer', { phone: 'ext. 60 (invented)' }),
  person('planner', 'Wen Castellane', 'two hats one river', { roles: ['planner', 'engineer'], phone: 'ext. 22 (invented)' }),
];

/** Makes the demonstration's people where they are missing. Those that `retireDemoPeople` closed stay closed. */
export async function seedDemoPeople(deps: Deps): Promise<void> {
  const repository = new PersonRepository(deps.db);
  for (const { password, role: _role, ...demo } of demoSignIns) {
    if (await repository.find(demo.id)) continue;
    const passwordHash = await hashPassword(password);
    await deps.db.write((tx) => repository.insert(tx, { ...demo, roles: [...demo.roles], passwordHash, isActive: true, lastSignInAt: null, createdAt: deps.now().toISOString(), version: 1 }));
  }
}

/** Their passwords are known to the world: without demonstration mode nobody gets in with them, even on a folder that was a demonstration once. */
export async function retireDemoPeople(deps: Deps): Promise<void> {
  const repository = new PersonRepository(deps.db);
  for (const { id } of demoSignIns) {
    const known = await repository.find(id);
    if (!known || (!known.isActive && !known.passwordHash)) continue;
    await deps.db.write(async (tx) => {
      await repository.update(tx, id, known.version, { isActive: false, passwordHash: null });
      await repository.voidLinks(tx, id, deps.now().toISOString());
      await deps.audit.record(tx, { id: null, name: 'Downreach' }, 'person.retire-demo', { kind: 'person', id });
    });
    deps.sessions.destroyAllOf(id);
  }
}

const checked = new Map<string, Promise<boolean>>();

/** The sign-ins that still work: active people whose printed password has not been changed. Each hash is tried once. */
export async function offeredDemoSignIns(deps: Deps): Promise<readonly DemoPerson[]> {
  const people = new Map((await new PersonRepository(deps.db).listAbleToSignIn()).map((row) => [row.id, row]));
  const offers = await Promise.all(demoSignIns.map((demo) => stillFits(people.get(demo.id), demo)));
  return demoSignIns.filter((_demo, i) => offers[i]);
}

function stillFits(row: PersonRow | undefined, { password }: DemoPerson): Promise<boolean> | boolean {
  if (!row?.passwordHash) return false;
  const known = checked.get(row.passwordHash) ?? passwordFits(row.passwordHash, password);
  checked.set(row.passwordHash, known);
  return known;
}
