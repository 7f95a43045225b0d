import { describe, expect, it } from 'vitest';
import { Tubes } from '../../server/solver/network/tubes';
import { expectClose } from './close-to';
import { reachOf, receptor, release, riverDocument } from './documents';
import { channel, momentsOf, networkField, peakOf, responseOf } from './network-helpers';

/** Slug in an even reach, per kilogram. Source: Fischer et al. 1979, section 2.3. */
const slug = (x: number, t: number, A: number, U: number, D: number): number => Math.exp(-((x - U * t) ** 2) / (4 * D * t)) / (A * Math.sqrt(4 * Math.PI * D * t));

describe('one even reach at the default step', () => {
  it.each([
    [5_000, 0.5, 20],
    [2_000, 0.4, 15],
    [10_000, 0.6, 5],
    [40_000, 0.5, 60],
  ])('%d m at %d m/s, D %d: peak, mean and variance of the passage within a thousandth of the exact ones', (x, U, D) => {
    const A = 50;
    const T = x / U;
    const horizonS = Math.min(3 * T, T + (14 * Math.sqrt(2 * D * T)) / U + (30 * D) / U ** 2);
    const doc = riverDocument([reachOf({ id: 'r', lengthKm: 100, Q: A * U, W: 10, H: 5, U, D, e: 5 })], { horizonS, releases: [release({ channel: channel('r', 90) })], receptors: [receptor({ channel: channel('r', 90 - x / 1_000) })] });
    const field = networkField(doc);
    const f = responseOf(doc, field);
    const [got, wanted] = [momentsOf(f, horizonS), momentsOf((t) => slug(x, t, A, U, D), horizonS)];
    expectClose(peakOf(f, 0.5 * T, 1.5 * T).peak, peakOf((t) => slug(x, t, A, U, D), 0.5 * T, 1.5 * T).peak, 1e-3);
    expectClose(got.dose, wanted.dose, 1e-6);
    // Second differences keep mean and variance of the cloud exactly; what is left is interpolation between steps.
    expectClose(got.mean, wanted.mean, 1e-5);
    expectClose(got.variance, wanted.variance, 1e-4);
    const books = field.books(horizonS, [1]);
    expect(Math.abs(books.released - books.inWater - books.left)).toBeLessThan(1e-9);
  });

  it('halving the step moves the peak by less than 0.1 %, towards the exact one', () => {
    const doc = riverDocument([reachOf({ id: 'r', lengthKm: 12, Q: 25, W: 10, H: 5, U: 0.5, D: 20, e: 5 })], { horizonS: 16_000, releases: [release({ channel: channel('r', 11) })], receptors: [receptor({ channel: channel('r', 6) })] });
    const exact = peakOf((t) => slug(5_000, t, 50, 0.5, 20), 5_000, 15_000).peak;
    const errors = [1, 2].map((refine) => Math.abs(peakOf(responseOf(doc, networkField(doc, { refine })), 5_000, 15_000).peak / exact - 1));
    expect(errors[0]).toBeLessThan(1e-3);
    // Second order: a quarter, with room for the sampling of the crest.
    expect(errors[1]!).toBeLessThan(0.4 * errors[0]!);
  });

  it('a release of an hour with loss agrees with the closed form at three times', () => {
    const doc = riverDocument([reachOf({ id: 'r', lengthKm: 12, Q: 16, W: 10, H: 4, U: 0.4, D: 15, e: 5 })], {
      horizonS: 20_000,
      substance: { name: 'Tracer', loss: { kind: 'first-order', ratePerS: 3e-5 }, applyLoss: true },
      releases: [release({ channel: channel('r', 9), timing: { kind: 'steady', durationS: 3_600 } })],
      receptors: [receptor({ channel: channel('r', 7) })],
    });
    const field = networkField(doc);
    const f = responseOf(doc, field, 0, true);
    // Quadrature over the time of release, 12 digits. The step is 60 s, a sixteenth of the passage's spread: 0.2 % on the flanks.
    expectClose(1_800 * f(6_000), 0.0217125313244, 1e-3);
    expectClose(1_800 * f(9_000), 0.00984904568628, 2e-3);
    const books = field.books(20_000, [1]);
    expect(Math.abs(books.released - books.inWater - books.left - books.lost)).toBeLessThan(1e-9);
    expect(books.lost).toBeGreaterThan(0.1);
  });
});

