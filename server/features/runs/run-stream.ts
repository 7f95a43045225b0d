import { type StreamHead, writeMessage } from '../../../shared/frames';
import type { RunRow } from '../../db/entities/incident.entities';
import type { ChangeBus } from '../../jobs/change-bus';
import { isActive } from './run.presenter';
import type { RunRepository } from './run.repository';

const BATCH = 16;

/**
 * The messages of a run: those stored, then those that come while it is solved, at last its result or its
 * failure. Reads no further than the receiver takes.
 */
export async function* runMessages(runId: string, repository: RunRepository, changes: ChangeBus, signal: AbortSignal): AsyncGenerator<Uint8Array> {
  const bell = listen(changes, runId, signal);
  try {
    for (let position = -1; !signal.aborted; ) {
      // The state is read before the messages: whatever an ended run has stored is then sure to be among them.
      const state = (await repository.findHead(runId))?.state;
      if (!state) return;
      const rows = await repository.messagesAfter(runId, position, BATCH);
      for (const row of rows) {
        yield row.message;
        position = row.position;
      }
      if (rows.length === BATCH) continue;
      if (!isActive(state)) {
        const run = await repository.find(runId);
        if (run) yield writeMessage(lastHead(run));
        return;
      }
      await bell.next();
    }
  } finally {
    bell.close();
  }
}

function lastHead(run: RunRow): StreamHead {
  if (run.state === 'done' && run.result) return { type: 'result', result: run.result };
  if (run.failure) return { type: 'failed', title: 'This run failed', ...run.failure };
  return { type: 'failed', code: 'cancelled', title: 'This run was cancelled', detail: 'It was cancelled before it was solved. Run the revision again', errors: [] };
}

/** Rings whenever something was stored for the run; a ring between two waits is kept. */
function listen(changes: ChangeBus, runId: string, signal: AbortSignal) {
  let isRung = false;
  let wake: () => void = () => undefined;
  const ring = () => {
    isRung = true;
    wake();
  };
  const unsubscribe = changes.subscribe((event) => {
    if (event.topic === 'run' && event.id === runId) ring();
  });
  signal.addEventListener('abort', ring);
  return {
    async next(): Promise<void> {
      if (!isRung) await new Promise<void>((resolve) => (wake = resolve));
      isRung = false;
    },
    close(): void {
      unsubscribe();
      signal.removeEventListener('abort', ring);
    },
  };
}
