import { setTimeout as pause } from 'node:timers/promises';
import { describe, expect, it } from 'vitest';
import { MessageReader, type StreamHead } from '../../../shared/frames';
import { RunRecorder } from './run-recorder';

const none = new Uint8Array(0);
const progress = (done: number): StreamHead => ({ type: 'progress', stage: 'frames', done, of: 100 });
const frame = (index: number): StreamHead => ({ type: 'frame', index, timeS: index, grid: { kind: 'channel', parts: [] }, scale: { floor: 1e-9, top: 1 }, max: 0 });

describe('the recorder of a run', () => {
  it('stores the first message at once and hundreds of later ones in a few batches', async () => {
    const batches: number[] = [];
    const recorder = new RunRecorder(async ({ messages }) => void batches.push(messages.length) === undefined, () => undefined);
    recorder.add(frame(0), none);
    await pause(20);
    expect(batches).toEqual([1]);
    for (let i = 1; i < 400; i++) recorder.add(frame(i), none);
    await recorder.finish();
    expect(batches.reduce((sum, count) => sum + count)).toBe(400);
    expect(batches.length).toBeLessThanOrEqual(3);
  });

  it('numbers messages without a gap and keeps their order', async () => {
    const stored: [number, number][] = [];
    const recorder = new RunRecorder(async ({ firstPosition, messages }) => {
      messages.forEach((message, i) => stored.push([firstPosition + i, (new MessageReader().push(message)[0]!.head as { index: number }).index]));
      return true;
    }, () => undefined);
    for (let i = 0; i < 30; i++) {
      recorder.add(frame(i), none);
      if (i % 10 === 0) await pause(1);
    }
    await recorder.finish();
    expect(stored).toEqual(Array.from({ length: 30 }, (_none, i) => [i, i]));
  });

  it('hands on progress without a message of its own, the latest only', async () => {
    const seen: (number | undefined)[] = [];
    const recorder = new RunRecorder(async (batch) => void seen.push(batch.progress?.done) === undefined, () => undefined);
    for (let done = 1; done <= 50; done++) recorder.add(progress(done), none);
    await recorder.finish();
    expect(seen.at(-1)).toBe(50);
    expect(seen.length).toBeLessThanOrEqual(2);
  });

  it('stores nothing more once the run takes no more', async () => {
    let calls = 0;
    const recorder = new RunRecorder(async () => ++calls > 1, () => undefined);
    recorder.add(frame(0), none);
    await pause(5);
    recorder.add(frame(1), none);
    await recorder.finish();
    expect(calls).toBe(1);
  });

  it('tells when storing fails', async () => {
    const lost: unknown[] = [];
    const recorder = new RunRecorder(() => Promise.reject(new Error('disk full')), (error) => lost.push(error));
    recorder.add(frame(0), none);
    await recorder.finish();
    expect(lost).toMatchObject([{ message: 'disk full' }]);
  });
});
