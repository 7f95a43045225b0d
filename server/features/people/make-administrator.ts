import type { PersonRow } from '../../db/entities/person.entity';
import type { Deps } from '../../deps';
import { OneTimeLinks } from './one-time-links';
import { PersonRepository } from './person.repository';
import { PersonService } from './person.service';

const operator = { id: null, name: 'command line' };

/**
 * Lets the owner of the installation in: takes the person in as administrator, or makes a known one an active administrator,
 * and gives a one-time link. Whoever may run commands beside the database owns it, so nobody else is asked.
 */
export async function makeAdministrator(deps: Deps, { email, name }: { email: string; name: string }): Promise<{ did: string; url: string; expiresAt: string }> {
  const repository = new PersonRepository(deps.db);
  return deps.db.write(async (tx) => {
    const known = await repository.findByEmail(email);
    const person = known ?? (await new PersonService(deps).insert(tx, { name, email, roles: ['administrator'], phone: '', licenceNumber: '' }));
    if (known && !isActiveAdministrator(known)) await repository.update(tx, known.id, known.version, { isActive: true, roles: [...new Set([...known.roles, 'administrator' as const])] });
    await deps.audit.record(tx, operator, 'person.make-administrator', { kind: 'person', id: person.id }, { email, isNew: !known });
    const link = await new OneTimeLinks(deps).issue(tx, person.id, person.passwordHash ? 'reset' : 'invitation');
    return { did: known ? describe(known) : `${name} (${email}) is now administrator.`, ...link };
  });
}

const isActiveAdministrator = (person: PersonRow): boolean => person.isActive && person.roles.includes('administrator');

const describe = (known: PersonRow): string =>
  isActiveAdministrator(known) ? `${known.name} (${known.email}) was administrator already.` : `${known.name} (${known.email}) was known here and is now an active administrator.`;
