import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { PlaneGrid } from '../../shared/frames';
import { lossClock } from '../../server/solver/loss';
import { gaussLegendre } from '../../server/solver/math/quadrature';
import { Meter } from '../../server/solver/meter';
import { clearLand, planeArea } from '../../server/solver/open/area-mask';
import { currentOf, alongShore } from '../../server/solver/open/current';
import { gridPuffs } from '../../server/solver/open/grid-puffs';
import { openResponse } from '../../server/solver/open/open-response';
import { addPuffs } from '../../server/solver/open/puff-kernel';
import type { OpenMotion, OpenSource } from '../../server/solver/open/puffs';
import { fixedSpread, okuboSpread, spreadOf } from '../../server/solver/open/spread';
import { normalDensity2, steadyPlume2 } from '../../server/solver/physics/plane';
import { releaseProfile, type ResolvedRelease } from '../../server/solver/release-profile';
import type { CurrentPart, Loss, ReleaseTiming } from '../../shared/schemas/estimate';
import { expectClose } from './close-to';
import { at } from './documents';

const east = (speedMps: number): CurrentPart => ({ kind: 'residual', speedMps, towardDeg: 90 });
const source = (timing: ReleaseTiming, over: Partial<OpenSource> = {}): OpenSource => ({
  release: { index: 0, profile: releaseProfile(timing), capPerKg: Infinity } as ResolvedRelease,
  origins: [{ x: 0, y: 0 }],
  startVarianceM2: 0,
  ...over,
});
const motion = (over: Partial<OpenMotion> = {}): OpenMotion => ({
  current: currentOf([east(0.3)]),
  spread: fixedSpread(2, 0.2, 1, 0),
  loss: lossClock({ kind: 'none' }, '2031-01-01T00:00:00Z'),
  mixingDepthM: 5,
  ...over,
});
const response = (m: OpenMotion, s: OpenSource, x: number, y: number, tolerance = 1e-9) => openResponse(m, s, x, y, 200_000, tolerance, new Meter());
const firstOrder = (ratePerS: number): Loss => ({ kind: 'first-order', ratePerS, source: '' });

