import type { z } from 'zod';
import type { auditQuerySchema } from '../../../shared/schemas/office';
import type { Database } from '../../db/database';
import { AuditEntity, type AuditRow } from '../../db/entities/record.entities';

export class AuditRepository {
  constructor(private readonly db: Database) {}

  /** The newest first. Pages hang on the entry's number, so that new entries do not shift them. */
  list({ before, kind, subjectId, personId, limit }: z.output<typeof auditQuerySchema>): Promise<AuditRow[]> {
    const query = this.db.read.createQueryBuilder(AuditEntity, 'entry').orderBy('entry.id', 'DESC').take(limit);
    if (before !== undefined) query.andWhere('entry.id < :before', { before });
    if (kind !== undefined) query.andWhere('entry.subjectKind = :kind', { kind });
    if (subjectId !== undefined) query.andWhere('entry.subjectId = :subjectId', { subjectId });
    if (personId !== undefined) query.andWhere('entry.personId = :personId', { personId });
    return query.getMany();
  }
}
