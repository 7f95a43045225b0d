import { createHash, randomBytes } from 'node:crypto';
import type { EntityManager } from 'typeorm';
import { toOffsetIso } from '../../../shared/clock-time';
import type { OneTimeLinkRow, PersonRow } from '../../db/entities/person.entity';
import type { Deps } from '../../deps';
import { AppError } from '../../http/problems';
import { invitationMail, linkUrl, resetMail } from '../../mail/link-mails';
import { PersonRepository } from './person.repository';

export type LinkPurpose = OneTimeLinkRow['purpose'];
const LIFE_MS: Record<LinkPurpose, number> = { invitation: 72 * 3_600_000, reset: 3_600_000 };
const TOKEN_BYTES = 32;

const hashOf = (token: string): string => createHash('sha256').update(token).digest('hex');

/** Links that set a password once. The token leaves in the mail; here only its hash is kept. */
export class OneTimeLinks {
  private readonly repository: PersonRepository;

  constructor(private readonly deps: Deps) {
    this.repository = new PersonRepository(deps.db);
  }

  /** Makes a link in the caller's transaction; earlier ones of the person stop working. */
  async issue(tx: EntityManager, personId: string, purpose: LinkPurpose): Promise<{ url: string; expiresAt: string }> {
    const now = this.deps.now();
    const token = randomBytes(TOKEN_BYTES).toString('base64url');
    const expiresAt = new Date(now.getTime() + LIFE_MS[purpose]).toISOString();
    await this.repository.voidLinks(tx, personId, now.toISOString());
    await this.repository.insertLink(tx, { id: this.deps.newId(), tokenHash: hashOf(token), purpose, personId, createdAt: now.toISOString(), expiresAt, usedAt: null });
    return { url: linkUrl(this.deps.config.publicUrl, token), expiresAt };
  }

  /** Makes a link and mails it, in the caller's transaction. */
  async send(tx: EntityManager, person: Pick<PersonRow, 'id' | 'name' | 'email'>, purpose: LinkPurpose, by: string): Promise<void> {
    const { url, expiresAt } = await this.issue(tx, person.id, purpose);
    const { organisation, utcOffset } = this.deps.config;
    const parts = { organisation, name: person.name, url, expiresAt: toOffsetIso(Date.parse(expiresAt), utcOffset) };
    await this.deps.mail.enqueue(tx, { to: person.email, ...(purpose === 'invitation' ? invitationMail({ ...parts, by }) : resetMail(parts)) });
  }

  /** The link and its person while it can be used; otherwise one and the same refusal. */
  async get(token: string): Promise<{ link: OneTimeLinkRow; person: PersonRow }> {
    const link = await this.repository.findLink(hashOf(token));
    const person = link && (await this.repository.find(link.personId));
    if (!link || !person?.isActive || link.usedAt || Date.parse(link.expiresAt) <= this.deps.now().getTime())
      throw new AppError('link-used-or-expired', 'Ask for a new link on the sign-in page under "Forgotten password"');
    return { link, person };
  }
}
