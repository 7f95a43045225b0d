import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lossClock } from '../../server/solver/loss';
import { Meter } from '../../server/solver/meter';
import { resolveReleases, weightsOf } from '../../server/solver/release-profile';
import { receptorAnswer } from '../../server/solver/results/receptor-answer';
import type { ReceptorSite, RunInput, UnitResponse } from '../../server/solver/types';
import type { ActionAnswer, ReceptorAnswer } from '../../shared/schemas/estimate-result';
import type { EstimateDocument } from '../../shared/schemas/estimate';
import { expectClose } from './close-to';
import { at, openDocument, reachOf, receptor, release, riverDocument, solve } from './documents';

/** A passage of a cloud at a place: a normal curve in time. */
type Passage = { atS: number; scaleS: number; height: number };
const curve = (passages: readonly Passage[]) => (tS: number): number => passages.reduce((sum, { atS, scaleS, height }) => sum + height * Math.exp(-(((tS - atS) / scaleS) ** 2) / 2), 0);
const responseOf = (passages: readonly Passage[]): UnitResponse => ({ at: curve(passages), features: passages.map(({ atS, scaleS }) => ({ atS, scaleS })) });

const HORIZON_S = 100_000;
/** The answer of a made-up place whose releases of 1 kg bring these passages. */
function answerTo(passagesOfReleases: readonly (readonly Passage[])[], actionValues: { value: number; averagingS?: number }[], over: Partial<EstimateDocument> = {}): ReceptorAnswer {
  const doc = openDocument({}, { horizonS: HORIZON_S, receptors: [receptor({ actionValues })], releases: passagesOfReleases.map((_, i) => release({ id: `r${i}`, name: `Release ${i}`, amount: { how: 'mass', massKg: { likely: 1 } } })) });
  const releases = resolveReleases(doc);
  const input = { doc: { ...doc, ...over }, releases, weights: weightsOf(releases), loss: lossClock({ kind: 'none' }, doc.startAt), isPreview: false, tolerance: 1e-6, meter: new Meter() } as unknown as RunInput;
  const site: ReceptorSite = { distanceM: 1_000, responses: passagesOfReleases.map(responseOf), reason: '', checks: [], working: () => [] };
  return receptorAnswer(input, doc.receptors[0]!, site);
}

/** Stretches above a level on a scan every 20 s. */
function scan(f: (tS: number) => number, level: number): [number, number][] {
  const out: [number, number][] = [];
  let from: number | null = null;
  for (let t = 0; t <= HORIZON_S; t += 20) {
    if (f(t) > level) from ??= t;
    else if (from !== null) {
      out.push([from, t]);
      from = null;
    }
  }
  if (from !== null) out.push([from, HORIZON_S]);
  return out;
}

const passage = fc.record({ atS: fc.integer({ min: 2_000, max: 95_000 }), scaleS: fc.integer({ min: 300, max: 6_000 }), height: fc.double({ min: -3, max: 0, noNaN: true }).map((power) => 10 ** power) });

describe('an arrival', () => {
  it('is where the curve first crosses the action value, and no passage above it is missed', () =>
    fc.assert(
      fc.property(fc.array(passage, { minLength: 1, maxLength: 5 }), fc.double({ min: -3.5, max: -0.1, noNaN: true }), (passages, power) => {
        const level = 10 ** power;
        const f = curve(passages);
        const { pulses, arrivalS, endS, timeAboveS } = answerTo([passages], [{ value: level }]).answers[0]!;
        const expected = scan(f, level).filter(([from, to]) => to - from > 200);
        for (const [from, to] of expected) expect(pulses.some((pulse) => pulse.startS < to && pulse.endS > from), `${from} to ${to}`).toBe(true);
        if (arrivalS.likely !== null && arrivalS.likely > 0) {
          // Crossings are found to 0.25 s.
          expect(f(arrivalS.likely - 0.3)).toBeLessThanOrEqual(level);
          expect(f(arrivalS.likely + 0.3)).toBeGreaterThanOrEqual(level);
        }
        if (endS.likely !== null && endS.likely < HORIZON_S) expect(f(endS.likely + 0.3)).toBeLessThanOrEqual(level);
        const above = scan(f, level).reduce((sum, [from, to]) => sum + to - from, 0);
        // The scan errs by 20 s at each end.
        expect(Math.abs((timeAboveS.likely ?? 0) - above)).toBeLessThanOrEqual(40 * (expected.length + 2));
      }),
      { numRuns: 150 },
    ));
});

