import { describe, expect, it } from 'vitest';
import { encodeValues, NO_ESTIMATE, type ChannelGrid, type PlaneGrid } from '../../shared/frames';
import { distanceM, fromPlane, toPlane } from '../../shared/geo';
import type { LonLat } from '../../shared/schemas/basics';
import type { EstimateWater } from '../../shared/schemas/estimate';
import type { Level } from '../../shared/schemas/estimate-result';
import { alongCourse, courseOf, coursePoint } from './channel-course';
import { bridgedCodes, drawnLevels, type Frame } from './frame';
import { metresPerWorldUnit, toWorld, type MapView } from './mercator';
import { prepareFrame, THIN_RIBBON_PX } from './sheets';
import { traceLines, traceRings } from './trace';

const scale = { floor: 1e-9, top: 1 };
const levels: Level[] = [{ value: 1e-4, isActionValue: true, label: '' }];

/** A half circle of 500 m radius, downstream anticlockwise from the east, 24 m wide. */
const RADIUS_M = 500;
const centre = { originLon: -116.9, originLat: -44.45 };
const bend: [number, number, number][] = Array.from({ length: 41 }, (_, k) => {
  const angle = (Math.PI * k) / 40;
  const [lon, lat] = fromPlane(centre, RADIUS_M * Math.cos(angle), RADIUS_M * Math.sin(angle));
  return [lon, lat, 10 - (angle * RADIUS_M) / 1_000];
});
const river: EstimateWater = {
  kind: 'river', registerId: null, name: 'River', chainageOrigin: '', temperatureC: null,
  flow: { name: 'Q50', discharges: [], source: '', readAt: null },
  reaches: [{
    id: 'bend', name: 'Bend', chainagePrefix: 'km', centreline: bend, downstreamReachId: null, joinsOnBank: null, slope: null, manningN: null,
    hydraulics: [{ flowName: 'Q50', exceededPercent: 50, dischargeM3s: 9, widthM: 24, depthM: 1, velocityMps: 0.4 }],
    dispersionM2s: null, transverseM2s: null, coefficientNote: '', calibrated: false, tidal: false,
  }],
};
const viewAt = (zoom: number): MapView => {
  const [x, y] = toWorld([centre.originLon, centre.originLat]);
  const worldScale = 2 ** zoom;
  return { zoom, scale: worldScale, offsetX: x * worldScale - 600, offsetY: y * worldScale - 400, width: 1_200, height: 800, metresPerPixel: metresPerWorldUnit(centre.originLat) / worldScale, seen: { left: 0, top: 0, right: 1_200, bottom: 800 }, marks: [] };
};

/** A cloud on the right bank half way round the bend. */
function bendFrame(nAcross: number): Frame {
  const chainageKm = Array.from({ length: 30 }, (_, k) => 9.9 - k * 0.045);
  const values = chainageKm.flatMap((km) => Array.from({ length: nAcross }, (_, i) => 0.01 * Math.exp(-(((km - 9.2) / 0.12) ** 2)) * Math.exp(-6 * (1 - i / (nAcross - 1)))));
  const grid: ChannelGrid = { kind: 'channel', parts: [{ reachId: 'bend', chainageKm, nAcross }] };
  return { head: { type: 'frame', index: 0, timeS: 0, grid, scale, max: 0.01 }, codes: encodeValues(Float64Array.from(values), scale) };
}

function pixelsOf(zoom: number, frame: Frame): { points: [number, number][]; ribbon: number } {
  const view = viewAt(zoom);
  const [entry] = prepareFrame(frame, levels, river).sheets;
  const sheet = entry!.full;
  const points: [number, number][] = [];
  const add = (x: number, y: number) => void points.push([x, y]);
  traceRings(sheet.bands[0]!, sheet.placeIn(view), sheet.bends, { moveTo: add, lineTo: add, closePath: () => undefined });
  return { points, ribbon: entry!.widthPx(view) };
}

