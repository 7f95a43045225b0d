import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkDoor } from '../../server/solver/door';
import { SolverInputError } from '../../server/solver/errors';
import { networkFeatures } from '../../server/solver/network/network-door';
import { valueAt } from '../../server/solver/network/series-response';
import { Hydraulics } from '../../server/solver/network/hydraulics';
import { reachWave } from '../../server/solver/network/wave';
import { reachStates } from '../../server/solver/river/reach-state';
import { solverFor } from '../../server/solver/solvers';
import { estimateDocumentSchema, type EstimateDocument, type EstimateDocumentInput, type RiverWater } from '../../shared/schemas/estimate';
import { expectClose } from './close-to';
import { at, reachOf, receptor, release, riverDocument, solve } from './documents';
import { channel, networkField, responseOf } from './network-helpers';

/** A reach with figures that belong to a river, and perhaps something that only parcels can follow. */
const reachArbitrary = fc.record({
  lengthKm: fc.double({ min: 0.3, max: 8, noNaN: true }),
  U: fc.double({ min: 0.05, max: 1.5, noNaN: true }),
  D: fc.double({ min: 0.5, max: 80, noNaN: true }),
  e: fc.double({ min: 0.005, max: 0.5, noNaN: true }),
  W: fc.double({ min: 4, max: 120, noNaN: true }),
  joins: fc.constantFrom('left' as const, 'right' as const),
  feature: fc.constantFrom('none' as const, 'storage' as const, 'structure' as const),
  /** Index of the reach below among those before it. */
  parent: fc.nat(100),
  Q: fc.double({ min: 0.5, max: 30, noNaN: true }),
});

const treeArbitrary = fc.record({
  reaches: fc.array(reachArbitrary, { minLength: 1, maxLength: 6 }),
  where: fc.double({ min: 0.02, max: 0.98, noNaN: true }),
  bank: fc.constantFrom('left' as const, 'mid' as const, 'right' as const),
  durationS: fc.constantFrom(0, 600, 7_200),
  radiusM: fc.constantFrom(0, 0, 150),
  hasLoss: fc.boolean(),
  isChanging: fc.boolean(),
});
type Tree = typeof treeArbitrary extends fc.Arbitrary<infer T> ? T : never;

/** A tree whose first reach is the last of the river; the release lies on the last of the list. Discharges add up. */
function documentOf(tree: Tree): EstimateDocument {
  const parents = tree.reaches.map((reach, i) => (i === 0 ? null : reach.parent % i));
  const own = tree.reaches.map((reach) => reach.Q);
  for (let i = tree.reaches.length - 1; i > 0; i--) if (tree.reaches.some((_, k) => parents[k] === i)) own[i] = tree.reaches.reduce((sum, _, k) => (parents[k] === i ? sum + own[k]! : sum), 0);
  if (tree.reaches.length > 1) own[0] = tree.reaches.reduce((sum, _, k) => (parents[k] === 0 ? sum + own[k]! : sum), 0);
  const reaches = tree.reaches.map(({ lengthKm, U, D, e, W, joins, feature }, i) =>
    reachOf(
      { id: `r${i}`, lengthKm, Q: own[i]!, W, H: own[i]! / (W * U), U, D, e },
      {
        downstreamReachId: parents[i] === null ? null : `r${parents[i]}`,
        joinsOnBank: joins,
        ...(feature === 'storage' ? { storage: { areaRatio: 0.3, exchangePerS: 1e-4 } } : {}),
        ...(feature === 'structure' ? { structure: { kind: 'weir' as const, volumeM3: 2_000 * own[i]!, tanks: 2 } } : {}),
      },
    ),
  );
  const source = tree.reaches.length - 1;
  const horizonS = 30_000;
  const doc = riverDocument(reaches, {
    horizonS,
    frameCount: 4,
    substance: { name: 'Tracer', loss: tree.hasLoss ? { kind: 'first-order', ratePerS: 2e-5 } : { kind: 'none' }, applyLoss: tree.hasLoss },
    releases: [release({ channel: channel(`r${source}`, tree.where * tree.reaches[source]!.lengthKm, tree.bank), initialRadiusM: tree.radiusM, timing: tree.durationS === 0 ? { kind: 'instantaneous' } : { kind: 'steady', durationS: tree.durationS } })],
    receptors: [receptor({ channel: channel('r0', 0) })],
  });
  if (!tree.isChanging) return doc;
  const Q = own[source]!;
  const rows = [{ atS: 0, dischargeM3s: Q }, { atS: 3_600, dischargeM3s: 3 * Q }, { atS: 9_000, dischargeM3s: Q }, { atS: horizonS, dischargeM3s: 1.2 * Q }];
  return { ...doc, water: { ...(doc.water as RiverWater), flow: { ...(doc.water as RiverWater).flow, series: [{ reachId: `r${source}`, rows }] } } };
}