describe('an instantaneous release', () => {
  it('at a straight shore is source and mirror: M 100 kg, h 4 m, K 3 m2/s', () => {
    const shore = motion({ current: alongShore(currentOf([east(0.1)]), 1, 0), spread: fixedSpread(3, 3, 1, 0), mixingDepthM: 4 });
    const mirrored = source({ kind: 'instantaneous', atS: 0 }, { origins: [{ x: 0, y: 30 }, { x: 0, y: -30 }] });
    expectClose(100 * response(shore, mirrored, 250, 10).at(2_000, false), 5.73337014829e-4);
  });

  it('lets nothing through the shore: the slope across it is zero at the line', () => {
    const shore = motion({ spread: fixedSpread(3, 3, 1, 0) });
    const mirrored = source({ kind: 'instantaneous', atS: 0 }, { origins: [{ x: 0, y: 30 }, { x: 0, y: -30 }] });
    const value = (y: number): number => response(shore, mirrored, 250, y).at(2_000, false);
    expect(Math.abs(value(0.01) - value(-0.01))).toBeLessThan(1e-12 * value(0));
  });

  it('keeps its mass on a grid to 1e-6, whatever the direction of its axes, once it is a cell wide', () =>
    fc.assert(
      // 0.35 m2/s for an hour is a standard deviation of 50 m, one cell.
      fc.property(fc.double({ min: 0, max: 360, noNaN: true }), fc.double({ min: 0.35, max: 20, noNaN: true }), fc.double({ min: 0.35, max: 20, noNaN: true }), (axis, along, across) => {
        const angle = (axis * Math.PI) / 90;
        const m = motion({ spread: fixedSpread(along, across, Math.cos(angle), Math.sin(angle)) });
        const puffs = gridPuffs(m, source({ kind: 'instantaneous', atS: 0 }), 3_600, 1, 0, false);
        const grid: PlaneGrid = { kind: 'plane', originLon: 0, originLat: 0, x0M: -2_000, y0M: -3_000, dxM: 50, dyM: 50, nx: 140, ny: 121 };
        const values = new Float64Array(grid.nx * grid.ny);
        addPuffs(values, grid, puffs);
        const mass = values.reduce((sum, value) => sum + value, 0) * 50 * 50 * 5;
        expectClose(mass, 1, 1e-6);
        expect(values.every((value) => value >= 0)).toBe(true);
      }),
      { numRuns: 40 },
    ));

  it('keeps its mass to 3e-4 where it is narrower than a cell, because it is widened to one that sums well', () => {
    const grid: PlaneGrid = { kind: 'plane', originLon: 0, originLat: 0, x0M: -2_013, y0M: -3_007, dxM: 50, dyM: 50, nx: 140, ny: 121 };
    for (const along of [0.001, 0.02, 0.1, 0.3]) {
      const values = new Float64Array(grid.nx * grid.ny);
      addPuffs(values, grid, gridPuffs(motion({ spread: fixedSpread(along, along / 5, 0, 1) }), source({ kind: 'instantaneous', atS: 0 }), 3_600, 1, 0, false));
      // A normal curve of 0.7 cells sums to one within 2 exp(-2 pi^2 0.49) = 1.3e-4 along each axis.
      expectClose(values.reduce((sum, value) => sum + value, 0) * 50 * 50 * 5, 1, 3e-4);
    }
  });

  it('drawn row by row agrees with the formula at every node inside the cut', () => {
    const spread = fixedSpread(8, 1, Math.cos(1.1), Math.sin(1.1));
    const m = motion({ spread });
    const grid: PlaneGrid = { kind: 'plane', originLon: 0, originLat: 0, x0M: 200, y0M: -900, dxM: 11, dyM: 13, nx: 160, ny: 150 };
    const values = new Float64Array(grid.nx * grid.ny);
    addPuffs(values, grid, gridPuffs(m, source({ kind: 'instantaneous', atS: 0 }), 3_600, 7, 0, false));
    const s = new Float64Array(3);
    spread.gained(0, 3_600, s);
    const peak = (7 / 5) * normalDensity2(0, 0, s[0]!, s[1]!, s[2]!);
    for (let j = 0; j < grid.ny; j += 7)
      for (let i = 0; i < grid.nx; i += 5) {
        const wanted = (7 / 5) * normalDensity2(200 + 11 * i - 1_080, -900 + 13 * j, s[0]!, s[1]!, s[2]!);
        // The cut leaves out 1e-7 of the peak.
        expect(Math.abs(values[j * grid.nx + i]! - wanted)).toBeLessThan(1.01e-7 * peak);
      }
  });

  it('turned with its current gives the same concentration at the turned place', () =>
    fc.assert(
      fc.property(fc.double({ min: 0, max: 6.28, noNaN: true }), fc.double({ min: -80, max: 80, noNaN: true }), (turn, off) => {
        const turned = (angle: number): OpenMotion => {
          const current = currentOf([{ kind: 'residual', speedMps: 0.3, towardDeg: 90 - (angle * 180) / Math.PI + 360 }]);
          return motion({ current, spread: spreadOf({ kind: 'constant', alongM2s: 5, acrossM2s: 0.5, turnsWithCurrent: true, axisTowardDeg: 0 }, current, 0, 10_000, null) });
        };
        const [x, y] = [1_000, off];
        const here = response(turned(0), source({ kind: 'instantaneous', atS: 0 }), x, y).at(3_600, false);
        const there = response(turned(turn), source({ kind: 'instantaneous', atS: 0 }), x * Math.cos(turn) - y * Math.sin(turn), x * Math.sin(turn) + y * Math.cos(turn)).at(3_600, false);
        expectClose(there, here, 1e-9);
      }),
      { numRuns: 40 },
    ));
});

