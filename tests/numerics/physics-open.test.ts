import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { SolverInputError } from '../../server/solver/errors';
import { lossClock } from '../../server/solver/loss';
import { gaussLegendre } from '../../server/solver/math/quadrature';
import { Meter } from '../../server/solver/meter';
import { currentOf } from '../../server/solver/open/current';
import { gridPuffs } from '../../server/solver/open/grid-puffs';
import { openResponse } from '../../server/solver/open/open-response';
import { addPuffs } from '../../server/solver/open/puff-kernel';
import { Puff, type OpenMotion, type OpenSource } from '../../server/solver/open/puffs';
import { shearOf, shearSpread } from '../../server/solver/open/shear';
import { channelDensity, type ShoreFrame } from '../../server/solver/open/shores';
import { fixedSpread, sizeSpread } from '../../server/solver/open/spread';
import { trackOf } from '../../server/solver/open/track';
import { coefficientAtSize, diffusivityAt, fourThirdsLaw, grownVarianceM2, lakeSizeLaw, okuboSizeLaw, type GrowthLaw } from '../../server/solver/physics/growing-spread';
import { exponential, type Gradient } from '../../server/solver/physics/matrix-exponential';
import { normalDensity2, shearCovariance } from '../../server/solver/physics/plane';
import { okuboVarianceM2 } from '../../server/solver/physics/spreading';
import { betweenWalls } from '../../server/solver/physics/two-walls';
import { releaseProfile, type ResolvedRelease } from '../../server/solver/release-profile';
import type { PlaneGrid } from '../../shared/frames';
import type { ReleaseTiming } from '../../shared/schemas/estimate';
import { expectClose } from './close-to';
import { at, openDocument, receptor, release, solve } from './documents';

const source = (timing: ReleaseTiming, over: Partial<OpenSource> = {}): OpenSource => ({
  release: { index: 0, profile: releaseProfile(timing), capPerKg: Infinity } as ResolvedRelease,
  origins: [{ x: 0, y: 0 }],
  startVarianceM2: 0,
  ...over,
});
const motion = (over: Partial<OpenMotion> = {}): OpenMotion => ({
  current: currentOf([{ kind: 'residual', speedMps: 0.3, towardDeg: 90 }]),
  spread: fixedSpread(2, 0.2, 1, 0),
  loss: lossClock({ kind: 'none' }, '2031-01-01T00:00:00Z'),
  mixingDepthM: 5,
  ...over,
});
const instant: ReleaseTiming = { kind: 'instantaneous', atS: 0 };
const respond = (m: OpenMotion, s: OpenSource, x: number, y: number) => openResponse(m, s, x, y, 200_000, 1e-9, new Meter());

/** Fourth-order Runge-Kutta, a plain route to any set of moments. */
function integrate(f: (t: number, y: readonly number[]) => number[], start: readonly number[], from: number, to: number, steps: number): number[] {
  let y = [...start];
  const h = (to - from) / steps;
  const moved = (k: readonly number[], share: number): number[] => y.map((value, i) => value + share * h * k[i]!);
  for (let n = 0; n < steps; n++) {
    const t = from + n * h;
    const k1 = f(t, y);
    const k2 = f(t + h / 2, moved(k1, 0.5));
    const k3 = f(t + h / 2, moved(k2, 0.5));
    const k4 = f(t + h, moved(k3, 1));
    y = y.map((value, i) => value + (h / 6) * (k1[i]! + 2 * k2[i]! + 2 * k3[i]! + k4[i]!));
  }
  return y;
}

