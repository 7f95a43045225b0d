import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { PlaneGrid } from '../../shared/frames';
import { isInRing, toPlane } from '../../shared/geo';
import { Outliner } from '../../shared/outlines';
import type { LonLat } from '../../shared/schemas/basics';
import type { Reached } from '../../shared/schemas/estimate-result';
import { isochroneTimes } from '../../server/solver/results/isochrones';
import { at, openDocument, reachOf, receptor, release, riverDocument, solve } from './documents';

const areaM2 = (ring: readonly LonLat[]): number => {
  const xy = ring.map((position) => toPlane({ originLon: 0, originLat: 0 }, position));
  return xy.slice(1).reduce((sum, [x, y], k) => sum + (xy[k]![0] * y - x * xy[k]![1]) / 2, 0);
};
const area = (polygons: Reached['envelopePolygons']): number => polygons.flat().reduce((sum, ring) => sum + areaM2(ring), 0);
const isCovered = (position: LonLat, polygons: Reached['envelopePolygons']): boolean => polygons.some(([outer, ...holes]) => isInRing(position, outer!) && !holes.some((hole) => isInRing(position, hole)));
const value = 1e-5;
const reachedOf = (doc: ReturnType<typeof openDocument>): Reached => solve(doc).result.reached!;

describe('lines of first arrival in open water', () => {
  it('pass through a receptor at its own arrival time', () => {
    const places = [1_500, 2_500, 4_000].map((x, i) => receptor({ id: `x${i}`, position: at(x, 40), actionValues: [{ value }] }));
    const { result } = solve(openDocument({}, { receptors: places }));
    for (const [i, answer] of result.receptors.entries()) {
      const arrivalS = answer.answers[0]!.arrivalS.likely!;
      const { isochrones } = result.reached!;
      for (const { timeS, polygons } of isochrones) {
        // Fields lie at most a node's travel apart in time, 2 % of the way here.
        if (timeS > 1.03 * arrivalS) expect(isCovered(places[i]!.position, polygons)).toBe(true);
        if (timeS < 0.97 * arrivalS) expect(isCovered(places[i]!.position, polygons)).toBe(false);
      }
      expect(isochrones.length).toBeGreaterThanOrEqual(4);
    }
  });

  it('lie one inside the next, and all inside the outline of everything reached', () => {
    const current = [{ kind: 'residual', speedMps: 0.05, towardDeg: 90 }, { kind: 'tide', majorMps: 0.3, floodTowardDeg: 80, periodS: 44_712, maxFloodS: 0 }] as const;
    const reached = reachedOf(openDocument({ current: [...current] }, { horizonS: 100_000, receptors: [receptor({ actionValues: [{ value }] })] }));
    const areas = [...reached.isochrones.map(({ polygons }) => area(polygons)), area(reached.envelopePolygons)];
    for (let k = 1; k < areas.length; k++) expect(areas[k]!).toBeGreaterThanOrEqual(areas[k - 1]! * (1 - 1e-3));
  });

  it('go round an island: a hole in the polygon, no line on its shore', () => {
    const island = [at(1_500, -300), at(1_500, 100), at(2_500, 100), at(2_500, -300), at(1_500, -300)];
    const outer = openDocument().water.kind === 'open' ? (openDocument().water as { area: LonLat[][] }).area[0]! : [];
    const reached = reachedOf(openDocument({ area: [outer, island] }, { receptors: [receptor({ actionValues: [{ value: 1e-6 }] })] }));
    const last = reached.isochrones.at(-1)!;
    expect(last.polygons[0]!).toHaveLength(2);
    // Corners are cut by part of a cell of about 60 m.
    expect(Math.abs(areaM2(last.polygons[0]![1]!)) / 400_000).toBeCloseTo(1, 1);
    expect(areaM2(last.polygons[0]![1]!)).toBeLessThan(0);
    for (const [lon, lat] of last.lines.flat()) expect(isInRing([lon, lat], island)).toBe(false);
    expect(isCovered(at(2_000, -100), last.polygons)).toBe(false);
  });

  it('never cover land beyond a shore by more than a tenth of a cell', () => {
    const shore = [at(-20_000, -150), at(20_000, -150), at(20_000, 9_000), at(-20_000, 9_000), at(-20_000, -150)];
    const reached = reachedOf(openDocument({ area: [shore] }, { receptors: [receptor({ actionValues: [{ value: 1e-6 }] })] }));
    const south = Math.min(...reached.envelopePolygons.flat(2).map((position) => toPlane({ originLon: 0, originLat: 0 }, position)[1]));
    expect(south).toBeGreaterThan(-156);
    expect(south).toBeLessThan(-144);
  });

  it('are not claimed without an amount', () => {
    expect(solve(openDocument({}, { releases: [release({ amount: { how: 'unknown' } })], receptors: [receptor({ actionValues: [{ value }] })] })).result.reached).toBeNull();
  });
});

