import { MessageReader, type StreamHead } from '../../../../shared/frames';

/** Hands on each message of an estimate's stream as soon as it is whole. */
export async function readStream(response: Response, onMessage: (head: StreamHead, payload: Uint8Array) => void): Promise<void> {
  if (!response.body) return;
  const messages = new MessageReader();
  const reader = response.body.getReader();
  for (;;) {
    const { done, value } = await reader.read();
    if (done) return;
    for (const { head, payload } of messages.push(value)) onMessage(head, payload);
  }
}
