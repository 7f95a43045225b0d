import { describe, expect, it } from 'vitest';
import type { EstimateDocument } from '../../shared/schemas/estimate';
import { peakTimeAtStation } from '../../server/solver/physics/line';
import { expectClose } from './close-to';
import { at, openDocument, reachOf, receptor, release, riverDocument, solve } from './documents';
import { channel } from './network-helpers';

const [Q, AREA_M2, SPEED_MPS, WAY_M] = [5, 10, 0.5, 8_000];

/** An even reach with a slug of 100 kg 8 km above the receptor; more river above and below. */
const even = (dispersionM2s: number, horizonS = 60_000): EstimateDocument =>
  riverDocument([reachOf({ id: 'r', lengthKm: 40, Q, W: 10, H: 1, U: SPEED_MPS, D: dispersionM2s, e: 5 })], {
    horizonS,
    releases: [release({ position: at(20_000, 0), channel: channel('r', 20) })],
    receptors: [receptor({ position: at(20_000 + WAY_M, 0), channel: channel('r', 20 - WAY_M / 1_000) })],
  });

const slugPeak = (D: number, t: number): number => (100 / (AREA_M2 * Math.sqrt(4 * Math.PI * D * t))) * Math.exp(-((WAY_M - SPEED_MPS * t) ** 2) / (4 * D * t));

function expectSound(doc: EstimateDocument): ReturnType<typeof solve>['result'] {
  const { result } = solve(doc);
  for (const { series } of result.receptors) expect(series.likely.every((value) => Number.isFinite(value) && value >= 0)).toBe(true);
  expect(Number.isFinite(result.diagnostics.massResidual)).toBe(true);
  return result;
}

describe('a river from hardly any dispersion to hardly any flow', () => {
  // Peclet numbers U L / D from 4e9 down to 4.
  it.each([1e-6, 1e-3, 1, 30, 1_000])('with a dispersion of %d m2/s has peak, time and dose of the slug', (D) => {
    const { receptors, diagnostics } = expectSound({ ...even(D), solver: 'closed-form' });
    const answer = receptors[0]!;
    const t = peakTimeAtStation(WAY_M, SPEED_MPS, D, 0);
    expect(Math.abs(answer.peakS! - t)).toBeLessThan(1);
    // Peaks are refined to half a second, which at the smallest dispersion is a few standard deviations of its passage.
    expectClose(answer.peak.likely!, slugPeak(D, t), D < 1e-3 ? 0.5 : 1e-3);
    if (D >= 1e-3 && D <= 30) expectClose(answer.dose.likely!, 100 / Q, 2e-3);
    expect(Math.abs(diagnostics.massResidual)).toBeLessThan(1e-3);
  });

  it.each([1e-3, 1, 30, 200])('with a dispersion of %d m2/s keeps every gram by parcels, and dose and time of the slug', (D) => {
    const { receptors, diagnostics, checks } = expectSound({ ...even(D), solver: 'network' });
    const answer = receptors[0]!;
    expect(Math.abs(diagnostics.massResidual)).toBeLessThan(1e-9);
    expectClose(answer.dose.likely!, 100 / Q, 5e-3);
    expectClose(answer.peakS!, peakTimeAtStation(WAY_M, SPEED_MPS, D, 0), 5e-3);
    // A passage of 11 s is narrower than the least step: its height is only known to a quarter, and that is told.
    const isTooNarrow = D < 1;
    expect(checks.some(({ code }) => code === 'resolution')).toBe(isTooNarrow);
    expectClose(answer.peak.likely!, slugPeak(D, peakTimeAtStation(WAY_M, SPEED_MPS, D, 0)), isTooNarrow ? 0.25 : 5e-3);
  });
});

describe('open water from molecules to a gale', () => {
  const sea = (K: number, speedMps: number): EstimateDocument =>
    openDocument({ current: speedMps > 0 ? [{ kind: 'residual', speedMps, towardDeg: 90 }] : [], mixing: { kind: 'constant', alongM2s: K, acrossM2s: K } }, { receptors: [receptor({ position: at(3_000, 0) })] });

  it.each([
    [1e-6, 0.2],
    [1e-2, 0.2],
    [10, 0.2],
    [1_000, 0.2],
    [100, 0],
    [100, 2],
  ])('K %d m2/s at %d m/s has the peak of the normal cloud', (K, U) => {
    const answer = expectSound(sea(K, U)).receptors[0]!;
    const cloud = (t: number): number => (100 / (5 * 4 * Math.PI * K * t)) * Math.exp(-((3_000 - U * t) ** 2) / (4 * K * t));
    // d/dt of the cloud in two dimensions: U²t² + 4 K t - x² = 0.
    const t = U > 0 ? (-2 * K + Math.sqrt(4 * K * K + U * U * 9e6)) / (U * U) : 9e6 / (4 * K);
    expect(Math.abs(answer.peakS! - t)).toBeLessThan(1 + 1e-4 * t);
    // At the smallest K the cloud is half a metre wide and passes in seconds: half a second off is half its peak.
    expectClose(answer.peak.likely!, cloud(t), K < 1e-3 ? 0.5 : 1e-3);
  });

  it('a place nothing comes to has no peak, and no arrival', () => {
    const answer = expectSound(openDocument({}, { receptors: [receptor({ position: at(-30_000, 10_000), actionValues: [{ value: 1e-9 }] })] })).receptors[0]!;
    expect(answer.verdict).toBe('not predicted to exceed');
    expect(answer.answers[0]!.arrivalS.likely).toBeNull();
  });
});
