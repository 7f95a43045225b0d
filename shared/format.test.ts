import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { civilAt, instantMs, isoWithOffset } from './civil';
import {
  arrivalStepS,
  formatAmount,
  formatClock,
  formatClockOffset,
  formatClockSpan,
  formatConcentration,
  formatDistance,
  formatDuration,
  formatElapsed,
  formatNumber,
  formatPosition,
  formatRatio,
  roundArrival,
} from './format';

const plain = (text: string) => text.replaceAll('\u202f', ' ');
const T0 = Date.parse('2031-05-12T06:40:00-08:00');

describe('concentrations', () => {
  it('are written with two significant figures in the unit a reader expects', () => {
    expect(formatConcentration(0.0234, 'mass')).toEqual({ text: '23', unit: 'mg/l' });
    expect(formatConcentration(8.54e-6, 'mass')).toEqual({ text: '8.5', unit: 'µg/l' });
    expect(formatConcentration(1e7, 'count')).toEqual({ text: plain('1 000').replace(' ', '\u202f'), unit: 'counts/100 ml' });
  });

  it('change unit after rounding, so that 1,000 µg/l is never shown for 1 mg/l', () => {
    expect(formatConcentration(0.0009996, 'mass')).toEqual({ text: '1.0', unit: 'mg/l' });
  });

  it('say "below" rather than nothing for traces', () => {
    expect(formatConcentration(3e-13, 'mass')).toEqual({ text: 'below 0.001', unit: 'µg/l' });
    expect(formatConcentration(500, 'count').text).toBe('below 1');
  });

  it('say that there is no estimate for what is not a number', () => {
    expect(formatConcentration(Number.NaN, 'mass').text).toBe('no estimate');
  });

  it('are within 5 % of the value whatever its size, because two figures allow half a unit in ten', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-8, max: 5e3, noNaN: true }), (value) => {
        const { text, unit } = formatConcentration(value, 'mass');
        const read = Number(plain(text).replaceAll(' ', '')) * (unit === 'mg/l' ? 1e-3 : 1e-6);
        expect(Math.abs(read - value) / value).toBeLessThanOrEqual(0.05 + 1e-9);
      }),
    );
  });

  it('keep the trailing nought that tells how well the figure is known', () => {
    expect(formatNumber(5)).toBe('5.0');
    expect(formatNumber(0.5)).toBe('0.50');
    expect(plain(formatNumber(4321))).toBe('4 300');
    expect(formatNumber(9.96)).toBe('10');
    expect(formatNumber(9e13)).toBe('9.0 × 10¹³');
  });
});

describe('amounts and ratios', () => {
  it('take the unit that keeps the figure readable', () => {
    expect(formatAmount(0.17, 'mass')).toEqual({ text: '170', unit: 'g' });
    expect(plain(formatAmount(4000, 'mass').text)).toBe('4 000');
    expect(formatAmount(20_000, 'mass')).toEqual({ text: '20', unit: 't' });
    expect(formatAmount(9e13, 'count')).toEqual({ text: '9.0 × 10¹³', unit: 'organisms' });
  });

  it('are called "about so many times"', () => {
    expect(formatRatio(3.21)).toBe('about 3 times');
    expect(formatRatio(1.26)).toBe('about 1.3 times');
    expect(formatRatio(0.42)).toBe('about 0.4 times');
  });
});

describe('arrivals and ends', () => {
  it('round to 5 min under 2 h, 15 min under 12 h, else 1 h', () => {
    expect(roundArrival(3_700, 'early')).toBe(3_600);
    expect(roundArrival(3_700, 'late')).toBe(3_900);
    expect(roundArrival(8_200, 'early')).toBe(8_100);
    expect(roundArrival(30_700, 'late')).toBe(31_500);
    expect(roundArrival(50_000, 'early')).toBe(46_800);
  });

  it('never move an arrival later or an end earlier, nor by a whole step', () => {
    fc.assert(
      fc.property(fc.double({ min: -10_000, max: 3e6, noNaN: true }), (seconds) => {
        const early = roundArrival(seconds, 'early');
        const late = roundArrival(seconds, 'late');
        // One millisecond is the tolerance for times that stand on a step but for rounding of the arithmetic.
        expect(early).toBeLessThanOrEqual(seconds + 1e-3);
        expect(late).toBeGreaterThanOrEqual(seconds - 1e-3);
        expect(seconds - early).toBeLessThan(arrivalStepS(seconds));
        expect(late - seconds).toBeLessThan(arrivalStepS(seconds));
      }),
    );
  });

  it('keep their order: an earlier arrival never rounds to a later time', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 2e5, noNaN: true }), fc.double({ min: 0, max: 2e5, noNaN: true }), (a, b) => {
        expect(roundArrival(Math.min(a, b), 'late')).toBeLessThanOrEqual(Math.max(roundArrival(a, 'late'), roundArrival(b, 'late')));
        expect(roundArrival(Math.min(a, b), 'early')).toBeLessThanOrEqual(Math.min(roundArrival(a, 'early'), roundArrival(b, 'early')));
      }),
    );
  });

  it('stay where they are when they stand on a step already', () => {
    expect(roundArrival(8_100.0000001, 'late')).toBe(8_100);
    expect(roundArrival(8_099.9999999, 'early')).toBe(8_100);
  });
});

