/** `npm run check`: types (three tsconfigs), lint and import rules. Prints one line each; exit status 1 when any fails. */
import { spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';

const bin = (name, file) => [process.execPath, join('node_modules', name, file)];
const steps = [
  ['types', [...bin('typescript', 'bin/tsc'), '--noEmit', '-p', 'tsconfig.json']],
  ['types of shared', [...bin('typescript', 'bin/tsc'), '--noEmit', '-p', 'shared/tsconfig.json']],
  ['types of the solver', [...bin('typescript', 'bin/tsc'), '--noEmit', '-p', 'server/solver/tsconfig.json']],
  ['lint', [...bin('eslint', 'bin/eslint.js'), '--config', 'tests/lint/eslint.config.mjs', '--max-warnings', '0', 'src', 'server', 'shared', 'tiles', 'tests']],
  ['import rules', [...bin('vitest', 'vitest.mjs'), 'run', 'tests/architecture/imports.test.ts']],
];

export function runChecks({ withImportRules = true } = {}) {
  const counts = { passed: 0, failed: 0 };
  for (const [name, [command, ...args]] of steps) {
    if (name === 'import rules' && !withImportRules) continue;
    const { status } = spawnSync(command, args, { stdio: 'inherit' });
    console.log(`${status === 0 ? 'ok    ' : 'FAILED'} ${name}`);
    counts[status === 0 ? 'passed' : 'failed'] += 1;
  }
  return counts;
}

if (import.meta.url === pathToFileURL(process.argv[1]).href) process.exit(runChecks().failed === 0 ? 0 : 1);
