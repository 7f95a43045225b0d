import { describe, expect, it } from 'vitest';
import { MessageReader, writeMessage, type FrameHead } from '../../shared/frames';
import { readEstimateStream, type EstimateMessage } from './estimate-stream';

const head: FrameHead = { type: 'frame', index: 3, timeS: 900, grid: { kind: 'plane', originLon: 0, originLat: 0, x0M: 0, y0M: 0, dxM: 1, dyM: 1, nx: 2, ny: 2 }, scale: { floor: 1e-9, top: 1 }, max: 0.5 };
const codes = Uint16Array.of(0, 1, 40_000, 65_535);
const frameBytes = writeMessage(head, new Uint8Array(codes.buffer));
const progressBytes = writeMessage({ type: 'progress', stage: 'frames', done: 1, of: 4 });

const joined = (...parts: Uint8Array[]): Uint8Array => {
  const out = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  parts.reduce((at, part) => (out.set(part, at), at + part.length), 0);
  return out;
};
const responseOf = (bytes: Uint8Array, chunk: number): Response =>
  new Response(
    new ReadableStream<Uint8Array>({
      start(controller) {
        for (let at = 0; at < bytes.length; at += chunk) controller.enqueue(bytes.slice(at, at + chunk));
        controller.close();
      },
    }),
  );

describe('the stream of an estimate', () => {
  it('gives each message whole, however the network cuts it', async () => {
    for (const chunk of [1, 3, 7, 64, 100_000]) {
      const got: EstimateMessage[] = [];
      await readEstimateStream(responseOf(joined(progressBytes, frameBytes, progressBytes), chunk), (message) => got.push(message));
      expect(got.map((message) => message.type)).toEqual(['progress', 'frame', 'progress']);
      const frame = got[1] as Extract<EstimateMessage, { type: 'frame' }>;
      expect(frame.frame.head).toEqual(head);
      expect([...frame.frame.codes]).toEqual([...codes]);
    }
  });

  it('says so when it breaks off inside a message', async () => {
    await expect(readEstimateStream(responseOf(frameBytes.subarray(0, frameBytes.length - 3), 50), () => undefined)).rejects.toThrow(/broke off/);
  });

  it('passes on what went wrong while reading', async () => {
    const broken = new Response(new ReadableStream({ start: (controller) => controller.error(new Error('connection lost')) }));
    await expect(readEstimateStream(broken, () => undefined)).rejects.toThrow('connection lost');
  });
});

describe('a reader of messages', () => {
  it('keeps up with a message far larger than its buffer, in small chunks', () => {
    const payload = new Uint8Array(3_000_000).map((_, k) => k % 251);
    const bytes = joined(progressBytes, writeMessage(head, payload), progressBytes);
    const reader = new MessageReader();
    const got = [];
    for (let at = 0; at < bytes.length; at += 1_000) got.push(...reader.push(bytes.subarray(at, at + 1_000)));
    expect(got.map((message) => message.head.type)).toEqual(['progress', 'frame', 'progress']);
    expect(got[1]!.payload.length).toBe(payload.length);
    expect(got[1]!.payload.every((byte, k) => byte === k % 251)).toBe(true);
    expect(reader.pendingBytes).toBe(0);
  });

  it('hands out payloads that later chunks do not overwrite', () => {
    const reader = new MessageReader();
    const [first] = reader.push(frameBytes);
    for (let k = 0; k < 2_000; k++) reader.push(writeMessage(head, new Uint8Array(80).fill(7)));
    expect([...new Uint16Array(first!.payload.buffer)]).toEqual([...codes]);
  });
});