describe('spread that grows with the size of the cloud', () => {
  const laws: [string, GrowthLaw][] = [
    ['4/3', fourThirdsLaw()],
    ['1.15', okuboSizeLaw()],
    ['1.1', lakeSizeLaw()],
    ['4/3 with a limit', fourThirdsLaw(undefined, 0.5)],
    ['1.15 with a limit', okuboSizeLaw(undefined, 0.2)],
  ];

  it.each(laws)('by the power %s obeys d(sigma2)/dt = 2 K at every size', (_name, law) => {
    // By steps of a Runge-Kutta of order four; a kink at the limit leaves it at 1e-6.
    const [wanted] = integrate((_t, [s]) => [2 * Math.min(law.mostM2s, diffusivityAt(law, s!))], [100], 0, 40_000, 4_000);
    expectClose(grownVarianceM2(law, 100, 40_000), wanted!, law.mostM2s < Infinity ? 1e-6 : 1e-9);
  });

  it.each(laws)('by the power %s goes on where it stopped', (_name, law) => {
    const half = grownVarianceM2(law, 25, 9_000);
    expectClose(grownVarianceM2(law, half, 21_000), grownVarianceM2(law, 25, 30_000), 1e-12);
  });

  it('has the published coefficients: 0.0103 l^1.15 is 0.041005, 0.57921, 8.18158 and 115.568 m2/s at 100 m to 100 km', () => {
    for (const [size, wanted] of [[100, 0.041005039], [1_000, 0.57921156], [10_000, 8.1815808], [100_000, 115.5679]] as const) expectClose(coefficientAtSize(okuboSizeLaw(), size), wanted, 1e-6);
  });

  it('after Okubo by size and by age give one cloud within a quarter in variance from an hour to a month, though fitted apart', () => {
    // The two fits differ by 6 % in diffusivity at a day; a share of it adds up with n = 1.15: 1/(1 - 0.575) = 2.35 times.
    for (const age of [3_600, 86_400, 7 * 86_400, 30 * 86_400]) {
      const ratio = grownVarianceM2(okuboSizeLaw(), 0, age) / okuboVarianceM2(age);
      expect(ratio).toBeGreaterThan(0.75);
      expect(ratio).toBeLessThan(1.25);
    }
  });

  it.each([
    ['constant', 0.38292492254802],
    ['four-thirds', 0.12360654892441],
  ])('Brooks 1960: the centre of a line of discharge falls to erf(b / (2 sqrt 2 sigma)) by the %s law', (law, wanted) => {
    // Width b 100 m, U 0.2 m/s, K0 0.5 m2/s at width b, x 2,000 m; the width of the plume is sqrt(12) sigma of its even start.
    const [b, age, K0] = [100, 10_000, 0.5];
    const gained = law === 'constant' ? 2 * K0 * age : grownVarianceM2(fourThirdsLaw(K0 / b ** (4 / 3)), b * b / 12, age) - b * b / 12;
    const { x, w } = gaussLegendre(40);
    // Mean of the normal curve over the line's own width: what a line source leaves on its axis.
    const centre = x.reduce((sum, node, i) => sum + w[i]! * (b / 2) * Math.exp(-((node * b / 2) ** 2) / (2 * gained)), 0) / Math.sqrt(2 * Math.PI * gained);
    expectClose(centre, wanted, 1e-8);
  });

  it('counts the first cloud of each release', () => {
    const m = motion({ spread: sizeSpread(fourThirdsLaw()) });
    const wide = new Puff(m, source(instant, { startVarianceM2: 10_000 }));
    wide.seen(0, 10_000, false);
    expectClose(wide.covariance[0]!, grownVarianceM2(fourThirdsLaw(), 10_000, 10_000), 1e-12);
  });

  it('keeps the release integral to its tolerance: a lasting release is a fine sum of short ones', () => {
    const m = motion({ spread: sizeSpread(lakeSizeLaw()) });
    const s = source({ kind: 'steady', startS: 0, durationS: 7_200 }, { startVarianceM2: 25 });
    const value = respond(m, s, 2_500, 30).at(9_000, false);
    const puff = new Puff(m, s);
    const { x, w } = gaussLegendre(16);
    let brute = 0;
    for (let panel = 0; panel < 720; panel++)
      x.forEach((node, i) => {
        puff.seen(10 * panel + 5 + 5 * node, 9_000, false);
        brute += (w[i]! * 5 * puff.at(2_500, 30)) / 7_200;
      });
    expectClose(value, brute, 1e-8);
  });
});