describe('dead zones', () => {
  const doc = riverDocument([reachOf({ id: 'r', lengthKm: 12, Q: 3, W: 10, H: 1, U: 0.3, D: 4, e: 5 }, { storage: { areaRatio: 0.25, exchangePerS: 2e-4 } })], {
    horizonS: 60_000,
    releases: [release({ channel: channel('r', 10) })],
    receptors: [8, 8.02, 7.98].map((km, i) => receptor({ id: `x${i}`, channel: channel('r', km) })),
  });
  const field = networkField(doc);
  const f = responseOf(doc, field);

  it.each([
    [7_000, 2.59249007758e-4],
    [8_000, 1.96803957415e-4],
    [9_000, 1.33438324324e-4],
  ])('give the resident concentration of theory at %d s', (t, wanted) => {
    // By Laplace inversion, Bencala & Walters 1983. Exchange and spreading take turns each step: 0.1 %.
    expectClose(3 * f(t), wanted, 1e-3);
  });

  it('give its mean and variance, and keep the amount', () => {
    const moments = momentsOf(f, 60_000);
    expectClose(3 * moments.dose, 1, 1e-6);
    expectClose(moments.mean, 8_444.44444444, 1e-5);
    expectClose(moments.variance, 5_172_839.50617, 1e-3);
    const books = field.books(60_000, [1]);
    expect(Math.abs(books.released - books.inWater - books.left)).toBeLessThan(1e-9);
  });

  it('give the flux pulse of a release at an inlet', () => {
    const inlet = riverDocument([reachOf({ id: 'r', lengthKm: 12, Q: 3, W: 10, H: 1, U: 0.3, D: 4, e: 5 }, { storage: { areaRatio: 0.25, exchangePerS: 2e-4 } })], { horizonS: 30_000, releases: [release({ channel: channel('r', 12) })], receptors: [10, 10.02, 9.98].map((km, i) => receptor({ id: `x${i}`, channel: channel('r', km) })) });
    const inletField = networkField(inlet);
    const [at, above, below] = [0, 1, 2].map((i) => responseOf(inlet, inletField, i)) as [(t: number) => number, (t: number) => number, (t: number) => number];
    const flux = (t: number): number => 3 * (at(t) - ((4 / 0.3) * (below(t) - above(t))) / 40);
    // Talbot in 50 digits = Bessel integral = Fourier inversion. The inlet costs a step's resolution: 0.3 %.
    expectClose(flux(7_000), 2.61265838956e-4, 3e-3);
    expectClose(flux(8_000), 1.90237845071e-4, 3e-3);
    expectClose(flux(9_000), 1.28122088937e-4, 3e-3);
    expectClose(flux(12_000), 3.59370817616e-5, 3e-3);
  });
});

describe('three reaches in a row', () => {
  const doc = riverDocument(
    [
      reachOf({ id: 'a', lengthKm: 3, Q: 10, W: 20, H: 1.25, U: 0.4, D: 10, e: 50 }, { downstreamReachId: 'b' }),
      reachOf({ id: 'b', lengthKm: 5, Q: 10, W: 20, H: 0.83, U: 0.6, D: 25, e: 50 }, { downstreamReachId: 'c' }),
      reachOf({ id: 'c', lengthKm: 9, Q: 10, W: 20, H: 1, U: 0.5, D: 15, e: 50 }),
    ],
    { horizonS: 50_000, releases: [release({ channel: channel('a', 3) })], receptors: [1, 1.02, 0.98].map((km, i) => receptor({ id: `x${i}`, channel: channel('c', km) })) },
  );
  const field = networkField(doc);
  const [at, above, below] = [0, 1, 2].map((i) => responseOf(doc, field, i)) as [(t: number) => number, (t: number) => number, (t: number) => number];
  const flux = (t: number): number => 10 * (at(t) - ((15 / 0.5) * (below(t) - above(t))) / 40);

  it('add their means exactly and their variances to 0.2 %', () => {
    const moments = momentsOf(flux, 50_000);
    expectClose(moments.dose, 1, 1e-8);
    expectClose(moments.mean, 31_833.3333333, 1e-6);
    // The inlet and the two changes of reach fall on whole parcels.
    expectClose(moments.variance, 4_014_907.40741, 2e-3);
  });

  it.each([
    [28_000, 3.01266127679e-5, 5e-3],
    [31_000, 1.89607182393e-4, 2e-3],
    [32_000, 1.96868289323e-4, 2e-3],
    [34_000, 1.04315011016e-4, 2e-3],
  ])('give the flux of the exact chain at %d s', (t, wanted, tolerance) => expectClose(flux(t), wanted, tolerance));
});

