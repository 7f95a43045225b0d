import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { randomUUID } from 'node:crypto';
import { setTimeout as pause } from 'node:timers/promises';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { Database } from '../db/database';
import { JobEntity, type JobRow } from '../db/entities/record.entities';
import { JobRunner } from './job-runner';

let folder: string;
let db: Database;
let runner: JobRunner;
const log: string[] = [];
const newRunner = () => new JobRunner({ db, now: () => new Date(), newId: randomUUID, log: (line) => log.push(line) });

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'downreach-jobs-'));
  db = await Database.open(join(folder, 'test.sqlite'));
  runner = newRunner();
  log.length = 0;
});
afterEach(async () => {
  await runner.stop();
  await db.close();
  rmSync(folder, { recursive: true, force: true });
});

const enqueue = (kind: string, subjectId: string, runAfter?: Date) => db.write((tx) => runner.enqueue(tx, kind, subjectId, runAfter));
const jobs = () => db.read.find(JobEntity, { order: { subjectId: 'ASC' } });
const stateOf = async (subjectId: string) => (await db.read.findOneByOrFail(JobEntity, { subjectId })).state;
/** Long, because a loaded machine is slow. */
const eventually = (check: () => unknown) => vi.waitFor(check, { timeout: 30_000 });
const held = () => {
  let release: () => void = () => undefined;
  const until = new Promise<void>((resolve) => (release = resolve));
  return { until, release };
};

describe('jobs', () => {
  it('are done once, the oldest first', async () => {
    const seen: string[] = [];
    runner.register('note', { atOnce: 1, handle: async (job) => void seen.push(job.subjectId) });
    for (const id of ['a', 'b', 'c']) {
      await enqueue('note', id);
      await pause(2);
    }
    await runner.start();
    await eventually(async () => expect((await jobs()).map(({ state }) => state)).toEqual(['done', 'done', 'done']));
    expect(seen).toEqual(['a', 'b', 'c']);
  });

  it('wait until they are due', async () => {
    const seen: string[] = [];
    runner.register('note', async (job) => void seen.push(job.subjectId));
    await enqueue('note', 'later', new Date(Date.now() + 3_600_000));
    await enqueue('note', 'now');
    await runner.start();
    await eventually(async () => expect(await stateOf('now')).toBe('done'));
    expect(seen).toEqual(['now']);
    expect(await stateOf('later')).toBe('queued');
  });

  it('of one kind never run more at once than its lane holds, and other kinds do not wait behind them', async () => {
    const { until, release } = held();
    const running: string[] = [];
    runner.register('run', { atOnce: 1, handle: (job) => (running.push(job.subjectId), until) });
    runner.register('mail', async () => undefined);
    await enqueue('run', 'run-1');
    await enqueue('run', 'run-2');
    await enqueue('mail', 'mail-1');
    await runner.start();
    await eventually(async () => expect(await stateOf('mail-1')).toBe('done'));
    expect(running).toEqual(['run-1']);
    expect(await stateOf('run-2')).toBe('queued');
    release();
    await eventually(async () => expect(await stateOf('run-2')).toBe('done'));
  });

  it('are taken up at once when queued and woken, without waiting for the next look', async () => {
    runner.register('note', async () => undefined);
    await runner.start();
    await pause(50);
    await enqueue('note', 'fresh');
    runner.wake();
    await vi.waitFor(async () => expect(await stateOf('fresh')).toBe('done'), { timeout: 1_500 });
  });

  it('keep their lease as long as their handler reports', async () => {
    const { until, release } = held();
    let renewed = '';
    const leaseOf = async () => (await jobs())[0]?.leaseUntil ?? '';
    runner.register('note', async (_job, { renewLease }) => {
      const before = await leaseOf();
      await pause(5);
      await renewLease();
      renewed = (await leaseOf()) > before ? 'later' : 'not later';
      await until;
    });
    await enqueue('note', 'a');
    await runner.start();
    await eventually(() => expect(renewed).toBe('later'));
    release();
    await eventually(async () => expect((await jobs())[0]).toMatchObject({ state: 'done', leaseUntil: null }));
  });

  it('whose handler throws are failed and given up, with the reason kept', async () => {
    const given: string[] = [];
    runner.register('note', { handle: () => Promise.reject(new Error('no paper')), onGivenUp: async (job, reason) => void given.push(`${job.subjectId} ${reason}`) });
    await enqueue('note', 'a');
    await runner.start();
    await eventually(async () => expect((await jobs())[0]).toMatchObject({ state: 'failed', lastError: 'no paper' }));
    await eventually(() => expect(given).toEqual(['a failed']));
  });
});

describe('a restart', () => {
  const left = (attempts: number): JobRow => ({ id: randomUUID(), kind: 'note', subjectId: `left-${attempts}`, state: 'running', attempts, leaseUntil: new Date(Date.now() + 60_000).toISOString(), runAfter: new Date(0).toISOString(), createdAt: new Date(0).toISOString(), lastError: '' });

  it('puts a job that a crash left running back once, then gives it up as interrupted', async () => {
    const seen: string[] = [];
    const given: string[] = [];
    runner.register('note', { handle: async (job) => void seen.push(job.subjectId), onGivenUp: async (job, reason) => void given.push(`${job.subjectId} ${reason}`) });
    await db.write((tx) => tx.insert(JobEntity, [left(1), left(2)]));
    await runner.start();
    await eventually(async () => expect((await jobs()).map(({ state }) => state)).toEqual(['done', 'failed']));
    expect(seen).toEqual(['left-1']);
    await eventually(() => expect(given).toEqual(['left-2 interrupted']));
  });

  it('after an orderly stop finds the job waiting, with no attempt lost', async () => {
    runner.register('note', (_job, { signal }) => new Promise((_resolve, reject) => signal.addEventListener('abort', () => reject(new Error('stopped')))));
    await enqueue('note', 'a');
    await runner.start();
    await eventually(async () => expect(await stateOf('a')).toBe('running'));
    await runner.stop();
    expect((await jobs())[0]).toMatchObject({ state: 'queued', attempts: 0, leaseUntil: null });

    runner = newRunner();
    runner.register('note', async () => undefined);
    await runner.start();
    await eventually(async () => expect(await stateOf('a')).toBe('done'));
  });
});
