import { describe, expect, it } from 'vitest';
import { fromPlane } from '../../shared/geo';
import type { EstimateWater } from '../../shared/schemas/estimate';
import { ribbonPx } from './channel-course';
import { isochroneLines, pixelLines } from './isochrone-painter';
import { metresPerWorldUnit, toWorld, type MapView } from './mercator';

const origin = { originLon: -116.9, originLat: -44.45 };
const viewAt = (zoom: number): MapView => {
  const [x, y] = toWorld([origin.originLon, origin.originLat]);
  const scale = 2 ** zoom;
  return { zoom, scale, offsetX: x * scale - 600, offsetY: y * scale - 400, width: 1_200, height: 800, metresPerPixel: metresPerWorldUnit(origin.originLat) / scale, seen: { left: 0, top: 0, right: 1_200, bottom: 800 }, marks: [] };
};
const river = {
  kind: 'river',
  flow: { name: 'Q50', discharges: [] },
  reaches: [{ id: 'r', centreline: [[...fromPlane(origin, -2_000, 0), 4], [...fromPlane(origin, 2_000, 0), 0]], hydraulics: [{ flowName: 'Q50', widthM: 24 }] }],
} as unknown as EstimateWater;

describe('lines of first arrival', () => {
  it('go right across a river where the front stands, a little wider than it is drawn, at every zoom', () => {
    const [line] = isochroneLines([{ timeS: 3_600, polygons: [], lines: [], fronts: [{ reachId: 'r', chainageKm: 2 }] }], river);
    for (const zoom of [10, 13, 16]) {
      const view = viewAt(zoom);
      const [[ax, ay, bx, by]] = pixelLines(line!, view) as [[number, number, number, number]];
      expect(Math.abs(ax - 600)).toBeLessThan(0.5);
      expect(Math.abs(bx - 600)).toBeLessThan(0.5);
      expect(by - ay).toBeCloseTo(ribbonPx(24, view.metresPerPixel, zoom) + 14, 1);
    }
  });

  it('lie on open water where the positions are', () => {
    const places = [fromPlane(origin, 0, 0), fromPlane(origin, 300, 100)];
    const [line] = isochroneLines([{ timeS: 3_600, polygons: [], lines: [places], fronts: [] }], { kind: 'open' } as EstimateWater);
    const view = viewAt(14);
    const [[ax, ay, bx, by]] = pixelLines(line!, view) as [[number, number, number, number]];
    expect([Math.round(ax), Math.round(ay)]).toEqual([600, 400]);
    // Web Mercator is stretched alike in both directions; 0.5 % is the plane's own error there.
    expect(((bx - ax) * view.metresPerPixel) / 300).toBeCloseTo(1, 1);
    expect(((ay - by) * view.metresPerPixel) / 100).toBeCloseTo(1, 1);
  });

  it('on a reach that is not part of the water are left out', () => {
    expect(isochroneLines([{ timeS: 0, polygons: [], lines: [], fronts: [{ reachId: 'other', chainageKm: 2 }] }], river)[0]!.fronts).toEqual([]);
  });
});
