import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Database from 'better-sqlite3';
import type { MakeCase } from '../harness';

const FRAMES = 48;
const FRAME_BYTES = 12_000;

export const storeCases: Record<string, MakeCase> = {
  store: async (peer) => {
    const folder = mkdtempSync(join(tmpdir(), 'bench-store-'));
    process.on('exit', () => rmSync(folder, { recursive: true, force: true }));
    const database = new Database(join(folder, 'ours.db'));
    database.pragma('page_size = 16384');
    database.pragma('journal_mode = WAL');
    database.pragma('synchronous = NORMAL');
    database.exec('CREATE TABLE frames (id INTEGER PRIMARY KEY, run INTEGER NOT NULL, n INTEGER NOT NULL, body BLOB NOT NULL)');
    const insert = database.prepare('INSERT INTO frames (run, n, body) VALUES (?, ?, ?)');
    const frames = Array.from({ length: FRAMES }, (_, n) => Buffer.from(Uint8Array.from({ length: FRAME_BYTES }, (__, k) => (k * 2654435761 + n * 40503) >>> 13)));
    let run = 0;
    const store = database.transaction(() => {
      run++;
      frames.forEach((frame, n) => insert.run(run, n, frame));
    });
    store.immediate();
    const count = database.prepare('SELECT count(*) AS n, sum(length(body)) AS bytes FROM frames').get() as { n: number; bytes: number };
    await peer?.ask('store.setup', { path: peer.path('theirs.db'), frames: FRAMES, size: FRAME_BYTES });
    return {
      peerName: 'Python sqlite3, same settings',
      error: Math.abs(count.n - FRAMES) + Math.abs(count.bytes - FRAMES * FRAME_BYTES),
      errorLimit: 0,
      ours: () => store.immediate(),
      peer: peer && ((repetitions) => peer.ask<number>('store.time_store', { repetitions })),
      clock: 'wall',
      isShare: true,
    };
  },
};
