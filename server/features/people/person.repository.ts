import type { EntityManager } from 'typeorm';
import { IsNull, Not } from 'typeorm';
import type { Database } from '../../db/database';
import { OneTimeLinkEntity, type OneTimeLinkRow, PersonEntity, type PersonRow } from '../../db/entities/person.entity';

export class PersonRepository {
  constructor(private readonly db: Database) {}

  find(id: string): Promise<PersonRow | null> {
    return this.db.read.findOneBy(PersonEntity, { id });
  }

  findByEmail(email: string): Promise<PersonRow | null> {
    return this.db.read.findOneBy(PersonEntity, { email });
  }

  list(): Promise<PersonRow[]> {
    return this.db.read.createQueryBuilder(PersonEntity, 'person').orderBy('person.name collate nocase').addOrderBy('person.email').getMany();
  }

  async insert(tx: EntityManager, row: PersonRow): Promise<void> {
    await tx.insert(PersonEntity, row);
  }

  /** Changes a person who is still at the version given, and raises the version; false where they are not. */
  async update(tx: EntityManager, id: string, version: number, patch: Partial<PersonRow>): Promise<boolean> {
    const { affected } = await tx.update(PersonEntity, { id, version }, { ...patch, version: version + 1 });
    return affected === 1;
  }

  /** Changes what nobody edits side by side: password and last sign-in. The version stays. */
  async patch(tx: EntityManager, id: string, patch: Pick<Partial<PersonRow>, 'passwordHash' | 'lastSignInAt'>): Promise<void> {
    await tx.update(PersonEntity, { id }, patch);
  }

  /** People who are active and can sign in. */
  listAbleToSignIn(): Promise<PersonRow[]> {
    return this.db.read.findBy(PersonEntity, { isActive: true, passwordHash: Not(IsNull()) });
  }

  async insertLink(tx: EntityManager, row: OneTimeLinkRow): Promise<void> {
    await tx.insert(OneTimeLinkEntity, row);
  }

  findLink(tokenHash: string): Promise<OneTimeLinkRow | null> {
    return this.db.read.findOneBy(OneTimeLinkEntity, { tokenHash });
  }

  /** Takes every open link of a person out of use. */
  async voidLinks(tx: EntityManager, personId: string, usedAt: string): Promise<void> {
    await tx.update(OneTimeLinkEntity, { personId, usedAt: IsNull() }, { usedAt });
  }
}