describe('pulses', () => {
  const level = [{ value: 0.1 }];

  it('of two releases are told apart, each named after its own', () => {
    const { pulses } = answerTo([[{ atS: 20_000, scaleS: 1_500, height: 1 }], [{ atS: 60_000, scaleS: 2_000, height: 0.5 }]], level).answers[0]!;
    expect(pulses.map(({ releaseId }) => releaseId)).toEqual(['r0', 'r1']);
    expect(pulses.map(({ peakS }) => Math.round(peakS! / 10) * 10)).toEqual([20_000, 60_000]);
    expectClose(pulses[1]!.peak!, 0.5, 1e-6);
  });

  it('that a tide brings back are told apart and belong to one release', () => {
    const tide = [0.3, 1, 0.4].map((height, i) => ({ atS: 10_000 + i * 22_356, scaleS: 2_000, height }));
    const answer = answerTo([tide], level).answers[0]!;
    expect(answer.pulses.map(({ releaseId }) => releaseId)).toEqual(['r0', 'r0', 'r0']);
    expect(answer.arrivalS.likely).toBe(answer.pulses[0]!.startS);
    expect(answer.endS.likely).toBe(answer.pulses[2]!.endS);
    expectClose(answer.timeAboveS.likely!, answer.pulses.reduce((sum, { startS, endS }) => sum + endS - startS, 0), 1e-12);
  });

  it('with less than a minute between them count as one, and the dip is left out of the time above', () => {
    // Two equal passages 2.6 scales apart sink to 0.859 of a height in the middle, and there for about a minute below 0.8596.
    const pair = [30_000, 30_520].map((atS) => ({ atS, scaleS: 200, height: 1 }));
    const f = curve(pair);
    const dip = f(30_260);
    const answer = answerTo([pair], [{ value: dip * 1.002 }]).answers[0]!;
    expect(answer.pulses).toHaveLength(1);
    expect(answer.timeAboveS.likely!).toBeLessThan(answer.pulses[0]!.endS - answer.pulses[0]!.startS);
  });

  it('still above at the end of the estimate have an open end', () => {
    const answer = answerTo([[{ atS: HORIZON_S, scaleS: 5_000, height: 1 }]], level).answers[0]!;
    expect(answer.endOpen).toBe(true);
    expect(answer.endS.likely).toBe(HORIZON_S);
    expect(answerTo([[{ atS: 50_000, scaleS: 5_000, height: 1 }]], level).answers[0]!.endOpen).toBe(false);
  });
});

describe('an averaging time', () => {
  it('of a normal passage gives the mean of its formula', () => {
    const averagingS = 7_200;
    const scaleS = 3_000;
    const { answers } = answerTo([[{ atS: 50_000, scaleS, height: 1 }]], [{ value: 0.2, averagingS }]);
    const at = (tS: number): number => meanOf(curve([{ atS: 50_000, scaleS, height: 1 }]), tS, averagingS);
    for (const t of [answers[0]!.arrivalS.likely!, answers[0]!.endS.likely!]) expectClose(at(t), 0.2, 2e-3);
    expectClose(answers[0]!.ratio!, at(50_000 + averagingS / 2) / 0.2, 1e-3);
  });
});

const meanOf = (f: (tS: number) => number, tS: number, windowS: number): number => {
  const n = 2_000;
  return Array.from({ length: n }, (_, i) => f(tS - windowS + (windowS * (i + 0.5)) / n)).reduce((sum, value) => sum + value, 0) / n;
};

