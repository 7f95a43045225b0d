/**
 * Calendar and clock without a clock: whole-number arithmetic of the proleptic Gregorian calendar, so that the solver,
 * the browser and the server say the same time. Days count from 1970-01-01.
 */

const DAY_MS = 86_400_000;
const MINUTE_MS = 60_000;

export type CivilDay = { year: number; month: number; day: number };
export type CivilTime = CivilDay & { weekday: number; hour: number; minute: number; second: number };

export const isLeapYear = (year: number): boolean => (year % 4 === 0 && year % 100 !== 0) || year % 400 === 0;
export const daysInMonth = (year: number, month: number): number => (month === 2 ? (isLeapYear(year) ? 29 : 28) : [4, 6, 9, 11].includes(month) ? 30 : 31);

/** Days from 1970-01-01, counting years from March so that the leap day comes last. */
export function daysFromCivil({ year, month, day }: CivilDay): number {
  const y = month <= 2 ? year - 1 : year;
  const marchMonth = (month + 9) % 12;
  const dayOfYear = Math.floor((153 * marchMonth + 2) / 5) + day - 1;
  return y * 365 + Math.floor(y / 4) - Math.floor(y / 100) + Math.floor(y / 400) + dayOfYear - 719_468;
}

export function civilFromDays(days: number): CivilDay {
  const shifted = days + 719_468;
  const era = Math.floor(shifted / 146_097);
  const dayOfEra = shifted - era * 146_097;
  const yearOfEra = Math.floor((dayOfEra - Math.floor(dayOfEra / 1_460) + Math.floor(dayOfEra / 36_524) - Math.floor(dayOfEra / 146_096)) / 365);
  const dayOfYear = dayOfEra - (365 * yearOfEra + Math.floor(yearOfEra / 4) - Math.floor(yearOfEra / 100));
  const marchMonth = Math.floor((5 * dayOfYear + 2) / 153);
  const month = ((marchMonth + 2) % 12) + 1;
  return { year: yearOfEra + era * 400 + (month <= 2 ? 1 : 0), month, day: dayOfYear - Math.floor((153 * marchMonth + 2) / 5) + 1 };
}

/** Minutes east of UTC from "-08:00", "+05:30" or "Z". NaN for anything else. */
export function offsetMinutes(offset: string): number {
  if (offset === 'Z') return 0;
  const match = /^([+-])(\d\d):(\d\d)$/.exec(offset);
  return match ? (match[1] === '-' ? -1 : 1) * (Number(match[2]) * 60 + Number(match[3])) : Number.NaN;
}

/** The calendar day and the time of day at an instant, in an offset. Weekday 0 is Sunday. */
export function civilAt(ms: number, offset: string): CivilTime {
  const local = ms + offsetMinutes(offset) * MINUTE_MS;
  const days = Math.floor(local / DAY_MS);
  const secondOfDay = Math.floor((local - days * DAY_MS) / 1_000);
  return { ...civilFromDays(days), weekday: (((days + 4) % 7) + 7) % 7, hour: Math.floor(secondOfDay / 3_600), minute: Math.floor(secondOfDay / 60) % 60, second: secondOfDay % 60 };
}

/** Instant in ms from calendar parts in an offset. */
export const instantOf = (day: CivilDay, hour: number, minute: number, second: number, offset: string): number =>
  daysFromCivil(day) * DAY_MS + ((hour * 60 + minute) * 60 + second) * 1_000 - offsetMinutes(offset) * MINUTE_MS;

/** Milliseconds from an ISO instant with offset or Z. NaN when it is not one. */
export function instantMs(iso: string): number {
  const match = /^(\d{4})-(\d\d)-(\d\d)T(\d\d):(\d\d)(?::(\d\d)(?:\.(\d{1,9}))?)?(Z|[+-]\d\d:\d\d)$/.exec(iso);
  if (!match) return Number.NaN;
  const [year, month, day, hour, minute, second] = match.slice(1, 7).map((part) => Number(part ?? 0)) as [number, number, number, number, number, number];
  if (month < 1 || month > 12 || day < 1 || day > daysInMonth(year, month) || hour > 23 || minute > 59 || second > 59) return Number.NaN;
  const fraction = match[7] ? Math.floor(Number(`0.${match[7]}`) * 1_000) : 0;
  return instantOf({ year, month, day }, hour, minute, second, match[8]!) + fraction;
}

const two = (n: number): string => String(n).padStart(2, '0');

/** ISO 8601 with offset, to the second: 2031-05-12T06:40:00-08:00. */
export function isoWithOffset(ms: number, offset: string): string {
  const at = civilAt(ms, offset);
  return `${String(at.year).padStart(4, '0')}-${two(at.month)}-${two(at.day)}T${two(at.hour)}:${two(at.minute)}:${two(at.second)}${offset === 'Z' ? '+00:00' : offset}`;
}