describe('a current that changes evenly in space', () => {
  const gradients: [string, Gradient][] = [
    ['simple shear', { ux: 0, uy: 2e-3, vx: 0 }],
    ['strain', { ux: 1e-4, uy: 5e-5, vx: 5e-5 }],
    ['rotation', { ux: 0, uy: -1e-3, vx: 1e-3 }],
    ['all three', { ux: 2e-5, uy: -3e-4, vx: 1e-4 }],
  ];

  it('as a simple shear spreads by the published covariance: 106,732.8, 10,368 and 1,440 m2', () => {
    const s = new Float64Array(3);
    shearSpread({ ux: 0, uy: 2e-3, vx: 0 }, [0.5, 0, 0.1], 10_000).gained(0, 7_200, s);
    const known = shearCovariance(7_200, 2e-3, 0.5, 0.1);
    for (const [got, wanted, formula] of [[s[0]!, 106_732.8, known.sxx], [s[1]!, 10_368, known.sxy], [s[2]!, 1_440, known.syy]] as const) {
      expectClose(got, wanted, 1e-8);
      expectClose(got, formula, 1e-8);
    }
  });

  it.each(gradients)('%s: covariance and centre obey their equations', (_name, g) => {
    const current = currentOf([{ kind: 'residual', speedMps: 0.1, towardDeg: 70 }, { kind: 'tide', name: 'M2', majorMps: 0.3, minorMps: 0.05, floodTowardDeg: 20, periodS: 44_712, maxFloodS: 3_000 }]);
    const shear = shearOf(g, current, 0, 30_000, { x: 100, y: -50 });
    const spread = shearSpread(g, [1.5, 0.3, 0.4], 30_000, 900);
    const u = new Float64Array(2);
    const wanted = integrate(
      (t, [x, y, xx, xy, yy]) => {
        current.velocity(t, u);
        const [dx, dy] = [x! - 100, y! + 50];
        return [
          u[0]! + g.ux * dx + g.uy * dy,
          u[1]! + g.vx * dx - g.ux * dy,
          2 * (g.ux * xx! + g.uy * xy!) + 3,
          g.ux * xy! + g.uy * yy! + g.vx * xx! - g.ux * xy! + 0.6,
          2 * (g.vx * xy! - g.ux * yy!) + 0.8,
        ];
      },
      [300, 200, 900, 0, 900],
      2_000,
      28_000,
      8_000,
    );
    const [place, s] = [new Float64Array(2), new Float64Array(3)];
    shear.place(2_000, 28_000, 300, 200, place);
    spread.gained(2_000, 28_000, s);
    // Metres on a way of kilometres, and square metres on the largest variance: the step of the plain route leaves 1e-9.
    const scale = Math.max(...wanted.slice(2));
    expect(Math.hypot(place[0]! - wanted[0]!, place[1]! - wanted[1]!)).toBeLessThan(1e-5);
    for (const [got, want] of [[s[0]! + 900, wanted[2]!], [s[1]!, wanted[3]!], [s[2]! + 900, wanted[4]!]] as const) expect(Math.abs(got - want)).toBeLessThan(1e-8 * scale);
  });

  it.each(gradients)('%s: the exponential keeps areas', (_name, g) => {
    const e = new Float64Array(4);
    exponential(g, 7_777, e);
    expectClose(e[0]! * e[3]! - e[1]! * e[2]!, 1, 1e-10);
  });

  it('as it vanishes is the plain current, at receptors and on grids', () => {
    const tiny = { ux: 0, uy: 1e-13, vx: 0 };
    const plain = motion({ spread: fixedSpread(2, 2, 1, 0) });
    const sheared = motion({ spread: shearSpread(tiny, [2, 0, 2], 20_000), shear: shearOf(tiny, plain.current, 0, 20_000, { x: 0, y: 0 }) });
    const s = source({ kind: 'steady', startS: 0, durationS: 3_000 });
    expectClose(respond(sheared, s, 1_500, 60).at(6_000, false), respond(plain, s, 1_500, 60).at(6_000, false), 1e-8);
    const [a, b] = [gridPuffs(plain, s, 6_000, 1, 1, false), gridPuffs(sheared, s, 6_000, 1, 1, false)];
    const sum = (list: readonly number[]): number => list.reduce((total, value) => total + value, 0);
    expectClose(sum(b.amount), sum(a.amount), 1e-12);
  });

  it('is solved from a document with books that close, and refused with a shore or a turning tensor', () => {
    const over = { velocityGradient: { eastByNorthPerS: 1e-4 }, mixing: { kind: 'constant' as const, alongM2s: 2, acrossM2s: 2 } };
    const { result } = solve(openDocument(over, { horizonS: 20_000 }));
    expect(Math.abs(result.diagnostics.massResidual)).toBeLessThan(1e-3);
    expect(result.secondOpinion?.agreement).not.toBe('disagrees');
    expect(() => solve(openDocument({ ...over, straightShore: { from: at(-100, -500), to: at(100, -500) } }))).toThrow(SolverInputError);
    expect(() => solve(openDocument({ ...over, mixing: { kind: 'constant', alongM2s: 2, acrossM2s: 1 } }))).toThrow(/fixed axis/);
    expect(() => solve(openDocument({ ...over, velocityGradient: { eastByEastPerS: 1e-3 } }))).toThrow(/e-foldings/);
  });
});

