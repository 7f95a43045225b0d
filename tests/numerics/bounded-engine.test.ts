import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { LonLat } from '../../shared/schemas/basics';
import { estimateDocumentSchema, type EstimateDocument, type EstimateDocumentInput } from '../../shared/schemas/estimate';
import { SolverCancelled, SolverInputError } from '../../server/solver/errors';
import { lossClock } from '../../server/solver/loss';
import { Meter } from '../../server/solver/meter';
import { solverFor } from '../../server/solver/solvers';
import { BoundedRun } from '../../server/solver/bounded/bounded-run';
import { boundedWater } from '../../server/solver/bounded/bounded-water';
import { BoundedFlow, flowModes } from '../../server/solver/bounded/flow-modes';
import { planeArea } from '../../server/solver/open/area-mask';
import { currentOf } from '../../server/solver/open/current';
import { toPlane } from '../../shared/geo';
import { places, prepare } from './bounded-helpers';
import { at, openDocument, receptor, release, solve } from './documents';

type Water = Partial<Extract<EstimateDocumentInput['water'], { kind: 'open' }>>;
const ring = (points: readonly (readonly [number, number])[]): LonLat[] => [...points, points[0]!].map(([x, y]) => at(x, y));
const rectangle = (x0: number, y0: number, x1: number, y1: number): LonLat[] => ring([[x0, y0], [x1, y0], [x1, y1], [x0, y1]]);
const lake = rectangle(-2_000, -1_000, 2_000, 1_000);
const island = rectangle(-300, -400, 200, 300);
const streams = [
  { name: 'In', position: at(-2_000, 300), dischargeM3s: 300 },
  { name: 'Out', position: at(2_000, -200), dischargeM3s: -300 },
];
const lakeDocument = (water: Water = {}, rest: Parameters<typeof openDocument>[1] = {}): EstimateDocument =>
  openDocument(
    { waterKind: 'lake', area: [lake, island], current: [], throughflows: streams, mixing: { kind: 'constant', alongM2s: 1, acrossM2s: 0.3 }, ...water },
    { horizonS: 86_400, releases: [release({ position: at(-1_500, 100) })], receptors: [receptor({ position: at(1_200, -300) })], ...rest },
  );

describe('a lake with streams and an island', () => {
  const doc = lakeDocument();
  const { result, messages } = solve(doc, { preview: true });

  it('is solved on a grid without being asked', () => {
    expect(result.solver).toBe('bounded water, finite volumes');
  });

  it('closes its books to 1e-9 of what was released, with a share gone down the outflow', () => {
    const { massReleased, massInWater, massLeft, massLost, massResidual } = result.diagnostics;
    expect(massReleased).toBe(100);
    expect(massLeft).toBeGreaterThan(1);
    expect(massLost).toBe(0);
    expect(Math.abs(massResidual)).toBeLessThan(1e-9);
    expect(massInWater + massLeft).toBeGreaterThan(99.9);
  });

  it('puts nothing on the island and nothing below zero anywhere', () => {
    const field = prepare(doc, { isPreview: true }).gridAt(doc.horizonS, [100]);
    if (field.grid.kind !== 'plane') throw new Error('A lake is drawn on a plane');
    const { grid, values } = field;
    const [ox, oy] = toPlane({ originLon: 0, originLat: 0 }, [grid.originLon, grid.originLat]);
    let onIsland = 0;
    values.forEach((value, k) => {
      const [x, y] = [ox + grid.x0M + (k % grid.nx) * grid.dxM, oy + grid.y0M + Math.floor(k / grid.nx) * grid.dxM];
      expect(value).toBeGreaterThanOrEqual(0);
      if (x < -300 || x > 200 || y < -400 || y > 300) return;
      onIsland++;
      expect(value).toBe(0);
    });
    expect(onIsland).toBeGreaterThan(20);
  });

  it('reaches the intake on the way to the outflow, later than the fastest water', () => {
    const answer = result.receptors[0]!;
    expect(answer.peak.likely).toBeGreaterThan(0);
    expect(answer.leadingEdgeS).toBeGreaterThan(3_600);
  });

  it('gives the same bytes again', () => {
    const again = solve(doc, { preview: true }).messages;
    expect(JSON.stringify(again.map(({ head }) => head))).toBe(JSON.stringify(messages.map(({ head }) => head)));
    again.forEach(({ payload }, n) => expect(Buffer.compare(payload, messages[n]!.payload)).toBe(0));
  });

  it('tells how far it has come, percent by percent, before anything else', () => {
    const { messages: told } = solve({ ...doc, horizonS: 7_200 });
    const steps = told.flatMap(({ head }) => (head.type === 'progress' && head.stage === 'steps' ? [head.done] : []));
    expect(steps.length).toBeGreaterThan(20);
    expect(steps[steps.length - 1]).toBe(100);
    expect([...steps].sort((a, b) => a - b)).toEqual(steps);
    expect(told[0]!.head).toMatchObject({ type: 'progress', of: 100 });
  });

  it('stops when the caller asks', () => {
    let asked = 0;
    expect(() => prepare(doc, { meter: new Meter(() => ++asked > 40) })).toThrow(SolverCancelled);
    expect(asked).toBe(41);
  });

  it('adds up: two releases together are the sum of each alone, to rounding', () => {
    const first = release({ position: at(-1_500, 100) });
    const second = release({ id: 'b', name: 'Second', position: at(-1_000, -600), timing: { kind: 'steady', startS: 3_600, durationS: 7_200 } });
    const preview = (releases: (typeof first)[]) => prepare(lakeDocument({}, { releases }), { isPreview: true });
    const both = preview([first, second]);
    const sum = both.gridAt(80_000, [3, 5]).values.reduce((total, value) => total + value, 0);
    const parts = [[3, 0], [0, 5]].map((weights) => both.gridAt(80_000, weights).values.reduce((total, value) => total + value, 0));
    expect(Math.abs(sum / (parts[0]! + parts[1]!) - 1)).toBeLessThan(1e-12);
    const books = both.books(86_400, [1, 1]);
    const alone = [both.books(86_400, [1, 0]), both.books(86_400, [0, 1])];
    expect(Math.abs(books.left - alone[0]!.left - alone[1]!.left)).toBeLessThan(1e-12);
    expect(books.released).toBe(2);
  });
});

