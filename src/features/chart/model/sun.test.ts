import { describe, expect, it } from 'vitest';
import { nightSpans, sunAltitudeDeg } from './sun';

describe('the sun', () => {
  it('stands at the zenith of the northern tropic at the June solstice at noon', () => {
    // Equation of time is about -1.8 min on 21 June: within half a degree of noon at longitude 0.
    expect(sunAltitudeDeg(Date.parse('2031-06-21T12:02:00Z'), 0, 23.44)).toBeGreaterThan(89.4);
  });

  it('makes day and night of equal length at the equator at an equinox, but for refraction and the width of the disc', () => {
    const [night] = nightSpans(Date.parse('2031-03-20T12:00:00Z'), 86_400, 0, 0);
    // Limb and refraction take 2 x 0.833 degrees from the night: 12 h - 6.7 min; edges are found to the minute.
    expect((night!.toS - night!.fromS) / 60).toBeCloseTo(713.3, -0.5);
  });

  it('gives long winter nights in the south', () => {
    const [night] = nightSpans(Date.parse('2031-06-21T20:00:00Z'), 86_400, -117, -44.5);
    expect((night!.toS - night!.fromS) / 3_600).toBeGreaterThan(14.5);
    expect((night!.toS - night!.fromS) / 3_600).toBeLessThan(15.6);
  });
});
