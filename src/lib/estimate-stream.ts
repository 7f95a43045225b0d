import { MessageReader, type EnvelopeHead, type FrameHead, type StreamHead } from '../../shared/frames';

/** A message of an estimate's stream as the page uses it: frames and the envelope come with their codes. */
export type EstimateMessage = Exclude<StreamHead, FrameHead | EnvelopeHead> | { type: 'frame'; frame: { head: FrameHead; codes: Uint16Array } } | { type: 'envelope'; frame: { head: EnvelopeHead; codes: Uint16Array } };

/** Codes are sent little-endian, which is the order of every machine that browsers run on; a payload is a copy and so aligned. */
const codesOf = (payload: Uint8Array): Uint16Array => new Uint16Array(payload.buffer, payload.byteOffset, payload.byteLength >> 1);

const toMessage = (head: StreamHead, payload: Uint8Array): EstimateMessage => {
  if (head.type === 'frame') return { type: 'frame', frame: { head, codes: codesOf(payload) } };
  if (head.type === 'envelope') return { type: 'envelope', frame: { head, codes: codesOf(payload) } };
  return head;
};

/**
 * Reads the stream of an estimate (shared/frames.ts) as it arrives and hands on each message at once. Ends when the
 * stream does; throws when it breaks off inside a message, or when the request is aborted.
 */
export async function readEstimateStream(response: Response, onMessage: (message: EstimateMessage) => void): Promise<void> {
  if (!response.body) throw new Error('The answer to an estimate has no body');
  const messages = new MessageReader();
  const chunks = response.body.getReader();
  try {
    for (;;) {
      const { done, value } = await chunks.read();
      if (done) break;
      for (const { head, payload } of messages.push(value)) onMessage(toMessage(head, payload));
    }
  } finally {
    chunks.releaseLock();
  }
  if (messages.pendingBytes > 0) throw new Error(`The estimate broke off ${messages.pendingBytes} bytes into a message`);
}
