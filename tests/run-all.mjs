/** `npm test`: checks, unit, numerics, API, architecture and browser tests; the last line adds up all of them. */
import { spawnSync } from 'node:child_process';
import { mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { ensureKernels } from '../server/solver/kernels/build.mjs';
import { runChecks } from './check.mjs';
import { findChromium } from './find-chromium.mjs';

const results = 'test-results';
rmSync(results, { recursive: true, force: true });
mkdirSync(results, { recursive: true });

const node = (args, environment = {}) => spawnSync(process.execPath, args, { stdio: 'inherit', env: { ...process.env, ...environment } });

/** A runner that left no report counts as one failure: nothing may pass by not running. */
function counted(name, file, read) {
  try {
    return read(JSON.parse(readFileSync(join(results, file), 'utf8')));
  } catch {
    console.error(`${name} left no report`);
    return { passed: 0, failed: 1 };
  }
}

function runVitest() {
  node([join('node_modules', 'vitest', 'vitest.mjs'), 'run', '--reporter=default', '--reporter=json', `--outputFile.json=${results}/vitest.json`]);
  return counted('vitest', 'vitest.json', (report) => ({ passed: report.numPassedTests, failed: report.numFailedTests + (report.success || report.numFailedTests > 0 ? 0 : 1) }));
}

function runBrowser() {
  let chromium;
  try {
    chromium = findChromium();
  } catch (error) {
    console.error(error.message);
    return { passed: 0, failed: 1 };
  }
  if (node([join('node_modules', 'vite', 'bin', 'vite.js'), 'build', '--logLevel', 'warn']).status !== 0) return { passed: 0, failed: 1 };
  node([join('node_modules', '@playwright', 'test', 'cli.js'), 'test', '--config', 'tests/e2e/playwright.config.ts'], { DOWNREACH_CHROMIUM: chromium });
  return counted('the browser tests', 'browser.json', ({ stats }) => ({ passed: stats.expected, failed: stats.unexpected + stats.flaky + (stats.expected + stats.unexpected === 0 ? 1 : 0) }));
}

await ensureKernels();
const counts = [runChecks({ withImportRules: false }), runVitest(), runBrowser()];
const sum = (key) => counts.reduce((total, count) => total + count[key], 0);
console.log(`${sum('passed')} passed, ${sum('failed')} failed`);
process.exit(sum('failed') === 0 ? 0 : 1);
