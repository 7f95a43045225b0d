import { type EntityManager, In } from 'typeorm';
import type { RegisterName } from '../../../shared/schemas/registers';
import type { Database } from '../../db/database';
import { RegisterItemEntity, type RegisterItemRow, RegisterVersionEntity, type RegisterVersionRow } from '../../db/entities/register.entities';

/** What searching and sorting need of an entry, without its data. */
export type RegisterHeading = Pick<RegisterItemRow, 'id' | 'code' | 'name' | 'ownerName' | 'lastCheckedOn' | 'isArchived'> & { otherNames: string | null; cas: string | null };

export class RegisterRepository {
  constructor(private readonly db: Database) {}

  async headings(register: RegisterName): Promise<RegisterHeading[]> {
    const rows = await this.db.read
      .createQueryBuilder(RegisterItemEntity, 'item')
      .select(['item.id as id', 'item.code as code', 'item.name as name', 'item.ownerName as ownerName', 'item.lastCheckedOn as lastCheckedOn', 'item.isArchived as isArchived'])
      .addSelect("json_extract(item.data, '$.otherNames')", 'otherNames')
      .addSelect("json_extract(item.data, '$.cas')", 'cas')
      .where('item.register = :register', { register })
      .getRawMany<Omit<RegisterHeading, 'isArchived'> & { isArchived: number }>();
    return rows.map((row) => ({ ...row, isArchived: row.isArchived === 1 }));
  }

  /** Entries in the order of the ids given. */
  async byIds(ids: readonly string[]): Promise<RegisterItemRow[]> {
    const rows = await this.db.read.find(RegisterItemEntity, { where: { id: In([...ids]) } });
    const found = new Map(rows.map((row) => [row.id, row]));
    return ids.flatMap((id) => found.get(id) ?? []);
  }

  find(register: RegisterName, id: string): Promise<RegisterItemRow | null> {
    return this.db.read.findOneBy(RegisterItemEntity, { register, id });
  }

  async all(register: RegisterName): Promise<RegisterItemRow[]> {
    return this.db.read.findBy(RegisterItemEntity, { register });
  }

  /** Codes differ by more than capitals: INT-1 and int-1 are one to whoever reads them aloud. */
  findByCode(register: RegisterName, code: string): Promise<RegisterItemRow | null> {
    return this.db.read.createQueryBuilder(RegisterItemEntity, 'item').where('item.register = :register and lower(item.code) = lower(:code)', { register, code }).getOne();
  }

  async takenIds(base: string): Promise<Set<string>> {
    const rows = await this.db.read.createQueryBuilder(RegisterItemEntity, 'item').select('item.id', 'id').where('item.id = :base or item.id like :like', { base, like: `${base}-%` }).getRawMany<{ id: string }>();
    return new Set(rows.map(({ id }) => id));
  }

  async insert(tx: EntityManager, row: RegisterItemRow): Promise<void> {
    await tx.insert(RegisterItemEntity, row as never);
  }

  /** Changes an entry that is still at the version given; false where it is not. */
  async update(tx: EntityManager, row: RegisterItemRow, fromVersion: number): Promise<boolean> {
    const { id, ...patch } = row;
    const { affected } = await tx.update(RegisterItemEntity, { id, version: fromVersion }, patch as never);
    return affected === 1;
  }

  async addVersion(tx: EntityManager, version: Omit<RegisterVersionRow, 'id'>): Promise<void> {
    await tx.insert(RegisterVersionEntity, version as never);
  }

  /** The versions of an entry, the oldest first. */
  versions(itemId: string): Promise<RegisterVersionRow[]> {
    return this.db.read.find(RegisterVersionEntity, { where: { itemId }, order: { version: 'ASC' } });
  }

  findVersion(itemId: string, version: number): Promise<RegisterVersionRow | null> {
    return this.db.read.findOneBy(RegisterVersionEntity, { itemId, version });
  }
}
