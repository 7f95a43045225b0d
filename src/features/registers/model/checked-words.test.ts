import { describe, expect, it } from 'vitest';
import { agoWords, checkedWords } from './checked-words';

const now = Date.parse('2031-05-12T20:00:00Z');

describe('when an entry was last checked', () => {
  it.each([
    ['2031-05-12', 'today'],
    ['2031-05-11', 'yesterday'],
    ['2031-04-01', '41 days ago'],
    ['2030-03-10', '14 months ago'],
    ['2028-05-01', '3 years ago'],
  ])('is said of %s as %s', (day, words) => expect(agoWords(day, now, '-08:00')).toBe(words));

  it('follows the calendar of the offset, not of UTC', () => {
    expect(agoWords('2031-05-11', Date.parse('2031-05-12T03:00:00Z'), '-08:00')).toBe('today');
  });

  it('asks for a check where it is overdue or never happened', () => {
    expect(checkedWords({ lastCheckedOn: '2030-03-10', isStale: true }, now, '-08:00')).toBe('Last checked 14 months ago: check it');
    expect(checkedWords({ lastCheckedOn: null, isStale: true }, now, '-08:00')).toBe('Never checked: check it');
  });
});
