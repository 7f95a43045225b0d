import { describe, expect, it } from 'vitest';
import fc from 'fast-check';
import { passedShare } from '../../server/solver/physics/line';
import { arrivalFigures, passageWithin } from '../../server/solver/paths/passage';
import { PathRandom } from '../../server/solver/paths/random';
import { diffusiveStep, fold, type LineDiffusivity } from '../../server/solver/paths/steps';

/** Chance is given four standard errors: with fixed seeds a test that passes once passes always. */
const FOUR = 4;

describe('random numbers of a path', () => {
  it('have the moments of a normal', () => {
    const random = new PathRandom(7, 0);
    const n = 400_000;
    const sums = [0, 0, 0, 0];
    for (let i = 0; i < n; i++) {
      const x = random.normal();
      for (let k = 0; k < 4; k++) sums[k]! += x ** (k + 1);
    }
    // Standard errors of the raw moments: variances 1, 2, 15, 96 over n.
    [0, 1, 0, 3].forEach((wanted, k) => expect(Math.abs(sums[k]! / n - wanted)).toBeLessThan(FOUR * Math.sqrt([1, 2, 15, 96][k]! / n)));
  });

  it('reach as far into the tails as a normal does', () => {
    const random = new PathRandom(3, 1);
    const n = 400_000;
    let beyond = 0;
    for (let i = 0; i < n; i++) if (Math.abs(random.normal()) > 3.5) beyond++;
    const share = 4.653e-4; // two-sided, Abramowitz & Stegun 1964, table 26.1
    expect(Math.abs(beyond / n - share)).toBeLessThan(FOUR * Math.sqrt(share / n));
  });

  it('differ from path to path, stream to stream and seed to seed, and are the same for the same', () => {
    const first = (seed: number, stream: number, path: number) => new PathRandom(seed, stream).start(path).bits();
    const seen = new Set<number>();
    for (let path = 0; path < 5_000; path++) seen.add(first(1, 0, path));
    // 5,000 draws of 32 bits: a collision is expected in 0.3 % of such sets.
    expect(seen.size).toBe(5_000);
    expect(first(1, 0, 5)).not.toBe(first(1, 1, 5));
    expect(first(1, 0, 5)).not.toBe(first(2, 0, 5));
    expect(first(1, 0, 5)).toBe(first(1, 0, 5));
  });

  it('of neighbouring paths are not correlated', () => {
    const random = new PathRandom(1, 0);
    const n = 50_000;
    let sum = 0;
    let before = random.start(0).normal();
    for (let path = 1; path <= n; path++) {
      const x = random.start(path).normal();
      sum += x * before;
      before = x;
    }
    expect(Math.abs(sum / n)).toBeLessThan(FOUR / Math.sqrt(n));
  });
});

describe('first passage with drift', () => {
  /** Share that has passed by each time, by `steps` long steps with the bridge test between their ends. */
  function passed(L: number, U: number, D: number, timesS: readonly number[], stepS: number, n: number, withBridge = true): number[] {
    const random = new PathRandom(11, 0);
    const arrivals = new Float64Array(n).fill(Number.NaN);
    const last = timesS[timesS.length - 1]!;
    for (let path = 0; path < n; path++) {
      random.start(path);
      for (let t = 0, x = 0; t < last; t += stepS) {
        const next = x + U * stepS + Math.sqrt(2 * D * stepS) * random.normal();
        const after = withBridge ? passageWithin(L - x, L - next, 2 * D * stepS, stepS, random) : next >= L ? stepS : null;
        if (after !== null) {
          arrivals[path] = t + after;
          break;
        }
        x = next;
      }
    }
    return timesS.map((t) => arrivals.reduce((sum, at) => sum + Number(at <= t), 0) / n);
  }

  const n = 40_000;
  // Check values from quadrature of the inverse Gaussian density (Schrodinger 1915; Folks & Chhikara 1978).
  const cases = [
    { L: 10_000, U: 0.5, D: 30, stepS: 4_000, timesS: [15_000, 18_000, 20_000, 24_000], wanted: [0.0048735106837966, 0.18165546708666, 0.5217859970135, 0.95761967192297] },
    { L: 50_000, U: 1, D: 10, stepS: 17_000, timesS: [49_000, 50_000, 51_000], wanted: [0.15860588592532, 0.50398902398136, 0.84139217845075] },
  ];
  it.each(cases)('over $L m keeps the inverse Gaussian within four standard errors with steps of $stepS s', ({ L, U, D, stepS, timesS, wanted }) => {
    const got = passed(L, U, D, timesS, stepS, n);
    wanted.forEach((share, i) => {
      expect(passedShare(L, timesS[i]!, U, D)).toBeCloseTo(share, 10);
      expect(Math.abs(got[i]! - share), `at ${timesS[i]} s`).toBeLessThan(FOUR * Math.sqrt((share * (1 - share)) / n));
    });
  });

  it('without the bridge comes late, which shows that the test can fail', () => {
    const { L, U, D, stepS, timesS, wanted } = cases[0]!;
    const got = passed(L, U, D, timesS, stepS, n, false);
    expect(Math.abs(got[2]! - wanted[2]!)).toBeGreaterThan(2 * FOUR * Math.sqrt((wanted[2]! * (1 - wanted[2]!)) / n));
  });

  it('tells how many ever arrive, when, and how sure that is', () => {
    const arrivals = Float64Array.from({ length: 1_000 }, (_, i) => (i < 600 ? 100 + i : Number.NaN));
    const figures = arrivalFigures(arrivals);
    expect(figures.share).toBe(0.6);
    expect(figures.shareError).toBeCloseTo(Math.sqrt(0.24 / 1_000), 12);
    expect(figures.quantilesS!.p50).toBeCloseTo(399.5, 6);
    // Even spread over 600 s: a median of 600 has the standard error 600 / (2 sqrt 600).
    expect(figures.medianErrorS).toBeCloseTo(300 / Math.sqrt(600), 0);
    expect(arrivalFigures(arrivals.subarray(0, 10)).quantilesS).toBeNull();
  });
});

