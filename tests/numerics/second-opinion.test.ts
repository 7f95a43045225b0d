import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { estimateDocumentSchema, type EstimateDocument } from '../../shared/schemas/estimate';
import { estimateResultSchema } from '../../shared/schemas/estimate-result';
import { isInArea } from '../../shared/geo';
import { SolverCancelled } from '../../server/solver/errors';
import { compareCurves, type Compared } from '../../server/solver/second-opinion/compare';
import { BOUNDS } from '../../server/solver/second-opinion/bounds';
import { at, openDocument, reachOf, receptor, release, riverDocument, solve } from './documents';

const stored = (name: string): EstimateDocument => estimateDocumentSchema.parse(JSON.parse(readFileSync(new URL(`../fixtures/documents/${name}.json`, import.meta.url), 'utf8')));

/** A normal hump of the given height and middle on times every 100 s. */
const timesS = Array.from({ length: 201 }, (_, i) => 100 * i);
const hump = (height: number, midS: number) => timesS.map((t) => height * Math.exp(-0.5 * ((t - midS) / 1_500) ** 2));
const compared = (second: number[], over: Partial<Compared> = {}, error = 0): Compared => ({
  timesS,
  first: { receptorId: 'x', values: hump(1, 10_000), errors: timesS.map(() => 0) },
  second: { receptorId: 'x', values: second, errors: second.map((value) => error * value) },
  onePath: timesS.map(() => 1e-3),
  idleBelow: 0,
  startS: 0,
  ...over,
});

describe('two methods at one receptor', () => {
  it('agree when they say the same', () => {
    expect(compareCurves(compared(hump(1, 10_000)))).toMatchObject({ agreement: 'agrees', peakRatio: 1, arrivalDifferenceS: 0, endDifferenceS: 0 });
  });

  it('differ, then disagree, as the peak goes beyond a factor of 1.3 and of 2', () => {
    expect(compareCurves(compared(hump(1.6, 10_000))).agreement).toBe('differs');
    expect(compareCurves(compared(hump(1 / 1.6, 10_000))).agreement).toBe('differs');
    expect(compareCurves(compared(hump(2.1, 10_000))).agreement).toBe('disagrees');
    expect(compareCurves(compared(hump(1 / 2.1, 10_000))).agreement).toBe('disagrees');
  });

  it('disagree when the arrival is more than a quarter of the travel time off', () => {
    const frontS = 10_000 - 1_500 * Math.sqrt(2 * Math.log(10));
    const late = compareCurves(compared(hump(1, 10_000 + 0.27 * frontS)));
    expect(late.agreement).toBe('disagrees');
    expect(late.arrivalDifferenceS! / late.travelS!).toBeCloseTo(0.27, 2);
    expect(compareCurves(compared(hump(1, 10_000 - 0.2 * frontS))).agreement).toBe('differs');
  });

  it('are not set against each other by chance: three standard errors are taken off first', () => {
    expect(compareCurves(compared(hump(2.2, 10_000), {}, 0.15)).agreement).not.toBe('disagrees');
    expect(compareCurves(compared(hump(2.2, 10_000), {}, 0.02)).agreement).toBe('disagrees');
  });

  it('say nothing where hardly a path is expected', () => {
    expect(compareCurves(compared(hump(0, 10_000), { onePath: timesS.map(() => 0.5) })).agreement).toBe('none');
    expect(compareCurves(compared(hump(0, 10_000))).agreement).toBe('disagrees');
  });

  it('leave the answer alone where both stay well below every action value', () => {
    expect(compareCurves(compared(hump(3, 10_000), { idleBelow: 4 })).agreement).toBe('differs');
    expect(compareCurves(compared(hump(3, 10_000), { idleBelow: 2 })).agreement).toBe('disagrees');
  });
});

