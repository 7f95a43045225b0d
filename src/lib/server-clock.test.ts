import { afterEach, describe, expect, it, vi } from 'vitest';
import { noteServerDate, serverNowMs } from './server-clock';

const now = Date.parse('2031-05-12T14:40:00Z');

describe('the clock', () => {
  afterEach(() => {
    noteServerDate(new Date(now).toUTCString(), now);
    vi.useRealTimers();
  });

  it('follows the server where this device is wrong', () => {
    vi.useFakeTimers({ now });
    noteServerDate('Mon, 12 May 2031 15:10:00 GMT', now);
    expect(serverNowMs()).toBe(Date.parse('2031-05-12T15:10:00Z'));
  });

  it('keeps the time of this device where the difference is no more than the way of an answer, or not told', () => {
    vi.useFakeTimers({ now });
    noteServerDate('Mon, 12 May 2031 14:39:58 GMT', now);
    expect(serverNowMs()).toBe(now);
    noteServerDate(null, now);
    noteServerDate('soon', now);
    expect(serverNowMs()).toBe(now);
  });
});
