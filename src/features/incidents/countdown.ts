import { formatDuration } from '../../../shared/format';

export type Countdown = { text: string; isPast: boolean };

/** Time left in whole minutes, never more than there is; after the moment the time since. */
export function countdownTo(ms: number, nowMs: number): Countdown {
  const leftS = (ms - nowMs) / 1_000;
  if (leftS < 0) {
    const since = Math.floor(-leftS / 60) * 60;
    return { text: since === 0 ? 'now' : formatDuration(since), isPast: true };
  }
  const left = Math.floor(leftS / 60) * 60;
  return { text: left === 0 ? 'under 1 min' : formatDuration(left), isPast: false };
}
