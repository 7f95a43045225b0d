import { MessageChannel, receiveMessageOnPort } from 'node:worker_threads';
import { Piscina } from 'piscina';
import type { StreamHead } from '../../shared/frames';
import type { EstimateDocument } from '../../shared/schemas/estimate';
import type { EstimateResult } from '../../shared/schemas/estimate-result';
import { SolverCancelled, SolverInputError } from '../solver/errors';
import { BEGUN, CANCEL, type SolveMessage, type SolveOutcome, type SolveTask } from './messages';

/** A worker that has not noticed its cancel flag by then is ended, ms. */
const HARD_STOP_MS = 2_000;

export type SolveInWorkerOptions = {
  /** Previews and runs have a thread each, so that a long run never holds up a forecast. */
  preview?: boolean;
  onMessage?: (head: StreamHead, payload: Uint8Array) => void;
  signal?: AbortSignal;
};

type Lane = 'preview' | 'run';
const lanes = new Map<Lane, Piscina>();

function laneOf(name: Lane): Piscina {
  const known = lanes.get(name);
  if (known) return known;
  const lane = new Piscina({
    filename: new URL('./solve.worker.ts', import.meta.url).href,
    execArgv: ['--import', loaderUrl()],
    minThreads: 1,
    maxThreads: 1,
    idleTimeout: Infinity,
  });
  lanes.set(name, lane);
  return lane;
}

/** The loader of TypeScript, found from here where the host can tell, else from the working folder. */
const loaderUrl = (): string => (typeof import.meta.resolve === 'function' ? import.meta.resolve('tsx') : 'tsx');

/** Starts both lanes and lets them solve small documents, in the background. */
export function warmPool(): void {
  for (const name of ['preview', 'run'] as const) {
    const task: SolveTask = { doc: null, preview: true, flags: newFlags(), port: null };
    laneOf(name)
      .run(task)
      .catch(() => undefined);
  }
}

export async function closePool(): Promise<void> {
  const all = [...lanes.values()];
  lanes.clear();
  await Promise.all(all.map((lane) => lane.destroy()));
}

const newFlags = (): Int32Array => new Int32Array(new SharedArrayBuffer(8));

/**
 * Solves a document on a worker thread. Messages arrive in order as they are ready; the promise gives the result.
 * On abort it rejects at once; the worker is asked to stop, and ended when it does not within two seconds.
 *
 * @throws SolverInputError for a document that cannot be solved, SolverCancelled on abort
 */
export function solveInWorker(doc: EstimateDocument, options: SolveInWorkerOptions = {}): Promise<EstimateResult> {
  const { signal, onMessage } = options;
  if (signal?.aborted) return Promise.reject(new SolverCancelled());
  const { port1, port2 } = new MessageChannel();
  const flags = newFlags();
  const hardStop = new AbortController();
  let result: EstimateResult | null = null;
  let isOpen = true;
  const take = ({ head, payload }: SolveMessage): void => {
    if (!isOpen) return;
    if (head.type === 'result') result = head.result;
    onMessage?.(head, payload);
  };
  const task: SolveTask = { doc, preview: options.preview ?? false, flags, port: port2 };
  port1.on('message', take);
  let hardTimer: NodeJS.Timeout | undefined;
  const solved = laneOf(options.preview ? 'preview' : 'run')
    .run(task, { transferList: [port2], signal: hardStop.signal })
    .then((outcome: SolveOutcome) => {
      // The last messages can lie behind the end of the task.
      for (let left = receiveMessageOnPort(port1); left; left = receiveMessageOnPort(port1)) take(left.message as SolveMessage);
      return resultOf(outcome, result);
    })
    .finally(() => {
      clearTimeout(hardTimer);
      port1.close();
    });
  return new Promise((resolve, reject) => {
    const abort = (): void => {
      isOpen = false;
      Atomics.store(flags, CANCEL, 1);
      // A task still waiting leaves the queue; one that has begun gets time to notice.
      if (Atomics.load(flags, BEGUN) === 0) hardStop.abort();
      else hardTimer = setTimeout(() => hardStop.abort(), HARD_STOP_MS);
      reject(new SolverCancelled());
    };
    signal?.addEventListener('abort', abort, { once: true });
    solved.then(resolve, reject).finally(() => signal?.removeEventListener('abort', abort));
  });
}

function resultOf(outcome: SolveOutcome, result: EstimateResult | null): EstimateResult {
  if (outcome.kind === 'cancelled') throw new SolverCancelled();
  if (outcome.kind === 'refused') throw new SolverInputError(outcome.errors);
  if (!result) throw new Error('The worker ended without a result');
  return result;
}
