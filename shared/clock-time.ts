/** Minutes of an offset such as "-08:00". */
export function offsetMinutes(utcOffset: string): number {
  const sign = utcOffset.startsWith('-') ? -1 : 1;
  return sign * (Number(utcOffset.slice(1, 3)) * 60 + Number(utcOffset.slice(4, 6)));
}

/** An instant as clock time with its offset, for example 2031-05-12T08:55:00-08:00. */
export const toOffsetIso = (ms: number, utcOffset: string): string =>
  `${new Date(ms + offsetMinutes(utcOffset) * 60_000).toISOString().slice(0, 19)}${utcOffset}`;

/**
 * Steps in which a time is shown: 5 min within 2 h after T0, 15 min within 12 h, 1 h beyond. Finer figures would
 * promise more than an estimate holds. Common practice, no source.
 */
const stepS = (elapsedS: number): number => (elapsedS < 2 * 3_600 ? 300 : elapsedS < 12 * 3_600 ? 900 : 3_600);

const rounded = (startMs: number, elapsedS: number, utcOffset: string, round: (value: number) => number): string => {
  const step = stepS(elapsedS) * 1_000;
  const shift = offsetMinutes(utcOffset) * 60_000;
  return toOffsetIso(round((startMs + elapsedS * 1_000 + shift) / step) * step - shift, utcOffset);
};

/** Clock time of an arrival, rounded to the safe side: earlier. */
export const arrivalClock = (startMs: number, elapsedS: number, utcOffset: string): string => rounded(startMs, elapsedS, utcOffset, Math.floor);

/** Clock time of an end, rounded to the safe side: later. */
export const endClock = (startMs: number, elapsedS: number, utcOffset: string): string => rounded(startMs, elapsedS, utcOffset, Math.ceil);