const tidal = { current: [{ kind: 'residual', speedMps: 0.08, towardDeg: 90 }, { kind: 'tide', majorMps: 0.25, floodTowardDeg: 80, periodS: 44_712, maxFloodS: 6_000 }] } satisfies Parameters<typeof openDocument>[0];
/** Previews: the same answers without a second opinion, which takes its time. */
const answersOf = (doc: EstimateDocument): ActionAnswer => solve(doc, { preview: true }).result.receptors[0]!.answers[0]!;
const times = ({ arrivalS, endS, pulses }: ActionAnswer) => [arrivalS.early, arrivalS.likely, arrivalS.late, endS.early, endS.likely, endS.late, ...pulses.flatMap(({ startS, endS: end }) => [startS, end])];
const expectSameTimes = (a: ActionAnswer, b: ActionAnswer, withinS: number): void => {
  const [left, right] = [times(a), times(b)];
  expect(left.map((t) => t === null)).toEqual(right.map((t) => t === null));
  left.forEach((t, i) => t !== null && expect(Math.abs(t - right[i]!)).toBeLessThanOrEqual(withinS));
};
const amount = (factor: number) => ({ how: 'mass', massKg: { low: 40 * factor, likely: 100 * factor, high: 250 * factor } }) as const;

describe('answers do not depend on', () => {
  const river = (factor: number, startAt = '2031-05-12T06:40:00-08:00', over: Partial<Parameters<typeof release>[0]> = {}) =>
    riverDocument([reachOf({ id: 'r', lengthKm: 30, Q: 9, W: 24, H: 0.95, U: 0.395, D: 15, e: 0.04 })], {
      startAt,
      releases: [release({ position: at(1_000, 0), channel: { reachId: 'r', chainageKm: 29, bank: 'right' }, amount: amount(factor), ...over })],
      receptors: [receptor({ position: at(11_000, 0), channel: { reachId: 'r', chainageKm: 19, bank: 'left' }, actionValues: [{ value: 1e-4 * factor }] })],
    });
  const open = (factor: number, startAt = '2031-05-12T06:40:00-08:00') =>
    openDocument(tidal, { horizonS: 120_000, startAt, releases: [release({ amount: amount(factor), timing: { kind: 'steady', startS: 0, durationS: 3_600 } })], receptors: [receptor({ actionValues: [{ value: 3e-6 * factor }] })] });

  it('the size of the numbers: ten times the amount and ten times the action value, thousandths alike', () => {
    for (const factor of [10, 1e-3, 1e6])
      for (const make of [river, open]) {
        // Root finding stops at 0.25 s.
        expectSameTimes(answersOf(make(factor)), answersOf(make(1)), 0.5);
        expectClose(answersOf(make(factor)).ratio!, answersOf(make(1)).ratio!, 1e-9);
      }
  });

  it('the day on which T0 lies, nor its UTC offset', () => {
    for (const make of [river, open]) for (const startAt of ['2029-12-31T23:59:00+05:30', '2031-05-12T06:40:00Z']) expectSameTimes(answersOf(make(1, startAt)), answersOf(make(1)), 0);
  });

  it('where zero of time is put: a release an hour later arrives an hour later', () => {
    const later = answersOf(river(1, undefined, { timing: { kind: 'instantaneous', atS: 3_600 } }));
    expectClose(later.arrivalS.likely! - 3_600, answersOf(river(1)).arrivalS.likely!, 1e-4);
  });

  it('the form in which the amount is told: 100 kg, 0.4 m³ of 250 kg/m³, 0.2 m³ of density 1,000 kg/m³ at half strength', () => {
    const forms = [
      { how: 'volume-strength', volumeM3: { likely: 0.4 }, strengthKgM3: 250 },
      { how: 'volume-density', volumeM3: { likely: 0.2 }, densityKgM3: 1_000, activeFraction: 0.5 },
    ] as const;
    const plain = answersOf(river(1, undefined, { amount: { how: 'mass', massKg: { likely: 100 } } }));
    for (const form of forms) expectSameTimes(answersOf(river(1, undefined, { amount: form })), plain, 0);
  });
});

