import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { LonLat } from '../../shared/schemas/basics';
import type { EstimateDocument } from '../../shared/schemas/estimate';
import { at, openDocument, reachOf, receptor, release, riverDocument, solve } from './documents';
import { channel } from './network-helpers';

const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });

/** Two ways to one document: their peaks, times of peak and doses at one receptor. */
function expectAgreement(doc: EstimateDocument, ways: readonly ['closed-form', 'network' | 'bounded'], bounds: { peak: number; time: number; dose: number }): void {
  const [one, other] = ways.map((solver) => solve({ ...doc, solver }).result.receptors[0]!) as [ReturnType<typeof solve>['result']['receptors'][number], ReturnType<typeof solve>['result']['receptors'][number]];
  const apart = (a: number, b: number): number => Math.abs(a - b) / Math.max(a, b);
  expect(apart(one.peak.likely!, other.peak.likely!), 'peak').toBeLessThan(bounds.peak);
  expect(apart(one.peakS!, other.peakS!), 'time of peak').toBeLessThan(bounds.time);
  expect(apart(one.dose.likely!, other.dose.likely!), 'dose').toBeLessThan(bounds.dose);
}

const anyTiming = fc.oneof(fc.constant({ kind: 'instantaneous' as const }), number(600, 10_000).map((durationS) => ({ kind: 'steady' as const, startS: 0, durationS })));
const anyBank = fc.constantFrom('left' as const, 'mid' as const, 'right' as const);

const anyRiver = fc
  .record({ U1: number(0.2, 0.8), U2: number(0.2, 0.8), W: number(8, 30), H: number(0.5, 2), D1: number(5, 30), D2: number(5, 30), e: number(0.02, 0.3), Qs: number(0.5, 6), from: anyBank, to: anyBank, side: fc.constantFrom('left' as const, 'right' as const), timing: anyTiming })
  .map(({ U1, U2, W, H, D1, D2, e, Qs, from, to, side, timing }) => {
    const Q = W * H * U1;
    const below = { W: W * 1.1, Q: Q + Qs };
    return riverDocument(
      [
        reachOf({ id: 'main', lengthKm: 14, Q, W, H, U: U1, D: D1, e }, { downstreamReachId: 'below' }),
        reachOf({ id: 'side', lengthKm: 5, Q: Qs, W: W / 2, H, U: Qs / (H * (W / 2)), D: D1, e }, { centreline: [[...at(14_000, 5_000), 5], [...at(14_000, 0), 0]], downstreamReachId: 'below', joinsOnBank: side }),
        reachOf({ id: 'below', lengthKm: 16, ...below, H: below.Q / (below.W * U2), U: U2, D: D2, e }, { centreline: [[...at(14_000, 0), 16], [...at(30_000, 0), 0]] }),
      ],
      {
        horizonS: 40 * 3_600,
        releases: [release({ position: at(4_000, 0), channel: channel('main', 10, from), timing })],
        receptors: [receptor({ position: at(22_000, 0), channel: channel('below', 8, to) })],
      },
    );
  });

const square = (halfM: number): LonLat[] => [at(-halfM, -halfM), at(halfM, -halfM), at(halfM, halfM), at(-halfM, halfM), at(-halfM, -halfM)];

/** A square of open sea with a steady drift, a first cloud that the grid resolves, and a receptor near its way. */
const anySea = fc
  .record({ speedMps: number(0.05, 0.3), towardDeg: number(0, 360), along: number(1, 8), ratio: number(1, 4), off: number(-1.5, 1.5), timing: anyTiming })
  .map(({ speedMps, towardDeg, along, ratio, off, timing }) => {
    const [ex, ey] = [Math.sin((towardDeg * Math.PI) / 180), Math.cos((towardDeg * Math.PI) / 180)];
    const sigma = 150;
    return openDocument(
      { area: [square(5_000)], current: [{ kind: 'residual', speedMps, towardDeg }], openEdge: { from: at(-5_000, -4_999), to: at(-4_999, -5_000), way: 'longer' }, mixing: { kind: 'constant', alongM2s: along, acrossM2s: along / ratio } },
      {
        horizonS: Math.round(2_800 / speedMps) + 12_000,
        releases: [release({ initialRadiusM: 2 * sigma, timing })],
        receptors: [receptor({ position: at(2_000 * ex - off * sigma * ey, 2_000 * ey + off * sigma * ex) })],
      },
    );
  });

describe('one random document solved two ways', () => {
  it('a river with a tributary: closed form and parcels', () =>
    fc.assert(
      // The closed form puts one even reach of the same mean and variance in place of two: 3 % of the peak.
      fc.property(anyRiver, (doc) => expectAgreement(doc, ['closed-form', 'network'], { peak: 0.05, time: 0.03, dose: 0.02 })),
      { numRuns: 8 },
    ));

  it('open sea: closed form and finite volumes', () =>
    fc.assert(
      // Cells of an eighth of the first cloud, with limited slopes at its top.
      fc.property(anySea, (doc) => expectAgreement(doc, ['closed-form', 'bounded'], { peak: 0.05, time: 0.05, dose: 0.03 })),
      { numRuns: 2 },
    ));

  it('is told of each run in the result: random paths agree, or the result says so', () =>
    fc.assert(
      fc.property(anyRiver, (doc) => {
        const { secondOpinion, receptors } = solve({ ...doc, receptors: [{ ...doc.receptors[0]!, actionValues: [{ value: 1e-4, basis: '', averagingS: 0, source: '', label: '' }] }] }).result;
        expect(['agrees', 'differs', 'disagrees']).toContain(secondOpinion!.agreement);
        // Where they disagree the answer is withdrawn.
        expect(secondOpinion!.agreement === 'disagrees').toBe(receptors[0]!.verdict === 'cannot be estimated');
      }),
      { numRuns: 5 },
    ));
});