describe('two parallel straight shores', () => {
  const shore: ShoreFrame = { ex: 1, ey: 0, x: 0, y: 0, oppositeM: 60 };
  const turned = (angle: number): ShoreFrame => ({ ex: Math.cos(angle), ey: Math.sin(angle), x: 0, y: 0, oppositeM: 60 });
  const between = (m: Partial<OpenMotion> = {}): OpenMotion => motion({ current: currentOf([{ kind: 'residual', speedMps: 0.5, towardDeg: 90 }]), spread: fixedSpread(8, 0.06, 1, 0), mixingDepthM: 3, shore, ...m });

  it.each([
    [450, 0, 900, 0.0170163239328],
    [1_800, 60, 3_600, 1.31909297524e-4],
  ])('a slug from a bank in a channel: at %d m, %d m across after %d s', (x, y, t, wanted) => expectClose(200 * respond(between(), source(instant), x, y).at(t, false), wanted));

  it('keep everything between them and let nothing through', () =>
    fc.assert(
      fc.property(fc.double({ min: 1, max: 59, noNaN: true }), fc.double({ min: 0.002, max: 50, noNaN: true }), (off, across) => {
        const covariance = Float64Array.of(400, 0, 2 * across * 600);
        const { x, w } = gaussLegendre(60);
        const total = x.reduce((sum, node, i) => sum + w[i]! * 30 * channelDensity(shore, covariance, 0, 0, off, 30 + 30 * node), 0) * Math.sqrt(2 * Math.PI * 400);
        // Sixty points resolve a curve of 1.5 m in 60 m.
        expectClose(total, 1, 1e-6);
      }),
      { numRuns: 50 },
    ));

  it.each([0.1, 0.5, 3, 40])('are drawn as they are answered: across mixing %d m2/s, turned by 35 degrees', (across) => {
    const angle = (35 * Math.PI) / 180;
    const frame = turned(angle);
    const current = currentOf([{ kind: 'residual', speedMps: 0.5, towardDeg: 55 }]);
    const m = between({ current, spread: fixedSpread(8, across, Math.cos(2 * angle), Math.sin(2 * angle)), shore: frame });
    const [ox, oy] = [-15 * Math.sin(angle), 15 * Math.cos(angle)];
    const s = source(instant, { origins: [{ x: ox, y: oy }] });
    const grid: PlaneGrid = { kind: 'plane', originLon: 0, originLat: 0, x0M: 650, y0M: 400, dxM: 3, dyM: 3, nx: 120, ny: 120 };
    const values = new Float64Array(grid.nx * grid.ny);
    addPuffs(values, grid, gridPuffs(m, s, 2_000, 1, 0, false));
    const peak = values.reduce((most, value) => Math.max(most, value), 0);
    for (let j = 0; j < 120; j += 9)
      for (let i = 0; i < 120; i += 7) {
        const [x, y] = [650 + 3 * i, 400 + 3 * j];
        const off = -x * Math.sin(angle) + y * Math.cos(angle);
        if (off < 0 || off > 60) continue;
        // Images past 1e-7 of a peak are left out; a wide puff is even to 5e-7.
        expect(Math.abs(values[j * 120 + i]! - respond(m, s, x, y).at(2_000, false))).toBeLessThan(2e-6 * peak);
      }
  });

  it('far apart are one shore, and farther off none', () => {
    const wide = between({ shore: { ...shore, oppositeM: 1e5 }, spread: fixedSpread(3, 3, 1, 0), mixingDepthM: 4 });
    const s = source(instant, { origins: [{ x: 0, y: 30 }] });
    const one = 2 * Math.PI * 12_000;
    const value = (Math.exp(-(50 ** 2) / 24_000) * (Math.exp(-(20 ** 2) / 24_000) + Math.exp(-(40 ** 2) / 24_000))) / (one * 4);
    expectClose(respond(wide, s, 1_050, 10).at(2_000, false), value, 1e-10);
  });

  it('close the books of a document to 0.1 %', () => {
    const doc = (timing: ReleaseTiming) =>
      openDocument(
        { straightShore: { from: at(-1_000, -300), to: at(1_000, -300), oppositeM: 800 }, mixing: { kind: 'constant', alongM2s: 5, acrossM2s: 2 } },
        { horizonS: 30_000, releases: [release({ timing })], receptors: [receptor({ position: at(3_000, 100) })] },
      );
    for (const timing of [instant, { kind: 'steady', startS: 0, durationS: 9_000 } as const]) {
      const { diagnostics } = solve(doc(timing)).result;
      expect(Math.abs(diagnostics.massResidual)).toBeLessThan(1e-3);
    }
    expect(() => solve(openDocument({ straightShore: { from: at(-1_000, -300), to: at(1_000, -300), oppositeM: 200 } }))).toThrow(/off the first/);
  });
});

