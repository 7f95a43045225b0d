import type { Mail, MailSummary } from '../../../shared/schemas/office';
import type { MailRow } from '../../db/entities/record.entities';
import { withoutLinkTokens } from '../../mail/link-mails';

export const presentMailSummary = ({ id, to, subject, state, attempts, nextAttemptAt, lastError, createdAt, sentAt }: MailRow): MailSummary => ({
  id, to, subject, state, attempts, nextAttemptAt: state === 'queued' ? nextAttemptAt : null, lastError, createdAt, sentAt,
});

/** A one-time link is for its receiver alone. Only where no mail server is set is it shown, because nobody else could pass it on. */
export const presentMail = (row: MailRow): Mail => ({ ...presentMailSummary(row), text: row.state === 'local' ? row.text : withoutLinkTokens(row.text) });
