import { formatDuration, formatEntered } from '../../../shared/format';

export type Countdown = { text: string; isPast: boolean };

const FAR_S = 10 * 86_400;
const DAYS_S = 48 * 3_600;
/** Cut to minutes, from two days on to hours, from ten days on to days: never more than there is. */
function write(seconds: number): string {
  if (seconds >= FAR_S) return `${formatEntered(Math.floor(seconds / 86_400))} d`;
  const step = seconds >= DAYS_S ? 3_600 : 60;
  return formatDuration(Math.floor(seconds / step) * step);
}

const FAR_OFF_MS = 30 * 86_400_000;
/** So far ahead that a clock time says more than a countdown. */
export const isFarOff = (ms: number, nowMs: number): boolean => ms - nowMs > FAR_OFF_MS;

/** Time left; after the moment the time since. */
export function countdownTo(ms: number, nowMs: number): Countdown {
  const leftS = (ms - nowMs) / 1_000;
  if (leftS < 0) {
    return { text: leftS > -60 ? 'now' : write(-leftS), isPast: true };
  }
  return { text: leftS < 60 ? 'under 1 min' : write(leftS), isPast: false };
}
