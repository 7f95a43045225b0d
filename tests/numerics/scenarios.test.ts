import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { estimateDocumentSchema, type EstimateDocument } from '../../shared/schemas/estimate';
import { currentOf } from '../../server/solver/open/current';
import { fromPlane } from '../../shared/geo';
import { solve } from './documents';

const documentOf = (name: string): EstimateDocument => estimateDocumentSchema.parse(JSON.parse(readFileSync(new URL(`../fixtures/documents/${name}.json`, import.meta.url), 'utf8')));
const answersOf = (doc: EstimateDocument) => new Map(solve(doc).result.receptors.map((answer) => [answer.receptorId, answer] as const));
const HOUR = 3_600;

/**
 * Hand figures: 1-D spread with Fischer's dispersion for the river, Okubo patches at sea and in the lake. They are
 * rough: a sound estimate lies within a factor of 2 in concentration and 25 % in time.
 */
const expectPeak = (got: number, low: number, high: number): void => {
  expect(got).toBeGreaterThan(low / 2);
  expect(got).toBeLessThan(high * 2);
};
const expectTime = (gotS: number, lowH: number, highH: number): void => {
  expect(gotS / HOUR).toBeGreaterThan(lowH * 0.75);
  expect(gotS / HOUR).toBeLessThan(highH * 1.25);
};

describe('ammonia from a bridge into the Ollemar', () => {
  const answers = answersOf(documentOf('s01-river'));

  it('reaches the first intake after 3 to 3.8 hours and peaks at 21 to 26 mg/l', () => {
    const answer = answers.get('int-1')!;
    expectTime(answer.answers[0]!.arrivalS.likely!, 3, 3.8);
    expectTime(answer.peakS!, 4.3, 4.3);
    expectPeak(answer.peak.likely!, 21e-3, 26e-3);
    expect(answer.verdict).toBe('may exceed');
  });

  it('peaks at the headgate after 8.5 hours at about 15 mg/l', () => {
    const answer = answers.get('irr-1')!;
    expectTime(answer.peakS!, 8.5, 8.5);
    expectPeak(answer.peak.likely!, 15e-3, 15e-3);
  });

  it('reaches the second intake after 17.7 to 18.1 hours, two confluences down, and is gone after 23', () => {
    const answer = answers.get('int-2')!;
    expectTime(answer.answers[0]!.arrivalS.likely!, 17.7, 18.1);
    expectTime(answer.peakS!, 20.4, 20.4);
    expectTime(answer.answers[0]!.endS.likely!, 23, 23);
    expectPeak(answer.peak.likely!, 4.3e-3, 4.5e-3);
  });

  it('leaves the hatchery on the side brook alone', () => {
    expect(answers.get('hat-1')).toMatchObject({ verdict: 'not predicted to exceed', reason: 'Not downstream of any release' });
  });
});

describe('digester slurry in the lake', () => {
  const answers = answersOf(documentOf('s06-lake'));

  it('brings about 1,000 cfu per 100 ml to the cove after 17 hours', () => {
    const answer = answers.get('bch-2')!;
    expectTime(answer.peakS!, 17, 17);
    expectPeak(answer.peak.likely!, 1e7, 1e7);
  });

  it('is negligible at the tower after four days', () => {
    const answer = answers.get('int-3')!;
    expect(answer.verdict).toBe('not predicted to exceed');
    // Below a hundredth of the action value.
    expect(answer.peak.high!).toBeLessThan(9e6 / 100);
  });
});

describe('phenol off the coast', () => {
  const doc = documentOf('s11-coast');

  it('reaches the intake after 8 to 15 hours at about 780 to 870 µg/l when it drifts its way', () => {
    const answer = answersOf(doc).get('int-4')!;
    expectTime(answer.answers[1]!.arrivalS.likely!, 8, 15);
    expectPeak(answer.peak.likely!, 780e-6, 870e-6);
  });

  it('leaves the pens to the south alone', () => expect(answersOf(doc).get('aq-1')!.verdict).toBe('not predicted to exceed'));

  it('has 780 to 870 µg/l on its centre line 8.5 km off, without the tide', () => {
    if (doc.water.kind !== 'open') throw new Error('the coast is open water');
    const parts = doc.water.current.filter((part) => part.kind !== 'tide');
    const drift = new Float64Array(2);
    currentOf(parts).velocity(0, drift);
    const speed = Math.hypot(drift[0]!, drift[1]!);
    const [originLon, originLat] = doc.releases[0]!.position;
    const position = fromPlane({ originLon, originLat }, (8_500 * drift[0]!) / speed, (8_500 * drift[1]!) / speed);
    const answer = answersOf({ ...doc, water: { ...doc.water, current: parts }, receptors: [{ ...doc.receptors[0]!, position }] }).get('int-4')!;
    expectTime(answer.answers[1]!.arrivalS.likely!, 8, 15);
    expectPeak(answer.peak.likely!, 780e-6, 870e-6);
  });
});
