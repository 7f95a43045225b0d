import { describe, expect, it } from 'vitest';
import { gradedAges, type SteadyRelease } from '../../server/solver/kernels/release';
import { builtKernels } from './built-kernels';
import { plainRelease } from './oracles/steady-release';

const kernels = await builtKernels();

const running: SteadyRelease = { currentMps: 0.5, alongM2s: 1.5, acrossM2s: 0.3, startSigmaM: 10, youngestS: 0, oldestS: 21_600, decayPerS: 1e-5, rateKgS: 1, depthM: 2 };
const points = 60;
const x = Float64Array.from({ length: points }, (_, k) => -60 + 11_500 * ((k * 0.618034) % 1) ** 2);
const y = Float64Array.from({ length: points }, (_, k) => 120 * (((k * 0.7548777) % 1) - 0.5) * ((k * 0.5698403) % 1));

describe('the release integral at points', () => {
  it.each<[string, Partial<SteadyRelease>]>([
    ['a running source', {}],
    ['a source that stopped two hours ago', { youngestS: 7_200, oldestS: 28_800 }],
    ['a small source in rough water', { startSigmaM: 3, alongM2s: 6, acrossM2s: 6 }],
    ['a sluggish current', { currentMps: 0.03 }],
    ['still water', { currentMps: 0 }],
    ['no dispersion', { alongM2s: 0, acrossM2s: 0 }],
    ['a strong loss', { decayPerS: 2e-3 }],
  ])('is that of a hundred thousand clouds for %s', (_, change) => {
    const release = { ...running, ...change };
    const exact = Array.from(x, (at, k) => plainRelease(at, y[k]!, release));
    const out = new Float64Array(points);
    kernels.releasePoints().evaluate(out, x, y, release);
    const peak = Math.max(...exact);
    // What lies beyond 5.6 standard deviations, 2e-8 of the whole, and 16 nodes a panel, 3e-7.
    exact.forEach((value, k) => expect(Math.abs(out[k]! - value)).toBeLessThan(4e-7 * peak));
  });

  it('does not depend on how many points are asked for at once', () => {
    const many = new Float64Array(3_000);
    const [xs, ys] = [many.map((_, k) => 3 * k), many.map((_, k) => k % 40)];
    kernels.releasePoints().evaluate(many, xs, ys, running);
    const one = new Float64Array(1);
    kernels.releasePoints().evaluate(one, xs.slice(2_500, 2_501), ys.slice(2_500, 2_501), running);
    expect(one[0]).toBe(many[2_500]);
  });

  it('refuses ages out of order, a source without a size, and points without results', () => {
    const kernel = kernels.releasePoints();
    expect(() => kernel.evaluate(new Float64Array(1), new Float64Array(1), new Float64Array(1), { ...running, youngestS: 30_000 })).toThrow(/ages in order/);
    expect(() => kernel.evaluate(new Float64Array(1), new Float64Array(1), new Float64Array(1), { ...running, startSigmaM: 0 })).toThrow(/a size/);
    expect(() => kernel.evaluate(new Float64Array(2), new Float64Array(1), new Float64Array(2), running)).toThrow(/1 and 2 coordinates, results 2/);
  });
});

describe('graded ages', () => {
  const sum = (count: number, px: number, py: number): number => {
    const { agesS, weightsS } = gradedAges(running, count);
    return agesS.reduce((all, age, n) => {
      const [sx2, sy2] = [100 + 3 * age, 100 + 0.6 * age];
      return all + weightsS[n]! * Math.exp(-((px - 0.5 * age) ** 2) / (2 * sx2) - py ** 2 / (2 * sy2) - 1e-5 * age) / Math.sqrt(sx2 * sy2);
    }, 0) / (2 * Math.PI * 2);
  };

  it('stand for a running release of 82 cloud sizes to 1e-6 of the peak with 90 clouds, and better with more', () => {
    const exact = Array.from(x, (at, k) => plainRelease(at, y[k]!, running));
    const peak = Math.max(...exact);
    const error = (count: number): number => Math.max(...exact.map((value, k) => Math.abs(sum(count, x[k]!, y[k]!) - value))) / peak;
    expect(error(90)).toBeLessThan(1e-6);
    expect(error(110)).toBeLessThan(1e-9);
  });

  it('weigh as much as the release lasted', () => {
    // The map's nearest singularity, 1 / 0.95, leaves 1.38^-180 of a constant: rounding alone is seen.
    const { weightsS } = gradedAges({ ...running, youngestS: 3_600 }, 90);
    expect(Math.abs(weightsS.reduce((a, b) => a + b, 0) / 18_000 - 1)).toBeLessThan(1e-12);
  });
});