describe('a release that lasts', () => {
  it.each([
    [200, 0, 0.00320899273243],
    [200, 15, 0.00208798351464],
    [1_000, 20, 0.00120934683644],
  ])('tends to the steady plume at (%d, %d)', (x, y, wanted) => {
    const m = motion({ loss: lossClock(firstOrder(1e-5), '2031-01-01T00:00:00Z') });
    // 100,000 s at 0.2 kg/s is 20 t; the plume has long been steady.
    const value = 20_000 * response(m, source({ kind: 'steady', startS: 0, durationS: 100_000 }), x, y).at(90_000, true);
    expectClose(value, wanted, 1e-8);
    expectClose(value, 0.2 * steadyPlume2(x, y, 5, 0.3, 2, 0.2, 1e-5), 1e-8);
  });

  it('is found in a reversing current as by a brute sum', () => {
    const current = currentOf([{ kind: 'residual', speedMps: 0.05, towardDeg: 60 }, { kind: 'tide', name: 'M2', majorMps: 0.4, minorMps: 0.1, floodTowardDeg: 20, periodS: 44_712, maxFloodS: 5_000 }]);
    const m = motion({ current, spread: spreadOf({ kind: 'constant', alongM2s: 8, acrossM2s: 1, turnsWithCurrent: true, axisTowardDeg: 0 }, current, 0, 60_000, null) });
    const t = 40_000;
    const [now, then, s] = [new Float64Array(2), new Float64Array(2), new Float64Array(3)];
    const { x: nodes, w } = gaussLegendre(16);
    // A little off the middle of the matter released at 8,000 s.
    current.displacement(t, now);
    current.displacement(8_000, then);
    const [x, y] = [now[0]! - then[0]! + 300, now[1]! - then[1]! - 200];
    const value = response(m, source({ kind: 'steady', startS: 0, durationS: 20_000 }), x, y).at(t, false);
    let brute = 0;
    for (let panel = 0; panel < 400; panel++)
      nodes.forEach((node, i) => {
        const born = 50 * panel + 25 + 25 * node;
        current.displacement(born, then);
        m.spread.gained(born, t, s);
        brute += (w[i]! * 25 * normalDensity2(x - now[0]! + then[0]!, y - now[1]! + then[1]!, s[0]!, s[1]!, s[2]!)) / (5 * 20_000);
      });
    expect(brute).toBeGreaterThan(1e-12);
    expectClose(value, brute, 1e-8);
  });

  it('as one release is the sum of its halves', () => {
    const m = motion({ spread: okuboSpread(1) });
    const whole = response(m, source({ kind: 'steady', startS: 0, durationS: 8_000 }), 3_000, 40).at(14_000, false);
    const first = response(m, source({ kind: 'steady', startS: 0, durationS: 4_000 }), 3_000, 40).at(14_000, false);
    const second = response(m, source({ kind: 'steady', startS: 4_000, durationS: 4_000 }), 3_000, 40).at(14_000, false);
    expectClose(whole, (first + second) / 2, 1e-8);
  });

  it('very short is an instantaneous one', () => {
    const m = motion();
    const short = response(m, source({ kind: 'steady', startS: -0.5, durationS: 1 }), 900, 20).at(3_000, false);
    // A second in a passage of ten minutes: second order in the ratio.
    expectClose(short, response(m, source({ kind: 'instantaneous', atS: 0 }), 900, 20).at(3_000, false), 1e-5);
  });

  it('on a grid agrees with the quadrature at the same places', () => {
    const m = motion({ spread: okuboSpread(3) });
    const s = source({ kind: 'steady', startS: 0, durationS: 7_200 });
    const grid: PlaneGrid = { kind: 'plane', originLon: 0, originLat: 0, x0M: 2_000, y0M: -200, dxM: 4, dyM: 4, nx: 120, ny: 100 };
    const values = new Float64Array(grid.nx * grid.ny);
    addPuffs(values, grid, gridPuffs(m, s, 10_800, 50, 0.7 * 4, false));
    const peak = values.reduce((most, value) => Math.max(most, value), 0);
    for (const [i, j] of [[10, 50], [60, 50], [60, 60], [100, 40]] as const) {
      const exact = 50 * response(m, s, 2_000 + 4 * i, -200 + 4 * j).at(10_800, false);
      // Eight points a stretch of four standard deviations, and the cut: 1e-5 of the peak.
      expect(Math.abs(values[j * grid.nx + i]! - exact)).toBeLessThan(1e-5 * peak);
    }
  });
});

