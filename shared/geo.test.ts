import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { LonLat } from './schemas/basics';
import { alongReach, distanceM, fromPlane, isInArea, snapToReaches, toPlane } from './geo';

const lon = fc.double({ min: -170, max: 170, noNaN: true });
const lat = fc.double({ min: -70, max: 70, noNaN: true });

describe('the local plane', () => {
  it('is its own way back', () =>
    fc.assert(
      fc.property(lon, lat, fc.double({ min: -5e4, max: 5e4, noNaN: true }), fc.double({ min: -5e4, max: 5e4, noNaN: true }), (originLon, originLat, x, y) => {
        const plane = { originLon, originLat };
        const [bx, by] = toPlane(plane, fromPlane(plane, x, y));
        expect(Math.hypot(bx - x, by - y)).toBeLessThan(1e-6);
      }),
    ));

  it('agrees with the great circle within 0.1 % at 10 km', () =>
    fc.assert(
      fc.property(lon, fc.double({ min: -55, max: 55, noNaN: true }), fc.double({ min: 0, max: 6.28, noNaN: true }), (originLon, originLat, angle) => {
        const there = fromPlane({ originLon, originLat }, 1e4 * Math.cos(angle), 1e4 * Math.sin(angle));
        // The plane keeps the cosine of its origin: off by half the difference in latitude times its tangent, 1e-3 at 55 degrees.
        expect(Math.abs(distanceM([originLon, originLat], there) / 1e4 - 1)).toBeLessThan(1.3e-3);
      }),
    ));

  it('one degree of latitude is 111.2 km', () => expect(distanceM([10, -44], [10, -45])).toBeCloseTo(111_195, -1));
});

describe('areas', () => {
  const ring = (half: number): LonLat[] => [[-half, -half], [half, -half], [half, half], [-half, half], [-half, -half]];

  it('leave out their islands', () => {
    expect(isInArea([0.5, 0.5], [ring(1), ring(0.2)])).toBe(true);
    expect(isInArea([0.1, 0.1], [ring(1), ring(0.2)])).toBe(false);
    expect(isInArea([1.5, 0], [ring(1)])).toBe(false);
    expect(isInArea([0, 0], [])).toBe(false);
  });
});

describe('snapping to a river that runs east', () => {
  const reaches = [
    { id: 'upper', centreline: [[0, 0, 20], [0.1, 0, 10]] as [number, number, number][] },
    { id: 'lower', centreline: [[0.1, 0, 10], [0.2, 0, 0]] as [number, number, number][] },
  ];

  it('finds reach, chainage and bank looking downstream', () => {
    expect(snapToReaches([0.05, 0.001], reaches)).toMatchObject({ reachId: 'upper', bank: 'left' });
    const south = snapToReaches([0.15, -0.001], reaches)!;
    expect(south).toMatchObject({ reachId: 'lower', bank: 'right' });
    expect(south.chainageKm).toBeCloseTo(5, 9);
    expect(south.distanceM).toBeCloseTo(111.2, 1);
  });

  it('finds nothing without reaches', () => expect(snapToReaches([0, 0], [])).toBeNull());

  it('is undone by the place along the reach', () =>
    fc.assert(
      fc.property(fc.double({ min: 10.1, max: 19.9, noNaN: true }), fc.double({ min: -200, max: 200, noNaN: true }), (km, offset) => {
        const { position, bearingDeg } = alongReach(reaches[0]!, km, offset);
        expect(bearingDeg).toBeCloseTo(90, 9);
        const snap = snapToReaches(position, reaches)!;
        expect(snap.chainageKm).toBeCloseTo(km, 6);
        expect(snap.distanceM).toBeCloseTo(Math.abs(offset), 3);
        if (Math.abs(offset) > 0.01) expect(snap.bank).toBe(offset > 0 ? 'left' : 'right');
      }),
    ));

  it('keeps to the ends of a reach', () => {
    expect(alongReach(reaches[0]!, 25).position[0]).toBeCloseTo(0, 12);
    expect(alongReach(reaches[0]!, 3).position[0]).toBeCloseTo(0.1, 12);
  });
});
