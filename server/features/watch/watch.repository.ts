import type { RegisterName } from '../../../shared/schemas/registers';
import type { Database } from '../../db/database';
import { MailEntity } from '../../db/entities/record.entities';
import { RegisterItemEntity } from '../../db/entities/register.entities';

export class WatchRepository {
  constructor(private readonly db: Database) {}

  /** Entries in use that were last checked before the day given, or never. */
  countStale(register: RegisterName, before: string): Promise<number> {
    return this.db.read
      .createQueryBuilder(RegisterItemEntity, 'item')
      .where('item.register = :register and item.isArchived = 0', { register })
      .andWhere('(item.lastCheckedOn is null or item.lastCheckedOn < :before)', { before })
      .getCount();
  }

  countFailedMails(): Promise<number> {
    return this.db.read.countBy(MailEntity, { state: 'failed' });
  }
}
