import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { LonLat } from '../../shared/schemas/basics';
import { estimateDocumentSchema, type CurrentPart, type EstimateDocument, type OpenWater } from '../../shared/schemas/estimate';
import type { ReceptorAnswer } from '../../shared/schemas/estimate-result';
import { toPlane } from '../../shared/geo';
import { expectClose } from './close-to';
import { at, openDocument, reachOf, receptor, release, riverDocument, solve } from './documents';

const ORIGIN = { originLon: 0, originLat: 0 };
const answersOf = (doc: EstimateDocument): ReceptorAnswer[] => solve(doc).result.receptors;

/** Peaks, doses and times of two lists of answers, the second of another system of units. */
function expectSame(got: ReceptorAnswer[], wanted: ReceptorAnswer[], tolerance: number, units = { concentration: 1, time: 1 }): void {
  expect(got.length).toBe(wanted.length);
  got.forEach((answer, i) => {
    const other = wanted[i]!;
    expectClose(answer.peak.likely!, other.peak.likely! * units.concentration, tolerance);
    expectClose(answer.dose.likely!, other.dose.likely! * units.concentration * units.time, Math.max(tolerance, 1e-6));
    expect(answer.verdict).toBe(other.verdict);
    answer.answers.forEach(({ arrivalS }, n) => {
      const arrival = other.answers[n]!.arrivalS.likely;
      // Crossings are refined to a quarter of a second, humps to half of one.
      if (arrival === null) expect(arrivalS.likely).toBeNull();
      else expect(Math.abs(arrivalS.likely! - arrival * units.time)).toBeLessThan(1 * Math.max(1, units.time));
    });
  });
}

/** A coast with all kinds of current, two releases and two receptors; numbers chosen at random. */
const anyCoast = fc
  .record({ speed: fc.double({ min: 0.1, max: 0.3, noNaN: true }), major: fc.double({ min: 0.05, max: 0.3, noNaN: true }), wind: fc.double({ min: 0, max: 8, noNaN: true }), across: fc.double({ min: 0.5, max: 4, noNaN: true }), x: fc.double({ min: 2_000, max: 4_000, noNaN: true }), y: fc.double({ min: -800, max: 800, noNaN: true }) })
  .map(({ speed, major, wind, across, x, y }) =>
    openDocument(
      {
        current: [
          { kind: 'residual', speedMps: speed, towardDeg: 80 },
          { kind: 'tide', name: 'M2', majorMps: major, minorMps: 0.3 * major, floodTowardDeg: 35, periodS: 44_712, maxFloodS: 4_000 },
          { kind: 'wind', windSpeedMps: wind, windFromDeg: 300, driftFraction: 0.01, turnDeg: 10 },
        ],
        mixing: { kind: 'constant', alongM2s: 3 * across, acrossM2s: across },
      },
      {
        releases: [release({ timing: { kind: 'steady', startS: 0, durationS: 7_200 } }), release({ id: 'b', position: at(400, 300), timing: { kind: 'instantaneous', atS: 3_600 }, amount: { how: 'mass', massKg: { likely: 40 } } })],
        receptors: [receptor({ position: at(x, y), actionValues: [{ value: 1e-6 }] }), receptor({ id: 'far', position: at(x + 1_500, y - 400), actionValues: [{ value: 1e-5 }] })],
      },
    ),
  );

const movedArea = (doc: EstimateDocument, move: (position: LonLat) => LonLat, current: (part: CurrentPart) => CurrentPart): EstimateDocument => {
  const water = doc.water as OpenWater;
  return {
    ...doc,
    water: { ...water, area: water.area.map((ring) => ring.map(move)), current: water.current.map(current) },
    releases: doc.releases.map((item) => ({ ...item, position: move(item.position) })),
    receptors: doc.receptors.map((item) => ({ ...item, position: move(item.position) })),
  };
};
const turnedBy = (deg: number) => (part: CurrentPart): CurrentPart => {
  const turn = (towardDeg: number): number => (((towardDeg - deg) % 360) + 360) % 360;
  if (part.kind === 'residual') return { ...part, towardDeg: turn(part.towardDeg) };
  if (part.kind === 'tide') return { ...part, floodTowardDeg: turn(part.floodTowardDeg) };
  return part.kind === 'wind' ? { ...part, windFromDeg: turn(part.windFromDeg) } : part;
};
const mirrored = (part: CurrentPart): CurrentPart => {
  const flip = (towardDeg: number): number => (360 - towardDeg) % 360;
  if (part.kind === 'residual') return { ...part, towardDeg: flip(part.towardDeg) };
  if (part.kind === 'tide') return { ...part, floodTowardDeg: flip(part.floodTowardDeg), minorMps: -part.minorMps };
  return part.kind === 'wind' ? { ...part, windFromDeg: flip(part.windFromDeg), turnDeg: -part.turnDeg } : part;
};

