import type { EntityManager } from 'typeorm';
import { toOffsetIso } from '../../../shared/clock-time';
import type { PasswordLinkAnswer } from '../../../shared/schemas/people';
import type { PersonRow } from '../../db/entities/person.entity';
import type { Deps } from '../../deps';
import { AppError } from '../../http/problems';
import type { Actor } from '../../http/routes';
import { passwordChangedMail } from '../../mail/link-mails';
import { OneTimeLinks } from '../people/one-time-links';
import { assertPasswordIsGood, hashPassword, passwordFits } from '../people/password';
import { PersonAccess } from '../people/person-access';

const visitor = { id: null, name: 'A visitor' };

/** Signing in and out and everything about one's own password. Answers never tell whether an address is known. */
export class SessionService {
  private readonly access: PersonAccess;
  private readonly links: OneTimeLinks;

  constructor(private readonly deps: Deps) {
    this.access = new PersonAccess(deps.db);
    this.links = new OneTimeLinks(deps);
  }

  async signIn(email: string, password: string, address: string): Promise<PersonRow> {
    const person = await this.access.findByEmail(email);
    const fits = await passwordFits(person?.passwordHash ?? null, password);
    if (!person || !fits || !person.isActive) {
      await this.deps.db.write((tx) => this.deps.audit.record(tx, visitor, 'session.refuse', { kind: 'session', id: person?.id ?? '' }, { email, address }));
      throw new AppError('sign-in-failed', 'Check both, or ask for a new password under "Forgotten password"');
    }
    await this.deps.db.write(async (tx) => {
      await this.access.noteSignIn(tx, person.id, this.deps.now().toISOString());
      await this.deps.audit.record(tx, person, 'session.sign-in', { kind: 'session', id: person.id }, { address });
    });
    this.announce(person);
    return person;
  }

  async signOut(actor: Actor, from: 'here' | 'everywhere'): Promise<void> {
    if (from === 'everywhere') this.deps.sessions.destroyAllOf(actor.id);
    await this.deps.db.write((tx) => this.deps.audit.record(tx, actor, from === 'here' ? 'session.sign-out' : 'session.sign-out-everywhere', { kind: 'session', id: actor.id }));
  }

  /** Changes one's own password. The caller keeps its session; the others end. */
  async changePassword(actor: Actor, currentPassword: string, newPassword: string): Promise<void> {
    const person = await this.access.get(actor.id);
    if (!(await passwordFits(person.passwordHash, currentPassword))) throw new AppError('bad-input', 'currentPassword: This is not your present password', { errors: [{ path: 'currentPassword', message: 'This is not your present password' }] });
    assertPasswordIsGood(newPassword, person);
    const passwordHash = await hashPassword(newPassword);
    await this.deps.db.write(async (tx) => {
      await this.storePassword(tx, person, passwordHash);
      await this.deps.audit.record(tx, actor, 'session.password-change', { kind: 'person', id: person.id });
    });
    this.announce(person, true);
  }

  /** Mails a reset link to a known, active person; an unknown address gets the same answer and leaves the same kind of entry. */
  async forgotPassword(email: string, address: string): Promise<void> {
    const person = await this.access.findByEmail(email);
    await this.deps.db.write(async (tx) => {
      await this.deps.audit.record(tx, visitor, 'session.password-forgotten', { kind: 'session', id: person?.id ?? '' }, { email, address });
      if (person?.isActive) await this.links.send(tx, person, person.passwordHash ? 'reset' : 'invitation', this.deps.config.organisation);
    });
    if (person?.isActive) this.announceMail(person);
  }

  async describeLink(token: string): Promise<PasswordLinkAnswer> {
    const { link, person } = await this.links.get(token);
    return { purpose: link.purpose, name: person.name, email: person.email, expiresAt: link.expiresAt };
  }

  /** Sets the password with a one-time link. Every session of the person ends. */
  async setPassword(token: string, newPassword: string): Promise<{ email: string }> {
    const { person } = await this.links.get(token);
    assertPasswordIsGood(newPassword, person);
    const passwordHash = await hashPassword(newPassword);
    const { purpose } = await this.deps.db.write(async (tx) => {
      const { link } = await this.links.get(token);
      await this.storePassword(tx, person, passwordHash);
      await this.deps.audit.record(tx, person, 'session.password-set', { kind: 'person', id: person.id }, { purpose: link.purpose });
      return link;
    });
    this.deps.sessions.destroyAllOf(person.id);
    this.announce(person, purpose === 'reset');
    return { email: person.email };
  }

  /** Stores the hash, takes open links out of use and tells the person, unless it is their first password. */
  private async storePassword(tx: EntityManager, person: PersonRow, passwordHash: string): Promise<void> {
    const now = this.deps.now();
    await this.access.storePassword(tx, person.id, passwordHash, now.toISOString());
    if (!person.passwordHash) return;
    const { organisation, utcOffset } = this.deps.config;
    await this.deps.mail.enqueue(tx, { to: person.email, ...passwordChangedMail({ organisation, name: person.name, at: toOffsetIso(now.getTime(), utcOffset) }) });
  }

  private announce(person: PersonRow, hasMail = false): void {
    this.deps.changes.announce({ topic: 'person', id: person.id, by: person.name });
    if (hasMail) this.announceMail(person);
  }

  private announceMail(person: PersonRow): void {
    this.deps.jobs.wake();
    this.deps.changes.announce({ topic: 'outbox', id: person.id });
  }
}
