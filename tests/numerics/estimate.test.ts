import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decodeValue, nodeCount, type FrameHead } from '../../shared/frames';
import { SolverCancelled, SolverInputError } from '../../server/solver/errors';
import { solveEstimate } from '../../server/solver/estimate';
import { contourLevels } from '../../server/solver/results/levels';
import { expectClose } from './close-to';
import { at, openDocument, reachOf, receptor, release, riverDocument, solve } from './documents';

const river = (over: Parameters<typeof riverDocument>[1] = {}) =>
  riverDocument([reachOf({ id: 'r', lengthKm: 30, Q: 9, W: 24, H: 0.95, U: 0.395, D: 15, e: 0.04 })], {
    releases: [release({ position: at(1_000, 0), channel: { reachId: 'r', chainageKm: 29, bank: 'right' } })],
    receptors: [receptor({ position: at(11_000, 0), channel: { reachId: 'r', chainageKm: 19, bank: 'left' }, actionValues: [{ value: 1e-4 }] })],
    ...over,
  });
const riverReceptor = (over: Parameters<typeof receptor>[0] = {}) => receptor({ position: at(11_000, 0), channel: { reachId: 'r', chainageKm: 19, bank: 'left' }, ...over });

describe('the stream of an estimate', () => {
  it('gives the same bytes for the same document', () => {
    const doc = openDocument({}, { receptors: [receptor({ actionValues: [{ value: 1e-5 }] })] });
    expect(solve(doc)).toEqual(solve(doc));
  });

  it.each([['open water', openDocument()], ['a river', river()]])('starts, sends each frame and receptor once, and ends with the result: %s', (_name, doc) => {
    const { messages, result } = solve(doc);
    expect(messages[0]!.head.type).toBe('start');
    expect(messages.at(-1)!.head).toEqual({ type: 'result', result });
    const frames = messages.filter((message) => message.head.type === 'frame');
    expect(frames.map((message) => (message.head as FrameHead).index)).toEqual([0, 1, 2, 3, 4, 5, 6, 7]);
    for (const { head, payload } of frames) expect(payload.byteLength).toBe(2 * nodeCount((head as FrameHead).grid));
    expect(messages.filter((message) => message.head.type === 'receptor')).toHaveLength(1);
    expect(messages.filter((message) => message.head.type === 'envelope')).toHaveLength(1);
    // Heads travel as JSON.
    for (const { head } of messages) expect(JSON.parse(JSON.stringify(head))).toEqual(head);
  });

  it('shows in its envelope what its frames show, at the same places', () => {
    const { messages } = solve(river());
    const value = (message: (typeof messages)[number], km: number): number => {
      const head = message.head as FrameHead;
      if (head.grid.kind !== 'channel') return 0;
      const { chainageKm, nAcross } = head.grid.parts[0]!;
      const nearest = chainageKm.reduce((best, node, i) => (Math.abs(node - km) < Math.abs(chainageKm[best]! - km) ? i : best), 0);
      if (Math.abs(chainageKm[nearest]! - km) > 0.2) return 0;
      return decodeValue(new Uint16Array(message.payload.buffer)[nearest * nAcross]!, head.scale);
    };
    const frames = messages.filter((message) => message.head.type === 'frame');
    const envelope = messages.find((message) => message.head.type === 'envelope')!;
    for (const km of [25, 19, 10]) {
      const most = Math.max(...frames.map((frame) => value(frame, km)));
      // Nodes of the two grids lie up to 60 m apart, 3 % of the cloud's length.
      expect(value(envelope, km)).toBeGreaterThan(0.97 * most);
    }
  });

  it('stops when asked to', () => expect(() => solveEstimate(openDocument(), () => undefined, { isCancelled: () => true })).toThrow(SolverCancelled));
});