describe('diffusivity that varies in space', () => {
  const bins = 20;
  function wellMixed(step: (z: number, normal: number) => number, low: number, high: number, n: number, steps: number): number[] {
    const random = new PathRandom(5, 0);
    const counts = new Array<number>(bins).fill(0);
    for (let path = 0; path < n; path++) {
      random.start(path);
      let z = low + ((path + 0.5) / n) * (high - low);
      for (let k = 0; k < steps; k++) z = fold(step(z, random.normal()), low, high);
      counts[Math.min(bins - 1, Math.floor(((z - low) / (high - low)) * bins))]!++;
    }
    return counts.map((count) => (count * bins) / n);
  }

  // Water column of 5 m, u* 0.05 m/s, K = kappa u* z (1 - z/h), steps of 1 s for half an hour.
  const [h, scale] = [5, 0.4 * 0.05];
  const column: LineDiffusivity = { at: (z) => scale * z * (1 - z / h), slope: (z) => scale * (1 - (2 * z) / h) };

  it('keeps an even column even: every bin 0.948 to 1.019 of the mean (Visser 1997)', () => {
    const shares = wellMixed((z, normal) => diffusiveStep(z, column, 1, normal), 0, h, 20_000, 1_800);
    // The bounds are those of 200,000 paths; here are a tenth as many, so chance is given its part: 1,000 a bin, 3.2 %.
    const chance = FOUR / Math.sqrt(1_000);
    for (const share of shares) {
      expect(share).toBeGreaterThan(0.948 - chance);
      expect(share).toBeLessThan(1.019 + chance);
    }
  });

  it('piles paths up at surface and bed when its slope is left out, which shows that the test can fail', () => {
    const shares = wellMixed((z, normal) => z + normal * Math.sqrt(2 * column.at(z)), 0, h, 4_000, 1_800);
    expect(Math.max(shares[0]!, shares[bins - 1]!)).toBeGreaterThan(3);
    expect(shares[bins / 2]!).toBeLessThan(0.6);
  });

  it('keeps water even where the section widens: paths go with the section', () => {
    // Section A = exp(g x), even concentration: density of paths goes with A.
    const growth = Math.log(3) / 1_000;
    const widening: LineDiffusivity = { at: () => 4, slope: () => 0, sectionGrowth: () => growth };
    const random = new PathRandom(9, 0);
    const n = 20_000;
    let upper = 0;
    for (let path = 0; path < n; path++) {
      random.start(path);
      // Start spread as A: by inverting its integral.
      let x = Math.log(1 + ((path + 0.5) / n) * 2) / growth;
      for (let k = 0; k < 200; k++) x = fold(diffusiveStep(x, widening, 20, random.normal()), 0, 1_000);
      if (x > 500) upper++;
    }
    const wanted = (3 - Math.sqrt(3)) / 2;
    expect(Math.abs(upper / n - wanted)).toBeLessThan(FOUR * Math.sqrt((wanted * (1 - wanted)) / n));
  });

  it('folds any position between its walls', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e4, max: 1e4, noNaN: true }), fc.double({ min: -50, max: 50, noNaN: true }), fc.double({ min: 0.1, max: 100, noNaN: true }), (x, low, width) => {
        const folded = fold(x, low, low + width);
        expect(folded).toBeGreaterThanOrEqual(low - 1e-9);
        expect(folded).toBeLessThanOrEqual(low + width + 1e-9);
      }),
    );
    expect(fold(-0.3, 0, 1)).toBeCloseTo(0.3, 12);
    expect(fold(2.2, 0, 1)).toBeCloseTo(0.2, 12);
  });
});