describe('losses on the grid', () => {
  const k = 2e-5;
  const closed = (timing: EstimateDocumentInput['releases'][number]['timing'], applyLoss: boolean): EstimateDocument =>
    lakeDocument({ throughflows: undefined, current: [{ kind: 'wind', windSpeedMps: 5, windFromDeg: 250, driftFraction: 0.01 }] }, { horizonS: 40_000, substance: { name: 'Tracer', loss: { kind: 'first-order', ratePerS: k }, applyLoss }, releases: [release({ position: at(-1_500, 100), timing })] });

  it('take e^-kt of an instantaneous release, to 1e-12', () => {
    const books = prepare(closed({ kind: 'instantaneous' }, true), { isPreview: true }).books(40_000, [1]);
    expect(Math.abs(books.inWater / Math.exp(-k * 40_000) - 1)).toBeLessThan(1e-12);
    expect(Math.abs(books.released - books.inWater - books.lost - books.left)).toBeLessThan(1e-12);
  });

  it('take their share of a release that lasts: (1 - e^-kT)/kT e^-k(t-T), to 1e-9', () => {
    const T = 20_000;
    const books = prepare(closed({ kind: 'steady', startS: 0, durationS: T }, true), { isPreview: true }).books(40_000, [1]);
    const wanted = (-Math.expm1(-k * T) / (k * T)) * Math.exp(-k * (40_000 - T));
    expect(Math.abs(books.inWater / wanted - 1)).toBeLessThan(1e-9);
  });

  it('are shown beside an estimate that leaves them out', () => {
    const doc = closed({ kind: 'steady', startS: 0, durationS: 5_000 }, false);
    const site = prepare(doc, { isPreview: true }).receptor(0, doc.receptors[0]!).responses[0]!;
    const applied = closed({ kind: 'steady', startS: 0, durationS: 5_000 }, true);
    const lossy = prepare(applied, { isPreview: true }).receptor(0, applied.receptors[0]!).responses[0]!;
    expect(site.at(39_000, true)).toBe(lossy.at(39_000, true));
    expect(site.at(39_000, true)).toBeLessThan(site.at(39_000, false));
  });
});

