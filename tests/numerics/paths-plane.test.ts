import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { planeArea, isInPlaneArea, type PlaneArea } from '../../server/solver/open/area-mask';
import { currentOf } from '../../server/solver/open/current';
import type { OpenMotion } from '../../server/solver/open/puffs';
import { turningSpread, okuboSpread, fixedSpread } from '../../server/solver/open/spread';
import { lossClock } from '../../server/solver/loss';
import { Meter } from '../../server/solver/meter';
import { fieldMotion, uniformMotion, type PathMotion, type WaterField } from '../../server/solver/paths/motion';
import { walkPlane } from '../../server/solver/paths/plane-walk';
import { PathRandom } from '../../server/solver/paths/random';
import { Walls } from '../../server/solver/paths/walls';
import { okuboVarianceM2 } from '../../server/solver/physics/spreading';
import { at } from './documents';

const FOUR = 4;
const still = currentOf([]);
const loss = lossClock({ kind: 'none' }, '2031-05-12T06:40:00-08:00');
const motionOf = (over: Partial<OpenMotion>): OpenMotion => ({ current: still, spread: fixedSpread(1, 1, 1, 0), loss, mixingDepthM: 1, ...over });

type Cloud = { x: number[]; y: number[] };

function walk(motion: PathMotion, walls: Walls | null, start: { x: number; y: number }, timesS: number[], n: number, seen?: (x: number, y: number) => void, seed = 1): Cloud {
  const cloud: Cloud = { x: [], y: [] };
  walkPlane({ motion, walls, line: null, ...start, startVarianceM2: 0, birthsS: new Float64Array(n), timesS, random: new PathRandom(seed, 0), meter: new Meter() }, [
    {
      seen(k, x, y) {
        seen?.(x, y);
        if (k !== timesS.length - 1) return;
        cloud.x.push(x);
        cloud.y.push(y);
      },
    },
  ]);
  return cloud;
}

