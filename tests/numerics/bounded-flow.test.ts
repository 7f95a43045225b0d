import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { toPlane } from '../../shared/geo';
import type { LonLat } from '../../shared/schemas/basics';
import type { OpenWater } from '../../shared/schemas/estimate';
import { SolverInputError } from '../../server/solver/errors';
import { boundedWater, type BoundedWater } from '../../server/solver/bounded/bounded-water';
import { levelOf } from '../../server/solver/bounded/bounded-plan';
import { BoundedFlow, flowModes, velocityAt } from '../../server/solver/bounded/flow-modes';
import { bodiesOf, nearestCell } from '../../server/solver/bounded/cell-grid';
import { MaskedPoisson } from '../../server/solver/bounded/masked-poisson';
import { divergenceAt, emptyFlow, type FaceFlow } from '../../server/solver/bounded/projection';
import { planeArea } from '../../server/solver/open/area-mask';
import { currentOf } from '../../server/solver/open/current';
import { at, openDocument, release } from './documents';
import { box, places } from './bounded-helpers';

const ring = (points: readonly (readonly [number, number])[]): LonLat[] => [...points, points[0]!].map(([x, y]) => at(x, y));
const rectangle = (x0: number, y0: number, x1: number, y1: number): LonLat[] => ring([[x0, y0], [x1, y0], [x1, y1], [x0, y1]]);
const lake = rectangle(-2_000, -1_000, 2_000, 1_000);
const island = rectangle(-300, -200, 300, 200);

const made = (over: Partial<OpenWater>, cells = 60, from: [number, number] = [-1_500, 0]) => {
  const water = openDocument({ waterKind: 'lake', area: [lake], current: [], ...over }, { releases: [release({ position: at(...from) })] }).water as OpenWater;
  const area = planeArea(water.area, 0, 0);
  const toXy = (position: readonly [number, number]) => {
    const [xM, yM] = toPlane({ originLon: 0, originLat: 0 }, [position[0], position[1]]);
    return { xM, yM };
  };
  const releases = [{ xM: from[0], yM: from[1] }];
  const bounded = boundedWater(water, area, toXy, releases, cells);
  const measured = (water.measuredCurrents ?? []).map(({ position, eastMps, northMps }) => ({ ...toXy(position), eastMps, northMps }));
  const level = levelOf(water);
  const modes = flowModes({ water: bounded, parts: water.current, measured, releases, hasTide: level.amplitudeM > 0 });
  return { water: bounded, modes, flow: new BoundedFlow(bounded, modes, currentOf(water.current), level) };
};
const largest = ({ x, y }: FaceFlow): number => Math.max(...x.map(Math.abs), ...y.map(Math.abs));
const through = (water: BoundedWater, flow: FaceFlow, xM: number): number => {
  const { grid } = water;
  const i = Math.round((xM - grid.x0M) / grid.dxM + 0.5);
  let sum = 0;
  for (let j = 0; j < grid.ny; j++) sum += flow.x[j * (grid.nx + 1) + i]!;
  return sum;
};
const streams = [
  { name: 'In', position: at(-2_000, 300), dischargeM3s: 12 },
  { name: 'Out', position: at(2_000, -200), dischargeM3s: -12 },
];

/** Largest gain or loss of a cell that no stream and no level explains, over U h dx. */
function worstDivergence(water: BoundedWater, flow: FaceFlow): number {
  return Math.max(...places(water.grid).map(({ cell }) => Math.abs(divergenceAt(water.grid, flow, cell)))) / largest(flow);
}

describe('the masked Poisson problem', () => {
  it('is solved to the residual asked for on any broken coast', () =>
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1e6 }), (seed) => {
        const grid = box(23, 19, 1, (x, y) => Math.sin(0.9 * x + seed) * Math.cos(0.7 * y - seed) > 0.55);
        const { nx } = grid;
        const k = emptyFlow(grid);
        const joins = (a: number, b: number): boolean => grid.isWater[a] === 1 && grid.isWater[b] === 1;
        for (const { cell } of places(grid)) {
          if (joins(cell, cell - 1)) k.x[cell + Math.floor(cell / nx)] = 1 + 0.5 * Math.sin(cell);
          if (joins(cell, cell - nx)) k.y[cell] = 1 + 0.5 * Math.cos(cell);
        }
        // The right side is A p of a known p, so that it sums to zero on every pond.
        const known = Float64Array.from(grid.isWater, (wet, cell) => (wet ? Math.sin(cell * 1.7) : 0));
        const apply = (p: Float64Array): Float64Array =>
          Float64Array.from(p, (value, cell) => {
            if (grid.isWater[cell] === 0) return 0;
            const face = cell + Math.floor(cell / nx);
            return k.x[face]! * (value - p[cell - 1]!) + k.x[face + 1]! * (value - p[cell + 1]!) + k.y[cell]! * (value - p[cell - nx]!) + k.y[cell + nx]! * (value - p[cell + nx]!);
          });
        const b = apply(known);
        const p = new Float64Array(known.length);
        const rounds = new MaskedPoisson(grid, k.x, k.y).solve(p, b, 1e-10);
        expect(rounds).toBeLessThan(200);
        const again = apply(p);
        // The residual of the recurrence and the true one part by rounding alone.
        expect(Math.max(...again.map((value, cell) => Math.abs(value - b[cell]!)))).toBeLessThan(1e-9);
        expect(bodiesOf(grid).count).toBeGreaterThan(0);
      }),
      { numRuns: 40 },
    ));
});

