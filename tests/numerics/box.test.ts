import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { flushingOf } from '../../server/solver/box/box-solver';
import { BoxRelease } from '../../server/solver/box/box-response';
import { SolverInputError } from '../../server/solver/errors';
import { lossClock } from '../../server/solver/loss';
import { releaseProfile } from '../../server/solver/release-profile';
import type { EstimateDocumentInput, ReleaseTiming } from '../../shared/schemas/estimate';
import { NO_ESTIMATE } from '../../shared/frames';
import { expectClose } from './close-to';
import { at, openDocument, receptor, release, solve } from './documents';

const HOUR = 3_600;
const TIDE_S = 12.42 * HOUR;
/** An invented harbour of 900 by 400 m, 9 m deep; springs to neaps, mean range 2.3 m, half of what leaves comes back. */
const basin = { volumeM3: 900 * 400 * 9, surfaceAreaM2: 900 * 400, tidalRangeM: 2.3, periodS: TIDE_S, returnFraction: 0.5 };
const outline = [at(-450, -200), at(450, -200), at(450, 200), at(-450, 200), at(-450, -200)];

const harbour = (over: Partial<Extract<EstimateDocumentInput['water'], { kind: 'open' }>> = {}, rest: Parameters<typeof openDocument>[1] = {}) =>
  openDocument(
    { waterKind: 'harbour', area: [outline], depthM: 9, mixingDepthM: 9, current: [], box: basin, ...over },
    {
      horizonS: 20 * 86_400,
      // 2,000 kg of the pentahydrate hold 509 kg of copper: 63.546/249.685.
      releases: [release({ timing: { kind: 'steady', startS: 0, durationS: 6 * HOUR }, amount: { how: 'mass', massKg: { likely: 2_000 }, activeFraction: 63.546 / 249.685 } })],
      receptors: [receptor({ position: at(300, 100), actionValues: [{ value: 4.8e-6, source: 'demonstration value' }] })],
      ...rest,
    },
  );

describe('copper sulfate in a harbour basin', () => {
  const { result } = solve(harbour());
  const answer = result.receptors[0]!;

  it('is solved as a stirred box', () => {
    expect(result.solver).toBe('stirred basin');
  });

  it('mixes to 157 µg/l if none had left, and peaks a little below as some leaves in the six hours', () => {
    const mixed = result.working.find((line) => line.formula === 'C₀ = M/V')!.value!;
    expect(Math.abs(mixed - 157e-6)).toBeLessThan(0.5e-6);
    expect(answer.peak.likely!).toBeLessThan(mixed);
    expect(answer.peak.likely!).toBeGreaterThan(0.95 * mixed);
    expect(Math.abs(answer.peakS! - 6 * HOUR)).toBeLessThan(60);
  });

  it('falls to 37 % in 7.8 tides, four days', () => {
    const { eFoldingS } = flushingOf(basin);
    expect(Math.abs(eFoldingS / TIDE_S - 7.8)).toBeLessThan(0.05);
    expect(Math.abs(eFoldingS / 86_400 - 4)).toBeLessThan(0.1);
  });

  it('is below 4.8 µg/l after about 14 days', () => {
    const endDays = answer.answers[0]!.endS.likely! / 86_400;
    expect(endDays).toBeGreaterThan(13.5);
    expect(endDays).toBeLessThan(14.7);
    expect(answer.answers[0]!.endOpen).toBe(false);
  });

  it('closes its books to 1e-12', () => {
    expect(Math.abs(result.diagnostics.massResidual)).toBeLessThan(1e-12);
    expect(result.diagnostics.massLeft / result.diagnostics.massReleased).toBeGreaterThan(0.98);
  });

  it('has one value all over the basin and none outside it', () => {
    const frame = solve(harbour(), { preview: true }).messages.find(({ head }) => head.type === 'frame')!;
    const codes = new Set(new Uint16Array(frame.payload.buffer.slice(frame.payload.byteOffset, frame.payload.byteOffset + frame.payload.byteLength)));
    // Beside both stands the hatch round the release, where nothing is told.
    expect([...codes].filter((code) => code !== NO_ESTIMATE).length).toBe(2);
    expect(codes.has(0)).toBe(true);
  });
});