describe('a receptor in a river', () => {
  const answerOf = (doc: ReturnType<typeof river>) => solve(doc).result.receptors[0]!;

  it('has the peak of the slug solution, at its time', () => {
    const answer = answerOf(river());
    const k = 15 / 0.395 ** 2;
    const T = 10_000 / 0.395;
    const t = -k + Math.sqrt(k * k + T * T);
    // The far bank is evenly mixed to 1e-6 here (tau 1.8).
    expectClose(answer.peak.likely!, (100 / 9) * (Math.exp(-((T - t) ** 2) / (4 * k * t)) / Math.sqrt(4 * Math.PI * k * t)), 1e-5);
    expect(Math.abs(answer.peakS! - t)).toBeLessThan(2);
  });

  it('has the dose M/Q', () => {
    // Simpson's rule on the drawn samples: 0.1 %.
    expectClose(answerOf(river()).dose.likely!, 100 / 9, 1e-3);
  });

  it('arrives and ends where the solution crosses the action value, to a second', () => {
    const { arrivalS, endS, timeAboveS, pulses } = answerOf(river()).answers[0]!;
    const k = 15 / 0.395 ** 2;
    const T = 10_000 / 0.395;
    const c = (t: number): number => (100 / 9) * (Math.exp(-((T - t) ** 2) / (4 * k * t)) / Math.sqrt(4 * Math.PI * k * t));
    for (const t of [arrivalS.likely!, endS.likely!]) {
      expect(Math.min(c(t - 1), c(t + 1))).toBeLessThan(1e-4);
      expect(Math.max(c(t - 1), c(t + 1))).toBeGreaterThan(1e-4);
    }
    expectClose(timeAboveS.likely!, endS.likely! - arrivalS.likely!, 1e-12);
    expect(pulses).toHaveLength(1);
  });

  it('is reached earlier and longer by the high amount, later and shorter by the low one', () => {
    const answer = answerOf(river({ releases: [{ ...river().releases[0]!, amount: { how: 'mass', massKg: { low: 50, likely: 100, high: 300 } } }] }));
    const { arrivalS, endS } = answer.answers[0]!;
    expect(arrivalS.early!).toBeLessThan(arrivalS.likely!);
    expect(arrivalS.late!).toBeGreaterThan(arrivalS.likely!);
    expect(endS.late!).toBeGreaterThan(endS.likely!);
    expectClose(answer.peak.high! / answer.peak.low!, 6, 1e-12);
  });

  it('without an amount gets figures per kilogram, no exceedance, and the amount that would exceed', () => {
    const answer = answerOf(river({ releases: [{ ...river().releases[0]!, amount: { how: 'unknown' } }] }));
    expect(answer.verdict).toBe('cannot be estimated');
    expect(answer.answers[0]!.arrivalS.likely).toBeNull();
    expect(answer.reason).toMatch(/per|1 kg/);
    expectClose(answer.peak.likely!, answerOf(river()).peak.likely! / 100, 1e-9);
  });

  it('off the way of every release is not predicted to exceed, and says why', () => {
    const answer = answerOf(river({ receptors: [riverReceptor({ position: at(0, 0), channel: { reachId: 'r', chainageKm: 29.9, bank: 'left' }, actionValues: [{ value: 1e-4 }] })] }));
    expect(answer).toMatchObject({ verdict: 'not predicted to exceed', reason: 'Not downstream of any release', peak: { likely: 0 }, peakS: null });
  });

  it('within ten depths of the release cannot be estimated', () => {
    const { result } = solve(river({ receptors: [riverReceptor({ position: at(1_005, 0), channel: { reachId: 'r', chainageKm: 28.995, bank: 'left' }, actionValues: [{ value: 1e-4 }] })] }));
    expect(result.receptors[0]!.verdict).toBe('cannot be estimated');
    expect(result.checks).toContainEqual(expect.objectContaining({ code: 'near-field', severity: 'stop', receptorId: 'x' }));
  });

  it('with a long averaging time sees a lower and later peak than the momentary one', () => {
    const value = { value: 2e-5, averagingS: 7_200 };
    const answer = answerOf(river({ receptors: [riverReceptor({ actionValues: [value, { value: 2e-5 }] })] }));
    const [mean, momentary] = answer.answers;
    expect(mean!.ratio!).toBeLessThan(momentary!.ratio!);
    expect(mean!.arrivalS.likely!).toBeGreaterThan(momentary!.arrivalS.likely!);
    // The mean over a window is the dose within it: at most the peak, at least its share of the passage.
    expect(mean!.ratio!).toBeGreaterThan(0.5 * momentary!.ratio!);
  });

  it('shows the figures with losses beside a conservative estimate', () => {
    const loss = { kind: 'first-order', ratePerS: 2e-5 } as const;
    const beside = answerOf(river({ substance: { name: 'Tracer', loss } }));
    const applied = answerOf(river({ substance: { name: 'Tracer', loss, applyLoss: true } }));
    expect(beside.withLosses!.peak).toBeLessThan(beside.peak.likely!);
    // Beside figures are on the drawn times: the peak lies between two of them.
    expectClose(beside.withLosses!.peak, applied.peak.likely!, 5e-3);
    expect(applied.withLosses).toBeNull();
  });
});

