import type { Database } from '../../db/database';
import { MailEntity, type MailRow } from '../../db/entities/record.entities';

export class OutboxRepository {
  constructor(private readonly db: Database) {}

  /** The newest first, with how many there are in all. */
  list({ state, offset, limit }: { state?: MailRow['state'] | undefined; offset: number; limit: number }): Promise<[MailRow[], number]> {
    return this.db.read.findAndCount(MailEntity, { where: state ? { state } : {}, order: { createdAt: 'DESC', id: 'ASC' }, skip: offset, take: limit });
  }

  find(id: string): Promise<MailRow | null> {
    return this.db.read.findOneBy(MailEntity, { id });
  }
}
