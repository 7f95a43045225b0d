import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

const PYTHON = '/usr/bin/python3';
const script = fileURLToPath(new URL('./peers/reference.py', import.meta.url));

/** Reference values as they are stored, made by `peers/reference.py --write`. */
export const reference = <T>(name: string): T => JSON.parse(readFileSync(new URL(`../fixtures/reference/${name}.json`, import.meta.url), 'utf8')) as T;

/** Versions of numpy and scipy of the system's Python; null where one of the three is missing. */
export function scientificPython(): string | null {
  if (!existsSync(PYTHON)) return null;
  const { status, stdout } = spawnSync(PYTHON, ['-c', 'import numpy, scipy; print(f"numpy {numpy.__version__}, scipy {scipy.__version__}")'], { encoding: 'utf8' });
  return status === 0 ? stdout.trim() : null;
}

/** Every case reckoned afresh. */
export function recomputed(): Record<string, unknown> {
  const { status, stdout, stderr } = spawnSync(PYTHON, [script], { encoding: 'utf8', maxBuffer: 1 << 26 });
  if (status !== 0) throw new Error(`${script} failed: ${stderr}`);
  return (JSON.parse(stdout) as { cases: Record<string, unknown> }).cases;
}