describe('a whole estimate in open water', () => {
  // Positions on a sphere: the plane of a document has its origin at its first release, here on the equator.
  it('is mirrored with its water, currents, releases and receptors', () =>
    fc.assert(fc.property(anyCoast, (doc) => expectSame(answersOf(movedArea(doc, ([lon, lat]) => [-lon, lat], mirrored)), answersOf(doc), 1e-6)), { numRuns: 3 }));

  it('turns with its water, currents, releases and receptors', () =>
    fc.assert(
      fc.property(anyCoast, fc.double({ min: 10, max: 350, noNaN: true }), (doc, deg) => {
        const [c, s] = [Math.cos((deg * Math.PI) / 180), Math.sin((deg * Math.PI) / 180)];
        const turn = (position: LonLat): LonLat => {
          const [x, y] = toPlane(ORIGIN, position);
          return at(x * c - y * s, x * s + y * c);
        };
        expectSame(answersOf(movedArea(doc, turn, turnedBy(deg))), answersOf(doc), 1e-6);
      }),
      { numRuns: 3 },
    ));

  it('is the same anywhere on its parallel', () =>
    fc.assert(fc.property(anyCoast, fc.double({ min: -90, max: 90, noNaN: true }), (doc, east) => expectSame(answersOf(movedArea(doc, ([lon, lat]) => [lon + east, lat], (part) => part)), answersOf(doc), 1e-6)), { numRuns: 3 }));

  it('scales: lengths by a, times by b, amounts by m give concentrations by m/a³ at b times the time', () =>
    fc.assert(
      fc.property(anyCoast, fc.double({ min: 0.5, max: 2, noNaN: true }), fc.double({ min: 0.5, max: 2, noNaN: true }), fc.double({ min: 0.01, max: 100, noNaN: true }), (doc, a, b, m) => {
        const water = doc.water as OpenWater;
        const scaled = (position: LonLat): LonLat => {
          const [x, y] = toPlane(ORIGIN, position);
          return at(a * x, a * y);
        };
        const speed = (part: CurrentPart): CurrentPart => {
          if (part.kind === 'residual') return { ...part, speedMps: (part.speedMps * a) / b };
          if (part.kind === 'tide') return { ...part, majorMps: (part.majorMps * a) / b, minorMps: (part.minorMps * a) / b, periodS: part.periodS * b, maxFloodS: part.maxFloodS * b };
          return part.kind === 'wind' ? { ...part, windSpeedMps: (part.windSpeedMps * a) / b } : part;
        };
        const moved = movedArea(doc, scaled, speed);
        const mixing = water.mixing.kind === 'constant' ? { ...water.mixing, alongM2s: (water.mixing.alongM2s * a * a) / b, acrossM2s: (water.mixing.acrossM2s * a * a) / b } : water.mixing;
        const other = estimateDocumentSchema.parse({
          ...moved,
          horizonS: doc.horizonS * b,
          water: { ...(moved.water as OpenWater), depthM: water.depthM * a, mixingDepthM: water.mixingDepthM * a, mixing },
          releases: moved.releases.map((item) => ({
            ...item,
            amount: item.amount.how === 'mass' ? { ...item.amount, massKg: { likely: item.amount.massKg.likely! * m } } : item.amount,
            timing: item.timing.kind === 'steady' ? { ...item.timing, durationS: item.timing.durationS * b } : item.timing.kind === 'instantaneous' ? { ...item.timing, atS: item.timing.atS * b } : item.timing,
          })),
          receptors: moved.receptors.map((item) => ({ ...item, actionValues: item.actionValues.map((value) => ({ ...value, value: (value.value * m) / a ** 3 })) })),
        });
        expectSame(answersOf(other), answersOf(doc), 1e-5, { concentration: m / a ** 3, time: b });
      }),
      { numRuns: 3 },
    ));
});

/** A river with a tributary on one side, a release at a bank and receptors at both. */
const riverWith = (bank: 'left' | 'right', side: 1 | -1) => {
  const far = bank === 'left' ? 'right' : 'left';
  const line = (from: [number, number], to: [number, number], km: number): [number, number, number][] => [[...at(from[0], side * from[1]), km], [...at(to[0], side * to[1]), 0]];
  return riverDocument(
    [
      reachOf({ id: 'main', lengthKm: 10, Q: 8, W: 20, H: 1, U: 0.4, D: 12, e: 0.02 }, { centreline: line([0, 0], [10_000, 0], 10), downstreamReachId: 'below' }),
      reachOf({ id: 'side', lengthKm: 5, Q: 4, W: 10, H: 1, U: 0.4, D: 8, e: 0.02 }, { centreline: line([10_000, 5_000], [10_000, 0], 5), downstreamReachId: 'below', joinsOnBank: bank }),
      reachOf({ id: 'below', lengthKm: 12, Q: 12, W: 25, H: 1.2, U: 0.4, D: 15, e: 0.03 }, { centreline: line([10_000, 0], [22_000, 0], 12) }),
    ],
    {
      releases: [release({ position: at(2_000, 0), channel: { reachId: 'main', chainageKm: 8, bank }, timing: { kind: 'steady', startS: 0, durationS: 3_600 } })],
      receptors: [
        receptor({ id: 'near', position: at(4_000, 0), channel: { reachId: 'main', chainageKm: 6, bank }, actionValues: [{ value: 1e-3 }] }),
        receptor({ id: 'same', position: at(13_000, 0), channel: { reachId: 'below', chainageKm: 9, bank }, actionValues: [{ value: 1e-4 }] }),
        receptor({ id: 'far', position: at(13_000, 0), channel: { reachId: 'below', chainageKm: 9, bank: far }, actionValues: [{ value: 1e-4 }] }),
      ],
    },
  );
};

