import { civilAt, daysFromCivil } from '../../../../shared/civil';

/** Days since 1970 of a day written 2031-05-12. */
function dayNumber(day: string): number {
  const [year = 0, month = 1, date = 1] = day.split('-').map(Number);
  return daysFromCivil({ year, month, day: date });
}

const counted = (n: number, one: string): string => `${n} ${one}${n === 1 ? '' : 's'} ago`;

/** How long ago a day was, as people say it. */
export function agoWords(day: string, nowMs: number, offset: string): string {
  const days = daysFromCivil(civilAt(nowMs, offset)) - dayNumber(day);
  if (days <= 0) return 'today';
  if (days === 1) return 'yesterday';
  if (days < 60) return counted(days, 'day');
  const months = Math.floor(days / 30.44);
  return months < 24 ? counted(months, 'month') : counted(Math.floor(days / 365.25), 'year');
}

/** "Last checked 14 months ago: check it". */
export function checkedWords(item: { lastCheckedOn: string | null; isStale: boolean }, nowMs: number, offset: string): string {
  if (item.lastCheckedOn === null) return 'Never checked: check it';
  return `Last checked ${agoWords(item.lastCheckedOn, nowMs, offset)}${item.isStale ? ': check it' : ''}`;
}