describe('times', () => {
  it('are written with day, clock and offset', () => {
    expect(formatClock(T0, '-08:00')).toBe('Mon 12 May 06:40');
    expect(formatClockOffset(T0, '-08:00')).toBe('Mon 12 May 06:40 (UTC-08:00)');
    expect(formatClock(T0, '+05:30')).toBe('Mon 12 May 20:10');
  });

  it('name the second day of a span only when it is another one', () => {
    expect(formatClockSpan(T0, T0 + 3_600_000, '-08:00')).toBe('Mon 12 May 06:40 to 07:40');
    expect(formatClockSpan(T0, T0 + 86_400_000, '-08:00')).toBe('Mon 12 May 06:40 to Tue 13 May 06:40');
  });

  it('agree with the calendar of the language for any instant and come back from their ISO form', () => {
    fc.assert(
      fc.property(fc.integer({ min: -2e12, max: 8e12 }), fc.integer({ min: -14 * 60, max: 14 * 60 }), (ms, minutes) => {
        const offset = `${minutes < 0 ? '-' : '+'}${String(Math.floor(Math.abs(minutes) / 60)).padStart(2, '0')}:${String(Math.abs(minutes) % 60).padStart(2, '0')}`;
        const local = new Date(ms + minutes * 60_000);
        expect(civilAt(ms, offset)).toEqual({
          year: local.getUTCFullYear(),
          month: local.getUTCMonth() + 1,
          day: local.getUTCDate(),
          weekday: local.getUTCDay(),
          hour: local.getUTCHours(),
          minute: local.getUTCMinutes(),
          second: local.getUTCSeconds(),
        });
        expect(instantMs(isoWithOffset(ms, offset))).toBe(Math.floor(ms / 1_000) * 1_000);
      }),
    );
  });

  it('refuse days that no calendar has', () => {
    expect(instantMs('2031-02-29T06:40:00-08:00')).toBeNaN();
    expect(instantMs('2031-05-12T24:00:00-08:00')).toBeNaN();
    expect(instantMs('2031-05-12 06:40')).toBeNaN();
  });

  it('are written as elapsed time and as durations', () => {
    expect(formatElapsed(8_100)).toBe('T+2:15');
    expect(formatElapsed(-600)).toBe('T-0:10');
    expect(formatElapsed(442_800)).toBe('T+123:00');
    expect(formatDuration(8_100)).toBe('2 h 15 min');
    expect(formatDuration(3_599.9)).toBe('1 h');
    expect(formatDuration(273_600)).toBe('3 d 4 h');
    expect(formatDuration(20)).toBe('20 s');
  });
});

describe('places', () => {
  it('are good to 0.1 km and never "0.0 km" for a place that is not here', () => {
    expect(formatDistance(12_345)).toBe('12.3 km');
    expect(formatDistance(30)).toBe('under 0.1 km');
    expect(formatDistance(0)).toBe('0.0 km');
  });

  it('name the half of the globe in words and never print sixty minutes', () => {
    expect(formatPosition([-116.7321, -44.4307], 'decimal')).toBe('44.43070° S, 116.73210° W');
    expect(formatPosition([-116.7321, -44.4307], 'minutes')).toBe('44° 25.842′ S, 116° 43.926′ W');
    expect(formatPosition([1.9999999, 0], 'minutes')).toBe('0° 00.000′ N, 2° 00.000′ E');
  });
});