describe('random trees of reaches', () => {
  it('keep every gram and never go below zero', () => {
    fc.assert(
      fc.property(treeArbitrary, (tree) => {
        const doc = documentOf(tree);
        const field = networkField(doc, { isPreview: true });
        const books = field.books(doc.horizonS, [1]);
        // Compensations are not needed: thousands of sums of 1e-16 each, and edges left out at 1e-14 of the peak.
        expect(Math.abs(books.released - books.inWater - books.lost - books.left)).toBeLessThan(1e-9);
        for (const part of [books.inWater, books.lost, books.left]) expect(part).toBeGreaterThanOrEqual(0);
        const f = responseOf(doc, field, 0, tree.hasLoss);
        for (let t = 0; t <= doc.horizonS; t += 500) expect(f(t)).toBeGreaterThanOrEqual(0);
        const { grid, values } = field.gridAt(doc.horizonS / 2, [1]);
        if (grid.kind !== 'channel') throw new Error('rivers have channel grids');
        expect(values.length).toBe(grid.parts.reduce((sum, part) => sum + part.chainageKm.length * part.nAcross, 0));
        for (const value of values) expect(value).toBeGreaterThanOrEqual(0);
      }),
      { seed: 7, numRuns: 25 },
    );
  });

  it('give twice the answer for twice the amount, and the sum for two releases', () => {
    fc.assert(
      fc.property(treeArbitrary, (tree) => {
        const doc = documentOf({ ...tree, hasLoss: false });
        const both = { ...doc, releases: [doc.releases[0]!, { ...doc.releases[0]!, id: 'b' }] };
        const [one, two] = [networkField(doc, { isPreview: true }), networkField(both, { isPreview: true })];
        const [a, b] = [one.gridAt(doc.horizonS / 2, [2]), two.gridAt(doc.horizonS / 2, [1, 1])];
        expect(b.values.length).toBe(a.values.length);
        a.values.forEach((value, i) => expect(Math.abs(value - b.values[i]!)).toBeLessThanOrEqual(1e-12 * value));
      }),
      { seed: 11, numRuns: 10 },
    );
  });
});

describe('random estuaries', () => {
  const estuary = fc.record({
    amplitudes: fc.array(fc.double({ min: 0.02, max: 1.5, noNaN: true }), { minLength: 1, maxLength: 3 }),
    widths: fc.array(fc.double({ min: 20, max: 900, noNaN: true }), { minLength: 3, maxLength: 3 }),
    hasRiver: fc.boolean(),
    hasBrook: fc.boolean(),
    startsInRiver: fc.boolean(),
    D: fc.double({ min: 5, max: 200, noNaN: true }),
    maxEbbS: fc.double({ min: 0, max: 44_000, noNaN: true }),
    durationS: fc.constantFrom(0, 5_000),
  });

  it('keep every gram and never go below zero, whatever the tide', () => {
    fc.assert(
      fc.property(estuary, ({ amplitudes, widths, hasRiver, hasBrook, startsInRiver, D, maxEbbS, durationS }) => {
        const tidal = amplitudes.map((amplitudeMps, i) =>
          reachOf(
            { id: `t${i}`, lengthKm: 6, Q: hasBrook && i === amplitudes.length - 1 ? 14 : 10, W: widths[i]!, H: 4, U: (hasBrook && i === amplitudes.length - 1 ? 14 : 10) / (widths[i]! * 4), D, e: 0.2 },
            { downstreamReachId: i === amplitudes.length - 1 ? null : `t${i + 1}`, tide: { amplitudeMps, periodS: 44_714, maxEbbS } },
          ),
        );
        const river = hasRiver ? [reachOf({ id: 'river', lengthKm: 5, Q: 10, W: 15, H: 1.5, U: 0.44, D: 8, e: 0.05 }, { downstreamReachId: 't0' })] : [];
        const brook = hasBrook && amplitudes.length > 1 ? [reachOf({ id: 'brook', lengthKm: 5, Q: 4, W: 10, H: 1, U: 0.4, D: 8, e: 0.05 }, { downstreamReachId: `t${amplitudes.length - 1}`, joinsOnBank: 'left' })] : [];
        const at = hasRiver && startsInRiver ? channel('river', 3) : channel('t0', 3);
        const doc = riverDocument([...river, ...brook, ...tidal], {
          horizonS: 100_000,
          frameCount: 4,
          releases: [release({ channel: at, timing: durationS === 0 ? { kind: 'instantaneous' } : { kind: 'steady', durationS } })],
          receptors: [receptor({ channel: channel(`t${amplitudes.length - 1}`, 1, 'left') })],
        });
        const field = networkField(doc, { isPreview: true });
        const books = field.books(doc.horizonS, [1]);
        expect(Math.abs(books.released - books.inWater - books.left)).toBeLessThan(1e-9);
        const f = responseOf(doc, field);
        for (let t = 0; t <= doc.horizonS; t += 1_000) {
          expect(f(t)).toBeGreaterThanOrEqual(0);
          expect(Number.isFinite(f(t))).toBe(true);
        }
      }),
      { seed: 3, numRuns: 12 },
    );
  });
});

