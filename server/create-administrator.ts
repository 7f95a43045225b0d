import { parseArgs } from 'node:util';
import { personCreateSchema } from '../shared/schemas/people';
import { toOffsetIso } from '../shared/clock-time';
import { type Config, readConfig } from './config';
import { closeDeps, createDeps } from './deps-create';
import { makeAdministrator } from './features/people/make-administrator';

const USAGE = 'Usage: npm run administrator -- --email you@example.org --name "Your name"';

/** What the caller got wrong, in words for the terminal. */
class UsageError extends Error {}

function readInput(args: string[]): { email: string; name: string } {
  let values: { email?: string | undefined; name?: string | undefined };
  try {
    ({ values } = parseArgs({ args, options: { email: { type: 'string' }, name: { type: 'string' } } }));
  } catch (error) {
    throw new UsageError((error as Error).message);
  }
  const { email, name } = values;
  if (email === undefined) throw new UsageError('--email is missing');
  if (name === undefined) throw new UsageError('--name is missing');
  const parsed = personCreateSchema.pick({ email: true, name: true }).safeParse({ email, name });
  if (!parsed.success) throw new UsageError(parsed.error.issues.map((issue) => `--${issue.path.join('.')} "${issue.path[0] === 'email' ? email : name}": ${issue.message}`).join('\n'));
  return parsed.data;
}

function readSettings(): Config {
  try {
    return readConfig({ ...process.env, DOWNREACH_LOG: 'silent' });
  } catch (error) {
    throw new UsageError((error as Error).message);
  }
}

async function main(): Promise<void> {
  const input = readInput(process.argv.slice(2));
  const config = readSettings();
  const deps = await createDeps(config);
  try {
    const { did, url, expiresAt } = await makeAdministrator(deps, input);
    console.log(`${did} Open this link once, until ${toOffsetIso(Date.parse(expiresAt), config.utcOffset)}, to set the password:\n\n  ${url}\n`);
  } finally {
    await closeDeps(deps);
  }
}

try {
  await main();
} catch (error) {
  if (!(error instanceof UsageError)) throw error;
  console.error(`${error.message}\n${USAGE}`);
  process.exitCode = 2;
}
