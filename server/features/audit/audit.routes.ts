import { apiPaths } from '../../../shared/api-paths';
import { type AuditEntry, auditPageSchema, auditQuerySchema } from '../../../shared/schemas/office';
import type { AuditRow } from '../../db/entities/record.entities';
import type { Deps } from '../../deps';
import { type Route, route } from '../../http/routes';
import { AuditRepository } from './audit.repository';

const presentEntry = ({ id, at, personId, personName, action, subjectKind, subjectId, detail }: AuditRow): AuditEntry => ({ id, at, personId, personName, action, subjectKind, subjectId, detail });

export function auditRoutes(deps: Deps): Route[] {
  const audit = new AuditRepository(deps.db);
  return [
    route({
      method: 'get', path: apiPaths.audit, action: 'audit:read', tag: 'Audit', summary: 'Lists who did what, the newest first, page by page',
      query: auditQuerySchema, response: auditPageSchema,
      handle: async ({ query }) => {
        const rows = await audit.list({ ...query, limit: query.limit + 1 });
        const entries = rows.slice(0, query.limit).map(presentEntry);
        return { entries, nextBefore: rows.length > query.limit ? entries.at(-1)!.id : null };
      },
    }),
  ];
}
