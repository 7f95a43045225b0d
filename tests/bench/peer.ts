import { spawn, spawnSync, type ChildProcessWithoutNullStreams } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface, type Interface } from 'node:readline';
import { fileURLToPath } from 'node:url';

const script = fileURLToPath(new URL('./peers/serve.py', import.meta.url));
/** A numpy tuned to this processor: settings that hold it back for other users' sake are left out; one thread. */
function peerEnvironment(): NodeJS.ProcessEnv {
  const { OPENBLAS_CORETYPE: _core, OPENBLAS_L2_SIZE: _l2, ...rest } = process.env;
  return { ...rest, OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1', MKL_NUM_THREADS: '1' };
}

/** The first Python on this machine that has numpy and scipy; null where there is none. */
function findPython(): string | null {
  for (const python of ['/usr/bin/python3', 'python3']) {
    if (spawnSync(python, ['-c', 'import numpy, scipy'], { env: peerEnvironment() }).status === 0) return python;
  }
  return null;
}

/** Longest wait for one answer: a peer that does not converge is a failure, not a hang. */
const TIMEOUT_MS = 300_000;

/** A long-lived Python process that does the peer's share and times its own work. */
export class Peer {
  private constructor(
    private readonly child: ChildProcessWithoutNullStreams,
    private readonly lines: Interface,
    private readonly folder: string,
    readonly versions: { numpy: string; scipy: string },
  ) {}

  static async start(): Promise<Peer | null> {
    const python = findPython();
    if (!python) return null;
    const child = spawn(python, [script], { env: peerEnvironment(), stdio: ['pipe', 'pipe', 'inherit'] }) as unknown as ChildProcessWithoutNullStreams;
    const lines = createInterface({ input: child.stdout });
    const peer = new Peer(child, lines, mkdtempSync(join(tmpdir(), 'bench-')), { numpy: '', scipy: '' });
    Object.assign(peer.versions, await peer.ask('timing.versions'));
    return peer;
  }

  async ask<T>(call: string, args: Record<string, unknown> = {}): Promise<T> {
    const answer = new Promise<string>((resolve, reject) => {
      const timer = setTimeout(() => reject(new Error(`${call} gave no answer in ${TIMEOUT_MS / 1000} s`)), TIMEOUT_MS);
      this.lines.once('line', (line) => {
        clearTimeout(timer);
        resolve(line);
      });
    });
    this.child.stdin.write(`${JSON.stringify({ call, args })}\n`);
    const { ok, failed } = JSON.parse(await answer) as { ok: T; failed?: string };
    if (failed) throw new Error(`${call}: ${failed}`);
    return ok;
  }

  /** Lets the peer write an array to a file and reads it. */
  async array(call: string, args: Record<string, unknown> = {}): Promise<Float64Array> {
    const path = join(this.folder, 'array.bin');
    await this.ask(call, { ...args, path });
    const bytes = readFileSync(path);
    return new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length));
  }

  path(name: string): string {
    return join(this.folder, name);
  }

  stop(): void {
    this.child.stdin.end();
    this.lines.close();
    rmSync(this.folder, { recursive: true, force: true });
  }
}