describe('lines of first arrival in a river', () => {
  const figures = { id: 'r', lengthKm: 60, Q: 9, W: 24, H: 0.95, U: 0.395, D: 15, e: 0.04 };
  const doc = (receptors: { km: number }[]) =>
    riverDocument([reachOf(figures)], {
      releases: [release({ position: at(1_000, 0), channel: { reachId: 'r', chainageKm: 59, bank: 'mid' } })],
      receptors: receptors.map(({ km }, i) => receptor({ id: `x${i}`, position: at((60 - km) * 1_000, 0), channel: { reachId: 'r', chainageKm: km, bank: 'left' }, actionValues: [{ value: 1e-4 }] })),
    });

  it('stand where a receptor there would have its arrival', () => {
    const fronts = solve(doc([{ km: 40 }])).result.reached!.isochrones.slice(1, 4);
    const { receptors } = solve(doc(fronts.map(({ fronts: [front] }) => ({ km: front!.chainageKm })))).result;
    fronts.forEach(({ timeS, fronts: all }, i) => {
      expect(all).toHaveLength(1);
      // Between rows 120 m (300 s) apart the logarithm is taken as straight: a fifth of a row.
      expect(Math.abs(receptors[i]!.answers[0]!.arrivalS.likely! - timeS)).toBeLessThan(60);
    });
  });

  it('stand at the same places by parcels of water as by the closed form', () => {
    const [closed, parcels] = (['closed-form', 'network'] as const).map((solver) => solve({ ...doc([{ km: 40 }]), solver }).result.reached!.isochrones);
    expect(parcels!.map(({ timeS }) => timeS)).toEqual(closed!.map(({ timeS }) => timeS));
    // A tenth of a kilometre is four minutes of way, half a section of the parcels' envelope.
    closed!.forEach(({ fronts: [front] }, i) => expect(Math.abs(parcels![i]!.fronts[0]!.chainageKm - front!.chainageKm)).toBeLessThan(0.1));
  });

  it('have polygons as long as the reached stretch and as wide as the river', () => {
    const last = solve(doc([{ km: 40 }])).result.reached!.isochrones.at(-1)!;
    const lengthM = (59 - last.fronts[0]!.chainageKm) * 1_000;
    // The cloud has spread some hundred metres upstream of the release too; five decimals are a metre, 4 % of the width.
    expect(area(last.polygons) / (lengthM * 24)).toBeGreaterThan(0.95);
    expect(area(last.polygons) / (lengthM * 24)).toBeLessThan(1.07);
  });

  it('follow the bends', () => {
    const bend = reachOf(figures, { centreline: [[...at(0, 0), 60], [...at(20_000, 0), 40], [...at(20_000, -20_000), 20], [...at(0, -20_000), 0]] });
    const bent = riverDocument([bend], {
      releases: [release({ position: at(1_000, 0), channel: { reachId: 'r', chainageKm: 59, bank: 'mid' } })],
      receptors: [receptor({ position: at(20_000, -10_000), channel: { reachId: 'r', chainageKm: 30, bank: 'left' }, actionValues: [{ value: 1e-4 }] })],
    });
    const { reached } = solve(bent).result;
    expect(isCovered(at(20_000, -5_000), reached!.isochrones.at(-1)!.polygons)).toBe(true);
    expect(isCovered(at(10_000, -10_000), reached!.isochrones.at(-1)!.polygons)).toBe(false);
  });
});

describe('outlines of a gridded field', () => {
  const grid: PlaneGrid = { kind: 'plane', originLon: 0, originLat: 0, x0M: -2_000, y0M: -2_000, dxM: 50, dyM: 50, nx: 81, ny: 81 };
  const water = openDocument().water;
  const cloud = (f: (x: number, y: number) => number): Float64Array => Float64Array.from({ length: 81 * 81 }, (_, k) => f(-2_000 + (k % 81) * 50, -2_000 + Math.floor(k / 81) * 50));

  it('enclose a normal cloud in the ellipse of its formula', () =>
    fc.assert(
      fc.property(fc.double({ min: 150, max: 400, noNaN: true }), fc.double({ min: 150, max: 400, noNaN: true }), fc.double({ min: 0.02, max: 0.5, noNaN: true }), (sx, sy, level) => {
        const { polygons } = new Outliner(water).above(grid, cloud((x, y) => Math.exp(-(x * x) / (2 * sx * sx) - (y * y) / (2 * sy * sy))), level);
        expect(polygons).toHaveLength(1);
        // A logarithm is a parabola here: straight between nodes it errs by (50/150)^2/8 of an e-folding, and simplifying by 4 m.
        expect(area(polygons) / (2 * Math.PI * sx * sy * -Math.log(level))).toBeCloseTo(1, 1);
      }),
      { numRuns: 30 },
    ));

  it('leave the hole of a ring open', () => {
    const { polygons } = new Outliner(water).above(grid, cloud((x, y) => Math.exp(-(((Math.hypot(x, y) - 1_000) / 200) ** 2))), 0.5);
    expect(polygons).toHaveLength(1);
    expect(polygons[0]!).toHaveLength(2);
    expect(isCovered(at(0, 0), polygons)).toBe(false);
    expect(isCovered(at(1_000, 0), polygons)).toBe(true);
  });
});

describe('times of the lines', () => {
  it('are round and between five and eight over most spans', () =>
    fc.assert(
      fc.property(fc.integer({ min: 600, max: 20 * 86_400 }), (spanS) => {
        const times = isochroneTimes(0, spanS);
        expect(times.length).toBeGreaterThanOrEqual(3);
        expect(times.length).toBeLessThanOrEqual(8);
        expect(times.every((t) => t % 60 === 0 && t > 0 && t <= spanS)).toBe(true);
      }),
    ));
});