describe('contours in a river', () => {
  it('stay inside the ribbon round a bend, at every zoom', () => {
    for (const zoom of [12, 14, 16, 17]) {
      const { points, ribbon } = pixelsOf(zoom, bendFrame(9));
      expect(points.length).toBeGreaterThan(20);
      const perPixel = viewAt(zoom).metresPerPixel;
      for (const [x, y] of points) {
        const fromAxisPx = Math.abs(Math.hypot(x - 600, y - 400) - RADIUS_M / perPixel);
        // The drawn centreline is a polygon of 40 sides: it lies up to 1 - cos(pi/80) = 0.08 % of the radius inside the circle;
        // and the local plane reckons with the mean radius of the Earth, the projection with the equatorial one, 0.11 % more.
        expect(fromAxisPx).toBeLessThanOrEqual(ribbon / 2 + (0.002 * RADIUS_M) / perPixel);
      }
    }
  });

  it('bend with the river between grid nodes', () => {
    const { points } = pixelsOf(16, bendFrame(9));
    const steps = points.slice(1).map(([x, y], k) => Math.hypot(x - points[k]![0], y - points[k]![1]));
    // A step along the river is at most 6 px; across, a cell of a ninth of the ribbon.
    expect(Math.max(...steps)).toBeLessThan(12);
  });

  it('lie on the bank where the cloud is', () => {
    const { points, ribbon } = pixelsOf(16, bendFrame(9));
    const middle = points.reduce((sum, [x, y]) => sum + Math.hypot(x - 600, y - 400), 0) / points.length;
    // Downstream runs anticlockwise, so the right bank is the outer one.
    expect(middle * viewAt(16).metresPerPixel).toBeGreaterThan(RADIUS_M + (ribbon * viewAt(16).metresPerPixel) / 8);
  });

  it('fill the whole width from the largest value across where the ribbon is too thin to show more', () => {
    const [entry] = prepareFrame(bendFrame(9), levels, river).sheets;
    expect(entry!.widthPx(viewAt(10))).toBeLessThan(THIN_RIBBON_PX);
    const { points } = entry!.thin!.bands[0]!;
    const across = [...points].filter((_, k) => k % 2 === 0);
    expect(new Set(across)).toEqual(new Set([0, 1]));
  });

  it('draw one line across at each end of a thin cloud, and none along the banks', () => {
    const sheet = prepareFrame(bendFrame(9), levels, river).sheets[0]!.thin!;
    const lines = traceLines(sheet, sheet.bands[0]!, sheet.placeIn(viewAt(12)));
    expect(lines.ends).toHaveLength(2);
  });

  it('show a section of one node as wide as the river', () => {
    const frame = bendFrame(9);
    const grid: ChannelGrid = { kind: 'channel', parts: [{ reachId: 'bend', chainageKm: [9.9, 9.5, 9.1], nAcross: 1 }] };
    const narrow: Frame = { head: { ...frame.head, grid }, codes: encodeValues(Float64Array.of(0, 0.01, 0), scale) };
    const sheet = prepareFrame(narrow, levels, river).sheets[0]!.full;
    expect([sheet.nx, sheet.bands[0]!.ends.length]).toEqual([2, 1]);
  });
});

describe('a course', () => {
  it('keeps its normals at unit length and to the left of the stream', () => {
    const course = courseOf({ id: 'bend', centreline: bend });
    const point = coursePoint();
    for (let km = 8.44; km < 10; km += 0.037) {
      alongCourse(course, km, point);
      expect(Math.hypot(point.leftX, point.leftY)).toBeCloseTo(1, 12);
      const [cx, cy] = toWorld([centre.originLon, centre.originLat]);
      // Anticlockwise: the centre of the bend is on the left.
      expect((cx - point.x) * point.leftX + (cy - point.y) * point.leftY).toBeGreaterThan(0);
    }
  });
});

/* ---------- open water ---------- */

const grid: PlaneGrid = { kind: 'plane', ...centre, x0M: -2_000, y0M: -2_000, dxM: 50, dyM: 50, nx: 81, ny: 81 };
const square = (half: number): LonLat[] => [[-half, -half], [half, -half], [half, half], [-half, half], [-half, -half]].map(([x, y]) => fromPlane(centre, x!, y!));
const openWater = (area: LonLat[][]): EstimateWater => ({
  kind: 'open', registerId: null, waterKind: 'lake', name: 'Lake', area, depthM: 10, mixingDepthM: 10, current: [], mixing: { kind: 'okubo', varianceFactor: 1 }, straightShore: null, coefficientNote: '', calibrated: false,
});
const valueAt = (x: number, y: number): number => 0.01 * Math.exp(-((x / 600) ** 2) - (y / 400) ** 2);
function openFrame(isLand: (x: number, y: number) => boolean = () => false): Frame {
  const values = Float64Array.from({ length: 81 * 81 }, (_, k) => {
    const [x, y] = [-2_000 + 50 * (k % 81), -2_000 + 50 * Math.floor(k / 81)];
    return isLand(x, y) ? 0 : valueAt(x, y);
  });
  return { head: { type: 'frame', index: 0, timeS: 0, grid, scale, max: 0.01 }, codes: encodeValues(values, scale) };
}