describe('the second opinion of a run', () => {
  it('agrees with the closed form down a river with two confluences', () => {
    const { result } = solve(stored('s01-river'));
    const opinion = result.secondOpinion!;
    expect(opinion.agreement).toBe('agrees');
    expect(opinion.figures.map((figure) => figure.receptorId).sort()).toEqual(['int-1', 'int-2', 'irr-1']);
    // The counting window lowers a peak by 3 to 6 %, sampling by another 3 %.
    for (const figure of opinion.figures) expect(Math.abs(figure.peakRatio! - 1)).toBeLessThan(0.15);
    expect(opinion.field!.overlap).toBeGreaterThan(0.9);
    expect(opinion.words).toContain('agrees');
    expect(result.checks.filter((check) => check.code === 'methods-disagree')).toEqual([]);
    expect(estimateResultSchema.parse(result)).toEqual(result);
  });

  it('agrees in open water and gives first arrivals', () => {
    const doc = openDocument({}, { receptors: [receptor({ actionValues: [{ value: 1e-6 }] })] });
    const { result } = solve(doc);
    expect(result.secondOpinion!.agreement).toBe('agrees');
    const paths = result.paths!;
    const [arrival] = paths.receptors;
    // 3,000 m at 0.2 m/s; the circle is met a little before.
    expect(arrival!.firstArrivalS!.p50).toBeGreaterThan(0.85 * 15_000);
    expect(arrival!.firstArrivalS!.p50).toBeLessThan(15_000);
    expect(arrival!.arriveShareError).toBeCloseTo(Math.sqrt((arrival!.arriveShare * (1 - arrival!.arriveShare)) / paths.count), 9);
    expect(Math.abs(arrival!.peak - result.receptors[0]!.peak.likely!)).toBeLessThan(4 * arrival!.peakError + 0.07 * arrival!.peak);
  });

  it('withdraws an answer where a spit lies between release and receptor, and says why', () => {
    const ring = [at(-4_000, -4_000), at(1_450, -4_000), at(1_450, 2_500), at(1_550, 2_500), at(1_550, -4_000), at(8_000, -4_000), at(8_000, 4_000), at(-4_000, 4_000), at(-4_000, -4_000)];
    const doc = openDocument({ area: [ring], mixing: { kind: 'constant', alongM2s: 3, acrossM2s: 3 } }, { receptors: [receptor({ actionValues: [{ value: 1e-6 }] })] });
    const { result, messages } = solve(doc);
    expect(result.secondOpinion!.agreement).toBe('disagrees');
    const [answer] = result.receptors;
    expect(answer!.verdict).toBe('cannot be estimated');
    expect(answer!.reason).toMatch(/^Two methods disagree: /);
    expect(result.checks).toContainEqual(expect.objectContaining({ code: 'methods-disagree', severity: 'stop', receptorId: 'x' }));
    expect(result.secondOpinion!.words).toContain('Two methods disagree');
    // Whoever followed the stream hears of it too.
    const told = messages.flatMap(({ head }) => (head.type === 'receptor' ? [head.answer.verdict] : []));
    expect(told).toEqual(['may exceed', 'cannot be estimated']);
  });

  it('is left out of previews', () => {
    const { result } = solve(openDocument(), { preview: true });
    expect(result.secondOpinion).toBeUndefined();
    expect(result.paths).toBeUndefined();
  });

  it('says so where no other method knows the water', () => {
    const reach = reachOf({ id: 'a', lengthKm: 20, Q: 30, W: 60, H: 1, U: 0.5, D: 30, e: 0.06 }, { storage: { areaRatio: 0.3, exchangePerS: 2e-4 } });
    const doc = riverDocument([reach], { releases: [release({ channel: { reachId: 'a', chainageKm: 19, bank: 'left' }, position: at(1_000, 0) })], receptors: [receptor({ position: at(6_000, 0), channel: { reachId: 'a', chainageKm: 14, bank: 'left' } })] });
    const { result } = solve(doc);
    expect(result.secondOpinion).toMatchObject({ agreement: 'none', solver: '' });
    expect(result.secondOpinion!.words).toContain('dead zones');
  });

  it('is the same bytes every time, and other bytes for another seed', () => {
    const doc = stored('s11-coast');
    const text = (seed: number) => JSON.stringify([solve({ ...doc, seed }).result.secondOpinion, solve({ ...doc, seed }).result.paths]);
    const first = text(1);
    expect(text(1)).toBe(first);
    expect(text(2)).not.toBe(first);
  });

  it('draws at most 300 paths of at most 60 places, in the water', () => {
    const doc = stored('s06-lake');
    const { paths } = solve(doc).result;
    if (doc.water.kind !== 'open') throw new Error('the lake is open water');
    const { area } = doc.water;
    expect(paths!.lines.length).toBeGreaterThan(100);
    expect(paths!.lines.length).toBeLessThanOrEqual(300);
    for (const line of paths!.lines) {
      expect(line.length).toBeLessThanOrEqual(Math.min(60, paths!.timesS.length));
      for (const [lon, lat] of line) {
        // Five decimals move a place at the shore by up to 0.7 m: it is given that much.
        const near = [0, 1e-5, -1e-5].some((dx) => [0, 1e-5, -1e-5].some((dy) => isInArea([lon! + dx, lat! + dy], area)));
        expect(near, `${lon}, ${lat}`).toBe(true);
      }
    }
  });

  it('stops when the estimate is cancelled', () => {
    let polls = 0;
    const doc = stored('s06-lake');
    solve(doc, { isCancelled: () => (polls++, false) });
    let left = polls - 3;
    expect(() => solve(doc, { isCancelled: () => left-- <= 0 })).toThrow(SolverCancelled);
  });

  it('states its bounds with the reason', () => {
    const { bounds } = solve(openDocument()).result.secondOpinion!;
    expect(bounds).toMatchObject({ peakFactor: BOUNDS.peakFactor, timeShare: BOUNDS.timeShare });
    expect(bounds.reason).toContain('factor of 2');
  });
});