const mean = (values: number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;
const covariance = (a: number[], b: number[]): number => {
  const [ma, mb] = [mean(a), mean(b)];
  return a.reduce((sum, value, i) => sum + (value - ma) * (b[i]! - mb), 0) / a.length;
};

describe('paths in open water', () => {
  const n = 40_000;

  it('spread by 2 K t along each axis', () => {
    const { x, y } = walk(uniformMotion(motionOf({ spread: fixedSpread(4, 1, 1, 0) }), 36_000), null, { x: 0, y: 0 }, [900, 3_600], n);
    // A sample variance of n normals has the relative standard error sqrt(2/n).
    expect(Math.abs(covariance(x, x) / (2 * 4 * 3_600) - 1)).toBeLessThan(FOUR * Math.sqrt(2 / n));
    expect(Math.abs(covariance(y, y) / (2 * 1 * 3_600) - 1)).toBeLessThan(FOUR * Math.sqrt(2 / n));
  });

  it('follow a tidal ellipse with a turning tensor: centre and covariance of the moment equations', () => {
    // Centre and covariance after 20,000 s by integrating the moment equations; u = 0.05 + 0.60 cos(wt + 0.4), v = -0.02 + 0.15 sin(wt + 0.4).
    const w = (2 * Math.PI) / 44_712;
    const deg = 180 / Math.PI;
    const toward = (u: number, v: number): number => (Math.atan2(u, v) * deg + 360) % 360;
    const current = currentOf([
      { kind: 'residual', speedMps: Math.hypot(0.05, 0.02), towardDeg: toward(0.05, -0.02) },
      { kind: 'tide', name: 'M2', majorMps: 0.6, minorMps: 0.15, floodTowardDeg: 90, periodS: 44_712, maxFloodS: -0.4 / w },
    ]);
    const spread = turningSpread(12, 1.5, (t, out) => {
      out[0] = Math.cos(2 * (0.3 + w * t));
      out[1] = Math.sin(2 * (0.3 + w * t));
    }, [0, 10_000, 20_000]);
    const timesS = [4_000, 8_000, 12_000, 16_000, 20_000];
    const { x, y } = walk(uniformMotion(motionOf({ current, spread }), 40_000), null, { x: 0, y: 0 }, timesS, n);
    const [sxx, sxy, syy] = [246_584.44204696, -6_453.2647685829, 293_415.55795304];
    expect(Math.abs(mean(x) + 956.7319649171)).toBeLessThan(FOUR * Math.sqrt(sxx / n));
    expect(Math.abs(mean(y) - 1_648.045433508)).toBeLessThan(FOUR * Math.sqrt(syy / n));
    expect(Math.abs(covariance(x, x) / sxx - 1)).toBeLessThan(FOUR * Math.sqrt(2 / n));
    expect(Math.abs(covariance(y, y) / syy - 1)).toBeLessThan(FOUR * Math.sqrt(2 / n));
    // Variance of a sample covariance: (sxx syy + sxy^2) / n.
    expect(Math.abs(covariance(x, y) - sxy)).toBeLessThan(FOUR * Math.sqrt((sxx * syy + sxy * sxy) / n));
  });

  it('grow with age as patches in the sea do, whatever the steps', () => {
    for (const timesS of [[86_400], [600, 3_600, 20_000, 50_000, 86_400]]) {
      const { x } = walk(uniformMotion(motionOf({ spread: okuboSpread(1) }), 86_400), null, { x: 0, y: 0 }, timesS, n);
      expect(Math.abs(covariance(x, x) / okuboVarianceM2(86_400) - 1)).toBeLessThan(FOUR * Math.sqrt(2 / n));
    }
  });

  it('are the same whatever the number of paths walked beside them', () => {
    const motion = uniformMotion(motionOf({ spread: okuboSpread(1) }), 86_400);
    const few = walk(motion, null, { x: 0, y: 0 }, [3_600, 7_200], 10);
    const many = walk(motion, null, { x: 0, y: 0 }, [3_600, 7_200], 500);
    expect(many.x.slice(0, 10)).toEqual(few.x);
    expect(many.y.slice(0, 10)).toEqual(few.y);
  });
});

/** A shore of `spikes` corners round the middle, with an island or none; radii as shares of 1,000 m. */
const shoreOf = (radii: number[], island: number[] | null): PlaneArea => {
  const ring = (shares: number[], sizeM: number, x: number, y: number) => [...shares, shares[0]!].map((share, i) => at(x + sizeM * share * Math.cos((2 * Math.PI * i) / shares.length), y + sizeM * share * Math.sin((2 * Math.PI * i) / shares.length)));
  return planeArea([ring(radii, 1_000, 0, 0), ...(island ? [ring(island, 100, 180, 0)] : [])], 0, 0);
};

describe('paths between shores', () => {
  it('are never on land, in any basin with or without an island, whether still or carried', () => {
    const share = fc.double({ min: 0.35, max: 1, noNaN: true });
    fc.assert(
      fc.property(fc.array(share, { minLength: 3, maxLength: 12 }), fc.option(fc.array(share, { minLength: 3, maxLength: 7 })), fc.double({ min: 0.1, max: 60, noNaN: true }), fc.double({ min: 0, max: 0.4, noNaN: true }), fc.integer({ min: 0, max: 1e6 }), (radii, island, K, speedMps, seed) => {
        const area = shoreOf(radii, island);
        const current = currentOf([{ kind: 'residual', speedMps, towardDeg: 77 }]);
        const start = { x: 20, y: 10 };
        fc.pre(isInPlaneArea(area, start.x, start.y));
        walk(uniformMotion(motionOf({ current, spread: fixedSpread(K, K / 3, 0.3, 0.9) }), 7_200), new Walls(area), start, [600, 1_800, 3_600, 7_200], 20, (x, y) => {
          if (!isInPlaneArea(area, x, y)) throw new Error(`${x}, ${y} is on land`);
        }, seed);
      }),
      { numRuns: 150 },
    );
  });

  it('leave an even cloud even in a basin with an island', () => {
    const area = shoreOf([1, 0.8, 1, 0.7, 0.9, 1], [1, 0.9, 0.8, 1]);
    const walls = new Walls(area);
    const random = new PathRandom(21, 0);
    // Evenly spread starts on a lattice; counts by quadrant of the basin before and after.
    const starts: { x: number; y: number }[] = [];
    for (let x = -1_000; x <= 1_000; x += 20) for (let y = -1_000; y <= 1_000; y += 20) if (walls.isWater(x + 3, y + 7)) starts.push({ x: x + 3, y: y + 7 });
    const cell = (x: number, y: number): number => (x > 180 ? 2 : x > -300 ? 1 : 0) + 3 * (y > 0 ? 1 : 0);
    const before = new Array<number>(6).fill(0);
    const after = new Array<number>(6).fill(0);
    const place = new Float64Array(2);
    starts.forEach((start, path) => {
      before[cell(start.x, start.y)]!++;
      random.start(path);
      place.set([start.x, start.y]);
      for (let k = 0; k < 60; k++) walls.reflect(place, 60 * random.normal(), 60 * random.normal());
      after[cell(place[0]!, place[1]!)]!++;
    });
    before.forEach((count, i) => expect(Math.abs(after[i]! - count), `part ${i}: ${count} before, ${after[i]} after`).toBeLessThan(FOUR * Math.sqrt(2 * count)));
  });

  it('end where the stated current runs onto land, and are counted there', () => {
    const area = shoreOf([1, 1, 1, 1], null);
    const current = currentOf([{ kind: 'residual', speedMps: 0.5, towardDeg: 90 }]);
    let ended = 0;
    walkPlane({ motion: uniformMotion(motionOf({ current, spread: fixedSpread(0.01, 0.01, 1, 0) }), 7_200), walls: new Walls(area), line: null, x: 0, y: 0, startVarianceM2: 0, birthsS: new Float64Array(50), timesS: [1_000, 3_000], random: new PathRandom(1, 0), meter: new Meter() }, [
      {
        ended(x, y) {
          ended++;
          expect(isInPlaneArea(area, x, y)).toBe(true);
          // 1,000 m to the corner; they have spread by about 5 m, and the shore slants.
          expect(x).toBeGreaterThan(960);
        },
      },
    ]);
    expect(ended).toBe(50);
  });

  it('stay even in a field whose mixing varies, by the drift of its slope', () => {
    // K = 1 + x/200 m2/s between walls 1,000 m apart.
    const area = planeArea([[at(0, 0), at(1_000, 0), at(1_000, 1_000), at(0, 1_000), at(0, 0)]], 0, 0);
    const field: WaterField = {
      longestStepS: 200,
      sample(x, _y, _t, out) {
        const K = 1 + Math.min(1_000, Math.max(0, x)) / 200;
        out.set([0, 0, K, 0, K, 1 / 200, 0]);
      },
    };
    const starts = 4_000;
    let inPoorHalf = 0;
    const walls = new Walls(area);
    for (let i = 0; i < starts; i++) {
      const { x } = walk(fieldMotion(field), walls, { x: ((i + 0.5) / starts) * 998 + 1, y: 500 }, [20_000], 1, undefined, i);
      if (x[0]! < 500) inPoorHalf++;
    }
    expect(Math.abs(inPoorHalf / starts - 0.5)).toBeLessThan(FOUR * Math.sqrt(0.25 / starts));
  });
});
