import { describe, expect, it } from 'vitest';
import { districtRegisters } from '../../server/db/seed/district';
import { assembleWater } from '../../shared/assemble';
import type { RiverWater } from '../../shared/schemas/estimate';
import { answerIn, answerOf, expectPeak, expectTime, HOUR, libraryCase, resultOf, varied } from './library';

describe('S01: ammonia from the V2 bridge into the Ollemar, usual flow', () => {
  it('reaches the first intake after 3 to 3.8 hours and peaks after 4.3 at 21 to 26 mg/l', () => {
    const answer = answerOf('S01', 'int-1');
    expectTime(answer.answers[0]!.arrivalS.likely, 3, 3.8);
    expectTime(answer.peakS, 4.3);
    expectPeak(answer.peak.likely, 21e-3, 26e-3);
  });

  it('peaks at the headgate after 8.5 hours at about 15 mg/l', () => {
    expectTime(answerOf('S01', 'irr-1').peakS, 8.5);
    expectPeak(answerOf('S01', 'irr-1').peak.likely, 15e-3);
  });

  it('reaches the second intake after 17.7 to 18.1 hours, peaks at 4.3 to 4.5 mg/l after 20.4 and is gone after 23', () => {
    const answer = answerOf('S01', 'int-2');
    expectTime(answer.answers[0]!.arrivalS.likely, 17.7, 18.1);
    expectTime(answer.peakS, 20.4);
    expectTime(answer.answers[0]!.endS.likely, 23);
    expectPeak(answer.peak.likely, 4.3e-3, 4.5e-3);
  });

  it('keeps the first intake shut for less than its ten hours of storage', () => {
    const { storageS, closingS } = libraryCase('S01').receptors.find(({ id }) => id === 'int-1')!;
    expect(answerOf('S01', 'int-1').answers[0]!.timeAboveS.likely! + closingS!).toBeLessThan(storageS!);
  });
});

describe('S02: hypochlorite leaking into the Quillock, low flow, half of it gone in half an hour', () => {
  it('reaches the hatchery after 1.4 hours and stands at about 3.3 mg/l until 3.7 to 4', () => {
    const answer = answerOf('S02', 'hat-1');
    expectTime(answer.leadingEdgeS, 1.4);
    expectPeak(answer.peak.likely, 3.3e-3);
    const last = answer.series.timesS.findLast((_, i) => answer.series.likely[i]! > 1.65e-3)!;
    expectTime(last, 3.7, 4);
  });

  it('falls to about 70 µg/l at the confluence and a tenth of that once diluted', () => {
    const doc = libraryCase('S02');
    const result = varied(doc, {
      receptors: [
        { ...doc.receptors[0]!, id: 'mouth', channel: { reachId: 'quillock', chainageKm: 0, bank: 'mid' }, position: [-116.96, -44.478] },
        // Where the river is mixed across again: half its mixing length of 4 km, in which 1.2 h pass and five times less is left.
        { ...doc.receptors[0]!, id: 'below', channel: { reachId: 'ol-lower', chainageKm: 28.65, bank: 'mid' }, position: [-116.96, -44.478] },
      ],
    });
    expectPeak(answerIn(result, 'mouth').peak.likely, 70e-6);
    // Section mean just below the joint, from the discharges: 0.6 of 5.8 m3/s.
    const { distanceTime } = result;
    const column = distanceTime!.chainageKm.findIndex((km, i) => distanceTime!.reachIds[i] === 'ol-lower' && km < 28.7);
    expectPeak(Math.max(...distanceTime!.values.map((row) => row[column]!)), 7e-6);
  });

  it('never comes near the value of the second intake', () => expect(answerOf('S02', 'int-2').verdict).toBe('not predicted to exceed'));
});