describe('a wave of discharge', () => {
  const water = riverDocument([reachOf({ id: 'r', lengthKm: 20, Q: 5, W: 14, H: 0.8, U: 0.446, D: 10, e: 0.05 })], { releases: [release({ channel: channel('r', 19) })] }).water as RiverWater;
  const state = reachStates(water)[0]!;
  const hydraulics = new Hydraulics(water, state, 4, 8);

  it('runs with dQ/dA, faster than the water', () => {
    const wave = reachWave(hydraulics, 20_000, (t) => (t < 3_600 ? 5 : 5.05), 0, 60_000);
    const arrival = Array.from({ length: 6_000 }, (_, i) => i * 10).find((t) => wave.dischargeM3s(20_000, t) > 5.025)!;
    // U/(1 - b) with b = 0.43; the front is spread evenly to both sides.
    expectClose(arrival - 3_600, 20_000 / (0.446 / 0.57), 0.02);
  });

  it('lets out the water that was let in', () => {
    const inflow = (t: number): number => (t < 3_600 ? 5 : t < 7_200 ? 7.5 : 5);
    const wave = reachWave(hydraulics, 20_000, inflow, 0, 120_000);
    let excess = 0;
    for (let t = 0; t < 120_000; t += 10) excess += 10 * (wave.dischargeM3s(20_000, t + 5) - 5);
    // Kept exactly by the cells; 1 % for jumps that fall within a sixteenth of a step and for reading between kept times.
    expectClose(excess, 2.5 * 3_600, 0.01);
  });
});

describe('values between steps', () => {
  const values = Float64Array.from({ length: 80 }, (_, i) => Math.exp(-((i - 40.3) ** 2) / (2 * 8 ** 2)));

  it('follow a crest between two steps', () => expectClose(Math.max(...Array.from({ length: 800 }, (_, i) => valueAt(values, i / 10))), 1, 1e-5));

  it('do not overshoot a jump', () => {
    const jump = Float64Array.from({ length: 20 }, (_, i) => (i < 10 ? 0 : 1));
    for (let at = 0; at < 19; at += 0.05) {
      expect(valueAt(jump, at)).toBeGreaterThanOrEqual(0);
      expect(valueAt(jump, at)).toBeLessThanOrEqual(1 + 1e-12);
    }
  });
});