describe('currents', () => {
  const parts: CurrentPart[] = [
    east(0.1),
    { kind: 'wind', windSpeedMps: 8, windFromDeg: 225, driftFraction: 0.02, turnDeg: -10 },
    { kind: 'tide', name: 'M2', majorMps: 0.4, minorMps: -0.1, floodTowardDeg: 33, periodS: 44_712, maxFloodS: 7_000 },
    { kind: 'series', rows: [{ atS: -5_000, eastMps: 0, northMps: 0.1 }, { atS: 10_000, eastMps: 0.2, northMps: 0 }, { atS: 50_000, eastMps: -0.1, northMps: 0.1 }] },
  ];

  it('displacement is the integral of velocity, also before T0', () => {
    const current = currentOf(parts);
    const [v, a, b] = [new Float64Array(2), new Float64Array(2), new Float64Array(2)];
    const { x, w } = gaussLegendre(20);
    for (const [from, to] of [[-4_000, 0], [0, 9_000], [12_000, 40_000]] as const) {
      current.displacement(from, a);
      current.displacement(to, b);
      const sum = [0, 0];
      x.forEach((node, i) => {
        current.velocity((from + to) / 2 + ((to - from) / 2) * node, v);
        sum[0]! += (w[i]! * v[0]! * (to - from)) / 2;
        sum[1]! += (w[i]! * v[1]! * (to - from)) / 2;
      });
      // 20 Gauss points on at most a period of the tide: rounding.
      expect(b[0]! - a[0]!).toBeCloseTo(sum[0]!, 7);
      expect(b[1]! - a[1]!).toBeCloseTo(sum[1]!, 7);
    }
  });

  it('wind from the south-west drives water to the north-east', () => {
    const v = new Float64Array(2);
    currentOf([{ kind: 'wind', windSpeedMps: 10, windFromDeg: 225, driftFraction: 0.03, turnDeg: 0 }]).velocity(0, v);
    expect(v[0]).toBeCloseTo(0.3 * Math.SQRT1_2, 12);
    expect(v[1]).toBeCloseTo(0.3 * Math.SQRT1_2, 12);
  });

  it('never exceed their stated bound', () => {
    const current = currentOf(parts);
    const v = new Float64Array(2);
    for (let t = -4_000; t < 50_000; t += 333) {
      current.velocity(t, v);
      expect(Math.hypot(v[0]!, v[1]!)).toBeLessThanOrEqual(current.maxSpeedMps + 1e-12);
    }
  });
});

describe('losses by day and night', () => {
  const clock = lossClock({ kind: 'day-night', dayRatePerS: 1e-4, nightRatePerS: 1e-5, sunriseHour: 6, sunsetHour: 20, source: '' }, '2031-01-15T20:00:00-08:00');

  it('begin with the night when T0 is at sunset by the local clock', () => {
    expectClose(clock.exposure(10 * 3_600), 10 * 3_600 * 1e-5, 1e-12);
    expectClose(clock.exposure(11 * 3_600), 10 * 3_600 * 1e-5 + 3_600 * 1e-4, 1e-12);
  });

  it('add to the same sum each day, and run backwards before T0', () => {
    const day = 10 * 3_600 * 1e-5 + 14 * 3_600 * 1e-4;
    expectClose(clock.exposure(5 * 86_400), 5 * day, 1e-12);
    expectClose(clock.exposure(-3_600), -3_600 * 1e-4, 1e-12);
  });
});

describe('land', () => {
  it('is set to zero, with islands, and what was there is counted', () => {
    const ring = (half: number) => [at(-half, -half), at(half, -half), at(half, half), at(-half, half), at(-half, -half)];
    const area = planeArea([ring(100), ring(20)], 0, 0);
    expectClose(area.areaM2, 200 ** 2 - 40 ** 2, 1e-9);
    const grid: PlaneGrid = { kind: 'plane', originLon: 0, originLat: 0, x0M: -155, y0M: -155, dxM: 10, dyM: 10, nx: 32, ny: 32 };
    const values = new Float64Array(32 * 32).fill(1);
    const removed = clearLand(values, grid, area);
    const kept = values.reduce((sum, value) => sum + value, 0);
    expect(kept).toBe(400 - 16);
    expect(removed).toBe(32 * 32 - kept);
  });
});
