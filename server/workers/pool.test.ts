import { afterAll, describe, expect, it } from 'vitest';
import type { StreamHead } from '../../shared/frames';
import { SolverCancelled, SolverInputError } from '../solver/errors';
import { solveEstimate } from '../solver/estimate';
import { closePool, solveInWorker } from './pool';
import { warmDocuments } from './warm-documents';

afterAll(closePool);

const [river, coast] = warmDocuments() as [ReturnType<typeof warmDocuments>[number], ReturnType<typeof warmDocuments>[number]];
/** Many receptors and frames: a second of work or more. */
const longCoast = { ...coast, frameCount: 240, receptors: Array.from({ length: 400 }, (_, i) => ({ ...coast.receptors[0]!, id: `x${i}`, position: [0.01 + i * 2e-4, 0.004] as [number, number] })) };

describe('the worker pool', () => {
  it('gives the same result as the solver on this thread, with all messages in order', async () => {
    const heads: StreamHead[] = [];
    let bytes = 0;
    const result = await solveInWorker(river, { preview: true, onMessage: (head, payload) => { heads.push(head); bytes += payload.byteLength; } });
    expect(result).toEqual(solveEstimate(river, () => undefined, { preview: true }));
    expect(heads[0]!.type).toBe('start');
    expect(heads.at(-1)!.type).toBe('result');
    expect(heads.filter((head) => head.type === 'frame').map((head) => head.index)).toEqual(result.frameTimesS.map((_, i) => i));
    expect(bytes).toBeGreaterThan(1_000);
  }, 30_000);

  it('names the field of a document that cannot be solved', async () => {
    const onLand = { ...coast, receptors: [{ ...coast.receptors[0]!, position: [0.5, 0.5] as [number, number] }] };
    await expect(solveInWorker(onLand)).rejects.toMatchObject({ constructor: SolverInputError, errors: [{ path: 'receptors.0.position' }] });
  }, 30_000);

  it('rejects at once on abort, sends nothing more, and the lane goes on', async () => {
    const controller = new AbortController();
    let after = 0;
    const run = solveInWorker(longCoast, { signal: controller.signal, onMessage: () => { if (controller.signal.aborted) after++; else controller.abort(); } });
    await expect(run).rejects.toBeInstanceOf(SolverCancelled);
    const next = await solveInWorker(river);
    expect(next.receptors).toHaveLength(1);
    expect(after).toBe(0);
  }, 30_000);

  it('drops a task that is aborted while it waits', async () => {
    const controller = new AbortController();
    const first = solveInWorker(longCoast);
    const second = solveInWorker(river, { signal: controller.signal });
    controller.abort();
    await expect(second).rejects.toBeInstanceOf(SolverCancelled);
    await expect(first).resolves.toMatchObject({ receptors: { length: 400 } });
  }, 60_000);

  it('answers a preview while a run is being solved', async () => {
    const run = solveInWorker(longCoast);
    let isRunOver = false;
    void run.then(() => { isRunOver = true; });
    await solveInWorker(river, { preview: true });
    expect(isRunOver).toBe(false);
    await run;
  }, 60_000);
});
