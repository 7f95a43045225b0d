import { MessageReader, type StreamHead } from '../../shared/frames';

/** All messages of an answer of the stream kind. */
export async function readHeads(response: Response): Promise<StreamHead[]> {
  const reader = new MessageReader();
  const heads: StreamHead[] = [];
  for await (const chunk of response.body!) heads.push(...reader.push(chunk).map(({ head }) => head));
  return heads;
}

/** Reads server-sent events in the background; `close` leaves. */
export function readEvents(response: Response): { events: Record<string, unknown>[]; text: () => string; ended: Promise<void> } {
  const events: Record<string, unknown>[] = [];
  let text = '';
  const ended = (async () => {
    const decoder = new TextDecoder();
    try {
      for await (const chunk of response.body!) {
        text += decoder.decode(chunk, { stream: true });
        const blocks = text.split('\n\n').slice(0, -1);
        events.splice(0, events.length, ...blocks.filter((block) => block.startsWith('data: ')).map((block) => JSON.parse(block.slice(6)) as Record<string, unknown>));
      }
    } catch {
      // The reader has left.
    }
  })();
  return { events, text: () => text, ended };
}