describe('mixing across through stream tubes', () => {
  /** A bank or mid-channel source after tau, by 17 tubes in steps of 1/64 of the tubes' own mixing time. */
  const after = (bank: 'left' | 'mid', tau: number): number[] => {
    const tubes = new Tubes(17);
    const value = tubes.sourceShares(bank, 0).map((share, j) => share / tubes.share[j]!);
    const steps = Math.ceil(tau * 256);
    for (let i = 0; i < steps; i++) tubes.mix(value, 0, tau / steps / tubes.spacing ** 2);
    return ['left' as const, 'mid' as const, 'right' as const].map((at) => tubes.weightsAt(at).reduce((sum, weight, j) => sum + weight * value[j]!, 0));
  };

  it.each([
    ['left' as const, 0.02, [3.98942280401, 0.175283004938], 0.05],
    ['left' as const, 0.1, [1.78428611437, 0.961407671463, 0.292899651842], 0.004],
    ['left' as const, 0.4, [1.03859288311, 0.999999722715, 0.961407671463], 0.001],
    ['mid' as const, 0.02, [0.175283004938, 1.9947262692, 0.175283004938], 0.05],
    ['mid' as const, 0.1, [0.961407671463, 1.03859288311, 0.961407671463], 0.003],
  ])('from %s at tau %d is the exact profile', (bank, tau, wanted, tolerance) => {
    // Images = cosine series, 12 digits. Second differences over a spread of 3 tubes are right to 5 %, over 7 to 0.4 %.
    wanted.forEach((value, i) => expectClose(after(bank, tau)[i]!, value, tolerance));
  });

  it('keeps the amount and stays positive at any strength', () => {
    for (const strength of [1e-3, 0.3, 1, 7, 1e3, 1e8]) {
      const tubes = new Tubes(9);
      const value = tubes.sourceShares('right', 0).map((share, j) => share / tubes.share[j]!);
      for (let i = 0; i < 5; i++) tubes.mix(value, 0, strength);
      expectClose(value.reduce((sum, c, j) => sum + c * tubes.share[j]!, 0), 1, 1e-12);
      for (const c of value) expect(c).toBeGreaterThanOrEqual(0);
    }
  });

  it('puts a water beside a clean one and keeps its amount', () => {
    const tubes = new Tubes(17);
    const value = Float64Array.from({ length: 17 }, (_, j) => 1 + j);
    const out = new Float64Array(17);
    const mean = (c: Float64Array): number => c.reduce((sum, v, j) => sum + v * tubes.share[j]!, 0);
    for (const [low, share] of [[0, 0.3], [0.7, 0.3], [0.25, 0.75], [0.2, 0.1]] as const) {
      tubes.join(out, value, 0, low, share);
      expectClose(mean(out), share * mean(value), 1e-12);
      out.forEach((c, j) => {
        const isOutside = (j + 0.5) / 16 < low || (j - 0.5) / 16 > low + share;
        if (isOutside) expect(c).toBe(0);
      });
    }
  });
});

describe('a tidal reach', () => {
  const periodS = 44_714;
  const doc = riverDocument([reachOf({ id: 'r', lengthKm: 80, Q: 240, W: 500, H: 6, U: 0.08, D: 150, e: 50 }, { tide: { amplitudeMps: 0.9, periodS, maxEbbS: ((Math.PI / 2 - 0.7) * periodS) / (2 * Math.PI) } })], {
    horizonS: 50_000,
    substance: { name: 'Tracer', loss: { kind: 'first-order', ratePerS: 2e-6 } },
    releases: [release({ channel: channel('r', 40) })],
    receptors: [receptor({ channel: channel('r', 34) })],
  });

  it('is exactly the moving slug of a reversing current', () => {
    const f = responseOf(doc, networkField(doc, { isPreview: true }), 0, true);
    // U = 0.08 + 0.9 sin(wt + 0.7), D 150, loss 2e-6, A 3000, M 20000, 30000 s: closed form; a preview's step costs 0.5 %.
    expectClose(20_000 * f(30_000), 8.34908647097e-4, 5e-3);
  });
});