describe('mixing over depth', () => {
  it.each([
    [130, 2, 0.5, 600, 0.00212086194222],
    [380, 5, 5.5, 1_800, 3.15208452923e-4],
  ])('10 kg 1.5 m above the bed of 6 m: at (%d, %d), %d m above the bed after %d s', (x, y, z, t, wanted) => {
    const m = motion({ current: currentOf([{ kind: 'residual', speedMps: 0.2, towardDeg: 90 }]), spread: fixedSpread(0.5, 0.05, 1, 0), mixingDepthM: 6 });
    const depth = (age: number): number => betweenWalls((6 - z) / 6, 4.5 / 6, (0.004 * age) / 36);
    expectClose(10 * openResponse(m, source(instant), x, y, 10_000, 1e-9, new Meter(), depth).at(t, false), wanted);
  });

  it('respects the depths of release and receptor: deep intakes stay clear of a spill on the surface at first, and none is cleaner in the end', () => {
    const peaks = (kzM2s: number) =>
      solve(openDocument({ depthM: 10, mixingDepthM: 10, vertical: { kzM2s } }, { receptors: [0, 5, 9.5].map((depthM, i) => receptor({ id: `d${i}`, depthM })).concat(receptor({ id: 'mean' })) }), { preview: true }).result.receptors.map((item) => item.peak.likely!);
    const [top, mid, bed, mean] = peaks(3e-4);
    expect(top!).toBeGreaterThan(2 * mean!);
    expect(bed!).toBeLessThan(0.05 * mean!);
    expect(mid!).toBeLessThan(top!);
    for (const value of peaks(0.05)) expectClose(value, peaks(0.05)[3]!, 1e-3);
  });

  it('of a receptor at the middle depth of a release there is a mirror image about the middle', () => {
    const at = (z0: number, z: number): number => solve(openDocument({ vertical: { kzM2s: 3e-4 } }, { releases: [release({ depthM: z0 })], receptors: [receptor({ depthM: z })] }), { preview: true }).result.receptors[0]!.peak.likely!;
    expectClose(at(1, 2), at(4, 3), 1e-9);
  });

  it('refuses a release below the layer', () => expect(() => solve(openDocument({ mixingDepthM: 3 }, { releases: [release({ depthM: 4 })] }))).toThrow(/below the mixing depth/));
});

