import { describe, expect, it } from 'vitest';
import type { EstimateReceptor } from '../../../../shared/schemas/estimate';
import type { ReceptorAnswer } from '../../../../shared/schemas/estimate-result';
import { byArrival, flagsOf } from './rail-lanes';

const receptor = (id: string): EstimateReceptor => ({ id, registerId: null, code: id.toUpperCase(), name: id, kind: 'intake', position: [0, 0], channel: null, depthM: null, closingS: null, storageS: null, actionValues: [] });
function answer(receptorId: string, early: number | null, end: number, verdict: 'may exceed' | 'not predicted to exceed' = early === null ? 'not predicted to exceed' : 'may exceed'): ReceptorAnswer {
  const none = { low: null, likely: null, high: null };
  return {
    receptorId, verdict, reason: '', distanceM: null, peak: none, peakS: null, leadingEdgeS: null, dose: none, series: { timesS: [], likely: [], low: null, high: null }, withLosses: null, working: [],
    answers: [{ index: 0, value: 1, verdict, reason: '', arrivalS: { early, likely: early === null ? null : early + 100, late: null }, endS: { early: null, likely: early === null ? null : end, late: null }, endOpen: false, timeAboveS: none, ratio: null, pulses: [] }],
  };
}

describe('receptors on the time rail', () => {
  it('are numbered in the order of arrival, those not reached last', () => {
    const rows = byArrival([receptor('a'), receptor('b'), receptor('c')], [answer('a', null, 0), answer('b', 900, 2_000), answer('c', 300, 2_000)]);
    expect(rows.map((row) => row.receptor.id)).toEqual(['c', 'b', 'a']);
    expect(rows.map((row) => row.number)).toEqual([1, 2, 3]);
  });

  it('share a lane only when one is over before the next begins', () => {
    const rows = byArrival([receptor('a'), receptor('b'), receptor('c')], [answer('a', 0, 1_000), answer('b', 500, 1_500), answer('c', 2_000, 2_500)]);
    expect(flagsOf(rows, 5_000, 100).map((flag) => [flag.id, flag.lane])).toEqual([['a', 0], ['b', 1], ['c', 0]]);
  });

  it('get no flag when they are not predicted to exceed', () => {
    expect(flagsOf(byArrival([receptor('a')], [answer('a', null, 0)]), 5_000, 100)).toEqual([]);
  });
});
