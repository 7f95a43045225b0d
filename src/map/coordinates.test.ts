import fc from 'fast-check';
import proj4 from 'proj4';
import { describe, expect, it } from 'vitest';
import { distanceM } from '../../shared/geo';
import type { LonLat } from '../../shared/schemas/basics';
import { coordinateStyles, formatCoordinates, fromUtm, parseCoordinates, toUtm, utmZone } from './coordinates';

const read = (text: string): LonLat => {
  const parsed = parseCoordinates(text);
  if (!parsed.ok) throw new Error(parsed.message);
  return parsed.position;
};
const refusal = (text: string): string => {
  const parsed = parseCoordinates(text);
  return parsed.ok ? 'accepted' : parsed.message;
};
const places = fc.tuple(fc.double({ min: -179.999, max: 179.999, noNaN: true }), fc.double({ min: -79.9, max: 79.9, noNaN: true }));

describe('typed coordinates', () => {
  it('are read in every way people write them', () => {
    const intake: LonLat = [-116.8016, -44.449];
    for (const text of [
      '-44.449, -116.8016',
      '-44.449 -116.8016',
      '-44.449;-116.8016',
      '-44,449; -116,8016',
      '-44,449, -116,8016',
      '44.449 S, 116.8016 W',
      '44.449S 116.8016W',
      'S44.449 W116.8016',
      '116.8016 W 44.449 S',
      '-116.8016, -44.449',
      '−44.449°, −116.8016°',
      "44° 26.94' S, 116° 48.096' W",
      '44 26.94 S 116 48.096 W',
      '-44 26.94 -116 48.096',
      `44°26'56.4"S 116°48'5.76"W`,
      "44° 26′ 56.4″ S, 116° 48′ 5.76″ W",
    ]) {
      const [lon, lat] = read(text);
      expect([text, lon, lat]).toEqual([text, expect.closeTo(intake[0], 9), expect.closeTo(intake[1], 9)]);
    }
  });

  it('come back to within the last figure that was written, in every style', () => {
    // Steps of the last figure: 0.00001 degrees (1.1 m), 0.001 minutes (1.9 m), 1 m; half of it each way, on the diagonal.
    const toleranceM = { decimal: 0.8, minutes: 1.4, utm: 0.8 };
    fc.assert(
      fc.property(places, fc.constantFrom(...coordinateStyles), (position, style) => {
        expect(distanceM(read(formatCoordinates(position, style)), position)).toBeLessThan(toleranceM[style]);
      }),
      { numRuns: 500 },
    );
  });

  it('are refused with what is wrong and how to write it', () => {
    expect(refusal('')).toMatch(/latitude then longitude/);
    expect(refusal('north of the bridge')).toMatch(/is not an angle|latitude then longitude/);
    expect(refusal('-44.449')).toMatch(/latitude then longitude/);
    expect(refusal('44 75.0 S 116 48.0 W')).toMatch(/below 60/);
    expect(refusal('44.5 26.9 S 116 48.0 W')).toMatch(/whole number/);
    expect(refusal('44.4 S 44.5 S')).toMatch(/Both figures are latitudes/);
    expect(refusal('-44.4 S, 116 W')).toMatch(/minus sign and a letter/);
    expect(refusal('88, 10')).toMatch(/off it/);
    expect(refusal('10, 200')).toMatch(/-180 to 180/);
    expect(refusal('11 K 516726 5078031')).toMatch(/N or S for the hemisphere, not K/);
    expect(refusal('61 S 516726 5078031')).toMatch(/1 to 60/);
    expect(refusal('11 S 5016726 5078031')).toMatch(/easting/);
  });

  it('never throw, whatever is typed', () => {
    fc.assert(fc.property(fc.string({ maxLength: 40 }), (text) => void parseCoordinates(text)));
    fc.assert(fc.property(fc.stringMatching(/^[0-9NSEW ,.;'"°-]{0,30}$/), (text) => void parseCoordinates(text)));
  });
});

describe('UTM', () => {
  it('puts the central meridian at 500 km and scales its arc by 0.9996', () => {
    // Arc of the WGS 84 meridian from the equator to 45 degrees by Simpson's rule over the radius of curvature.
    const [a, e2] = [6_378_137, 0.00669437999014];
    const radius = (lat: number) => (a * (1 - e2)) / (1 - e2 * Math.sin(lat) ** 2) ** 1.5;
    const n = 200;
    const h = Math.PI / 4 / n;
    let arc = radius(0) + radius(Math.PI / 4);
    for (let k = 1; k < n; k++) arc += (k % 2 === 1 ? 4 : 2) * radius(k * h);
    arc *= h / 3;
    const north = toUtm([-117, 45]);
    expect(north).toMatchObject({ zone: 11, hemisphere: 'N' });
    // Millimetre: what a survey would notice, and far above the rounding of either series.
    expect(north.eastingM).toBeCloseTo(500_000, 3);
    expect(north.northingM).toBeCloseTo(0.9996 * arc, 3);
    expect(toUtm([-117, -45]).northingM).toBeCloseTo(10_000_000 - 0.9996 * arc, 3);
  });

  it('agrees with the published worked example of the projection', () => {
    // Snyder 1987, Map Projections: A Working Manual, USGS Prof. Paper 1395, numerical example of the ellipsoidal
    // transverse Mercator: Clarke 1866, 40 30 N 73 30 W, central meridian 75 W: x = 127 106.5 m, y = 4 484 124.4 m.
    const [x, y] = proj4('+proj=longlat +ellps=clrk66 +no_defs', '+proj=utm +zone=18 +ellps=clrk66 +units=m +no_defs', [-73.5, 40.5]) as [number, number];
    expect(x - 500_000).toBeCloseTo(127_106.5, 1);
    expect(y).toBeCloseTo(4_484_124.4, 1);
  });

  it('finds its way back', () => {
    fc.assert(
      fc.property(places, (position) => {
        const [lon, lat] = fromUtm(toUtm(position));
        // 1e-8 degrees is a millimetre.
        expect(Math.abs(lon - position[0])).toBeLessThan(1e-8);
        expect(Math.abs(lat - position[1])).toBeLessThan(1e-8);
      }),
    );
  });

  it('keeps the widened zones of southern Norway and Svalbard', () => {
    expect([[4, 60], [2, 60], [8, 75], [10, 75], [22, 75], [34, 75], [180, 0], [-180, 0]].map((position) => utmZone(position as LonLat))).toEqual([32, 31, 31, 33, 35, 37, 60, 1]);
  });
});