describe('S03: fire-water into the Evarrow, and what the dam does to it', () => {
  const mouth = (key: string) => {
    const doc = libraryCase(key);
    const at = { channel: { reachId: 'evarrow', chainageKm: 0, bank: 'mid' as const }, position: [-116.905, -44.46] as [number, number] };
    return answerIn(varied(doc, { receptors: [{ ...doc.receptors[0]!, id: 'mouth', ...at }] }), 'mouth');
  };

  it('with the dam at 2 m3/s the mouth stands at 58 µg/l from 7 hours on', () => {
    const answer = mouth('S03');
    expectPeak(answer.peak.likely, 58e-6);
    // Half the plateau: its front.
    const front = answer.series.timesS.find((_, i) => answer.series.likely[i]! > 29e-6)!;
    expectTime(front, 7);
  });

  it('with the dam at 2 m3/s the second intake is reached after 16 hours, peaks at 8.5 µg/l after 21 and is free after 27', () => {
    const answer = answerOf('S03', 'int-2');
    expectTime(answer.answers[0]!.arrivalS.likely, 16);
    expectTime(answer.peakS, 21);
    expectTime(answer.answers[0]!.endS.likely, 27);
    expectPeak(answer.peak.likely, 8.5e-6);
  });

  it('with the dam at 12 m3/s throughout it is reached after 10 hours, peaks at 4.9 µg/l after 15 and is free after 20', () => {
    expectPeak(mouth('S03-12').peak.likely, 9.6e-6);
    const answer = answerOf('S03-12', 'int-2');
    expectTime(answer.answers[0]!.arrivalS.likely, 10);
    expectTime(answer.peakS, 15);
    expectTime(answer.answers[0]!.endS.likely, 20);
    expectPeak(answer.peak.likely, 4.9e-6);
  });

  it('raising the dam half an hour after the fire makes it lower and shorter at the second intake, but earlier', () => {
    const left = answerOf('S03', 'int-2');
    const raised = answerOf('S03-R', 'int-2');
    const throughout = answerOf('S03-12', 'int-2');
    expect(resultOf('S03-R').solver).toContain('network');
    expect(raised.peak.likely!).toBeLessThan(0.8 * left.peak.likely!);
    expect(raised.answers[0]!.timeAboveS.likely!).toBeLessThan(left.answers[0]!.timeAboveS.likely! - HOUR);
    expect(raised.answers[0]!.arrivalS.likely!).toBeLessThan(left.answers[0]!.arrivalS.likely! - 3 * HOUR);
    // The dam at 12 m3/s from the start is the limit: never earlier than that.
    expect(raised.answers[0]!.arrivalS.likely!).toBeGreaterThan(throughout.answers[0]!.arrivalS.likely!);
  });

  it('is the same at the second intake with the estuary below it, whose section the sea holds up: a wave passes there at once', () => {
    const doc = libraryCase('S03-R');
    const whole = assembleWater(districtRegisters.waters.find(({ id }) => id === 'river-ollemar')!, { flowName: 'Q50' }) as RiverWater;
    const answer = answerIn(varied(doc, { water: { ...whole, flow: (doc.water as RiverWater).flow } }), 'int-2');
    // The longer way has a coarser step.
    expect(Math.abs(answer.peak.likely! / answerOf('S03-R', 'int-2').peak.likely! - 1)).toBeLessThan(0.02);
  });

  it('raising the dam changes no amount: the dose at the second intake is the amount over the discharge', () => {
    const dose = (key: string, Q: number) => answerOf(key, 'int-2').dose.likely! * Q;
    // Doses are Simpson's rule on the samples, and a wave passes while the cloud does: 3 %.
    for (const [key, Q] of [['S03', 13.5], ['S03-12', 23.5], ['S03-R', 23.5]] as const) expect(Math.abs(dose(key, Q) / 2.5 - 1), key).toBeLessThan(0.03);
  });
});

