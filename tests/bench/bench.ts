/**
 * `npm run bench [-- name ...]`: ours and a peer side by side, one JSON line a case on stdout, what was reached on stderr.
 * A name stands for all cases that begin with it. Each case runs in a clean process, because code that has seen two kinds
 * of arrays stays slower for ever after. Exit status 1 where a case failed, an error bound included; slowness never fails.
 */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { ensureKernels } from '../../server/solver/kernels/build.mjs';
import { cases } from './cases/all';
import { reached } from './goals';
import type { Figure } from './harness';

const wanted = process.argv.slice(2);
const names = Object.keys(cases).filter((name) => wanted.length === 0 || wanted.some((w) => name === w || name.startsWith(`${w}-`)));
if (names.length === 0) {
  console.error(`No case is called ${wanted.join(', ')}. There are: ${Object.keys(cases).join(', ')}`);
  process.exit(2);
}
await ensureKernels();
let failed = 0;
for (const name of names) {
  const run = spawnSync(process.execPath, ['--import', 'tsx', fileURLToPath(new URL('./run-case.ts', import.meta.url)), name], { encoding: 'utf8', stdio: ['ignore', 'pipe', 'inherit'] });
  if (run.status !== 0) {
    failed++;
    console.error(`${name}: failed`);
    continue;
  }
  process.stdout.write(run.stdout);
  console.error(`${name}: ${reached(name, (JSON.parse(run.stdout.trim().split('\n').at(-1)!) as Figure).ratio)}`);
}
process.exit(failed === 0 ? 0 : 1);
