import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { join } from 'node:path';
import { afterAll, afterEach, beforeEach, describe, expect, it } from 'vitest';
import { MessageReader, type StreamHead } from '../../shared/frames';
import type { ChangeEvent } from '../../shared/schemas/incidents';
import type { Deps } from '../../server/deps';
import { closeDeps } from '../../server/deps-create';
import { registerRunJobs } from '../../server/features/runs/run.job';
import { runMessages } from '../../server/features/runs/run-stream';
import { RunService } from '../../server/features/runs/run.service';
import { SolverInputError } from '../../server/solver/errors';
import { closePool } from '../../server/workers/pool';
import { buildRiverDocument } from '../helpers/build-document';
import { eventually } from '../helpers/eventually';
import { openDeps, saveRevision, somePlanner, testFolder } from '../helpers/test-deps';

type Solve = NonNullable<Parameters<typeof registerRunJobs>[1]>;

let place: ReturnType<typeof testFolder>;
let deps: Deps;
let runs: RunService;

beforeEach(async () => {
  place = testFolder();
  deps = await openDeps(place.folder);
  runs = new RunService(deps);
});
afterEach(async () => {
  await closeDeps(deps);
  place.remove();
});

afterAll(closePool);

const frame = (index: number): StreamHead => ({ type: 'frame', index, timeS: index, grid: { kind: 'channel', parts: [] }, scale: { floor: 1e-9, top: 1 }, max: 0 });
const stateOf = async (id: string) => (await runs.getHead(id)).state;
const start = async (solve?: Solve, silenceLimitMs?: number) => {
  registerRunJobs(deps, solve, silenceLimitMs);
  await deps.jobs.start();
};
/** Sends one frame and then waits until it is told to stop. */
const hanging: Solve = (_document, { onMessage, signal } = {}) => {
  onMessage?.(frame(0), new Uint8Array(4));
  return new Promise((_resolve, reject) => signal?.addEventListener('abort', () => reject(new Error('aborted'))));
};
const headsOf = async (id: string, signal = new AbortController().signal, seen: StreamHead[] = []) => {
  const reader = new MessageReader();
  for await (const message of runMessages(id, runs.repository, deps.changes, signal)) seen.push(...reader.push(message).map(({ head }) => head));
  return seen;
};
const bytesOf = async (id: string) => {
  const messages: Uint8Array[] = [];
  for await (const message of runMessages(id, runs.repository, deps.changes, new AbortController().signal)) messages.push(message);
  return Buffer.concat(messages);
};

