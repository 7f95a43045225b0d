import { Worker } from 'node:worker_threads';
import { median, type MakeCase } from '../harness';
import { solveFrames } from '../threads-work';

const FRAMES = 48;
const ROUNDS = 9;
const WARM_UPS = 2;
/** Below this the machine has no second core to give, and the case says nothing. */
const LEAST_PROBE = 1.5;

type Task = { kind: 'spin' | 'frames'; from: number; to: number };

async function startWorker() {
  const worker = new Worker(new URL('../threads-worker.mjs', import.meta.url));
  worker.on('error', (error) => {
    throw error;
  });
  await new Promise((resolve) => worker.once('message', resolve));
  return {
    ask: (task: Task): Promise<Float32Array[]> =>
      new Promise((resolve) => {
        worker.once('message', ({ values }: { values: Float32Array[] }) => resolve(values));
        worker.postMessage(task);
      }),
    stop: () => worker.terminate(),
  };
}

const timed = async (work: () => Promise<unknown>): Promise<number> => {
  const start = performance.now();
  await work();
  return performance.now() - start;
};

export const threadCases: Record<string, MakeCase> = {
  threads: async () => {
    const [a, b] = [await startWorker(), await startWorker()];
    // Frames differ in their cost: each worker takes every other stretch.
    const halves = (kind: Task['kind']): [Task[], Task[]] => {
      const stretches = Array.from({ length: FRAMES / 6 }, (_, k): Task => ({ kind, from: 6 * k, to: 6 * k + 6 }));
      return [stretches.filter((_, k) => k % 4 === 0 || k % 4 === 3), stretches.filter((_, k) => k % 4 === 1 || k % 4 === 2)];
    };
    const run = async (worker: typeof a, tasks: Task[]): Promise<Float32Array[][]> => {
      const out = [];
      for (const task of tasks) out.push(await worker.ask(task));
      return out;
    };
    const one = (kind: Task['kind']) => timed(async () => run(a, halves(kind).flat()));
    const two = (kind: Task['kind']) => timed(async () => Promise.all([run(a, halves(kind)[0]), run(b, halves(kind)[1])]));
    const error = (await a.ask({ kind: 'frames', from: 7, to: 8 }))[0]!.some((value, k) => value !== solveFrames(7, 8)[0]![k]) ? 1 : 0;
    const shares: number[] = [];
    const probes: number[] = [];
    const times: number[] = [];
    for (let round = -WARM_UPS; round < ROUNDS; round++) {
      const probe = (await one('spin')) / (await two('spin'));
      const single = await one('frames');
      const both = await two('frames');
      if (round < 0) continue;
      probes.push(probe);
      shares.push(single / both / probe);
      times.push(both);
    }
    await Promise.all([a.stop(), b.stop()]);
    const probe = median(probes);
    return { peerName: `spin probe ${probe.toFixed(2)}${probe < LEAST_PROBE ? ', too low to judge' : ''}`, error, errorLimit: 0, ours: () => undefined, peer: null, ratio: probe < LEAST_PROBE ? null : median(shares), ms: median(times) };
  },
};