describe('a place outside the basin', () => {
  it('cannot be estimated, and is told so, not called safe', () => {
    const { result } = solve(harbour({ area: [[at(-450, -200), at(450, -200), at(450, 200), at(-450, 200), at(-450, -200)]] }, { receptors: [receptor({ position: at(450 + 250, 0), actionValues: [{ value: 1e-6 }] })] }));
    expect(result.receptors[0]!.verdict).toBe('may exceed');
    // 250 m off the outline still counts as at its edge; the door refuses places farther off.
    expect(() => solve(harbour({}, { receptors: [receptor({ position: at(2_000, 0) })] }))).toThrow(SolverInputError);
  });
});

describe('one kilogram in a stirred basin', () => {
  const made = (timing: ReleaseTiming, flushing: number, ratePerS: number): BoxRelease =>
    new BoxRelease(releaseProfile(timing), flushing, lossClock(ratePerS > 0 ? { kind: 'first-order', ratePerS, source: '' } : { kind: 'none' }, '2031-03-21T09:00:00-08:00'), 1e6);

  it('let go at once decays as e^-(f+k)t, shared between flushing and loss as f to k', () => {
    const books = made({ kind: 'instantaneous', atS: 100 }, 3e-6, 1e-6).at(200_100);
    expectClose(books.inWater, Math.exp(-4e-6 * 200_000), 1e-12);
    expectClose(books.left / books.lost, 3, 1e-12);
  });

  it('let go steadily reaches (1 - e^-rT)/rT at its end', () => {
    expectClose(made({ kind: 'steady', startS: 0, durationS: 50_000 }, 2e-5, 0).at(50_000).inWater, -Math.expm1(-1) / 1, 1e-12);
  });

  it('let go by a table agrees with fine steps of the balance, to 1e-6', () => {
    const box = made({ kind: 'table', rows: [{ atS: 0, rate: 0 }, { atS: 10_000, rate: 3 }, { atS: 40_000, rate: 1 }] }, 1e-5, 2e-6);
    const profile = releaseProfile({ kind: 'table', rows: [{ atS: 0, rate: 0 }, { atS: 10_000, rate: 3 }, { atS: 40_000, rate: 1 }] });
    let mass = 0;
    const h = 10;
    // Steps of 10 s against times of 1e5 s, halved about the middle: an error of about (h r)^2/12.
    for (let t = 0; t < 60_000; t += h) mass = mass * Math.exp(-1.2e-5 * h) + (profile.released(t + h) - profile.released(t)) * Math.exp(-1.2e-5 * (h / 2));
    expectClose(box.at(60_000).inWater, mass, 1e-6);
  });

  it('by day and night loses by the hours of each', () => {
    const loss = lossClock({ kind: 'day-night', dayRatePerS: 4e-5, nightRatePerS: 1e-5, sunriseHour: 6, sunsetHour: 20, source: '' }, '2031-01-15T20:00:00-08:00');
    const box = new BoxRelease(releaseProfile({ kind: 'instantaneous', atS: 0 }), 0, loss, 1e6);
    expectClose(box.at(14 * HOUR).inWater, Math.exp(-1e-5 * 10 * HOUR - 4e-5 * 4 * HOUR), 1e-12);
    expect(box.at(14 * HOUR).left).toBe(0);
  });

  it('keeps its books to 1e-12 and nothing below zero, whatever the rates', () =>
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1e-3, noNaN: true }), fc.double({ min: 0, max: 1e-3, noNaN: true }), fc.integer({ min: 1, max: 500_000 }), fc.integer({ min: 1, max: 900_000 }), (flushing, rate, durationS, atS) => {
        const books = made({ kind: 'steady', startS: 0, durationS }, flushing, rate).at(atS);
        expect(Math.abs(books.released - books.inWater - books.lost - books.left)).toBeLessThan(1e-12);
        for (const value of Object.values(books)) expect(value).toBeGreaterThanOrEqual(-1e-15);
      }),
    ));
});

describe('figures of a basin that cannot be', () => {
  it('a tide of more water than the basin holds is refused with its field', () => {
    try {
      solve(harbour({ box: { ...basin, tidalRangeM: 12 } }));
      expect.unreachable('A basin was drained dry');
    } catch (error) {
      if (!(error instanceof SolverInputError)) throw error;
      expect(error.errors[0]!.path).toBe('water.box.tidalRangeM');
    }
  });

  it('a box asked for without its figures is refused with what to give', () => {
    try {
      solve({ ...harbour({ box: undefined }), solver: 'box' });
      expect.unreachable('A box without figures was solved');
    } catch (error) {
      if (!(error instanceof SolverInputError)) throw error;
      expect(error.errors[0]!.path).toBe('water.box');
    }
  });
});
