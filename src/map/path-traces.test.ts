import { describe, expect, it } from 'vitest';
import type { LonLat } from '../../shared/schemas/basics';
import type { EstimateWater, Reach } from '../../shared/schemas/estimate';
import type { MapView } from './mercator';
import { toWorld } from './mercator';
import { pathTraces } from './path-traces';

const view: MapView = { zoom: 14, scale: 2 ** 14, offsetX: 0, offsetY: 0, width: 800, height: 600, metresPerPixel: 9.55, seen: { left: 0, top: 0, right: 800, bottom: 600 }, marks: [] };
const pixelOf = (position: LonLat): [number, number] => toWorld(position).map((value) => value * view.scale) as [number, number];

const reach = (id: string, centreline: [number, number, number][], downstreamReachId: string | null): Reach => ({
  id,
  name: id,
  chainagePrefix: 'km',
  centreline,
  downstreamReachId,
  joinsOnBank: null,
  slope: null,
  manningN: null,
  hydraulics: [{ flowName: 'mean', exceededPercent: null, dischargeM3s: 10, widthM: 40, depthM: 1, velocityMps: 0.5 }],
  dispersionM2s: null,
  transverseM2s: null,
  coefficientNote: '',
  calibrated: false,
  tidal: false,
});

/** A river that turns a right angle in its first reach and carries on in a second. */
const river: EstimateWater = {
  kind: 'river',
  registerId: null,
  name: 'River',
  chainageOrigin: '',
  reaches: [reach('a', [[0, 0, 4], [0.01, 0, 3], [0.01, 0.01, 2]], 'b'), reach('b', [[0.01, 0.01, 2], [0.02, 0.01, 1]], null)],
  flow: { name: 'mean', discharges: [], source: '', readAt: null },
  temperatureC: null,
};

const verticesOf = (trace: ReturnType<typeof pathTraces>[number]): [number, number][] =>
  Array.from({ length: trace.upTo[trace.upTo.length - 1]! }, (_, i) => {
    const out = { x: 0, y: 0 };
    trace.at(i, view, out);
    return [out.x, out.y];
  });

describe('lines of random paths', () => {
  it('go straight from place to place in open water, and a line released later starts at its own time', () => {
    const line: LonLat[] = [[0, 0], [0.01, 0.01], [0.02, 0]];
    const water = { kind: 'open', area: [] } as unknown as EstimateWater;
    const [trace] = pathTraces({ timesS: [0, 10, 20, 30], lines: [line] }, water);
    expect(trace!.firstTime).toBe(1);
    expect(trace!.upTo).toEqual([1, 2, 3]);
    expect(verticesOf(trace!)).toEqual(line.map(pixelOf));
  });

  it('follow the bends of a river and its reaches between two places', () => {
    const [trace] = pathTraces({ timesS: [0, 10], lines: [[[0.005, 0], [0.015, 0.01]]] }, river);
    const vertices = verticesOf(trace!);
    expect(trace!.upTo).toEqual([1, vertices.length]);
    for (const corner of [[0.01, 0], [0.01, 0.01]] as LonLat[]) {
      const [x, y] = pixelOf(corner);
      expect(vertices.some(([vx, vy]) => Math.hypot(vx - x, vy - y) < 1)).toBe(true);
    }
  });

  it('keep their bank in the ribbon as it is drawn, wider than the river is', () => {
    // 15 m to the left (north) of a river 40 m wide that runs east and is drawn 17.8 px wide.
    const [trace] = pathTraces({ timesS: [0, 10], lines: [[[0.002, 15 / 111_195], [0.004, 15 / 111_195]]] }, river);
    const [, y] = verticesOf(trace!)[0]!;
    const [, middle] = pixelOf([0.002, 0]);
    expect((middle - y) / 17.8).toBeCloseTo(15 / 40, 1);
  });

  it('leave out a line of a single place', () => {
    expect(pathTraces({ timesS: [0, 10], lines: [[[0, 0]]] }, river)).toEqual([]);
  });
});