describe('a current consistent with mass', () => {
  const currents: [string, Partial<OpenWater>][] = [
    ['streams in and out', { throughflows: streams }],
    ['streams round an island', { throughflows: streams, area: [lake, island] }],
    ['wind over a closed lake with an island', { area: [lake, island], current: [{ kind: 'wind', windSpeedMps: 6, windFromDeg: 230, driftFraction: 0.02, turnDeg: 0 }] }],
    ['a stated current past an island, open at both ends', { area: [lake, island], openEdge: { from: at(2_000, -1_000), to: at(-2_000, -1_000), way: 'longer' }, current: [{ kind: 'residual', speedMps: 0.2, towardDeg: 80 }] }],
    ['measured currents and soundings', { throughflows: streams, measuredCurrents: [{ position: at(0, 500), eastMps: 0.05, northMps: 0 }], depthPoints: [{ position: at(-1_500, 0), depthM: 2 }, { position: at(1_000, 500), depthM: 9 }] }],
  ];

  it.each(currents)('neither makes nor loses water in any cell: %s (below 1e-12 of U h dx)', (_name, over) => {
    const { water, flow } = made(over);
    flow.meanOver(0, 60);
    expect(largest(flow.now)).toBeGreaterThan(0.01);
    expect(worstDivergence(water, flow.now)).toBeLessThan(1e-12);
  });

  it.each(currents)('passes no land: %s', (_name, over) => {
    const { water, flow } = made(over);
    flow.meanOver(0, 60);
    const { grid } = water;
    const passable = new Set([...water.openFaces, ...water.streams.flatMap((stream) => stream.faces)].map(({ axis, face }) => `${axis} ${face}`));
    for (let j = 0; j < grid.ny; j++) for (let i = 1; i < grid.nx; i++) if (!grid.isWater[j * grid.nx + i] || !grid.isWater[j * grid.nx + i - 1]) if (!passable.has(`0 ${j * (grid.nx + 1) + i}`)) expect(flow.now.x[j * (grid.nx + 1) + i]).toBe(0);
    for (let cell = grid.nx; cell < grid.nx * grid.ny; cell++) if (!grid.isWater[cell] || !grid.isWater[cell - grid.nx]) if (!passable.has(`1 ${cell}`)) expect(flow.now.y[cell]).toBe(0);
  });

  it('carries the discharge of the streams through every section between them', () => {
    const { water, flow } = made({ throughflows: streams, area: [lake, island] });
    flow.meanOver(0, 60);
    for (const x of [-1_500, -400, 0, 400, 1_500]) expect(Math.abs(through(water, flow.now, x) - 12)).toBeLessThan(1e-9);
  });

  it('in a strip between two streams as wide as it is uniform: Q over depth and width', () => {
    const { water, flow } = made({ throughflows: streams.map((stream) => ({ ...stream, position: at(stream.dischargeM3s > 0 ? -2_000 : 2_000, 0) })) });
    flow.meanOver(0, 60);
    const out = new Float64Array(2);
    // Ends of one width away the unevenness has fallen by e^-2pi or more (Saint-Venant).
    velocityAt(water, flow.now, nearestCell(water.grid, 0, 700)!.cell, out);
    expect(Math.abs(out[0]! / (12 / (5 * 2_000)) - 1)).toBeLessThan(0.02);
  });

  it('meets measured currents to 3 % where the water can run that way', () => {
    const { modes } = made({ throughflows: streams, area: [lake, island], measuredCurrents: [{ position: at(0, 600), eastMps: 0.06, northMps: 0.01 }, { position: at(-1_000, -500), eastMps: -0.03, northMps: 0 }] });
    for (const fit of modes.fits) expect(Math.hypot(fit.gotEastMps - fit.eastMps, fit.gotNorthMps - fit.northMps)).toBeLessThan(0.03 * 0.06);
  });

  it('draws as much water through the open edge as the rising level needs: A dη/dt', () => {
    const { water, flow } = made({ area: [lake, island], openEdge: { from: at(2_000, -400), to: at(2_000, 400), tideRangeM: 1.2, periodS: 44_714, highWaterS: 0 } });
    const areaM2 = places(water.grid).length * water.grid.dxM ** 2;
    const [fromS, toS] = [10_000, 10_600];
    flow.meanOver(fromS, toS);
    const level = (tS: number): number => 0.6 * Math.cos((2 * Math.PI * tS) / 44_714);
    const rise = (level(toS) - level(fromS)) / (toS - fromS);
    const out = water.openFaces.reduce((sum, { axis, face, sign }) => sum + sign * (axis === 0 ? flow.now.x : flow.now.y)[face]!, 0);
    expect(Math.abs(out / (-rise * areaM2) - 1)).toBeLessThan(1e-10);
  });

  it('adds up: the flow of two parts of a current is the sum of their flows', () => {
    const edge = { from: at(2_000, -1_000), to: at(-2_000, -1_000), way: 'longer' as const };
    const parts: OpenWater['current'] = [{ kind: 'residual', speedMps: 0.1, towardDeg: 70 }, { kind: 'tide', name: 'M2', majorMps: 0.3, minorMps: 0.1, floodTowardDeg: 20, periodS: 44_714, maxFloodS: 3_000 }];
    const flows = [[parts[0]!], [parts[1]!], parts].map((current) => {
      const { flow } = made({ area: [lake, island], openEdge: edge, current });
      return Float64Array.from(flow.meanOver(7_000, 7_600).x);
    });
    const scale = Math.max(...flows[2]!);
    flows[2]!.forEach((value, n) => expect(Math.abs(value - flows[0]![n]! - flows[1]![n]!)).toBeLessThan(1e-12 * scale));
  });

  it('keeps a uniform current uniform far from the shore where the edge is open', () => {
    const { water, flow } = made({ openEdge: { from: at(2_000, -1_000), to: at(-2_000, -1_000), way: 'longer' }, current: [{ kind: 'residual', speedMps: 0.2, towardDeg: 90 }] });
    flow.meanOver(0, 60);
    const out = new Float64Array(2);
    velocityAt(water, flow.now, nearestCell(water.grid, 0, 500)!.cell, out);
    // One shore to the south: the current falls off within a cell or five depths of it.
    expect(Math.abs(out[0]! - 0.2)).toBeLessThan(0.002);
    expect(Math.abs(out[1]!)).toBeLessThan(0.002);
  });

  it('is mirrored with the water, to rounding of the iteration', () => {
    const shape: [number, number][] = [[-2_000, -1_000], [2_000, -700], [1_700, 900], [-1_500, 1_000]];
    const streams = [{ name: 'In', position: at(-1_700, 300), dischargeM3s: 12 }, { name: 'Out', position: at(1_850, -200), dischargeM3s: -12 }];
    const plain = made({ area: [ring(shape)], throughflows: streams }, 40);
    const mirror = made({ area: [ring(shape.map(([x, y]) => [-x, y] as [number, number]).reverse())], throughflows: streams.map((stream) => ({ ...stream, position: [-stream.position[0], stream.position[1]] as LonLat })) }, 40, [1_500, 0]);
    const [a, b] = [plain.flow.meanOver(0, 60), mirror.flow.meanOver(0, 60)];
    const { nx, ny } = plain.water.grid;
    const scale = largest(a);
    for (let j = 0; j < ny; j++) for (let i = 0; i <= nx; i++) expect(Math.abs(a.x[j * (nx + 1) + i]! + b.x[j * (nx + 1) + nx - i]!)).toBeLessThan(1e-9 * scale);
  });
});

describe('figures that cannot be', () => {
  const refused = (over: Partial<OpenWater>): string[] => {
    try {
      made(over);
    } catch (error) {
      if (error instanceof SolverInputError) return error.errors.map(({ path }) => path);
      throw error;
    }
    return [];
  };

  it('a stream far from the shore is refused with its place in the list', () => {
    expect(refused({ throughflows: [{ name: 'Brook', position: at(9_000, 0), dischargeM3s: 1 }] })).toEqual(['water.throughflows.0.position']);
  });

  it('an open edge off the outline is refused at the end that is wrong', () => {
    expect(refused({ openEdge: { from: at(2_000, 0), to: at(5_000, 0) } })).toEqual(['water.openEdge.to']);
  });

  it('an open edge without width is refused', () => {
    expect(refused({ openEdge: { from: at(2_000, 0), to: at(2_000, 0) } })).toEqual(['water.openEdge.to']);
  });
});