describe('several releases', () => {
  it('add up at every receptor', () =>
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 900 }), fc.integer({ min: -300, max: 300 }), fc.integer({ min: 0, max: 7_200 }), (massKg, y, startS) => {
        const first = release();
        const second = release({ id: 'b', position: at(0, y), timing: { kind: 'steady', startS, durationS: 1_800 }, amount: { how: 'mass', massKg: { likely: massKg } } });
        const dose = (releases: ReturnType<typeof release>[]): number => solve(openDocument({}, { releases, receptors: [receptor({ position: at(3_000, 50) })] })).result.receptors[0]!.dose.likely!;
        // Each dose is summed on its own samples to 1e-3.
        expectClose(dose([first, second]), dose([first]) + dose([second]), 3e-3);
      }),
      { numRuns: 12 },
    ));

  it('with one unknown amount claim what the known ones exceed, and nothing else', () => {
    const unknown = release({ id: 'b', amount: { how: 'unknown' } });
    const verdict = (value: number) => solve(openDocument({}, { releases: [release(), unknown], receptors: [receptor({ actionValues: [{ value }] })] })).result.receptors[0]!.verdict;
    expect(verdict(1e-9)).toBe('may exceed');
    expect(verdict(1)).toBe('cannot be estimated');
  });
});

describe('books', () => {
  it.each([
    ['open water', openDocument()],
    ['open water with loss', openDocument({}, { substance: { name: 'T', loss: { kind: 'first-order', ratePerS: 3e-5 }, applyLoss: true }, releases: [release({ timing: { kind: 'steady', durationS: 7_200 } })] })],
    ['open water at a shore', openDocument({ straightShore: { from: at(-40_000, -200), to: at(40_000, -200) } })],
    ['a river', river({ horizonS: 40_000 })],
    ['a river with loss', river({ horizonS: 40_000, substance: { name: 'T', loss: { kind: 'first-order', ratePerS: 3e-5 }, applyLoss: true } })],
  ])('close within 0.1 %: %s', (_name, doc) => {
    const { diagnostics } = solve(doc).result;
    expect(diagnostics.massReleased).toBe(100);
    expect(diagnostics.massInWater).toBeGreaterThan(10);
    // Open water sums nodes a fifth of a standard deviation apart, rivers eight a standard deviation.
    expect(Math.abs(diagnostics.massResidual)).toBeLessThan(1e-3);
  });

  it('count what has left a river', () => {
    const { diagnostics } = solve(river({ horizonS: 200_000 })).result;
    expectClose(diagnostics.massLeft, 100, 1e-6);
  });
});

describe('limits of concentration', () => {
  it('no value is above the solubility, and a check says so', () => {
    const { result, messages } = solve(openDocument({}, { substance: { name: 'T', solubilityKgM3: 1e-6 } }));
    for (const { head } of messages) if (head.type === 'frame') expect(head.max).toBeLessThanOrEqual(1e-6);
    expect(result.diagnostics.cappedValues).toBeGreaterThan(0);
    expect(result.checks.map((check) => check.code)).toContain('capped');
  });

  it('no release is stronger than what was spilled', () => {
    const doc = openDocument({}, { releases: [release({ spilledVolumeM3: 1e6 })] });
    for (const { head } of solve(doc).messages) if (head.type === 'frame') expect(head.max).toBeLessThanOrEqual(100 / 1e6 + 1e-15);
  });
});

