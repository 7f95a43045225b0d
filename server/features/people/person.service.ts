import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type { Person, personCreateSchema, personUpdateSchema } from '../../../shared/schemas/people';
import type { Database } from '../../db/database';
import type { PersonRow } from '../../db/entities/person.entity';
import type { Deps } from '../../deps';
import { AppError } from '../../http/problems';
import type { Actor } from '../../http/routes';
import { OneTimeLinks } from './one-time-links';
import { presentPerson } from './person.presenter';
import { PersonRepository } from './person.repository';

/** Who a session belongs to; null for visitors, unknown people and those who have been deactivated. */
export async function findActor(db: Database, personId: string | undefined): Promise<Actor | null> {
  const person = personId ? await new PersonRepository(db).find(personId) : null;
  return person?.isActive ? { id: person.id, name: person.name, email: person.email, roles: person.roles } : null;
}

type PersonUpdate = Omit<z.output<typeof personUpdateSchema>, 'version'>;

export class PersonService {
  private readonly repository: PersonRepository;
  private readonly links: OneTimeLinks;

  constructor(private readonly deps: Deps) {
    this.repository = new PersonRepository(deps.db);
    this.links = new OneTimeLinks(deps);
  }

  async list(): Promise<Person[]> {
    return (await this.repository.list()).map(presentPerson);
  }

  async get(id: string): Promise<Person> {
    return presentPerson(await this.getRow(id));
  }

  /** Takes a person in and mails the invitation. */
  async create(actor: Actor, input: z.output<typeof personCreateSchema>): Promise<Person> {
    const row = await this.deps.db.write(async (tx) => {
      const known = await this.repository.findByEmail(input.email);
      if (known) throw new AppError('duplicate', `${input.email} belongs to ${known.name}${known.isActive ? '' : ', who is deactivated: activate them instead'}`, { errors: [{ path: 'email', message: `Belongs to ${known.name} already` }] });
      const person = await this.insert(tx, input);
      await this.links.send(tx, person, 'invitation', actor.name);
      await this.record(tx, actor, 'person.create', person.id, { email: person.email, roles: person.roles });
      return person;
    });
    this.announce(actor, row.id, true);
    return presentPerson(row);
  }

  /** A new person without a password, in the caller's transaction. */
  async insert(tx: EntityManager, input: Pick<PersonRow, 'name' | 'email' | 'roles' | 'phone' | 'licenceNumber'>): Promise<PersonRow> {
    const row: PersonRow = { id: this.deps.newId(), ...input, roles: [...new Set(input.roles)], passwordHash: null, isActive: true, lastSignInAt: null, createdAt: this.deps.now().toISOString(), version: 1 };
    await this.repository.insert(tx, row);
    return row;
  }

  async update(actor: Actor, id: string, { version, ...input }: z.output<typeof personUpdateSchema>): Promise<Person> {
    const after: PersonUpdate = { ...input, roles: [...new Set(input.roles)] };
    const wasActive = await this.deps.db.write(async (tx) => {
      const before = await this.getRow(id);
      if (before.version !== version) throw staleVersion(before, version);
      await this.assertAdministratorRemains(before, after);
      await this.repository.update(tx, id, version, after);
      if (before.isActive && !after.isActive) await this.repository.voidLinks(tx, id, this.deps.now().toISOString());
      await this.record(tx, actor, 'person.update', id, changesOf(before, after));
      return before.isActive;
    });
    if (wasActive && !after.isActive) this.deps.sessions.destroyAllOf(id);
    this.announce(actor, id);
    return this.get(id);
  }

  /** Sends the invitation again, or a link for a new password to somebody who has one. */
  async invite(actor: Actor, id: string): Promise<void> {
    await this.deps.db.write(async (tx) => {
      const person = await this.getRow(id);
      if (!person.isActive) throw new AppError('wrong-state', `${person.name} is deactivated: activate them before sending a link`);
      const purpose = person.passwordHash ? 'reset' : 'invitation';
      await this.links.send(tx, person, purpose, actor.name);
      await this.record(tx, actor, 'person.invite', id, { purpose });
    });
    this.announce(actor, id, true);
  }

  /** Somebody must be left who can let people in: an active administrator with a password. */
  private async assertAdministratorRemains(before: PersonRow, after: PersonUpdate): Promise<void> {
    const held = before.isActive && before.roles.includes('administrator');
    const holds = after.isActive && after.roles.includes('administrator');
    if (!held || holds) return;
    const others = (await this.repository.listAbleToSignIn()).filter((person) => person.id !== before.id && person.roles.includes('administrator'));
    if (others.length > 0) return;
    const path = after.isActive ? 'roles' : 'isActive';
    throw new AppError('wrong-state', `${before.name} is the last administrator who can sign in: make somebody else administrator first`, { errors: [{ path, message: 'The last administrator stays: make somebody else administrator first' }] });
  }

  private async getRow(id: string): Promise<PersonRow> {
    const person = await this.repository.find(id);
    if (!person) throw new AppError('not-found', `There is no person ${id}`);
    return person;
  }

  private record(tx: EntityManager, actor: Actor, action: string, id: string, detail: Record<string, unknown>): Promise<void> {
    return this.deps.audit.record(tx, actor, action, { kind: 'person', id }, detail);
  }

  private announce(actor: Actor, id: string, hasMail = false): void {
    this.deps.jobs.wake();
    this.deps.changes.announce({ topic: 'person', id, by: actor.name });
    if (hasMail) this.deps.changes.announce({ topic: 'outbox', id, by: actor.name });
  }
}

const staleVersion = (before: PersonRow, version: number): AppError =>
  new AppError('stale-version', `${before.name} has been changed to version ${before.version} since you read version ${version}`, { current: presentPerson(before) });

/** What was changed, old and new, for the audit trail. */
function changesOf(before: PersonRow, after: PersonUpdate): Record<string, unknown> {
  const fields = Object.keys(after) as (keyof PersonUpdate)[];
  const changed = fields.filter((field) => JSON.stringify(before[field]) !== JSON.stringify(after[field]));
  return { name: before.name, changed: Object.fromEntries(changed.map((field) => [field, { from: before[field], to: after[field] }])) };
}
