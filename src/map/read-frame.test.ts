import { describe, expect, it } from 'vitest';
import { decodeValue, encodeValues, NO_ESTIMATE, type ChannelGrid, type PlaneGrid } from '../../shared/frames';
import { alongReach, fromPlane } from '../../shared/geo';
import type { LonLat } from '../../shared/schemas/basics';
import type { EstimateWater } from '../../shared/schemas/estimate';
import type { Frame } from './frame';
import { readFrameAt } from './read-frame';

const scale = { floor: 1e-9, top: 1 };
const plane = { originLon: 10, originLat: 55 };
const grid: PlaneGrid = { kind: 'plane', ...plane, x0M: -100, y0M: -100, dxM: 50, dyM: 40, nx: 5, ny: 6 };
const codes = encodeValues(Float64Array.from({ length: 30 }, (_, k) => 1e-6 * (k + 1) ** 2), scale);
const frame: Frame = { head: { type: 'frame', index: 0, timeS: 0, grid, scale, max: 1 }, codes };
const at = (i: number, j: number): LonLat => fromPlane(plane, -100 + 50 * i, -100 + 40 * j);
const corners = (half: number): LonLat[] => [[-half, -half], [half, -half], [half, half], [-half, half], [-half, -half]].map(([x, y]) => fromPlane(plane, x!, y!));
const lake = (half = 1_000): EstimateWater => ({
  kind: 'open', registerId: null, waterKind: 'lake', name: 'Lake', area: [corners(half)], depthM: 10, mixingDepthM: 10, current: [], mixing: { kind: 'okubo', varianceFactor: 1 }, straightShore: null, coefficientNote: '', calibrated: false,
});

describe('a reading off the map on open water', () => {
  it('is the decoded value at every node', () => {
    for (let j = 0; j < 6; j++) for (let i = 0; i < 5; i++) expect(readFrameAt(frame, at(i, j), lake())! / decodeValue(codes[j * 5 + i]!, scale)).toBeCloseTo(1, 6);
  });

  it('lies halfway in the logarithm between two nodes', () => {
    const [a, b] = [decodeValue(codes[6]!, scale), decodeValue(codes[7]!, scale)];
    expect(readFrameAt(frame, at(1.5, 1), lake())! / Math.sqrt(a * b)).toBeCloseTo(1, 6);
  });

  it('is nothing on land, and none where there is no estimate', () => {
    expect(readFrameAt(frame, at(4, 4), lake(60))).toBeNull();
    const blank: Frame = { ...frame, codes: codes.slice() };
    blank.codes[6] = NO_ESTIMATE;
    expect(readFrameAt(blank, at(1.2, 1.2), lake())).toBeNull();
    expect(readFrameAt(blank, at(1.8, 1), lake())! / decodeValue(codes[7]!, scale)).toBeCloseTo(1, 6);
  });

  it('is zero in the water round the grid and below the floor', () => {
    expect(readFrameAt(frame, at(12, 3), lake())).toBe(0);
    expect(readFrameAt({ ...frame, codes: new Uint16Array(30) }, at(2, 2), lake())).toBe(0);
  });

  it('is not pulled down by land beside it', () => {
    // The water ends at x = 60 m, so the nodes at x = 100 m are land and say 0.
    const shore: LonLat[] = [[-900, -900], [60, -900], [60, 900], [-900, 900], [-900, -900]].map(([x, y]) => fromPlane(plane, x!, y!));
    const dry: Frame = { ...frame, codes: codes.map((code, k) => (k % 5 === 4 ? 0 : code)) };
    const water = { ...lake(), area: [shore] } as EstimateWater;
    expect(readFrameAt(dry, at(3.1, 2), water)! / decodeValue(codes[13]!, scale)).toBeCloseTo(1, 6);
  });
});

describe('a reading off the map in a river', () => {
  const centreline: [number, number, number][] = [[10, 55, 5], [10.02, 55.005, 3.6], [10.04, 55, 2.2]];
  const reach = { id: 'r', name: 'R', chainagePrefix: 'km', centreline, downstreamReachId: null, joinsOnBank: null, slope: null, manningN: null, hydraulics: [{ flowName: 'Q50', exceededPercent: 50, dischargeM3s: 9, widthM: 40, depthM: 1, velocityMps: 0.4 }], dispersionM2s: null, transverseM2s: null, coefficientNote: '', calibrated: false, tidal: false };
  const river: EstimateWater = { kind: 'river', registerId: null, name: 'River', chainageOrigin: '', temperatureC: null, flow: { name: 'Q50', discharges: [], source: '', readAt: null }, reaches: [reach] };
  const chainageKm = [4.6, 4.2, 3.2, 2.8];
  const channel: ChannelGrid = { kind: 'channel', parts: [{ reachId: 'r', chainageKm, nAcross: 3 }] };
  const values = encodeValues(Float64Array.from({ length: 12 }, (_, k) => 1e-5 * (k + 1)), scale);
  const stream: Frame = { head: { ...frame.head, grid: channel } as Frame['head'], codes: values };

  it('is the decoded value at every node, left bank first', () => {
    chainageKm.forEach((km, j) =>
      [19.9, 0, -19.9].forEach((offsetM, i) => {
        // 10 cm inside the bank and the two planes' difference: a two-hundredth of the way to the next node, whose value differs by up to 100 %.
        expect(readFrameAt(stream, alongReach(reach, km, offsetM).position, river)! / decodeValue(values[j * 3 + i]!, scale)).toBeCloseTo(1, 1);
      }),
    );
    expect(readFrameAt(stream, alongReach(reach, 4.2).position, river)! / decodeValue(values[4]!, scale)).toBeCloseTo(1, 3);
  });

  it('is nothing off the river unless the ribbon is drawn that wide', () => {
    const beside = alongReach(reach, 4.2, 30).position;
    expect(readFrameAt(stream, beside, river)).toBeNull();
    expect(readFrameAt(stream, beside, river, 80)).not.toBeNull();
  });

  it('is zero in the river where the cloud is not', () => {
    expect(readFrameAt(stream, alongReach(reach, 2.4).position, river)).toBe(0);
  });
});
