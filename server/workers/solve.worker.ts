import { solveEstimate } from '../solver/estimate';
import { SolverCancelled, SolverInputError } from '../solver/errors';
import type { EstimateSink } from '../solver/types';
import { BEGUN, CANCEL, type SolveMessage, type SolveOutcome, type SolveTask } from './messages';
import { warmDocuments } from './warm-documents';

/** Progress goes out no more often than this, ms. */
const PROGRESS_EVERY_MS = 50;
const WARM_ROUNDS = 4;

/** Solves one task on a worker thread and posts its messages as they are ready. */
export default function solveTask({ doc, preview, flags, port }: SolveTask): SolveOutcome {
  Atomics.store(flags, BEGUN, 1);
  if (!doc || !port) return warm();
  try {
    solveEstimate(doc, postingSink((message, transfer) => port.postMessage(message, transfer)), { preview, isCancelled: () => Atomics.load(flags, CANCEL) === 1 });
    return { kind: 'done' };
  } catch (error) {
    if (error instanceof SolverCancelled) return { kind: 'cancelled' };
    if (error instanceof SolverInputError) return { kind: 'refused', errors: error.errors };
    throw error;
  }
}

function postingSink(post: (message: SolveMessage, transfer: ArrayBuffer[]) => void): EstimateSink {
  let lastProgressMs = 0;
  return (head, payload = new Uint8Array(0)) => {
    if (head.type === 'progress' && head.done < head.of) {
      const nowMs = performance.now();
      if (nowMs - lastProgressMs < PROGRESS_EVERY_MS) return;
      lastProgressMs = nowMs;
    }
    post({ head, payload }, payload.byteLength > 0 ? [payload.buffer as ArrayBuffer] : []);
  };
}

/** Solves small documents a few times, so that the first forecast of a day is not the slow one. */
function warm(): SolveOutcome {
  const documents = warmDocuments();
  for (let round = 0; round < WARM_ROUNDS; round++) for (const doc of documents) solveEstimate(doc, () => undefined, { preview: true });
  return { kind: 'done' };
}
