import { z } from 'zod';

export const mailStates = ['queued', 'sent', 'failed', 'local'] as const;
export const mailSummarySchema = z.object({
  id: z.string(),
  to: z.string(),
  subject: z.string(),
  /** `local`: no mail server is set, so the mail is kept here to be read. */
  state: z.enum(mailStates),
  attempts: z.number().int(),
  nextAttemptAt: z.string().nullable(),
  lastError: z.string(),
  createdAt: z.string(),
  sentAt: z.string().nullable(),
});
export type MailSummary = z.infer<typeof mailSummarySchema>;
export const mailSchema = mailSummarySchema.extend({ text: z.string() });
export type Mail = z.infer<typeof mailSchema>;

const pageSize = z.coerce.number().int().min(1, 'At least 1').max(200, 'At most 200').default(50);

export const outboxQuerySchema = z.object({ state: z.enum(mailStates).optional(), offset: z.coerce.number().int().min(0).max(10_000_000).default(0), limit: pageSize });
export const outboxSchema = z.object({ mails: z.array(mailSummarySchema), total: z.number().int(), hasMailServer: z.boolean() });
export type Outbox = z.infer<typeof outboxSchema>;

export const auditKinds = ['person', 'session', 'register', 'incident', 'scenario', 'revision', 'run', 'mail'] as const;
export const auditQuerySchema = z.object({
  /** Entries older than this number; leave it out for the newest. */
  before: z.coerce.number().int().min(1).optional(),
  kind: z.enum(auditKinds).optional(),
  subjectId: z.string().max(200).optional(),
  personId: z.string().max(64).optional(),
  limit: pageSize,
});
export const auditEntrySchema = z.object({
  id: z.number().int(),
  at: z.string(),
  personId: z.string().nullable(),
  personName: z.string(),
  action: z.string(),
  subjectKind: z.string(),
  subjectId: z.string(),
  detail: z.record(z.string(), z.unknown()),
});
export type AuditEntry = z.infer<typeof auditEntrySchema>;
/** `nextBefore` asks for the next page; null at the end. */
export const auditPageSchema = z.object({ entries: z.array(auditEntrySchema), nextBefore: z.number().int().nullable() });
export type AuditPage = z.infer<typeof auditPageSchema>;