describe('a tide through an open edge', () => {
  const harbour = openDocument(
    {
      waterKind: 'harbour',
      area: [rectangle(-450, -200, 450, 200)],
      depthM: 9,
      mixingDepthM: 9,
      current: [],
      openEdge: { from: at(-40, -200), to: at(40, -200), tideRangeM: 2.3, periodS: 44_712, highWaterS: 0 },
      mixing: { kind: 'constant', alongM2s: 0.5, acrossM2s: 0.5 },
    },
    { horizonS: 2 * 44_712, releases: [release({ position: at(300, 50) })], receptors: [receptor({ position: at(0, -150) })] },
  );

  it('carries some of the release out on each ebb, and the books close to 1e-9', () => {
    const field = prepare(harbour, { isPreview: true });
    const books = field.books(harbour.horizonS, [1]);
    expect(books.left).toBeGreaterThan(0.02);
    // Two ebbs take no more than the prism, 2.3 m of a mean 9 m, could hold if it were stirred, and half as much again near the gap.
    expect(books.left).toBeLessThan(0.8);
    expect(Math.abs(books.released - books.inWater - books.lost - books.left)).toBeLessThan(1e-9);
  });

  it('leaves a uniform field uniform to 1e-12 while the water falls by the whole range', () => {
    const { water } = harbour;
    if (water.kind !== 'open') throw new Error('A harbour is open water');
    const area = planeArea(water.area, 0, 0);
    const start = [{ xM: 300, yM: 50 }];
    const bounded = boundedWater(water, area, (position) => { const [xM, yM] = toPlane({ originLon: 0, originLat: 0 }, [position[0], position[1]]); return { xM, yM }; }, start, 60);
    const level = { amplitudeM: 1.15, periodS: 44_712, highWaterS: 0 };
    const flow = new BoundedFlow(bounded, flowModes({ water: bounded, parts: [], measured: [], releases: start, hasTide: true }), currentOf([]), level);
    const plan = { flow, mixing: water.mixing, releases: [{ release: { ...harbour.releases[0]!, index: 0, release: harbour.releases[0]!, profile: { startS: 0, stopS: 0, isInstant: true, isSteady: false, rate: () => 0, released: () => 1, knotsS: [0] }, amount: { low: null, likely: 1, high: null } as never, capPerKg: Infinity }, ...start[0]! }], horizonS: 22_356, loss: lossClock({ kind: 'none' }, harbour.startAt), isPreview: false, meter: new Meter() };
    const field = BoundedRun.field(plan, 0, null);
    const run = new BoundedRun(plan, [field]);
    for (const { cell } of places(bounded.grid)) field.c[cell] = 1;
    field.released = 1;
    const before = run.volume.reduce((sum, volume) => sum + volume, 0);
    run.advance(22_356, () => undefined);
    for (const { cell } of places(bounded.grid)) expect(Math.abs(field.c[cell]! - 1)).toBeLessThan(1e-12);
    const after = run.volume.reduce((sum, volume) => sum + volume, 0);
    expect(Math.abs(after / before - (9 - 1.15) / (9 + 1.15))).toBeLessThan(1e-9);
    expect(run.figures.worstCourant).toBeLessThanOrEqual(0.5);
  });
});