describe('a whole estimate in a river', () => {
  it.each(['closed-form', 'network'] as const)('is mirrored when left and right change places: %s', (solver) => {
    const one = answersOf({ ...riverWith('left', 1), solver });
    const other = answersOf({ ...riverWith('right', -1), solver });
    expectSame(other, one, 1e-9);
    // The tributary keeps its own side clean, so that the mirror could be told from the original.
    expect(one[2]!.peak.likely!).toBeGreaterThan(1.03 * one[1]!.peak.likely!);
  });

  it.each(['closed-form', 'network'] as const)('scales with lengths, times and amounts: %s', (solver) => {
    const doc = { ...riverWith('left', 1), solver };
    if (doc.water.kind !== 'river') throw new Error('a river');
    const [a, b, m] = [1.7, 0.6, 20];
    const scaled: EstimateDocument = {
      ...doc,
      horizonS: doc.horizonS * b,
      water: {
        ...doc.water,
        reaches: doc.water.reaches.map((reach) => ({
          ...reach,
          centreline: reach.centreline.map(([lon, lat, km]): [number, number, number] => [a * lon, a * lat, a * km]),
          hydraulics: reach.hydraulics.map((row) => ({ ...row, dischargeM3s: (row.dischargeM3s * a ** 3) / b, widthM: row.widthM * a, depthM: row.depthM * a, velocityMps: (row.velocityMps * a) / b })),
          dispersionM2s: (reach.dispersionM2s! * a * a) / b,
          transverseM2s: (reach.transverseM2s! * a * a) / b,
        })),
      },
      releases: doc.releases.map((item) => ({ ...item, position: [a * item.position[0], a * item.position[1]], channel: { ...item.channel!, chainageKm: a * item.channel!.chainageKm }, timing: { kind: 'steady', startS: 0, durationS: 3_600 * b }, amount: { how: 'mass', massKg: { low: null, likely: 100 * m, high: null }, activeFraction: 1 } })),
      receptors: doc.receptors.map((item) => ({ ...item, position: [a * item.position[0], a * item.position[1]], channel: { ...item.channel!, chainageKm: a * item.channel!.chainageKm }, actionValues: item.actionValues.map((value) => ({ ...value, value: (value.value * m) / a ** 3 })) })),
    };
    // Parcels choose their steps by the clock as well as by the water: to their resolution.
    expectSame(answersOf(scaled), answersOf(doc), solver === 'network' ? 2e-3 : 1e-5, { concentration: m / a ** 3, time: b });
  });
});

describe('the unit in which an amount is told', () => {
  const withAmount = (amount: EstimateDocument['releases'][number]['amount']) => {
    const doc = openDocument({}, { receptors: [receptor({ actionValues: [{ value: 1e-5 }] })] });
    return answersOf({ ...doc, releases: [{ ...doc.releases[0]!, amount }] });
  };
  const range = (likely: number) => ({ low: null, likely, high: null });

  it('changes nothing: 100 kg are 250 kg at 40 %, 2 m³ of 50 kg/m³, or 0.125 m³ of density 800 kg/m³', () => {
    const wanted = withAmount({ how: 'mass', massKg: range(100), activeFraction: 1 });
    for (const amount of [
      { how: 'mass', massKg: range(250), activeFraction: 0.4 },
      { how: 'volume-strength', volumeM3: range(2), strengthKgM3: 50 },
      { how: 'volume-density', volumeM3: range(0.125), densityKgM3: 800, activeFraction: 1 },
    ] as const)
      expectSame(withAmount(amount), wanted, 1e-12);
  });

  it('counts organisms as it weighs kilograms', () => {
    const doc = openDocument({}, { receptors: [receptor({ actionValues: [{ value: 1e-5 }] })] });
    const counted = solve({ ...doc, substance: { ...doc.substance, measure: 'count' }, releases: [{ ...doc.releases[0]!, amount: { how: 'count', count: range(1e14) } }], receptors: [{ ...doc.receptors[0]!, actionValues: [{ ...doc.receptors[0]!.actionValues[0]!, value: 1e7 }] }] }).result;
    expect(counted.unit).toBe('counts/m3');
    expectSame(counted.receptors, answersOf(doc), 1e-12, { concentration: 1e12, time: 1 });
  });
});
