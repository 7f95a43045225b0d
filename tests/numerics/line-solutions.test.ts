import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { AdaptiveQuadrature } from '../../server/solver/math/quadrature';
import { Meter } from '../../server/solver/meter';
import {
  chainMoments,
  fluxPeakTimeAtStation,
  heldInlet,
  normalDensity,
  passageDensity,
  passedShare,
  peakTimeAtStation,
  recoveredShare,
  steadyLimit,
  steadyReleaseResponse,
  topHatDensity,
} from '../../server/solver/physics/line';
import { expectClose } from './close-to';

// Check values by independent routes in higher precision: Fourier inversion, Laplace inversion, direct quadrature.
describe('instantaneous release along a line', () => {
  it('a slug in a river: M 1000 kg, A 50 m2, U 0.5 m/s, D 20 m2/s', () => expectClose((1_000 / 50) * normalDensity(5_000, 0.5 * 9_000, 2 * 20 * 9_000), 0.00939706251368));

  it('with a first size of 150 m and loss of 1e-5 1/s', () =>
    expectClose((1_000 / 50) * Math.exp(-1e-5 * 9_000) * normalDensity(5_000, 4_500, 150 ** 2 + 2 * 20 * 9_000), 0.00850377062085));

  it('from an even start over 400 m', () => expectClose((1_000 / 50) * topHatDensity(5_000, 4_500, 400, 2 * 20 * 9_000), 0.00934325170758));

  it('in a tidal current', () => {
    const w = (2 * Math.PI) / 44_714;
    const t = 30_000;
    const centre = 0.08 * t + (0.9 / w) * (Math.cos(0.7) - Math.cos(w * t + 0.7));
    expectClose(centre, 6_006.18873602, 1e-11);
    expectClose((20_000 / 3_000) * Math.exp(-2e-6 * t) * normalDensity(6_000, centre, 2 * 150 * t), 8.34908647097e-4);
  });

  it.each([
    [5_000, 0.5, 20, 0, 9_920.31999488, 9_762.879585399],
    [5_000, 0.5, 20, 1e-4, 9_766.52623466, 9_613.928954575],
    [300, 0.1, 50, 0, 830.9518948453, 297.0585407784],
  ])('the peak passes %d m at its time (U %d, D %d, k %d)', (x, U, D, k, resident, flux) => {
    expectClose(peakTimeAtStation(x, U, D, k), resident, 1e-10);
    expectClose(fluxPeakTimeAtStation(x, U, D, k), flux, 1e-10);
  });
});

describe('release at a constant rate', () => {
  it.each([
    [2_000, 3_000, 7.95237683566e-5],
    [2_000, 6_000, 0.0217125313244],
    [2_000, 9_000, 0.00984904568628],
    [-60, 3_000, 0.00624519206865],
  ])('0.5 kg/s for an hour: x %d m, t %d s', (x, t, wanted) => {
    const J = (s: number): number => steadyReleaseResponse(x, s, 0.4, 15, 3e-5);
    expectClose((0.5 / 40) * (J(t) - J(t - 3_600)), wanted);
  });

  it('is the integral of slugs over the time of release', () =>
    fc.assert(
      fc.property(fc.double({ min: -500, max: 5_000, noNaN: true }), fc.double({ min: 100, max: 20_000, noNaN: true }), fc.double({ min: 0, max: 1e-4, noNaN: true }), (x, t, k) => {
        const [U, D] = [0.4, 15];
        const quadrature = new AdaptiveQuadrature(new Meter());
        const slug = (a: number): number => Math.exp(-k * a) * normalDensity(x, U * a, 2 * D * a);
        const value = quadrature.integrate(slug, [0, t], 1e-11, (a, b) => (b - a > 200 ? 'split' : 'take'));
        // Far out in the tail both are below any concentration of interest.
        if (value > 1e-10) expectClose(steadyReleaseResponse(x, t, U, D, k), value, 1e-7);
      }),
      { numRuns: 60 },
    ));

  it('tends to its steady limit', () => {
    expectClose(steadyReleaseResponse(2_000, 1e6, 0.4, 15, 3e-5), steadyLimit(2_000, 0.4, 15, 3e-5), 1e-12);
    expectClose(steadyLimit(2_000, 0.4, 15, 0), 1 / 0.4, 1e-12);
  });

  it('does not overflow at a high ratio of advection to dispersion', () => expectClose(steadyReleaseResponse(50_000, 60_000, 1, 0.01, 0), 1, 1e-12));

  // Ogata & Banks 1961; loss after van Genuchten & Alves 1982.
  it.each([
    [1_000, 0, 0.205309170723],
    [2_000, 0, 0.820721349204],
    [1_000, 2e-4, 0.174374292419],
    [20_000, 2e-4, 0.746131747591],
  ])('an inlet held at one concentration: t %d s, k %d 1/s', (t, k, wanted) => expectClose(heldInlet(300, t, 0.2, 5, k), wanted));
});

describe('passage of a place', () => {
  it.each([
    [15_000, 8.70423486461e-6, 0.0048735106837966],
    [18_000, 1.34234275407e-4, 0.18165546708666],
    [20_000, 1.82091405099e-4, 0.5217859970135],
    [24_000, 3.45406731919e-5, 0.95761967192297],
  ])('density and share passed at %d s (L 10 km, U 0.5 m/s, D 30 m2/s)', (t, density, share) => {
    expectClose(passageDensity(10_000, t, 0.5, 30), density);
    expectClose(passedShare(10_000, t, 0.5, 30), share);
  });

  it.each([
    [49_000, 0.15860588592532],
    [50_000, 0.50398902398136],
    [51_000, 0.84139217845075],
  ])('the share passed does not overflow at %d s', (t, share) => expectClose(passedShare(50_000, t, 1, 10), share, 1e-12));

  it('loss with dispersion is a little less than in plug flow', () => expectClose(recoveredShare(5_000, 0.5, 20, 1e-5), 0.9049096923276541, 1e-12));

  it('cumulants of three reaches add', () => {
    const sum = chainMoments([
      { lengthM: 3_000, speedMps: 0.4, dispersionM2s: 10 },
      { lengthM: 5_000, speedMps: 0.6, dispersionM2s: 25 },
      { lengthM: 8_000, speedMps: 0.5, dispersionM2s: 15 },
    ]);
    expectClose(sum.meanS, 31_833.3333333, 1e-11);
    expectClose(sum.varianceS2, 4_014_907.40741, 1e-11);
    expectClose(sum.thirdS3, 1.5250155864198e9, 1e-12);
    expect(sum.thirdS3 / sum.varianceS2 ** 1.5).toBeCloseTo(0.189566233649, 10);
  });

  it('an inverse normal law with the summed mean and variance stands for the chain within 0.1 % at the peak', () => {
    const m = 31_833.3333333;
    const v = 4_014_907.40741;
    const f = (t: number): number => passageDensity(m, t, 1, v / (2 * m));
    // Fourier inversion of the exact chain.
    expectClose(f(31_000), 1.89607182393e-4, 1e-3);
    expectClose(f(32_000), 1.96868289323e-4, 1e-3);
    expectClose(f(32_000), 1.968684e-4, 1e-6);
  });
});
