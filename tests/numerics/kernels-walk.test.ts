import { describe, expect, it } from 'vitest';
import type { BoxWalk } from '../../server/solver/kernels/walk';
import { builtKernels } from './built-kernels';
import { plainNormals } from './oracles/box-walk';

const kernels = await builtKernels();

const HUGE = 1e6;
/** A walk in a box far too large for its walls to matter, all paths at the middle. */
function openWalk(paths: number, seed: number): BoxWalk {
  const walk = kernels.boxWalk(paths, HUGE, HUGE, seed);
  walk.x.fill(HUGE / 2);
  walk.y.fill(HUGE / 2);
  return walk;
}
/** Steps so long that 32-bit positions show the normals to 1e-5: in a box of 2^20 with spread 2^13 a position is good to 0.06. */
const step = { driftX: 0, driftY: 0, spreadX: 8192, spreadY: 8192 };

describe('random paths in a box', () => {
  it('take the steps that the plain generator and logarithm give', () => {
    const walk = openWalk(4096, 7);
    // The words of the second block, read where the walk keeps them.
    const internals = walk as unknown as { at: { state: number }; parameters: Float32Array };
    const words = new Int32Array(internals.parameters.buffer, internals.at.state, 64).slice(32);
    walk.walk([step]);
    for (let path = 2048; path < 2048 + 400; path++) {
      const [first, second] = plainNormals(words, path % 4);
      // Position rounding 0.03 / 8192 = 4e-6, and the 32-bit normal 1e-6 of at most 6.6.
      expect(Math.abs((walk.x[path]! - HUGE / 2) / 8192 - first)).toBeLessThan(2e-5);
      expect(Math.abs((walk.y[path]! - HUGE / 2) / 8192 - second)).toBeLessThan(2e-5);
    }
  });

  it.each([1, 2, 20261201])('have normal steps: mean, variance, skewness and kurtosis within 4 standard errors (seed %i)', (seed) => {
    const n = 400_000;
    const walk = openWalk(n, seed);
    walk.walk([step]);
    const normals = [...walk.x, ...walk.y].map((value) => (value - HUGE / 2) / 8192);
    // Moments of N: 0, 1, 0, 3; variances of N^k: 1, 2, 15, 96.
    [[0, 1], [1, 2], [0, 15], [3, 96]].forEach(([mean, variance], k) => {
      const moment = normals.reduce((sum, value) => sum + value ** (k + 1), 0) / normals.length;
      expect(Math.abs(moment - mean!) / Math.sqrt(variance! / normals.length)).toBeLessThan(4);
    });
    // x and y of a path are independent, so the mean product of n pairs has standard error 1 / sqrt n; squares likewise, 2 / sqrt n.
    let [product, squares] = [0, 0];
    for (let k = 0; k < n; k++) {
      product += normals[k]! * normals[k + n]!;
      squares += (normals[k]! ** 2 - 1) * (normals[k + n]! ** 2 - 1);
    }
    expect(Math.abs(product / n) * Math.sqrt(n)).toBeLessThan(4);
    expect((Math.abs(squares / n) * Math.sqrt(n)) / 2).toBeLessThan(4);
  });

  it('take steps that do not depend on the ones before: variances add up over steps', () => {
    const walk = openWalk(200_000, 5);
    walk.walk(Array.from({ length: 20 }, () => ({ ...step, spreadX: 1000, spreadY: 500, driftX: 100 })));
    const mean = walk.x.reduce((a, b) => a + b, 0) / walk.paths - HUGE / 2;
    const variance = walk.x.reduce((a, b) => a + (b - HUGE / 2 - 2000) ** 2, 0) / walk.paths;
    // Standard errors: sigma / sqrt n and sigma^2 sqrt(2/n); sigma^2 = 20e6.
    expect(Math.abs(mean - 2000)).toBeLessThan((4 * Math.sqrt(20e6)) / Math.sqrt(200_000));
    expect(Math.abs(variance / 20e6 - 1)).toBeLessThan(4 * Math.sqrt(2 / 200_000));
  });

  it('spread evenly over the box after long enough, and never leave it', () => {
    const walk = kernels.boxWalk(100_000, 10, 4, 3);
    walk.walk(Array.from({ length: 300 }, () => ({ driftX: 0.05, driftY: -0.02, spreadX: 1, spreadY: 0.5 })).map((s, k) => (k % 2 ? { ...s, driftX: -s.driftX, driftY: -s.driftY } : s)));
    expect(walk.x.every((value) => value >= 0 && value <= 10) && walk.y.every((value) => value >= 0 && value <= 4)).toBe(true);
    const counts = new Array<number>(20).fill(0);
    for (const value of walk.x) counts[Math.min(19, Math.floor(value * 2))]!++;
    // Chi-square with 19 degrees of freedom exceeds 50 once in 10 000.
    expect(counts.reduce((sum, count) => sum + (count - 5000) ** 2 / 5000, 0)).toBeLessThan(50);
  });

  it('are the same bytes for the same seed, however many there are and however the steps are split', () => {
    const steps = Array.from({ length: 300 }, (_, k) => ({ driftX: 0.01 * k, driftY: 0, spreadX: 5, spreadY: 3 }));
    const whole = openWalk(5000, 11);
    whole.walk(steps);
    const split = openWalk(2500, 11);
    split.walk(steps.slice(0, 7));
    split.walk(steps.slice(7));
    expect(whole.x.slice(0, 2500)).toEqual(split.x);
    expect(whole.y.slice(0, 2500)).toEqual(split.y);
    const other = openWalk(2500, 12);
    other.walk(steps);
    expect(other.x.some((value, k) => value !== split.x[k])).toBe(true);
  });

  it('refuse steps longer than the box and a box without sides', () => {
    const walk = kernels.boxWalk(8, 10, 10, 1);
    expect(() => walk.walk([{ driftX: 0, driftY: 0, spreadX: 2, spreadY: 0 }])).toThrow(/may reach 1.32 of the box/);
    expect(() => kernels.boxWalk(8, 0, 10, 1)).toThrow(/got 8 in 0 x 10 m/);
  });
});
