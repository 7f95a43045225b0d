import type { EntityManager } from 'typeorm';
import type { Database } from '../../db/database';
import type { PersonRow } from '../../db/entities/person.entity';
import { AppError } from '../../http/problems';
import { PersonRepository } from './person.repository';

/** What signing in needs of the people: look-up, last sign-in, password. */
export class PersonAccess {
  private readonly repository: PersonRepository;

  constructor(db: Database) {
    this.repository = new PersonRepository(db);
  }

  findByEmail(email: string): Promise<PersonRow | null> {
    return this.repository.findByEmail(email);
  }

  async get(id: string): Promise<PersonRow> {
    const person = await this.repository.find(id);
    if (!person) throw new AppError('not-found', `There is no person ${id}`);
    return person;
  }

  noteSignIn(tx: EntityManager, id: string, at: string): Promise<void> {
    return this.repository.patch(tx, id, { lastSignInAt: at });
  }

  /** Stores a new password's hash; links that were open for the old one stop working. */
  async storePassword(tx: EntityManager, id: string, passwordHash: string, at: string): Promise<void> {
    await this.repository.patch(tx, id, { passwordHash });
    await this.repository.voidLinks(tx, id, at);
  }
}
