import { offsetMinutes } from '../../../../shared/civil';

const HOUR = 3_600;
const STEPS_S = [300, 600, 900, 1_800, HOUR, 2 * HOUR, 3 * HOUR, 6 * HOUR, 12 * HOUR, 24 * HOUR, 48 * HOUR, 120 * HOUR];

export type Tick = { atS: number; isMidnight: boolean };

/** Ticks at round clock times of the given offset, at most `most` of them. */
export function clockTicks(startMs: number, lengthS: number, offset: string, most: number): Tick[] {
  const stepS = STEPS_S.find((step) => lengthS / step <= most) ?? STEPS_S[STEPS_S.length - 1]!;
  const localStart = startMs / 1_000 + offsetMinutes(offset) * 60;
  const ticks: Tick[] = [];
  for (let at = Math.ceil(localStart / stepS) * stepS; at <= localStart + lengthS; at += stepS) ticks.push({ atS: at - localStart, isMidnight: at % 86_400 === 0 });
  return ticks;
}

/** Round elapsed times, for the second row of ticks. */
export function elapsedTicks(lengthS: number, most: number): number[] {
  const stepS = STEPS_S.find((step) => lengthS / step <= most) ?? STEPS_S[STEPS_S.length - 1]!;
  return Array.from({ length: Math.floor(lengthS / stepS) + 1 }, (_, i) => i * stepS);
}