describe('far from any shore', () => {
  const open = (rest: Parameters<typeof openDocument>[1]): EstimateDocument =>
    openDocument(
      {
        area: [rectangle(-4_000, -3_000, 8_000, 3_000)],
        openEdge: { from: at(8_000, -3_000), to: at(-4_000, -3_000), way: 'longer' },
        current: [{ kind: 'residual', speedMps: 0.15, towardDeg: 90 }],
        mixing: { kind: 'constant', alongM2s: 8, acrossM2s: 4 },
      },
      { horizonS: 50_000, receptors: [receptor({ position: at(4_000, 300) })], ...rest },
    );

  it('a point that the grid starts wider than it is has the right width later: peak to 4 %, time of the peak to 1 %', () => {
    const doc = open({ releases: [release()] });
    const numeric = solve({ ...doc, solver: 'bounded' }).result.receptors[0]!;
    const exact = solve({ ...doc, solver: 'closed-form' }).result.receptors[0]!;
    // A start of 112 m where the cloud is 460 by 650 m at the place.
    expect(Math.abs(numeric.peak.likely! / exact.peak.likely! - 1)).toBeLessThan(0.04);
    expect(Math.abs(numeric.peakS! / exact.peakS! - 1)).toBeLessThan(0.01);
  });

  it('agrees with the closed form: peak to 3 %, time of the peak to 1 %, dose to 1 %', () => {
    const doc = open({ releases: [release({ initialRadiusM: 400 })] });
    const numeric = solve({ ...doc, solver: 'bounded' }).result.receptors[0]!;
    const exact = solve({ ...doc, solver: 'closed-form' }).result.receptors[0]!;
    // Cells of 75 m under a cloud that starts with a standard deviation of 200 m.
    expect(Math.abs(numeric.peak.likely! / exact.peak.likely! - 1)).toBeLessThan(0.03);
    expect(Math.abs(numeric.peakS! / exact.peakS! - 1)).toBeLessThan(0.01);
    expect(Math.abs(numeric.dose.likely! / exact.dose.likely! - 1)).toBeLessThan(0.01);
    expect(Math.abs(numeric.leadingEdgeS! / exact.leadingEdgeS! - 1)).toBeLessThan(0.03);
  });

  it('spreads with age as the closed form does: Okubo, still water, peak to 3 %', () => {
    const doc = openDocument(
      { waterKind: 'lake', area: [rectangle(-3_000, -3_000, 3_000, 3_000)], current: [], mixing: { kind: 'okubo', varianceFactor: 1 } },
      { horizonS: 60_000, releases: [release({ initialRadiusM: 300 })], receptors: [receptor({ position: at(400, 0) })] },
    );
    const numeric = solve({ ...doc, solver: 'bounded' }).result.receptors[0]!;
    const exact = solve({ ...doc, solver: 'closed-form' }).result.receptors[0]!;
    expect(Math.abs(numeric.peak.likely! / exact.peak.likely! - 1)).toBeLessThan(0.03);
  });
});

describe('a release that moves', () => {
  it('leaves its matter along its way: with hardly any spreading the middle of the mass is the middle of the way', () => {
    const doc = lakeDocument(
      { throughflows: undefined, area: [lake], current: [], mixing: { kind: 'constant', alongM2s: 0.01, acrossM2s: 0.01 } },
      {
        horizonS: 7_200,
        releases: [release({ position: at(-1_200, -400), timing: { kind: 'steady', startS: 0, durationS: 3_600 }, path: [{ atS: 0, position: at(-1_200, -400) }, { atS: 3_600, position: at(1_000, 600) }] })],
      },
    );
    const { grid, values } = prepare({ ...doc, solver: 'bounded' }, { isPreview: true }).gridAt(7_200, [1]);
    if (grid.kind !== 'plane') throw new Error('A lake is drawn on a plane');
    const [ox, oy] = toPlane({ originLon: 0, originLat: 0 }, [grid.originLon, grid.originLat]);
    const total = values.reduce((sum, value) => sum + value, 0);
    const mean = (f: (k: number) => number): number => values.reduce((sum, value, k) => sum + value * f(k), 0) / total;
    const x = mean((k) => ox + grid.x0M + (k % grid.nx) * grid.dxM);
    const y = mean((k) => oy + grid.y0M + Math.floor(k / grid.nx) * grid.dxM);
    // Half a cell: each share is laid round its place.
    expect(Math.abs(x + 100)).toBeLessThan(grid.dxM / 2);
    expect(Math.abs(y - 100)).toBeLessThan(grid.dxM / 2);
    // As long as its way: a line of 2,200 m has a standard deviation of a twelfth root of that east.
    const sigma = Math.sqrt(mean((k) => (ox + grid.x0M + (k % grid.nx) * grid.dxM - x) ** 2));
    expect(Math.abs(sigma / (2_200 / Math.sqrt(12)) - 1)).toBeLessThan(0.02);
  });
});

describe('which way a water is solved', () => {
  const nameOf = (doc: EstimateDocument): string => solverFor(doc).name;
  const bare: Water = { throughflows: undefined };

  it('stays with the closed form where nothing asks for a grid', () => {
    expect(nameOf(lakeDocument({ ...bare, area: [lake], current: [{ kind: 'residual', speedMps: 0.02, towardDeg: 90 }] }))).toBe('open water, closed form');
  });

  it.each<[string, Water]>([
    ['streams', {}],
    ['a measured current', { ...bare, area: [lake], measuredCurrents: [{ position: at(0, 0), eastMps: 0.1, northMps: 0 }] }],
    ['an open edge', { ...bare, area: [lake], openEdge: { from: at(2_000, -500), to: at(2_000, 500) } }],
    ['soundings', { ...bare, area: [lake], depthPoints: [{ position: at(0, 0), depthM: 3 }] }],
    ['an island in the way', { ...bare, current: [{ kind: 'residual', speedMps: 0.02, towardDeg: 90 }] }],
  ])('takes the grid for %s', (_name, water) => {
    expect(nameOf(lakeDocument(water))).toBe('bounded water, finite volumes');
  });

  it('leaves an island aside that the cloud never meets', () => {
    expect(nameOf(lakeDocument({ ...bare, current: [{ kind: 'residual', speedMps: 0.005, towardDeg: 270 }], mixing: { kind: 'constant', alongM2s: 0.01, acrossM2s: 0.01 } }))).toBe('open water, closed form');
  });

  it('does as the document says', () => {
    expect(nameOf({ ...lakeDocument(), solver: 'closed-form' })).toBe('open water, closed form');
    expect(() => solverFor({ ...lakeDocument(), solver: 'network' })).toThrow(SolverInputError);
  });
});

