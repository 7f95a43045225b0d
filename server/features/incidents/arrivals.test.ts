import { describe, expect, it } from 'vitest';
import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { ActionAnswer, EstimateResult, ReceptorAnswer } from '../../../shared/schemas/estimate-result';
import { arrivalsOf, nextArrivals } from './arrivals';

const start = '2031-05-12T06:40:00-08:00';
const at = (elapsedS: number) => Date.parse(start) + elapsedS * 1_000;
const hour = 3_600;

type Times = [early: number | null, likely: number | null, late: number | null];
const answer = (arrival: Times, end: Times, endOpen = false): ActionAnswer => ({
  index: 0, value: 1e-3, verdict: 'may exceed', reason: '', endOpen, ratio: null, pulses: [],
  arrivalS: { early: arrival[0], likely: arrival[1], late: arrival[2] }, endS: { early: end[0], likely: end[1], late: end[2] }, timeAboveS: { low: null, likely: null, high: null },
});
const reckoned = (...receptors: { code: string; closingS?: number; answers: ActionAnswer[] }[]) =>
  arrivalsOf(
    'run-1',
    'scenario-1',
    { startAt: start, receptors: receptors.map(({ code, closingS }) => ({ id: code, code, name: `Name of ${code}`, closingS: closingS ?? null })) } as unknown as EstimateDocument,
    { receptors: receptors.map(({ code, answers }) => ({ receptorId: code, verdict: 'may exceed', answers }) as unknown as ReceptorAnswer) } as unknown as EstimateResult,
  );
const next = (nowMs: number, ...receptors: Parameters<typeof reckoned>) => nextArrivals('incident-1', '-08:00', [{ ...reckoned(...receptors), scenarioName: 'Whole tank' }], nowMs);

describe('next arrivals', () => {
  it('are rounded to the safe side, with the latest time to begin closing', () => {
    const [arrival] = next(at(0), { code: 'INT-1', closingS: 1_800, answers: [answer([2 * hour + 1_000, 3 * hour, null], [5 * hour, 6 * hour, null])] });
    expect(arrival).toEqual({
      incidentId: 'incident-1', scenarioId: 'scenario-1', scenarioName: 'Whole tank', runId: 'run-1', receptorCode: 'INT-1', receptorName: 'Name of INT-1', verdict: 'may exceed',
      earliestAt: '2031-05-12T08:55:00-08:00', likelyAt: '2031-05-12T09:40:00-08:00', closeByAt: '2031-05-12T08:25:00-08:00',
    });
  });

  it('come the earliest first, over all scenarios', () => {
    const codes = next(at(0), { code: 'LATE', answers: [answer([9 * hour, null, null], [10 * hour, null, null])] }, { code: 'SOON', answers: [answer([hour, null, null], [2 * hour, null, null])] }).map(({ receptorCode }) => receptorCode);
    expect(codes).toEqual(['SOON', 'LATE']);
  });

  it('name no likely time where only the high amount exceeds the action value', () => {
    expect(next(at(0), { code: 'A', answers: [answer([hour, null, null], [2 * hour, null, null])] })[0]).toMatchObject({ earliestAt: '2031-05-12T07:40:00-08:00', likelyAt: null, closeByAt: null });
  });

  it('leave out receptors that are not predicted to exceed', () => {
    expect(next(at(0), { code: 'A', answers: [answer([null, null, null], [null, null, null])] })).toEqual([]);
  });

  it('stay while they last and drop out after the latest end', () => {
    const receptor = { code: 'A', answers: [answer([hour, hour, hour], [2 * hour, 3 * hour, null])] };
    expect(next(at(2.5 * hour), receptor)).toHaveLength(1);
    expect(next(at(3 * hour + 1), receptor)).toHaveLength(0);
  });

  it('stay when the estimate ends before the concentration has fallen', () => {
    expect(next(at(400 * hour), { code: 'A', answers: [answer([hour, hour, hour], [2 * hour, null, null], true)] })).toHaveLength(1);
  });

  it('take the earliest arrival and the latest end over several action values', () => {
    const receptor = { code: 'A', answers: [answer([4 * hour, null, null], [5 * hour, null, null]), answer([hour, null, null], [9 * hour, null, null])] };
    expect(next(at(8 * hour), receptor)[0]?.earliestAt).toBe('2031-05-12T07:40:00-08:00');
  });
});
