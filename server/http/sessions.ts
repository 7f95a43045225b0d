import { randomBytes } from 'node:crypto';
import Database from 'better-sqlite3';
import session, { type SessionData } from 'express-session';
import type { Request, RequestHandler } from 'express';
import type { Config } from '../config';

declare module 'express-session' {
  interface SessionData {
    personId: string;
    /** When the sign-in happened, ms since 1970: the absolute time-out counts from here. */
    signedInAt: number;
  }
}

/**
 * Sessions live in a SQLite file of their own: a session write must neither wait for nor be rolled back with
 * a transaction of the main database.
 */
export class SessionStore extends session.Store {
  private readonly db: Database.Database;

  constructor(file: string, private readonly now: () => number) {
    super();
    // Every open event stream listens for 'ended', which is told whenever sessions were ended.
    this.setMaxListeners(0);
    this.db = new Database(file);
    this.db.pragma('journal_mode = WAL');
    this.db.pragma('synchronous = NORMAL');
    this.db.exec(`create table if not exists sessions (sid text primary key, person_id text not null, data text not null, expires_at integer not null);
      create index if not exists sessions_person on sessions (person_id);
      create table if not exists secrets (id integer primary key check (id = 1), value text not null);`);
  }

  /** Secret that signs the cookie, made once per installation. */
  secret(): string {
    this.db.prepare('insert or ignore into secrets (id, value) values (1, ?)').run(randomBytes(32).toString('hex'));
    return (this.db.prepare('select value from secrets where id = 1').get() as { value: string }).value;
  }

  override get(sid: string, done: (error: unknown, data?: SessionData | null) => void): void {
    const row = this.db.prepare('select data from sessions where sid = ? and expires_at > ?').get(sid, this.now()) as { data: string } | undefined;
    done(null, row ? (JSON.parse(row.data) as SessionData) : null);
  }

  override set(sid: string, data: SessionData, done?: (error?: unknown) => void): void {
    this.deleteExpired();
    this.db.prepare('insert into sessions (sid, person_id, data, expires_at) values (?, ?, ?, ?) on conflict (sid) do update set person_id = excluded.person_id, data = excluded.data, expires_at = excluded.expires_at')
      .run(sid, data.personId ?? '', JSON.stringify(data), this.expiryOf(data));
    done?.();
  }

  /** Every request puts the end off; a step too small to matter is not written. A session that has ended stays ended. */
  override touch(sid: string, data: SessionData, done?: () => void): void {
    const expiresAt = this.expiryOf(data);
    this.db.prepare('update sessions set expires_at = ? where sid = ? and expires_at < ? and expires_at > ?').run(expiresAt, sid, expiresAt - idleMsOf(data) / 60, this.now());
    done?.();
  }

  /** By the server's own clock: the cookie's date is for the browser. */
  private expiryOf(data: SessionData): number {
    return this.now() + idleMsOf(data);
  }

  override destroy(sid: string, done?: (error?: unknown) => void): void {
    this.db.prepare('delete from sessions where sid = ?').run(sid);
    this.emit('ended');
    done?.();
  }

  /** Ends every session of a person; `exceptSid` keeps one. */
  destroyAllOf(personId: string, exceptSid = ''): void {
    this.db.prepare('delete from sessions where person_id = ? and sid <> ?').run(personId, exceptSid);
    this.emit('ended');
  }

  deleteExpired(): void {
    this.db.prepare('delete from sessions where expires_at <= ?').run(this.now());
  }

  close(): void {
    this.db.close();
  }
}

const idleMsOf = (data: SessionData): number => data.cookie.originalMaxAge ?? 86_400_000;

/** Opens a fresh session under a new id, so that an id planted beforehand is worth nothing. */
export const openSession = (req: Request, { personId, signedInAt }: Pick<SessionData, 'personId' | 'signedInAt'>): Promise<void> =>
  new Promise((resolve, reject) => {
    req.session.regenerate((error: unknown) => {
      if (error) return reject(error as Error);
      Object.assign(req.session, { personId, signedInAt });
      resolve();
    });
  });

export const SESSION_COOKIE = 'downreach.sid';

/** Server-side session with an idle time-out (rolling cookie) and an absolute one from sign-in. */
export function sessionMiddleware(config: Config, store: SessionStore, now: () => number): RequestHandler[] {
  const load = session({
    store,
    name: SESSION_COOKIE,
    secret: store.secret(),
    resave: false,
    saveUninitialized: false,
    rolling: true,
    cookie: { httpOnly: true, sameSite: 'lax', secure: 'auto', maxAge: config.idleMs },
  });
  const endOldSessions: RequestHandler = (req, _res, next) => {
    if (req.session.personId && now() - (req.session.signedInAt ?? 0) > config.absoluteMs) {
      req.session.regenerate(() => next());
      return;
    }
    next();
  };
  return [load, endOldSessions];
}
