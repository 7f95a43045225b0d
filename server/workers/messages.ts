import type { MessagePort } from 'node:worker_threads';
import type { StreamHead } from '../../shared/frames';
import type { FieldError } from '../../shared/problem';
import type { EstimateDocument } from '../../shared/schemas/estimate';

/** What a worker is handed. Without a document it warms itself up. */
export type SolveTask = {
  doc: EstimateDocument | null;
  preview: boolean;
  /** [0] set by the caller to cancel, [1] set by the worker when it has begun. */
  flags: Int32Array;
  port: MessagePort | null;
};
export const CANCEL = 0;
export const BEGUN = 1;

/** One message of the estimate's stream; the payload is transferred. */
export type SolveMessage = { head: StreamHead; payload: Uint8Array };

/** How a task ended. Errors come back as data, because a thrown class does not survive the way between threads. */
export type SolveOutcome = { kind: 'done' } | { kind: 'cancelled' } | { kind: 'refused'; errors: FieldError[] };
