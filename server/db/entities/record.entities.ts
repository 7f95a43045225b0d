import { EntitySchema } from 'typeorm';

/** Append-only record of who changed what. */
export type AuditRow = { id: number; at: string; personId: string | null; personName: string; action: string; subjectKind: string; subjectId: string; detail: Record<string, unknown> };

export const AuditEntity = new EntitySchema<AuditRow>({
  name: 'Audit',
  tableName: 'audit_entries',
  columns: {
    id: { type: 'integer', primary: true, generated: 'increment' },
    at: { type: 'text' },
    personId: { type: 'text', nullable: true },
    personName: { type: 'text' },
    action: { type: 'text' },
    subjectKind: { type: 'text' },
    subjectId: { type: 'text' },
    detail: { type: 'simple-json' },
  },
  indices: [{ columns: ['subjectKind', 'subjectId'] }],
});

export type MailRow = { id: string; to: string; subject: string; text: string; state: 'queued' | 'sent' | 'failed' | 'local'; attempts: number; nextAttemptAt: string | null; lastError: string; createdAt: string; sentAt: string | null };

/** The outbox: without SMTP settings mails stay here as `local`, readable by an administrator. */
export const MailEntity = new EntitySchema<MailRow>({
  name: 'Mail',
  tableName: 'mails',
  columns: {
    id: { type: 'text', primary: true },
    to: { type: 'text', name: 'recipient' },
    subject: { type: 'text' },
    text: { type: 'text' },
    state: { type: 'text' },
    attempts: { type: 'integer', default: 0 },
    nextAttemptAt: { type: 'text', nullable: true },
    lastError: { type: 'text', default: '' },
    createdAt: { type: 'text' },
    sentAt: { type: 'text', nullable: true },
  },
  indices: [{ columns: ['state'] }],
});

/** Work to be done outside requests, claimed by lease so that it survives a restart. */
export type JobRow = { id: string; kind: string; subjectId: string; state: 'queued' | 'running' | 'done' | 'failed'; attempts: number; leaseUntil: string | null; runAfter: string; createdAt: string; lastError: string };

export const JobEntity = new EntitySchema<JobRow>({
  name: 'Job',
  tableName: 'jobs',
  columns: {
    id: { type: 'text', primary: true },
    kind: { type: 'text' },
    subjectId: { type: 'text' },
    state: { type: 'text' },
    attempts: { type: 'integer', default: 0 },
    leaseUntil: { type: 'text', nullable: true },
    runAfter: { type: 'text' },
    createdAt: { type: 'text' },
    lastError: { type: 'text', default: '' },
  },
  indices: [{ columns: ['state', 'runAfter'] }],
});
