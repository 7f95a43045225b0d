import type { Response } from 'express';

export const STREAM_TYPE = 'application/octet-stream';

/** Raised when the receiver goes away before the answer is complete. */
export function goneSignal(res: Response): AbortSignal {
  const gone = new AbortController();
  res.once('close', () => {
    if (!res.writableFinished) gone.abort();
  });
  return gone.signal;
}

/** Writes messages as they come and waits while the receiver is slow. One listener serves all waits: compression passes listeners on but not their removal. */
export async function sendMessages(res: Response, messages: AsyncIterable<Uint8Array>, signal: AbortSignal): Promise<void> {
  let wake = (): void => undefined;
  res.on('drain', () => wake());
  signal.addEventListener('abort', () => wake(), { once: true });
  for await (const message of messages) {
    if (signal.aborted) break;
    const isTaken = res.write(message);
    flushNow(res);
    if (!isTaken && !signal.aborted) await new Promise<void>((resolve) => (wake = resolve));
  }
  res.end();
}

/** Compression holds small writes back unless told otherwise. */
export const flushNow = (res: Response): void => (res as Response & { flush?: () => void }).flush?.();