describe('S04: a plating bath into the Ollemar, low flow', () => {
  // Mean after 45 minutes of release: spread along by the dispersion of 0.8 km.
  const MEAN = 52e-3;
  const at442 = (bank: 'left' | 'right') => {
    const doc = libraryCase('S04');
    const offtake = doc.receptors.find(({ id }) => id === 'stk-1')!;
    return answerIn(varied(doc, { receptors: [{ ...offtake, channel: { ...offtake.channel!, bank } }] }), 'stk-1');
  };

  it('0.8 km below stands 1.5 times the mean at the bank of the release and half of it at the other', () => {
    const [same, far] = [at442('right').peak.likely!, at442('left').peak.likely!];
    expectPeak(same, 1.5 * MEAN);
    expectPeak(far, 0.5 * MEAN);
    // Not mixed: the bank of the release carries at least twice as much.
    expect(same / far).toBeGreaterThan(2);
  });

  it('warns at the offtake that the river is not mixed across there', () => {
    const codes = resultOf('S04').checks.filter(({ receptorId }) => receptorId === 'stk-1').map(({ code }) => code);
    expect(codes).toContain('across-mixing');
  });

  it('peaks at the first intake after 3.7 hours at 27 to 45 mg/l, more than a thousand times its value', () => {
    const answer = answerOf('S04', 'int-1');
    expectTime(answer.peakS, 3.7);
    expectPeak(answer.peak.likely, 27e-3, 45e-3);
    expect(answer.answers[0]!.ratio!).toBeGreaterThan(1_000);
  });

  it('reaches the second intake after 22.7 to 25.5 hours and peaks after 28.7 at 4.6 to 5.2 mg/l', () => {
    const answer = answerOf('S04', 'int-2');
    expectTime(answer.answers[0]!.arrivalS.likely, 22.7, 25.5);
    expectTime(answer.peakS, 28.7);
    expectPeak(answer.peak.likely, 4.6e-3, 5.2e-3);
  });
});

describe('S09: a barge hatch at high water slack in the estuary', () => {
  const atKm7 = () => {
    const { distanceTime } = resultOf('S09');
    const { chainageKm, timesS, values } = distanceTime!;
    const column = chainageKm.reduce((best, km, i) => (Math.abs(km - 7) < Math.abs(chainageKm[best]! - 7) ? i : best), 0);
    return { timesS, section: values.map((row) => row[column]!) };
  };

  it('the ebb takes it past km 7 about 1.8 hours later, with a section mean of about 6 µg/l', () => {
    const { timesS, section } = atKm7();
    const firstEbb = timesS.filter((t) => t < 5 * HOUR).length;
    const peak = section.slice(0, firstEbb).reduce((best, value, i) => (value > section[best]! ? i : best), 0);
    expectTime(timesS[peak], 1.8);
    expectPeak(section[peak]!, 6e-6);
  });

  it('comes back on the flood and passes the sluice again, twice in each tide', () => {
    const { timesS, section } = atKm7();
    const humps = section.filter((value, i) => i > 0 && i < section.length - 1 && value > section[i - 1]! && value >= section[i + 1]! && value > 1e-7);
    expect(humps.length).toBeGreaterThanOrEqual(3);
    // Between the first ebb and its flood it is down in the lower estuary: the section at the sluice is clean.
    const low = Math.min(...section.filter((_, i) => timesS[i]! > 3 * HOUR && timesS[i]! < 9 * HOUR));
    expect(low).toBeLessThan(0.1 * Math.max(...section));
  });

  // Let go in mid-channel it runs past the bank of the sluice on the first ebb; 475 m of width take hours to cross.
  it('is stronger at the bank of the sluice on its second way past than on its first', () => {
    const { series } = answerOf('S09', 'eco-1');
    const most = (from: number, to: number) => Math.max(...series.likely.filter((_, i) => series.timesS[i]! >= from * HOUR && series.timesS[i]! < to * HOUR));
    expect(most(9, 16)).toBeGreaterThan(3 * most(0, 6));
    expect(series.likely.every((value) => value >= 0)).toBe(true);
  });
});
