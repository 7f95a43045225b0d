import type { SessionStore } from './http/sessions';
import type { Config } from './config';
import type { Database } from './db/database';
import type { AuditTrail } from './db/audit-trail';
import type { ChangeBus } from './jobs/change-bus';
import type { JobRunner } from './jobs/job-runner';
import type { MailQueue } from './mail/mail-queue';

/** What features are given. Clock and ids are passed in, so that tests can fix them. */
export type Deps = Readonly<{
  config: Config;
  db: Database;
  now: () => Date;
  newId: () => string;
  sessions: SessionStore;
  audit: AuditTrail;
  changes: ChangeBus;
  jobs: JobRunner;
  mail: MailQueue;
  log: (line: string) => void;
}>;
