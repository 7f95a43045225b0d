import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { apiPaths } from '../../shared/api-paths';
import { type TestApp, startTestApp } from '../helpers/test-app';

const root = fileURLToPath(new URL('../..', import.meta.url));
const PASSWORD = 'the first long password';
let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'downreach-administrator-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

function run(args: string[], dataFolder = folder, env: Record<string, string> = {}) {
  const { status, stdout, stderr } = spawnSync(process.execPath, ['--import', 'tsx', 'server/create-administrator.ts', ...args], {
    cwd: root,
    encoding: 'utf8',
    env: { PATH: process.env['PATH'], DOWNREACH_DATA: dataFolder, DOWNREACH_DEMO: 'off', DOWNREACH_URL: 'https://downreach.example.org', ...env },
  });
  return { status, stdout, stderr };
}
const tokenIn = (text: string) => /https:\/\/downreach\.example\.org\/set-password\/([\w-]+)/.exec(text)?.[1] ?? '';
const setPassword = (app: TestApp, token: string) => app.visitor().post(apiPaths.passwordSet).send({ token, newPassword: PASSWORD });

describe('the command that makes the first administrator', () => {
  it('works on an empty folder and prints a link', () => {
    const { status, stdout, stderr } = run(['--email', 'First@Example.org', '--name', 'First Person']);
    expect({ status, stderr }).toEqual({ status: 0, stderr: '' });
    expect(stdout).toContain('First Person (first@example.org) is now administrator.');
    expect(tokenIn(stdout)).not.toBe('');
  });

  it('lets the person in beside a server that runs, and not twice with one link', async () => {
    const app = await startTestApp();
    const token = tokenIn(run(['--email', 'first@example.org', '--name', 'First Person'], app.folder).stdout);
    await setPassword(app, token).expect(200);
    await setPassword(app, token).expect(410);
    const { body } = await (await app.signedIn('first@example.org', PASSWORD)).get(apiPaths.people).expect(200);
    expect(body).toMatchObject([{ name: 'First Person', roles: ['administrator'] }]);
    await app.close();
  });

  it('gives the role to somebody who is known, and brings back one who was deactivated', async () => {
    const app = await startTestApp();
    const person = await app.addPerson({ roles: ['planner'], name: 'Known Person', isActive: false });
    const { stdout } = run(['--email', person.email, '--name', 'Whatever'], app.folder);
    expect(stdout).toContain(`Known Person (${person.email}) was known here and is now an active administrator.`);
    await setPassword(app, tokenIn(stdout)).expect(200);
    const { body } = await (await app.signedIn(person.email, PASSWORD)).get(apiPaths.person(person.id)).expect(200);
    expect(body).toMatchObject({ name: 'Known Person', roles: ['planner', 'administrator'], isActive: true });
    await app.close();
  });

  it.each([
    [['--email', 'nobody', '--name', 'X'], {}, '--email "nobody": Give an e-mail address'],
    [['--email', 'a@example.org', '--name', ' '], {}, '--name " ": Give a name'],
    [['--name', 'X'], {}, '--email is missing'],
    [['--email', 'a@example.org'], {}, '--name is missing'],
    [['--mail', 'a@example.org'], {}, "Unknown option '--mail'"],
    [['--email', 'a@example.org', '--name', 'X'], { SMTP_URL: 'mail.example.org:secret' }, 'SMTP_URL="...": give smtp://'],
  ])('refuses %j %j in plain words', (args, env, words) => {
    const { status, stdout, stderr } = run(args, folder, env);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toContain(words);
    expect(stderr).toContain('Usage: npm run administrator');
    expect(stderr).not.toMatch(/secret|\n\s+at /);
  });
});
