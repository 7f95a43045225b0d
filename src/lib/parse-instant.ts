import { civilAt, daysInMonth, type CivilDay } from '../../shared/civil';

type Parsed<T> = { ok: true; value: T } | { ok: false; why: string };

const months = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec'];

/** A day as typed: 2031-05-12, 12 May 2031, 12 May, today, tomorrow, yesterday. 05/12/2031 is refused: it can be read two ways. */
export function parseDay(typed: string, nowMs: number, offset: string): Parsed<CivilDay> {
  const text = typed.trim().toLowerCase();
  const shift = { yesterday: -1, today: 0, tomorrow: 1 }[text];
  if (shift !== undefined) {
    const { year, month, day } = civilAt(nowMs + shift * 86_400_000, offset);
    return { ok: true, value: { year, month, day } };
  }
  const iso = /^(\d{4})-(\d{1,2})-(\d{1,2})$/.exec(text);
  if (iso) return existing({ year: Number(iso[1]), month: Number(iso[2]), day: Number(iso[3]) }, typed);
  const words = /^(?:[a-z]{3,9},? )?(\d{1,2})\.? ([a-z]{3,9})\.?(?: (\d{4}))?$/.exec(text);
  const month = words ? months.indexOf(words[2]!.slice(0, 3)) + 1 : 0;
  if (words && month > 0) return existing({ year: words[3] ? Number(words[3]) : civilAt(nowMs, offset).year, month, day: Number(words[1]) }, typed);
  if (/^\d{1,2}[/.-]\d{1,2}[/.-]\d{2,4}$/.test(text)) return { ok: false, why: `"${typed.trim()}" can be read two ways: type the day as 2031-05-12 or 12 May 2031` };
  return { ok: false, why: text === '' ? 'Give the day, for example 2031-05-12' : `"${typed.trim()}" is not a day: type 2031-05-12 or 12 May 2031` };
}

function existing(day: CivilDay, typed: string): Parsed<CivilDay> {
  if (day.month < 1 || day.month > 12) return { ok: false, why: `"${typed.trim()}" has no such month: months run from 1 to 12` };
  const last = daysInMonth(day.year, day.month);
  if (day.day < 1 || day.day > last) return { ok: false, why: `"${typed.trim()}" does not exist: that month has ${last} days` };
  if (day.year < 1900 || day.year > 2199) return { ok: false, why: `The year ${day.year} is out of range: give one from 1900 to 2199` };
  return { ok: true, value: day };
}

/** A time of day as typed: 06:40, 6:40, 0640, 6.40. */
export function parseTimeOfDay(typed: string): Parsed<{ hour: number; minute: number }> {
  const text = typed.trim();
  const match = /^(\d{1,2})[:.h](\d{2})$/i.exec(text) ?? /^(\d{2})(\d{2})$/.exec(text);
  if (!match) return { ok: false, why: text === '' ? 'Give the time, for example 06:40' : `"${text}" is not a time: type it as 06:40` };
  const hour = Number(match[1]);
  const minute = Number(match[2]);
  if (hour > 23 || minute > 59) return { ok: false, why: `"${text}" is past the end of the day: times run from 00:00 to 23:59` };
  return { ok: true, value: { hour, minute } };
}
