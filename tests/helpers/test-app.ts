import { randomUUID } from 'node:crypto';
import { copyFileSync, mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import request from 'supertest';
import { apiPaths } from '../../shared/api-paths';
import type { Role } from '../../shared/permissions';
import { createApp } from '../../server/app';
import { readConfig } from '../../server/config';
import { Database } from '../../server/db/database';
import { PersonEntity, type PersonRow } from '../../server/db/entities/person.entity';
import type { Deps } from '../../server/deps';
import { closeDeps, createDeps } from '../../server/deps-create';
import { hashPassword } from '../../server/features/people/password';

export type Agent = ReturnType<typeof request.agent>;
/** Node's own fetch, with a session or without: for answers that are streams. */
export type Fetch = (path: string, init?: RequestInit) => Promise<Response>;
type Options = {
  now?: () => Date;
  /** `empty`: nobody and nothing; `full`: the demonstration as the first start makes it. */
  data?: 'empty' | 'full';
  /** Demonstration mode, without its data unless `data` says so. */
  demo?: boolean;
  env?: Record<string, string>;
};
export type TestApp = {
  url: string;
  deps: Deps;
  folder: string;
  /** Somebody with these roles, with a password. */
  addPerson: (values: Partial<PersonRow> & Pick<PersonRow, 'roles'>) => Promise<PersonRow>;
  /** A supertest agent without a session. */
  visitor: () => Agent;
  signedIn: (email: string, password?: string) => Promise<Agent>;
  /** An agent signed in as somebody with these roles only; the same one when asked again. */
  agentFor: (...roles: Role[]) => Promise<Agent>;
  /** As `agentFor`, with a session of its own at every call. */
  fetchAs: (...roles: Role[]) => Promise<Fetch>;
  fetchVisitor: Fetch;
  close: () => Promise<void>;
};

export const TEST_PASSWORD = 'a long test password';
let passwordHash: Promise<string> | undefined;
let template: Promise<string> | undefined;

/** The migrated, empty database, made once per worker and copied for every app. */
async function makeTemplate(): Promise<string> {
  const folder = mkdtempSync(join(tmpdir(), 'downreach-template-'));
  process.once('exit', () => rmSync(folder, { recursive: true, force: true }));
  const file = join(folder, 'downreach.sqlite');
  await (await Database.open(file)).close();
  return file;
}

/** The real application over a real database in a folder of its own, listening on a free port. */
export async function startTestApp({ now, data = 'empty', demo = false, env = {} }: Options = {}): Promise<TestApp> {
  const folder = mkdtempSync(join(tmpdir(), 'downreach-test-'));
  const config = readConfig({ DOWNREACH_DATA: folder, DOWNREACH_DEMO: demo || data === 'full' ? 'on' : 'off', DOWNREACH_LOG: 'silent', ...env });
  copyFileSync(await (template ??= makeTemplate()), config.databaseFile);
  const deps = await createDeps(config, now);
  if (data === 'full') await (await import('../../server/db/seed/seed-demo')).seedDemo(deps);
  const server = createServer(createApp(deps));
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;

  const addPerson: TestApp['addPerson'] = async (values) => {
    const id = randomUUID();
    const row: PersonRow = { id, name: `Test ${values.roles.join(' and ')}`, email: `${id}@example.org`, passwordHash: await (passwordHash ??= hashPassword(TEST_PASSWORD)), phone: '', licenceNumber: '', isActive: true, lastSignInAt: null, createdAt: deps.now().toISOString(), version: 1, ...values };
    await deps.db.write((tx) => tx.insert(PersonEntity, row));
    return row;
  };
  const signedIn: TestApp['signedIn'] = async (email, password = TEST_PASSWORD) => {
    const agent = request.agent(url);
    await agent.post(apiPaths.signIn).send({ email, password }).expect(200);
    return agent;
  };
  const agents = new Map<string, Promise<Agent>>();
  const agentFor: TestApp['agentFor'] = (...roles) => {
    const key = [...roles].sort().join();
    if (!agents.has(key)) agents.set(key, addPerson({ roles }).then(({ email }) => signedIn(email)));
    return agents.get(key)!;
  };
  const fetchVisitor: Fetch = (path, init) => fetch(new URL(path, url), init);
  const fetchAs: TestApp['fetchAs'] = async (...roles) => {
    const { email } = await addPerson({ roles });
    const answer = await fetchVisitor(apiPaths.signIn, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify({ email, password: TEST_PASSWORD }) });
    const cookie = answer.headers.getSetCookie().map((line) => line.split(';')[0]).join('; ');
    return (path, init = {}) => fetchVisitor(path, { ...init, headers: { ...(init.headers as Record<string, string> | undefined), cookie } });
  };
  const close = async () => {
    server.closeAllConnections();
    await new Promise((resolve) => server.close(resolve));
    await closeDeps(deps);
    rmSync(folder, { recursive: true, force: true });
  };
  return { url, deps, folder, addPerson, visitor: () => request.agent(url), signedIn, agentFor, fetchAs, fetchVisitor, close };
}