describe('at the door', () => {
  const plain = (over: Partial<EstimateDocumentInput> = {}, series?: { reachId: string; rows: { atS: number; dischargeM3s: number }[] }[]): EstimateDocument => {
    const doc = riverDocument([reachOf({ id: 'r', lengthKm: 5, Q: 5, W: 14, H: 0.8, U: 0.446, D: 10, e: 0.05 })], { horizonS: 36_000, releases: [release({ position: at(1_000, 0), channel: channel('r', 4) })], ...over });
    const water = doc.water as RiverWater;
    return { ...doc, water: { ...water, flow: { ...water.flow, ...(series ? { series } : {}) } } };
  };
  const errorOf = (doc: EstimateDocument): SolverInputError['errors'][number] => {
    try {
      checkDoor(doc);
      solverFor(doc);
    } catch (error) {
      if (error instanceof SolverInputError) return error.errors[0]!;
    }
    throw new Error('the door let it in');
  };
  const rows = (...pairs: [number, number][]) => pairs.map(([atS, dischargeM3s]) => ({ atS, dischargeM3s }));

  it('a series that ends too soon names both spans', () => {
    const error = errorOf(plain({}, [{ reachId: 'r', rows: rows([0, 5], [20_000, 6]) }]));
    expect(error.path).toBe('water.flow.series.0.rows');
    expect(error.message).toContain('0 s to 20000 s; the estimate needs 0 s to 36000 s');
  });

  it('a series with a gap in a change names the row', () => {
    const error = errorOf(plain({}, [{ reachId: 'r', rows: rows([0, 5], [3_600, 5], [30_000, 9], [40_000, 9]) }]));
    expect(error.path).toBe('water.flow.series.0.rows.2.atS');
    expect(error.message).toContain('at most 6 h apart');
  });

  it('a long level stretch is no gap', () => expect(() => checkDoor(plain({}, [{ reachId: 'r', rows: rows([0, 5], [1_800, 5], [2_100, 9], [40_000, 9]) }]))).not.toThrow());

  it('a series of an unknown reach, and a second one of the same, are refused', () => {
    expect(errorOf(plain({}, [{ reachId: 'x', rows: rows([0, 5], [40_000, 6]) }])).path).toBe('water.flow.series.0.reachId');
    const one = { reachId: 'r', rows: rows([0, 5], [40_000, 5]) };
    expect(errorOf(plain({}, [one, one])).path).toBe('water.flow.series.1.reachId');
  });

  it('rows out of order are refused by the schema with their place', () => {
    const doc = plain({}, [{ reachId: 'r', rows: rows([0, 5], [40_000, 6], [30_000, 6]) }]);
    expect(estimateDocumentSchema.safeParse(doc).error?.issues[0]?.path).toEqual(['water', 'flow', 'series', 0, 'rows', 2, 'atS']);
  });

  it('the closed form is refused where it cannot do, and open water by parcels', () => {
    const error = errorOf(plain({ solver: 'closed-form' }, [{ reachId: 'r', rows: rows([0, 5], [40_000, 5]) }]));
    expect(error).toMatchObject({ path: 'solver' });
    expect(error.message).toContain('changing discharge');
  });

  it('auto takes parcels where the river asks for them, else the closed form', () => {
    expect(solverFor(plain()).name).toContain('closed form');
    const changing = plain({}, [{ reachId: 'r', rows: rows([0, 5], [40_000, 5]) }]);
    expect(networkFeatures(changing.water as RiverWater)).toEqual(['changing discharge']);
    expect(solverFor(changing).name).toContain('parcels');
  });
});

describe('the engine with parcels', () => {
  const doc = riverDocument([reachOf({ id: 'r', lengthKm: 12, Q: 25, W: 10, H: 5, U: 0.5, D: 20, e: 5 })], {
    solver: 'network',
    horizonS: 20_000,
    releases: [release({ position: at(1_000, 0), channel: channel('r', 11), timing: { kind: 'steady', durationS: 1_200 } })],
    receptors: [receptor({ position: at(6_000, 0), channel: channel('r', 6), actionValues: [{ value: 1e-4 }] })],
  });

  it('gives the same bytes twice', () => {
    const [a, b] = [solve(doc), solve(doc)];
    expect(JSON.stringify(a.result)).toBe(JSON.stringify(b.result));
    a.messages.forEach((message, i) => expect(Buffer.from(message.payload).equals(Buffer.from(b.messages[i]!.payload))).toBe(true));
  });

  it('agrees with the closed form in peak, times, envelope and table of travel times', () => {
    const [parcels, closed] = [solve(doc), solve({ ...doc, solver: 'closed-form' })];
    const [a, b] = [parcels.result.receptors[0]!, closed.result.receptors[0]!];
    expectClose(a.peak.likely!, b.peak.likely!, 1e-3);
    expect(Math.abs(a.peakS! - b.peakS!)).toBeLessThan(20);
    expect(Math.abs(a.answers[0]!.arrivalS.likely! - b.answers[0]!.arrivalS.likely!)).toBeLessThan(20);
    expectClose(a.dose.likely!, b.dose.likely!, 2e-3);
    const rows = parcels.result.travelTimes!.filter(({ chainageKm }) => chainageKm <= 9);
    expect(rows.length).toBe(10);
    for (const row of rows) {
      const other = closed.result.travelTimes!.find(({ chainageKm }) => chainageKm === row.chainageKm)!;
      expectClose(row.peak, other.peak, 5e-3);
      expect(Math.abs(row.peakS - other.peakS)).toBeLessThan(60);
      expect(Math.abs(row.leadingEdgeS - other.leadingEdgeS)).toBeLessThan(60);
    }
    const largest = (solved: typeof parcels): number[] => solved.messages.flatMap(({ head }) => (head.type === 'frame' ? [head.max] : []));
    // Frames hold the sections nearest the crest: 2 %.
    largest(parcels).slice(1).forEach((max, i) => expectClose(max, largest(closed)[i + 1]!, 0.02));
  });

  it('stops within a fifth of a second of being asked', () => {
    let asked = 0;
    const from = performance.now();
    expect(() => solve(doc, { isCancelled: () => ++asked > 3 })).toThrow('cancelled');
    // Asked every 20,000 values: milliseconds. The bound leaves room for a busy machine.
    expect(performance.now() - from).toBeLessThan(2_000);
  });
});