describe('depth and bank of a receptor', () => {
  const near = (bank: 'left' | 'right') =>
    solve(riverDocument([reachOf({ id: 'r', lengthKm: 30, Q: 9, W: 24, H: 0.95, U: 0.395, D: 15, e: 0.004 })], {
      releases: [release({ position: at(1_000, 0), channel: { reachId: 'r', chainageKm: 29, bank: 'right' } })],
      receptors: [receptor({ position: at(3_000, 0), channel: { reachId: 'r', chainageKm: 27, bank }, actionValues: [{ value: 1e-4 }] })],
    })).result.receptors[0]!;

  it('the bank of the release has more than the far one while the river is not mixed across', () => expect(near('right').peak.likely!).toBeGreaterThan(2 * near('left').peak.likely!));

  it('an intake below the mixed layer is told apart by a note', () => {
    const { checks } = solve(openDocument({ depthM: 20, mixingDepthM: 5 }, { receptors: [receptor({ depthM: 12 })] })).result;
    expect(checks).toContainEqual(expect.objectContaining({ code: 'below-layer', receptorId: 'x' }));
  });
});

describe('releases', () => {
  it('add up: doses exactly, peaks between the larger and the sum', () =>
    fc.assert(
      fc.property(fc.integer({ min: -500, max: 500 }), fc.integer({ min: 0, max: 20_000 }), fc.integer({ min: 600, max: 10_000 }), (y, startS, durationS) => {
        const [a, b] = [release(), release({ id: 'b', position: at(200, y), timing: { kind: 'steady', startS, durationS } })];
        const of = (releases: ReturnType<typeof release>[]) => solve(openDocument(tidal, { horizonS: 60_000, releases, receptors: [receptor({ position: at(2_500, 50) })] }), { preview: true }).result.receptors[0]!;
        const [both, first, second] = [of([a, b]), of([a]), of([b])];
        // A preview integrates over release time to 1e-4.
        expectClose(both.dose.likely!, first.dose.likely! + second.dose.likely!, 5e-4);
        expect(both.peak.likely!).toBeGreaterThanOrEqual(Math.max(first.peak.likely!, second.peak.likely!) * (1 - 5e-4));
        expect(both.peak.likely!).toBeLessThanOrEqual((first.peak.likely! + second.peak.likely!) * (1 + 5e-4));
      }),
      { numRuns: 8 },
    ));
});

describe('a preview', () => {
  it('has the peak and the arrival of the run, though it integrates over release time by a fixed rule', () =>
    fc.assert(
      fc.property(fc.integer({ min: 600, max: 40_000 }), fc.integer({ min: 600, max: 5_000 }), fc.integer({ min: -400, max: 400 }), fc.integer({ min: 0, max: 60 }), fc.boolean(), (durationS, x, y, initialRadiusM, isGrowing) => {
        const doc = openDocument({ ...tidal, ...(isGrowing ? { mixing: { kind: 'okubo' } } : {}) }, {
          horizonS: 120_000,
          releases: [release({ initialRadiusM, timing: { kind: 'steady', durationS } })],
          receptors: [receptor({ position: at(x, y), actionValues: [{ value: 1e-6 }] })],
        });
        const [quick, full] = [solve(doc, { preview: true }).result.receptors[0]!, solve(doc).result.receptors[0]!];
        // Five standard deviations and more from any puff the preview says nothing.
        if (full.peak.likely! < 1e-9) return;
        expectClose(quick.peak.likely!, full.peak.likely!, 1e-4);
        const [soon, right] = [quick.answers[0]!.arrivalS.likely, full.answers[0]!.arrivalS.likely];
        if (right !== null) expect(Math.abs(soon! - right)).toBeLessThan(2);
      }),
      { numRuns: 6 },
    ));
});