describe('contours on open water', () => {
  it('lie where the concentration is the level, on the ground', () => {
    const sheet = prepareFrame(openFrame(), levels, openWater([square(1_990)])).sheets[0]!.full;
    const { points } = sheet.bands[0]!;
    for (let k = 0; k < points.length; k += 2) {
      const [x, y] = [-2_000 + 50 * points[k]!, -2_000 + 50 * points[k + 1]!];
      // In logarithms the field is a parabola: a chord over 50 m of it misses by at most 50^2 / (4 * 400^2) = 0.4 %.
      expect(Math.abs(Math.log(valueAt(x, y) / 1e-4))).toBeLessThan(0.005);
    }
  });

  it('are placed within a pixel of where the projection puts them', () => {
    const sheet = prepareFrame(openFrame(), levels, openWater([square(1_990)])).sheets[0]!.full;
    const view = viewAt(15);
    const out = new Float64Array(2);
    sheet.placeIn(view)(60.5, 20.25, out);
    const [wx, wy] = toWorld(fromPlane(centre, -2_000 + 60.5 * 50, -2_000 + 20.25 * 50));
    expect(Math.hypot(out[0]! - (wx * view.scale - view.offsetX), out[1]! - (wy * view.scale - view.offsetY))).toBeLessThan(0.05);
  });

  it('run up to the shore instead of closing in front of it', () => {
    // The shore lies at x = 300 m; nodes beyond it are land and say 0.
    const shore: LonLat[] = [[-1_990, -1_990], [310, -1_990], [310, 1_990], [-1_990, 1_990], [-1_990, -1_990]].map(([x, y]) => fromPlane(centre, x!, y!));
    const sheet = prepareFrame(openFrame((x) => x > 310), levels, openWater([shore])).sheets[0]!.full;
    const { points } = sheet.bands[0]!;
    const east = Math.max(...[...points].filter((_, k) => k % 2 === 0)) * 50 - 2_000;
    expect(east).toBeGreaterThan(320);
    // Nothing is drawn in the wet part where the level is not reached: its outline north of the middle is the true one.
    const north = Math.max(...[...points].filter((_, k) => k % 2 === 1)) * 50 - 2_000;
    expect(Math.abs(north - 400 * Math.sqrt(Math.log(100)))).toBeLessThan(10);
  });

  it('leave nodes without an estimate as boxes to hatch', () => {
    const frame = openFrame();
    frame.codes[40 * 81 + 40] = frame.codes[40 * 81 + 41] = NO_ESTIMATE;
    const sheet = prepareFrame(frame, levels, openWater([square(1_990)])).sheets[0]!.full;
    expect(sheet.blanks).toEqual([[39.5, 41.5, 39.5, 40.5]]);
    expect(sheet.bands[0]!.ends).toHaveLength(1);
  });

  it('refuse a frame whose values do not match its grid', () => {
    const frame = openFrame();
    expect(() => prepareFrame({ ...frame, codes: frame.codes.subarray(1) }, levels, openWater([square(1_990)]))).toThrow(/6560 values where its grid has 6561/);
  });
});

describe('frames', () => {
  it('bridge nodes without a value by their neighbours and leave whole frames as they are', () => {
    const whole = Uint16Array.of(1, 2, 3, 4);
    expect(bridgedCodes(whole, 2, 2)).toBe(whole);
    expect([...bridgedCodes(Uint16Array.of(10, NO_ESTIMATE, 30, 40, 50, 60), 3, 2)]).toEqual([10, Math.round((10 + 30 + 40 + 50 + 60) / 5), 30, 40, 50, 60]);
    expect([...bridgedCodes(Uint16Array.of(10, 0, 30), 3, 1, Uint8Array.of(0, 1, 0))]).toEqual([10, 20, 30]);
  });

  it('draw levels once each, lowest first, the action value before a plain level of the same size', () => {
    const plain = (value: number): Level => ({ value, isActionValue: false, label: '' });
    const action: Level = { value: 2, isActionValue: true, label: 'intake' };
    expect(drawnLevels([plain(3), action, plain(2), plain(1), plain(0)])).toEqual([plain(1), action, plain(3)]);
  });
});

it('distances of the test bend are those of its chainage', () => {
  // Guards the fixture: chords of 40 sides are 0.03 % shorter than the arc.
  const length = bend.slice(1).reduce((sum, [lon, lat], k) => sum + distanceM([bend[k]![0], bend[k]![1]], [lon, lat]), 0);
  expect(length / (Math.PI * RADIUS_M)).toBeCloseTo(1, 2);
  expect(toPlane(centre, [bend[0]![0], bend[0]![1]])[0]).toBeCloseTo(RADIUS_M, 6);
});
