import { randomUUID } from 'node:crypto';
import type { Config } from './config';
import { AuditTrail } from './db/audit-trail';
import { Database } from './db/database';
import type { Deps } from './deps';
import { SessionStore } from './http/sessions';
import { ChangeBus } from './jobs/change-bus';
import { JobRunner } from './jobs/job-runner';
import { MailQueue } from './mail/mail-queue';

/** Opens the databases and builds everything the features are given. Tests pass a clock of their own. */
export async function createDeps(config: Config, now: () => Date = () => new Date()): Promise<Deps> {
  const db = await Database.open(config.databaseFile);
  const log = (line: string) => {
    if (!config.isSilent) console.log(line);
  };
  const base = { config, db, now, newId: randomUUID, log };
  const jobs = new JobRunner(base);
  const changes = new ChangeBus();
  return {
    ...base,
    sessions: new SessionStore(config.sessionsFile, () => now().getTime()),
    audit: new AuditTrail(now),
    changes,
    jobs,
    mail: new MailQueue({ ...base, jobs, changes }),
  };
}

export async function closeDeps(deps: Deps): Promise<void> {
  await deps.jobs.stop();
  deps.sessions.close();
  await deps.db.close();
}