describe('a release that moves', () => {
  const track = trackOf([{ atS: 0, x: 0, y: 0 }, { atS: 1_000, x: 400, y: 300 }, { atS: 3_000, x: 400, y: -700 }]);

  it('is the sum of what it leaves on its way', () => {
    const m = motion({ current: currentOf([{ kind: 'residual', speedMps: 0.2, towardDeg: 90 }]), spread: fixedSpread(1, 1, 1, 0) });
    const s = source({ kind: 'steady', startS: 0, durationS: 3_000 }, { track });
    const { x: nodes, w } = gaussLegendre(20);
    for (const [x, y, t] of [[900, 200, 5_000], [1_400, -500, 8_000], [420, -650, 3_100]] as const) {
      let brute = 0;
      for (let panel = 0; panel < 300; panel++)
        nodes.forEach((node, i) => {
          const born = 10 * panel + 5 + 5 * node;
          const z = born < 1_000 ? born / 1_000 : (born - 1_000) / 2_000;
          const [px, py] = born < 1_000 ? [400 * z, 300 * z] : [400, 300 - 1_000 * z];
          const v = 2 * (t - born);
          brute += (w[i]! * 5 * normalDensity2(x - px - 0.2 * (t - born), y - py, v, 0, v)) / (5 * 3_000);
        });
      expectClose(respond(m, s, x, y).at(t, false), brute, 1e-8);
    }
  });

  it('at rest is a release at rest', () => {
    const rest = trackOf([{ atS: 0, x: 0, y: 0 }, { atS: 3_000, x: 0, y: 0 }]);
    const timing: ReleaseTiming = { kind: 'steady', startS: 0, durationS: 3_000 };
    expectClose(respond(motion(), source(timing, { track: rest }), 900, 20).at(4_000, false), respond(motion(), source(timing), 900, 20).at(4_000, false), 1e-9);
  });

  it('moving with the water is released at once: every puff is one cloud of its age', () => {
    const drifting = trackOf([{ atS: 0, x: 0, y: 0 }, { atS: 3_000, x: 900, y: 0 }]);
    const m = motion({ spread: fixedSpread(1, 1, 1, 0) });
    const value = respond(m, source({ kind: 'steady', startS: 0, durationS: 3_000 }, { track: drifting }), 1_200, 40).at(4_000, false);
    const { x, w } = gaussLegendre(60);
    const wanted = x.reduce((sum, node, i) => sum + (w[i]! / 2) * normalDensity2(0, 40, 2 * (2_500 - 1_500 * node), 0, 2 * (2_500 - 1_500 * node)), 0) / 5;
    expectClose(value, wanted, 1e-9);
  });

  it('is solved from a document with books that close, and its path has to cover the release', () => {
    const moving = (lastS: number) => openDocument({}, { horizonS: 20_000, releases: [release({ timing: { kind: 'steady', durationS: 3_600 }, path: [{ atS: 0, position: at(0, 0) }, { atS: lastS, position: at(2_000, 1_000) }] })] });
    expect(Math.abs(solve(moving(3_600)).result.diagnostics.massResidual)).toBeLessThan(1e-3);
    expect(() => solve(moving(3_000))).toThrow(/let the path cover it/);
  });
});