describe('a run', () => {
  it('is solved in a worker and ends with its result, its frames and an audit entry', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    await start();
    await eventually(async () => expect(await stateOf(runId)).toBe('done'));
    const run = await runs.get(somePlanner, runId);
    expect(run.result?.receptors[0]?.receptorId).toBe('int-1');
    expect(run).toMatchObject({ progress: null, failure: null, engineVersion: run.result?.engineVersion, abilities: { cancel: false } });
    const types = (await headsOf(runId)).map(({ type }) => type);
    expect(types[0]).toBe('start');
    expect(types.filter((type) => type === 'frame')).toHaveLength(run.result!.frameTimesS.length);
    expect(types).toContain('envelope');
    expect(types.at(-1)).toBe('result');
    expect(types).not.toContain('receptor');
  }, 60_000);

  it('gives the same bytes for the same revision, engine version and seed', async () => {
    const { runId, scenarioId } = await saveRevision(deps, buildRiverDocument());
    const again = await runs.create(somePlanner, scenarioId, 1);
    await start();
    for (const id of [runId, again.id]) await eventually(async () => expect(await stateOf(id)).toBe('done'));
    const bytes = [await bytesOf(runId), await bytesOf(again.id)];
    expect(bytes[0]!.length).toBeGreaterThan(1_000);
    expect(bytes[0]!.equals(bytes[1]!)).toBe(true);
  }, 60_000);

  it('stores and announces its first frame while the rest is being solved', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    const events: ChangeEvent[] = [];
    deps.changes.subscribe((event) => events.push(event));
    await start(hanging);
    const leaving = new AbortController();
    const seen: StreamHead[] = [];
    const reading = headsOf(runId, leaving.signal, seen);
    await eventually(() => expect(seen).toMatchObject([{ type: 'frame', index: 0 }]));
    expect(await stateOf(runId)).toBe('running');
    expect(events).toContainEqual(expect.objectContaining({ topic: 'run', id: runId, state: 'running' }));
    leaving.abort();
    await reading;
  });

  it('ends at once when it is cancelled, keeps nothing, and tells those who watch', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    let isAborted = false;
    await start((document, options) => hanging(document, options).finally(() => (isAborted = true)));
    await eventually(async () => expect(await stateOf(runId)).toBe('running'));
    const reading = headsOf(runId);
    await runs.cancel(somePlanner, runId);
    await eventually(() => expect(isAborted).toBe(true));
    expect((await reading).at(-1)).toMatchObject({ type: 'failed', code: 'cancelled' });
    expect(await stateOf(runId)).toBe('cancelled');
    expect(await runs.repository.messagesAfter(runId, -1, 10)).toEqual([]);
  });

  it('is never begun when it was cancelled while it waited', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    await runs.cancel(somePlanner, runId);
    let isBegun = false;
    await start(async () => ((isBegun = true), Promise.reject(new Error('begun'))));
    const later = await saveRevision(deps, buildRiverDocument());
    await eventually(async () => expect(await stateOf(later.runId)).toBe('failed'));
    expect(isBegun).toBe(true);
    expect(await stateOf(runId)).toBe('cancelled');
  });

  it('that the solver refuses fails with the fields to mend', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    await start(() => Promise.reject(new SolverInputError([{ path: 'water.reaches.0', message: 'too steep' }])));
    await eventually(async () => expect(await stateOf(runId)).toBe('failed'));
    expect((await runs.getHead(runId)).failure).toMatchObject({ code: 'cannot-be-estimated', errors: [{ path: 'water.reaches.0', message: 'too steep' }] });
    expect((await headsOf(runId)).at(-1)).toMatchObject({ type: 'failed', code: 'cannot-be-estimated' });
  });

  it('that gives no sign for too long is ended, so that the next one gets its turn', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    const next = await saveRevision(deps, buildRiverDocument());
    await start(hanging, 200);
    await eventually(async () => expect(await stateOf(runId)).toBe('failed'));
    expect((await runs.getHead(runId)).failure).toMatchObject({ code: 'silent', detail: expect.stringContaining('no sign') });
    await eventually(async () => expect(await stateOf(next.runId)).toBe('failed'));
  });

  it('that meets a bug fails without telling its inside', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    await start(() => Promise.reject(new Error('Cannot read properties of undefined (secret)')));
    await eventually(async () => expect(await stateOf(runId)).toBe('failed'));
    const { failure } = await runs.getHead(runId);
    expect(failure).toMatchObject({ code: 'internal', errors: [] });
    expect(failure?.detail).toContain(runId);
    expect(failure?.detail).not.toMatch(/undefined|secret/);
  });
});

describe('a restart of the server', () => {
  const children: ChildProcess[] = [];
  afterEach(() => {
    for (const child of children.splice(0)) child.kill('SIGKILL');
  });

  /** Begins the queued run in another process and kills that process without warning. */
  async function crash(): Promise<void> {
    const child = spawn(process.execPath, ['--import', 'tsx', join(import.meta.dirname, '..', 'fixtures', 'hanging-server.ts'), place.folder], { stdio: ['ignore', 'pipe', 'inherit'] });
    children.push(child);
    await once(child.stdout, 'data');
    child.kill('SIGKILL');
    await once(child, 'exit');
  }

  it('solves a run again that a killed server had begun', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    await crash();
    expect(await stateOf(runId)).toBe('running');
    await start();
    await eventually(async () => expect(await stateOf(runId)).toBe('done'));
    expect((await headsOf(runId)).filter(({ type }) => type === 'start')).toHaveLength(1);
  }, 60_000);

  it('fails a run as interrupted that two servers have died on', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    await crash();
    await crash();
    await start();
    await eventually(async () => expect(await stateOf(runId)).toBe('failed'));
    expect((await runs.getHead(runId)).failure?.code).toBe('interrupted');
  }, 60_000);

  it('in good order puts the run back and solves it after the next start', async () => {
    const { runId } = await saveRevision(deps, buildRiverDocument());
    await start(hanging);
    await eventually(async () => expect(await stateOf(runId)).toBe('running'));
    await closeDeps(deps);

    deps = await openDeps(place.folder);
    runs = new RunService(deps);
    expect(await stateOf(runId)).toBe('queued');
    await start();
    await eventually(async () => expect(await stateOf(runId)).toBe('done'));
  }, 60_000);
});