describe('streams that do not balance', () => {
  it('are refused in closed water where they would change its volume by more than a fifth, with the figures', () => {
    const doc = lakeDocument({ throughflows: [{ ...streams[0]!, dischargeM3s: 400 }] }, { horizonS: 3 * 86_400 });
    try {
      prepare(doc);
      expect.unreachable('A lake was filled');
    } catch (error) {
      if (!(error instanceof SolverInputError)) throw error;
      expect(error.errors[0]).toMatchObject({ path: 'water.throughflows' });
      expect(error.errors[0]!.message).toContain('400 m³/s');
    }
  });

  it('raise the level a little where they nearly do, and that is told', () => {
    const doc = lakeDocument({ throughflows: [{ ...streams[0]!, dischargeM3s: 40 }, { ...streams[1]!, dischargeM3s: -20 }] });
    const field = prepare(doc, { isPreview: true });
    expect(field.checks.some((check) => check.code === 'level-drift')).toBe(true);
    const books = field.books(doc.horizonS, [1]);
    expect(Math.abs(books.released - books.inWater - books.lost - books.left)).toBeLessThan(1e-9);
  });
});

describe('any lake', () => {
  it('is solved in a preview without a value below zero, with books that close to 1e-9', () =>
    fc.assert(
      fc.property(
        fc.record({
          corner: fc.integer({ min: -800, max: 800 }),
          inflow: fc.double({ min: 0, max: 60, noNaN: true }),
          wind: fc.double({ min: 0, max: 12, noNaN: true }),
          fromDeg: fc.integer({ min: 0, max: 360 }),
          along: fc.double({ min: 0.01, max: 20, noNaN: true }),
          ratio: fc.double({ min: 1, max: 10, noNaN: true }),
          range: fc.double({ min: 0, max: 3, noNaN: true }),
          isOkubo: fc.boolean(),
          lasts: fc.integer({ min: 0, max: 30_000 }),
        }),
        ({ corner, inflow, wind, fromDeg, along, ratio, range, isOkubo, lasts }) => {
          const doc = lakeDocument(
            {
              area: [ring([[-2_000, -1_000], [2_000, -900], [1_700, 1_000 + corner / 2], [corner, 800], [-1_800, 1_100]]), island],
              throughflows: [{ ...streams[0]!, dischargeM3s: inflow }],
              openEdge: { from: at(1_990, -850), to: at(1_900, -200), tideRangeM: range },
              current: [{ kind: 'wind', windSpeedMps: wind, windFromDeg: fromDeg, driftFraction: 0.01 }],
              mixing: isOkubo ? { kind: 'okubo', varianceFactor: ratio } : { kind: 'constant', alongM2s: along, acrossM2s: along / ratio },
            },
            {
              frameCount: 3,
              substance: { name: 'Tracer', loss: { kind: 'first-order', ratePerS: 1e-5 }, applyLoss: lasts % 2 === 0 },
              releases: [release({ position: at(-1_200, 100), timing: lasts < 100 ? { kind: 'instantaneous' } : { kind: 'steady', startS: 0, durationS: lasts } })],
            },
          );
          const field = prepare(estimateDocumentSchema.parse(doc), { isPreview: true });
          const books = field.books(doc.horizonS, [1]);
          expect(Math.abs(books.released - books.inWater - books.lost - books.left)).toBeLessThan(1e-9);
          for (const tS of [doc.horizonS / 3, doc.horizonS]) expect(field.gridAt(tS, [1]).values.every((value) => !(value < 0))).toBe(true);
        },
      ),
      { numRuns: 8 },
    ));
});