describe('levels', () => {
  it.each([1e-9, 1e-6, 3e-4, 0.2, 50])('hold every action value and are at most seven, ascending: top %d', (top) => {
    const doc = openDocument({}, { receptors: [receptor({ actionValues: [{ value: 3.9e-4 }, { value: 5e-3 }, { value: 1e-2 }] })] });
    const levels = contourLevels(doc, top);
    expect(levels.length).toBeLessThanOrEqual(7);
    expect(levels.filter((level) => level.isActionValue).map((level) => level.value)).toEqual([3.9e-4, 5e-3, 1e-2]);
    expect([...levels].sort((a, b) => a.value - b.value)).toEqual(levels);
  });
});

describe('documents that cannot be solved', () => {
  const errorsOf = (doc: ReturnType<typeof openDocument>) => {
    try {
      solve(doc);
    } catch (error) {
      if (error instanceof SolverInputError) return error.errors;
      throw error;
    }
    return [];
  };

  it('a receptor is moved onto the water within 300 m with a note, and refused farther out', () => {
    const near = solve(openDocument({}, { releases: [release({ position: at(48_000, 0) })], receptors: [receptor({ position: at(50_200, 0) })] })).result;
    expect(near.checks).toContainEqual(expect.objectContaining({ code: 'receptor-moved', severity: 'note' }));
    const [error] = errorsOf(openDocument({}, { receptors: [receptor({ position: at(50_400, 0) })] }));
    expect(error!.path).toBe('receptors.0.position');
    expect(error!.message).toMatch(/lies 400 m outside Open water: move it/);
  });

  it('a current series that ends before the estimate', () => {
    const current = [{ kind: 'series', rows: [{ atS: 0, eastMps: 0.1, northMps: 0 }, { atS: 20_000, eastMps: 0.1, northMps: 0 }] }] as const;
    expect(errorsOf(openDocument({ current: current.map((part) => ({ ...part, rows: [...part.rows] })) }))[0]!.path).toBe('water.current.0.rows');
  });

  it('a release far off its river', () => {
    expect(errorsOf(river({ releases: [{ ...river().releases[0]!, position: at(1_000, 5_000) }] }))[0]!.path).toBe('releases.0.position');
  });
});

describe('any document of a sensible range', () => {
  const timing = fc.oneof(
    fc.record({ kind: fc.constant('instantaneous' as const), atS: fc.integer({ min: -3_600, max: 20_000 }) }),
    fc.record({ kind: fc.constant('steady' as const), startS: fc.integer({ min: -3_600, max: 20_000 }), durationS: fc.integer({ min: 1, max: 40_000 }) }),
  );
  it('is solved with finite, non-negative figures', () =>
    fc.assert(
      fc.property(timing, fc.double({ min: 0, max: 1, noNaN: true }), fc.double({ min: 0, max: 0.6, noNaN: true }), fc.integer({ min: -4_000, max: 4_000 }), fc.boolean(), (when, residual, tide, y, isOkubo) => {
        const doc = openDocument(
          {
            current: [{ kind: 'residual', speedMps: residual, towardDeg: 60 }, { kind: 'tide', majorMps: tide, floodTowardDeg: 350, periodS: 44_712, maxFloodS: 0 }],
            mixing: isOkubo ? { kind: 'okubo' } : { kind: 'constant', alongM2s: 10, acrossM2s: 1 },
          },
          { releases: [release({ timing: when })], receptors: [receptor({ position: at(2_000, y), actionValues: [{ value: 1e-6 }] })], frameCount: 4 },
        );
        const { result, messages } = solve(doc, { preview: true });
        const [answer] = result.receptors;
        expect([answer!.peak.likely!, answer!.dose.likely!, ...answer!.series.likely].every((value) => Number.isFinite(value) && value >= 0)).toBe(true);
        expect(answer!.series.timesS.every((t, i, all) => i === 0 || t > all[i - 1]!)).toBe(true);
        for (const { head } of messages) if (head.type === 'frame') expect(Number.isFinite(head.max)).toBe(true);
        expect(Number.isFinite(result.diagnostics.massResidual)).toBe(true);
      }),
      { numRuns: 60 },
    ));
});
