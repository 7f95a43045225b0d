import { describe, expect, it } from 'vitest';
import { arrivalClock, endClock, offsetMinutes, toOffsetIso } from './clock-time';

const start = Date.parse('2031-05-12T06:40:00-08:00');

describe('clock times', () => {
  it('carry the offset they are shown in', () => {
    expect(toOffsetIso(start, '-08:00')).toBe('2031-05-12T06:40:00-08:00');
    expect(toOffsetIso(start, '+05:45')).toBe('2031-05-12T20:25:00+05:45');
    expect(Date.parse(toOffsetIso(start, '+05:45'))).toBe(start);
    expect([offsetMinutes('-03:30'), offsetMinutes('+00:00')]).toEqual([-210, 0]);
  });

  it('of arrivals are rounded earlier: to 5 min within 2 h, 15 min within 12 h, 1 h beyond', () => {
    expect(arrivalClock(start, 3_600 + 299, '-08:00')).toBe('2031-05-12T07:40:00-08:00');
    expect(arrivalClock(start, 2 * 3_600 + 19 * 60, '-08:00')).toBe('2031-05-12T08:55:00-08:00');
    expect(arrivalClock(start, 17.9 * 3_600, '-08:00')).toBe('2031-05-12T23:40:00-08:00');
  });

  it('of ends are rounded later', () => {
    expect(endClock(start, 3_600 + 1, '-08:00')).toBe('2031-05-12T07:45:00-08:00');
    expect(endClock(start, 17.9 * 3_600, '-08:00')).toBe('2031-05-13T00:40:00-08:00');
  });

  it('are rounded by the time elapsed since the release, so that every page and every offset tells the same instant', () => {
    expect(Date.parse(arrivalClock(start, 17.9 * 3_600, '+05:45'))).toBe(Date.parse(arrivalClock(start, 17.9 * 3_600, '-08:00')));
  });
});
