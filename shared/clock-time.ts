/** Clock times of what an estimate reckons in seconds after T0. Rounded as everywhere: by the elapsed time, to the safe side. */
import { isoWithOffset } from './civil';
import { roundArrival } from './format';

export { isoWithOffset as toOffsetIso, offsetMinutes } from './civil';

/** Clock time of an arrival, rounded to the safe side: earlier. */
export const arrivalClock = (startMs: number, elapsedS: number, utcOffset: string): string => isoWithOffset(startMs + roundArrival(elapsedS, 'early') * 1_000, utcOffset);

/** Clock time of an end, rounded to the safe side: later. */
export const endClock = (startMs: number, elapsedS: number, utcOffset: string): string => isoWithOffset(startMs + roundArrival(elapsedS, 'late') * 1_000, utcOffset);
